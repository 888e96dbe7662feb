package window

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"

	"cavitywright/sim/measure/reading"
	"cavitywright/sim/study"
	"cavitywright/table"
	"cavitywright/table/dial"
	"cavitywright/table/param"
	"cavitywright/ui/pane"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// wishForm says what is wished for, what may be turned, and what is demanded.
type wishForm struct {
	w        *Window
	box      fyne.CanvasObject
	goals    *goalList
	against  *goalRow
	rows     []*freeRow
	list     *fyne.Container
	dials    []dial.Dial
	labels   []string
	bend     *widget.Select
	same     *widget.Select
	radius   *widget.Entry
	symmetry *widget.SelectEntry
	area     [2]*widget.Entry
	side     [2]*widget.Entry
	more     *fyne.Container
	under    *widget.Select
	over     *widget.Select
	tries    *widget.Entry
	effort   *widget.Select
	method   *widget.Select
	offered  *table.Table
}

// freeRow is a number that may be turned, with its range.
type freeRow struct {
	which    *widget.Select
	from, to *widget.Entry
	box      *fyne.Container
}

const (
	nothingAgainst = "nothing"
	asDrawn        = "the wall as drawn"
	// wishCopies is the number of copies of each wall under a tolerance.
	wishCopies = 8
	// shortestOrbit are goals beside the readings.
	shortestTrace  = "orbit-trace:2:1"
	shortestLength = "orbit-length:2:1"
)

func newWishForm(w *Window) *wishForm {
	f := &wishForm{w: w, list: container.NewVBox()}
	f.goals, f.against = newGoalList("window-share", "lyapunov-per-length", "area"), newGoalRow(append([]string{nothingAgainst}, aims...), nil)
	f.bend = widget.NewSelect([]string{"any bend", "convex", "strictly convex"}, nil)
	f.same = widget.NewSelect([]string{"any size", "same perimeter", "same area"}, nil)
	f.bend.SetSelectedIndex(0)
	f.same.SetSelectedIndex(0)
	f.radius, f.symmetry = widget.NewEntry(), widget.NewSelectEntry([]string{"D1", "D2", "C3", "D3", "C2"})
	f.radius.SetPlaceHolder("any")
	f.symmetry.SetPlaceHolder("any")
	pair := func(e *[2]*widget.Entry) {
		for i := range e {
			e[i] = widget.NewEntry()
			e[i].SetPlaceHolder("any")
		}
	}
	pair(&f.area)
	pair(&f.side)
	f.under = widget.NewSelect([]string{asDrawn}, func(name string) { visible(f.over, name != asDrawn) })
	f.over = widget.NewSelect([]string{"mean", "worst"}, nil)
	f.over.SetSelectedIndex(0)
	f.over.Hide()
	f.under.SetSelectedIndex(0)
	f.tries, f.effort = widget.NewEntry(), widget.NewSelect([]string{"0.03", "0.1", "0.3", "1", "4"}, nil)
	f.tries.SetText("60")
	f.effort.Selected = "0.1"
	f.method = widget.NewSelect([]string{"simplex", "evolution"}, nil)
	f.method.SetSelectedIndex(0)
	f.more = container.NewVBox(
		container.NewHBox(wordBox("radius from", 84), boxed(72, f.radius), widget.NewLabel("symmetry"), boxed(84, f.symmetry)),
		container.NewHBox(wordBox("area from", 84), boxed(72, f.area[0]), widget.NewLabel("to"), boxed(72, f.area[1])),
		container.NewHBox(wordBox("within", 84), boxed(72, f.side[0]), widget.NewLabel("by"), boxed(72, f.side[1])),
		container.NewHBox(wordBox("method", 84), boxed(120, f.method)),
		container.NewBorder(nil, nil, wordBox("counts", 84), boxed(84, f.over), f.under),
	)
	f.more.Hide()
	more := quiet("", "More demands  ▾", func() { visible(f.more, !f.more.Visible()) })
	f.box = container.NewVBox(f.goals.list, container.NewHBox(quiet("", "Add a goal", func() { f.goals.add() })),
		container.NewBorder(nil, nil, wordBox("against", 72), nil, f.against.box),
		f.list, container.NewHBox(quiet("", "Free another number", func() { f.add() })),
		container.NewGridWithColumns(2, f.bend, f.same),
		container.NewHBox(wordBox("walls", 72), boxed(64, f.tries), widget.NewLabel("effort"), boxed(84, f.effort)),
		container.NewHBox(more), f.more)
	return f
}

// offer lists what the table at hand has.
func (f *wishForm) offer() {
	t := f.w.session.Table()
	d := t.Design()
	under := []string{asDrawn}
	for _, p := range d.Study.Tolerances {
		under = append(under, p.Name)
	}
	if strings.Join(under, "\n") != strings.Join(f.under.Options, "\n") {
		before := f.under.Selected
		f.under.SetOptions(under)
		if f.under.SetSelected(before); f.under.SelectedIndex() < 0 {
			f.under.SetSelectedIndex(0)
		}
	}
	if f.offered != nil && f.offered.SameWall(t) {
		return
	}
	f.offered = t
	f.dials, f.labels = nil, nil
	for _, x := range dial.All(d) {
		f.dials, f.labels = append(f.dials, x), append(f.labels, study.Label(d, x))
	}
	for _, r := range f.rows {
		before := r.which.Selected
		r.which.SetOptions(f.labels)
		if r.which.SelectedIndex() < 0 && before != "" {
			r.which.ClearSelected()
		}
	}
	if len(f.rows) == 0 && len(f.dials) > 0 {
		f.add().which.SetSelectedIndex(shaping(d, f.dials))
	}
	var names []string
	for _, r := range reading.Readings() {
		if _, err := reading.Wanted(t, []string{r.Name}); err == nil && r.Kind != reading.Asked {
			names = append(names, r.Name)
		}
	}
	names = append(names, shortestTrace, shortestLength)
	f.goals.offer(names)
	f.against.offer(names, []string{"lobe-width", "area", "perimeter"})
}

// add adds a row for a number.
func (f *wishForm) add() *freeRow {
	r := &freeRow{from: widget.NewEntry(), to: widget.NewEntry()}
	r.which = widget.NewSelect(f.labels, func(string) { f.suggest(r) })
	out := quiet("clear", "", func() { f.drop(r) })
	r.box = container.NewBorder(nil, nil, wordBox("turn", 52), container.NewHBox(boxed(68, r.from), widget.NewLabel("to"), boxed(68, r.to), out), r.which)
	f.rows = append(f.rows, r)
	f.list.Add(r.box)
	return r
}

func (f *wishForm) drop(r *freeRow) {
	for i, o := range f.rows {
		if o == r {
			f.rows = append(f.rows[:i:i], f.rows[i+1:]...)
			break
		}
	}
	f.list.Remove(r.box)
}

// suggest fills in a range about the number's value.
func (f *wishForm) suggest(r *freeRow) {
	k := r.which.SelectedIndex()
	if k < 0 {
		return
	}
	d := f.w.session.Table().Design()
	v, err1 := f.dials[k].Value(d)
	spec, err2 := f.dials[k].Spec(d)
	if err1 != nil || err2 != nil {
		return
	}
	half := math.Abs(v) * 2 * suggestSpan
	if half == 0 {
		half = suggestSpan / 2
	}
	write := func(v float64) string {
		if spec.Unit == param.Angle {
			return strconv.FormatFloat(v*180/math.Pi, 'g', 5, 64) + "°"
		}
		return strconv.FormatFloat(v, 'g', 5, 64)
	}
	r.from.SetText(write(spec.Clamp(v - half)))
	r.to.SetText(write(spec.Clamp(v + half)))
}

// plan is what the form describes.
func (f *wishForm) plan() (table.Wish, error) {
	unit := f.w.session.Table().Design().Unit
	p := table.Wish{Effort: 0.1, Method: table.Method(max(0, f.method.SelectedIndex()))}
	goals, err := f.goals.goals()
	if err != nil {
		return p, err
	}
	p.Goals = goals
	for i, g := range goals {
		if i > 0 {
			p.Name += " and "
		}
		p.Name += g.Reading
	}
	if f.against.aim.SelectedIndex() > 0 {
		g, err := f.against.goal(1)
		if err != nil {
			return p, err
		}
		p.Against, p.Name = []table.Goal{g}, p.Name+" against "+g.Reading
	}
	for _, r := range f.rows {
		k := r.which.SelectedIndex()
		if k < 0 {
			continue
		}
		x := table.Freedom{Dial: f.dials[k].String()}
		if x.Lo, err = pane.Evaluate(r.from.Text, unit); err != nil {
			return p, fmt.Errorf("%s, from: %w", r.which.Selected, err)
		}
		if x.Hi, err = pane.Evaluate(r.to.Text, unit); err != nil {
			return p, fmt.Errorf("%s, to: %w", r.which.Selected, err)
		}
		p.Free = append(p.Free, x)
	}
	if len(p.Free) == 0 {
		return p, errors.New("choose a number that may be turned")
	}
	if p.Tries, err = strconv.Atoi(strings.TrimSpace(f.tries.Text)); err != nil {
		return p, fmt.Errorf("the number of walls is %q; write a whole number", f.tries.Text)
	}
	if e, err := strconv.ParseFloat(f.effort.Selected, 64); err == nil {
		p.Effort = e
	}
	if f.under.SelectedIndex() > 0 {
		p.Under, p.Over, p.Copies = f.under.Selected, table.Robust(max(0, f.over.SelectedIndex())), wishCopies
	}
	return p, f.demand(&p.Demand, unit)
}

// demand fills what is demanded.
func (f *wishForm) demand(d *table.Demand, unit table.Unit) error {
	d.Bend, d.Scaled = table.Bending(max(0, f.bend.SelectedIndex())), table.Scaling(max(0, f.same.SelectedIndex()))
	d.Symmetry = strings.TrimSpace(f.symmetry.Text)
	for _, x := range []struct {
		e    *widget.Entry
		what string
		to   *float64
	}{{f.radius, "radius", &d.LeastRadius}, {f.area[0], "area from", &d.AreaLo}, {f.area[1], "area to", &d.AreaHi}, {f.side[0], "within", &d.BoxX}, {f.side[1], "by", &d.BoxY}} {
		var err error
		if *x.to, err = typed(x.e, unit, x.what, 0); err != nil {
			return err
		}
	}
	return nil
}
