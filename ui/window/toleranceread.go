package window

import (
	"errors"
	"math"
	"slices"

	"cavitywright/table"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// readRow is a reading that is taken of the copies, with what is good of it.
type readRow struct {
	which       *widget.Select
	least, most *widget.Entry
	out         *widget.Button
	box         *fyne.Container
}

// readList are the readings of a tolerance, one at least.
type readList struct {
	rows  []*readRow
	list  *fyne.Container
	names []string // what the table at hand has
}

// readFirst are the readings that a new row takes first.
var readFirst = []string{"window-share", "escape-rate", "lyapunov-per-length", "area"}

func newReadList() *readList {
	l := &readList{list: container.NewVBox()}
	l.add()
	return l
}

// add adds a reading that no other row takes.
func (l *readList) add() *readRow {
	r := &readRow{which: widget.NewSelect(nil, nil), least: widget.NewEntry(), most: widget.NewEntry()}
	r.least.SetPlaceHolder("none")
	r.most.SetPlaceHolder("none")
	r.out = quiet("clear", "", func() { l.drop(r) })
	r.box = container.NewVBox(container.NewBorder(nil, nil, wordBox("Read", 72), r.out, r.which),
		container.NewHBox(wordBox("good from", 72), boxed(84, r.least), widget.NewLabel("to"), boxed(84, r.most)))
	l.rows = append(l.rows, r)
	l.list.Add(r.box)
	l.choose(r)
	l.settle()
	return r
}

func (l *readList) drop(r *readRow) {
	l.rows = slices.DeleteFunc(l.rows, func(o *readRow) bool { return o == r })
	l.list.Remove(r.box)
	l.settle()
}

// settle lets a row be taken out where another is left.
func (l *readList) settle() {
	for _, r := range l.rows {
		visible(r.out, len(l.rows) > 1)
	}
}

// choose lists the readings in a row; where its own is not among them it takes
// the first likely one that no other row has.
func (l *readList) choose(r *readRow) {
	before := r.which.Selected
	r.which.SetOptions(l.names)
	r.which.ClearSelected()
	for _, name := range slices.Concat([]string{before}, readFirst, l.names) {
		taken := func(o *readRow) bool { return o != r && o.which.Selected == name }
		if slices.Contains(l.names, name) && (name == before || !slices.ContainsFunc(l.rows, taken)) {
			r.which.SetSelected(name)
			return
		}
	}
}

// offer lists what the table at hand has.
func (l *readList) offer(names []string) {
	l.names = names
	for _, r := range l.rows {
		l.choose(r)
	}
}

// fill puts the readings and their limits into a plan.
func (l *readList) fill(p *table.Tolerance, unit table.Unit) (err error) {
	for _, r := range l.rows {
		x := table.Limit{Reading: r.which.Selected}
		if x.Reading == "" {
			return errors.New("choose what is to be read")
		}
		if x.Lo, err = typed(r.least, unit, x.Reading+", good from", math.Inf(-1)); err != nil {
			return err
		}
		if x.Hi, err = typed(r.most, unit, x.Reading+", good to", math.Inf(1)); err != nil {
			return err
		}
		p.Readings = append(p.Readings, x.Reading)
		if !math.IsInf(x.Lo, 0) || !math.IsInf(x.Hi, 0) {
			p.Limits = append(p.Limits, x)
		}
	}
	return nil
}
