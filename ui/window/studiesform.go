package window

import (
	"errors"
	"fmt"
	"strconv"
	"strings"

	"cavitywright/sim/measure/reading"
	"cavitywright/sim/study"
	"cavitywright/table"
	"cavitywright/table/dial"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// studyForm says what is turned, and what is read.
type studyForm struct {
	w        *Window
	box      fyne.CanvasObject
	turns    [2]*turnRow
	ticks    map[string]*widget.Check
	grid     *fyne.Container
	chosen   *widget.Button // names the ticked readings; a press opens the list
	effort   *widget.Select
	births   *widget.Select
	kept     *widget.Select // the sweeps in the study
	ready    *table.DialSweep
	settling int          // above 0 while the form is filled by itself
	offered  *table.Table // the wall that the form was made for
}

const (
	nothingMore = "nothing more"
	noBirths    = "not marked"
	// studyPoints and studyLines are the steps that are offered for the first and
	// for the second number.
	studyPoints = 15
	studyLines  = 3
	// mostBirths is the greatest number of bounces up to which births are offered.
	mostBirths = 6
)

func newStudyForm(w *Window) *studyForm {
	f := &studyForm{w: w, ticks: map[string]*widget.Check{}}
	for i := range f.turns {
		f.turns[i] = newTurnRow(func() { f.suggest(i) }, f.touched, []int{studyPoints, studyLines}[i])
	}
	f.effort = widget.NewSelect([]string{"0.1", "0.3", "1", "4", "16"}, func(string) { f.touched() })
	f.effort.Selected = "1"
	f.births = widget.NewSelect([]string{noBirths}, func(string) { f.touched() })
	for n := 2; n <= mostBirths; n++ {
		f.births.Options = append(f.births.Options, fmt.Sprintf("to %d bounces", n))
	}
	f.births.Selected = noBirths
	f.kept = widget.NewSelect(nil, f.take)
	f.kept.PlaceHolder = "Kept in the file"
	f.grid = container.NewGridWithColumns(2)
	f.grid.Hide()
	for _, r := range reading.Readings() {
		if r.Kind == reading.Asked {
			continue
		}
		c := widget.NewCheck(r.Name, func(bool) { f.touched() })
		f.ticks[r.Name] = c
		f.grid.Add(c)
	}
	f.chosen = quiet("", "", func() {
		if f.grid.Visible() {
			f.grid.Hide()
		} else {
			f.grid.Show()
		}
	})
	f.chosen.Alignment = widget.ButtonAlignLeading
	word := func(s string) fyne.CanvasObject {
		return container.NewGridWrap(fyne.NewSize(72, 34), widget.NewLabel(s))
	}
	size := func(wide float32, o fyne.CanvasObject) fyne.CanvasObject {
		return container.NewGridWrap(fyne.NewSize(wide, 34), o)
	}
	f.box = container.NewVBox(
		container.NewBorder(nil, nil, word("Turn"), nil, f.turns[0].which), f.turns[0].box,
		container.NewBorder(nil, nil, word("and"), nil, f.turns[1].which), f.turns[1].box,
		container.NewBorder(nil, nil, word("Read"), nil, f.chosen), f.grid,
		container.NewHBox(word("effort"), size(76, f.effort), widget.NewLabel("births"), size(132, f.births), layout.NewSpacer()),
		container.NewBorder(nil, nil, word("or run"), nil, f.kept),
	)
	return f
}

// touched forgets the kept sweep: the form speaks for itself again.
func (f *studyForm) touched() {
	f.tick()
	if f.settling > 0 || f.ready == nil {
		return
	}
	f.ready = nil
	f.kept.ClearSelected()
}

// tick names the ticked readings.
func (f *studyForm) tick() {
	names := f.readings()
	text := "tick what is to be read"
	if len(names) > 0 {
		text = strings.Join(names, ", ")
	}
	if n := []rune(text); len(n) > 38 {
		text = string(n[:37]) + "…"
	}
	if f.chosen != nil {
		f.chosen.SetText(text + "  ▾")
	}
}

// readings are those that are ticked, in the order of the list.
func (f *studyForm) readings() (names []string) {
	for _, r := range reading.Readings() {
		if c := f.ticks[r.Name]; c != nil && c.Checked && c.Visible() {
			names = append(names, r.Name)
		}
	}
	return names
}

// offer lists the numbers, readings and sweeps that the table has.
func (f *studyForm) offer() {
	t := f.w.session.Table()
	d := t.Design()
	var names []string
	for _, s := range d.Study.Sweeps {
		names = append(names, s.Name)
	}
	if strings.Join(names, "\n") != strings.Join(f.kept.Options, "\n") {
		f.kept.SetOptions(names)
	}
	if f.offered != nil && f.offered.SameWall(t) {
		return
	}
	first := f.offered == nil
	f.offered = t
	f.settling++
	defer func() { f.settling-- }()
	var dials []dial.Dial
	var labels []string
	for _, x := range dial.All(d) {
		dials, labels = append(dials, x), append(labels, study.Label(d, x))
	}
	f.turns[0].offer(dials, labels)
	f.turns[1].offer(append([]dial.Dial{{}}, dials...), append([]string{nothingMore}, labels...))
	if f.turns[1].which.SelectedIndex() < 0 {
		f.turns[1].which.SetSelectedIndex(0)
	}
	if f.turns[0].which.SelectedIndex() < 0 && len(dials) > 0 {
		f.turns[0].which.SetSelectedIndex(shaping(d, dials))
	}
	ticked := false
	for _, r := range reading.Readings() {
		c := f.ticks[r.Name]
		if c == nil {
			continue
		}
		if _, err := reading.Wanted(t, []string{r.Name}); err != nil {
			c.Hide()
			continue
		}
		c.Show()
		ticked = ticked || c.Checked
	}
	if first || !ticked {
		for _, name := range []string{"window-share", "escape-rate", "lyapunov-per-length", "perimeter"} {
			if c := f.ticks[name]; c.Visible() && len(f.readings()) == 0 {
				c.SetChecked(true)
			}
		}
	}
	f.tick()
}

// sweep is what the form describes, or the kept one that was chosen.
func (f *studyForm) sweep() (table.DialSweep, error) {
	if f.ready != nil {
		return *f.ready, nil
	}
	d := f.w.session.Table().Design()
	s := table.DialSweep{Readings: f.readings(), Effort: 1}
	if e, err := strconv.ParseFloat(f.effort.Selected, 64); err == nil {
		s.Effort = e
	}
	for _, t := range f.turns {
		if t.which.SelectedIndex() < 0 || t.which.Selected == nothingMore {
			continue
		}
		turn, err := t.turn(d)
		if err != nil {
			return s, err
		}
		s.Turns = append(s.Turns, turn)
		if s.Name != "" {
			s.Name += " and "
		}
		s.Name += t.which.Selected
	}
	if len(s.Turns) == 0 {
		return s, errors.New("choose a number to turn")
	}
	if len(s.Readings) == 0 {
		return s, errors.New("tick what is to be read at each point")
	}
	if k := f.births.SelectedIndex(); k > 0 && len(s.Turns) == 1 {
		s.Orbits = k + 1
	}
	return s, nil
}

// take takes a sweep that the study holds, whatever the form says.
func (f *studyForm) take(name string) {
	for _, s := range f.w.session.Table().Design().Study.Sweeps {
		if s.Name == name {
			f.ready = &s
			f.fill(s)
		}
	}
}

// fill shows a kept sweep in the form, as far as the form can say it.
func (f *studyForm) fill(s table.DialSweep) {
	f.settling++
	defer func() { f.settling-- }()
	d := f.w.session.Table().Design()
	f.turns[1].which.SetSelectedIndex(0)
	for i, turn := range s.Turns[:min(len(s.Turns), len(f.turns))] {
		x, err := dial.Find(d, turn.Dial)
		if err != nil {
			continue
		}
		f.turns[i].which.SetSelected(study.Label(d, x))
		lo, hi := turn.Ends()
		f.turns[i].from.SetText(strconv.FormatFloat(lo, 'g', -1, 64))
		f.turns[i].to.SetText(strconv.FormatFloat(hi, 'g', -1, 64))
		f.turns[i].points.SetText(strconv.Itoa(len(turn.All())))
	}
	for name, c := range f.ticks {
		on := false
		for _, r := range s.Readings {
			on = on || r == name
		}
		c.SetChecked(on)
	}
	f.births.SetSelectedIndex(0)
	if s.Orbits >= 2 && s.Orbits <= mostBirths {
		f.births.SetSelectedIndex(s.Orbits - 1)
	}
	f.effort.Selected = strconv.FormatFloat(s.Effort, 'g', -1, 64)
	f.effort.Refresh()
}
