package window

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"cavitywright/sim/study"
	"cavitywright/table"
	"cavitywright/table/dial"
	"cavitywright/table/param"
	"cavitywright/ui/pane"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// turnRow is a number with its range.
type turnRow struct {
	which    *widget.Select
	from, to *widget.Entry
	points   *widget.Entry
	dials    []dial.Dial // those of the list, after "nothing more" where that stands first
	box      fyne.CanvasObject
}

func newTurnRow(chosen, touched func(), points int) *turnRow {
	t := &turnRow{which: widget.NewSelect(nil, func(string) { chosen() })}
	entry := func(text string) *widget.Entry {
		e := widget.NewEntry()
		e.SetText(text)
		e.OnChanged = func(string) { touched() }
		return e
	}
	t.from, t.to, t.points = entry(""), entry(""), entry(strconv.Itoa(points))
	size := func(wide float32, o fyne.CanvasObject) fyne.CanvasObject {
		return container.NewGridWrap(fyne.NewSize(wide, 34), o)
	}
	t.box = container.NewHBox(size(72, widget.NewLabel("from")), size(72, t.from), widget.NewLabel("to"), size(72, t.to), widget.NewLabel("in"), size(52, t.points), widget.NewLabel("values"))
	return t
}

// shaping is the first number that does more than scale the table: the second
// parameter of a shape, where it has one.
func shaping(d table.Design, dials []dial.Dial) int {
	for i, x := range dials {
		if spec, err := x.Spec(d); err == nil && x.Part == dial.Item && spec.Unit == param.Pure && x.Name != "scale" {
			return i
		}
	}
	return min(1, len(dials)-1)
}

// offer lists numbers, and keeps the chosen one where it is among them.
func (t *turnRow) offer(dials []dial.Dial, labels []string) {
	t.dials = dials
	if strings.Join(labels, "\n") == strings.Join(t.which.Options, "\n") {
		return
	}
	before := t.which.Selected
	t.which.SetOptions(labels)
	if t.which.SelectedIndex() < 0 && before != "" {
		t.which.ClearSelected()
	}
}

// suggestSpan is half of the range that is offered about a number's value,
// relative to it.
const suggestSpan = 0.3

// suggest fills in a range about the chosen number's value.
func (f *studyForm) suggest(i int) {
	f.touched()
	t := f.turns[i]
	k := t.which.SelectedIndex()
	if k < 0 || t.which.Selected == nothingMore {
		t.box.Hide()
		return
	}
	t.box.Show()
	t.suggest(f.w.session.Table().Design(), t.dials[k])
}

// suggest fills in a range about a number's value.
func (t *turnRow) suggest(d table.Design, x dial.Dial) {
	v, err1 := x.Value(d)
	spec, err2 := x.Spec(d)
	if err1 != nil || err2 != nil {
		return
	}
	half := math.Abs(v) * suggestSpan
	if half == 0 {
		half = suggestSpan / 2
	}
	lo, hi := spec.Clamp(v-half), spec.Clamp(v+half)
	if spec.Unit == param.Count {
		lo, hi = spec.Clamp(v-1), spec.Clamp(v+1)
		t.points.SetText(strconv.Itoa(int(hi-lo) + 1))
	}
	write := func(v float64) string {
		if spec.Unit == param.Angle {
			return strconv.FormatFloat(v*180/math.Pi, 'g', 5, 64) + "°"
		}
		return strconv.FormatFloat(v, 'g', 5, 64)
	}
	t.from.SetText(write(lo))
	t.to.SetText(write(hi))
}

// turn is what the row says.
func (t *turnRow) turn(d table.Design) (table.Turn, error) {
	x := t.dials[t.which.SelectedIndex()]
	from, err := pane.Evaluate(t.from.Text, d.Unit)
	if err != nil {
		return table.Turn{}, fmt.Errorf("%s, from: %w", t.which.Selected, err)
	}
	to, err := pane.Evaluate(t.to.Text, d.Unit)
	if err != nil {
		return table.Turn{}, fmt.Errorf("%s, to: %w", t.which.Selected, err)
	}
	if spec, err := x.Spec(d); err == nil && spec.Unit == param.Angle {
		from, to = from*math.Pi/180, to*math.Pi/180 // forms show degrees
	}
	n, err := strconv.Atoi(strings.TrimSpace(t.points.Text))
	if err != nil || n < 2 || n > study.MostPoints {
		return table.Turn{}, fmt.Errorf("%s: the number of values is %q; write a whole number from 2", t.which.Selected, t.points.Text)
	}
	if from == to {
		return table.Turn{}, fmt.Errorf("%s: the range is empty; give two different ends", t.which.Selected)
	}
	return table.Turn{Dial: x.String(), From: from, To: to, Points: n}, nil
}
