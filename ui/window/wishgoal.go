package window

import (
	"errors"
	"fmt"
	"slices"

	"cavitywright/table"
	"cavitywright/ui/pane"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// goalRow is a goal: an aim, a reading, for the aim "at" a value, and among
// several a weight.
type goalRow struct {
	aim    *widget.Select
	read   *widget.Select
	value  *widget.Entry
	weight *widget.Entry
	out    *widget.Button // takes the row out; nil where it stays
	box    fyne.CanvasObject
	// held, weighed and below are what stands below the reading: the value, the
	// weight, and both.
	held, weighed, below fyne.CanvasObject
}

// aims are those of table.Aim, in its order.
var aims = []string{"the greatest", "the least", "at the value"}

// newGoalRow makes a row; drop, which may be nil, takes it out.
func newGoalRow(aims []string, drop func()) *goalRow {
	g := &goalRow{read: widget.NewSelect(nil, nil), value: widget.NewEntry(), weight: widget.NewEntry()}
	g.value.SetPlaceHolder("value")
	g.weight.SetText("1")
	g.held = boxed(84, g.value)
	g.weighed = container.NewHBox(widget.NewLabel("weight"), boxed(64, g.weight))
	g.weighed.Hide()
	g.below = container.NewHBox(wordBox("", 128), g.held, g.weighed)
	g.aim = widget.NewSelect(aims, func(string) { g.settle() })
	var end fyne.CanvasObject
	if drop != nil {
		g.out = quiet("clear", "", drop)
		g.out.Hide()
		end = g.out
	}
	g.box = container.NewVBox(container.NewBorder(nil, nil, boxed(128, g.aim), end, g.read), g.below)
	g.aim.SetSelectedIndex(0)
	return g
}

// settle shows the fields that matter.
func (g *goalRow) settle() {
	visible(g.read, g.aim.Selected != nothingAgainst)
	visible(g.held, g.aim.Selected == aims[table.Hold])
	visible(g.below, g.held.Visible() || g.weighed.Visible())
}

// offer lists readings in the row; where its own is not among them it takes the
// first of the likely ones that is.
func (g *goalRow) offer(names, likely []string) {
	before := g.read.Selected
	g.read.SetOptions(names)
	g.read.ClearSelected()
	for _, name := range append([]string{before}, likely...) {
		if slices.Contains(names, name) {
			g.read.SetSelected(name)
			return
		}
	}
}

// goal is what a row says; aims before skip stand for no goal.
func (g *goalRow) goal(skip int) (table.Goal, error) {
	out := table.Goal{Reading: g.read.Selected, Aim: table.Aim(g.aim.SelectedIndex() - skip), Weight: 1}
	if out.Reading == "" {
		return out, errors.New("choose what is wished for")
	}
	var err error
	if out.Aim == table.Hold {
		if out.Value, err = pane.Evaluate(g.value.Text, ""); err != nil {
			return out, fmt.Errorf("%s: %w", out.Reading, err)
		}
	}
	if g.weighed.Visible() {
		if out.Weight, err = typed(g.weight, "", out.Reading+", weight", 1); err != nil {
			return out, err
		}
	}
	return out, nil
}

// goalList are the goals of a wish, whose weighted sum counts.
type goalList struct {
	rows   []*goalRow
	list   *fyne.Container
	names  []string // the readings that a row may take
	likely []string // those that a new row takes first
}

func newGoalList(likely ...string) *goalList {
	l := &goalList{list: container.NewVBox(), likely: likely}
	l.add()
	return l
}

// add adds a goal, of a reading that no other has.
func (l *goalList) add() *goalRow {
	var g *goalRow
	g = newGoalRow(aims, func() { l.drop(g) })
	l.rows = append(l.rows, g)
	l.list.Add(g.box)
	g.offer(l.names, l.free())
	l.weigh()
	return g
}

// free are the readings that no goal has, the likely ones first.
func (l *goalList) free() (all []string) {
	for _, name := range slices.Concat(l.likely, l.names) {
		if !slices.ContainsFunc(l.rows, func(g *goalRow) bool { return g.read.Selected == name }) {
			all = append(all, name)
		}
	}
	return all
}

func (l *goalList) drop(g *goalRow) {
	l.rows = slices.DeleteFunc(l.rows, func(o *goalRow) bool { return o == g })
	l.list.Remove(g.box)
	l.weigh()
}

// weigh shows the weights where there are several goals.
func (l *goalList) weigh() {
	for _, g := range l.rows {
		visible(g.weighed, len(l.rows) > 1)
		visible(g.out, len(l.rows) > 1)
		g.settle()
	}
}

// offer lists readings in all rows.
func (l *goalList) offer(names []string) {
	l.names = names
	for _, g := range l.rows {
		g.offer(names, l.free())
	}
}

// goals are what the rows say.
func (l *goalList) goals() (all []table.Goal, err error) {
	for _, g := range l.rows {
		x, err := g.goal(0)
		if err != nil {
			return nil, err
		}
		if slices.ContainsFunc(all, func(o table.Goal) bool { return o.Reading == x.Reading && o.Aim == x.Aim && o.Value == x.Value }) {
			return nil, fmt.Errorf("%s is wished for twice; take one of the two out", x.Reading)
		}
		all = append(all, x)
	}
	return all, nil
}
