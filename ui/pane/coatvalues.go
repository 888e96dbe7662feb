package pane

import (
	"fmt"
	"strings"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/param"
	"cavitywright/table/shape"
	"cavitywright/table/wall"
	"cavitywright/ui/session"
	"cavitywright/ui/tool"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// The strip of values while the pointer holds the coat tool: the numbers of the
// selected coat, or those of all of the wall.

// coatForm says which form the strip has to be; another is another form.
func (v *Values) coatForm() string {
	s := v.desk.Session
	if s.Settings.Tool != session.Coats {
		return ""
	}
	t := s.Table()
	r, ok := tool.SelectedCoat(s)
	if !ok {
		_, filled := tool.Medium(t)
		return fmt.Sprint("wall ", t.Law().Name(), polarisationOf(t.Law()), s.Settings.Laid().Name(), filled)
	}
	first, last := r.Sides(t)
	return fmt.Sprint("coat ", r.First, r.Law.Name(), polarisationOf(r.Law), first, last, r.Loop, r.Last)
}

func polarisationOf(l wall.Law) string {
	if d, ok := l.(wall.Dielectric); ok {
		return d.Polarisation.String()
	}
	return ""
}

// run is the selected coat as it stands now.
func (v *Values) run() tool.CoatRun {
	r, _ := tool.SelectedCoat(v.desk.Session)
	return r
}

// buildCoats makes the form.
func (v *Values) buildCoats() {
	s := v.desk.Session
	r, ok := tool.SelectedCoat(s)
	if !ok {
		v.buildBare()
		return
	}
	t := s.Table()
	v.name.SetText("Coat")
	first, last := r.Sides(t)
	where := fmt.Sprintf("side %d", first+1)
	switch {
	case first == table.AllSides:
		where = "all sides"
	case last != first:
		where = fmt.Sprintf("sides %d to %d", first+1, last+1)
	}
	if len(t.Design().Items) > 1 {
		where += " of the " + v.itemTitle(t.Design().Coats[r.First].Item)
	}
	v.Box.Add(container.NewHScroll(container.NewHBox(v.name, v.palette(r.Law, func(l wall.Law) {
		v.lay(v.run().Relaid(s.Table(), l))
	}), widget.NewLabel(where))))
	grid := container.New(&columns{least: 268})
	v.stretchRows(grid, r)
	v.lawRows(grid, r.Law, func() wall.Law { return v.run().Law }, func(l wall.Law) edit.Command {
		s.Settings.Law = l // the next pull lays the same
		return v.run().Relaid(s.Table(), l)
	})
	v.Box.Add(grid)
}

// buildBare makes the form of all of the wall, under the palette of what a pull
// lays.
func (v *Values) buildBare() {
	s := v.desk.Session
	v.name.SetText("A pull lays")
	v.Box.Add(container.NewHScroll(container.NewHBox(v.name, v.palette(s.Settings.Laid(), func(l wall.Law) { s.Touch() }))))
	bare := s.Table().Law()
	title := widget.NewLabel("All of the wall")
	title.TextStyle.Bold = true
	var names []string
	for _, k := range wall.Kinds() {
		names = append(names, kindTitle(k.Name))
	}
	law := widget.NewSelect(names, nil)
	law.Selected = kindTitle(bare.Name())
	law.OnChanged = func(string) {
		l, err := session.Brush(wall.Kinds()[law.SelectedIndex()].Name, s.Table().Law())
		if err == nil {
			v.lay(tool.Barer(s.Table(), l))
		}
	}
	v.Box.Add(container.NewHBox(title, law, widget.NewLabel("where no coat lies")))
	grid := container.New(&columns{least: 268})
	v.lawRows(grid, bare, func() wall.Law { return s.Table().Law() }, func(l wall.Law) edit.Command {
		if d, ok := l.(wall.Dielectric); ok && d.Index != s.Table().Law().(wall.Dielectric).Index {
			return tool.Filled(s.Table(), d.Index) // one medium fills the table
		}
		return tool.Barer(s.Table(), l)
	})
	if _, dielectric := bare.(wall.Dielectric); !dielectric {
		if _, ok := tool.Medium(s.Table()); ok {
			spec := param.Spec{Name: "medium, index", Lo: 1, Hi: 10}
			grid.Add(v.add(spec, func(x float64) edit.Command { return tool.Filled(s.Table(), x) }))
		}
	}
	v.Box.Add(grid)
}

// lay carries a command out and says why where it is refused.
func (v *Values) lay(c edit.Command) {
	if err := v.desk.Session.Do(c); err != nil {
		v.desk.Say(err.Error())
	}
	v.Refresh()
}

// stretchRows are where the coat begins and ends, and how wide it is.
func (v *Values) stretchRows(grid *fyne.Container, r tool.CoatRun) {
	s := v.desk.Session
	first, last := r.Sides(s.Table())
	of := func(side int) string {
		if side == table.AllSides {
			return "of each side"
		}
		return fmt.Sprintf("of side %d", side+1)
	}
	fraction := param.Spec{Name: "from, " + of(first), Lo: 0, Hi: 1}
	grid.Add(v.add(fraction, func(x float64) edit.Command {
		_, to := v.run().Fractions(s.Table())
		return v.run().WithFractions(s.Table(), x, to)
	}))
	fraction.Name = "to, " + of(last)
	grid.Add(v.add(fraction, func(x float64) edit.Command {
		from, _ := v.run().Fractions(s.Table())
		return v.run().WithFractions(s.Table(), from, x)
	}))
	if r.Loop < 0 {
		return
	}
	l := s.Table().Loops()[r.Loop]
	at := param.Spec{Name: "from s", Unit: param.Length, Lo: 0, Hi: s.Table().Length()}
	grid.Add(v.add(at, func(x float64) edit.Command {
		return v.run().WithStart(s.Table(), v.shownS(x))
	}))
	at.Name = "to s"
	grid.Add(v.add(at, func(x float64) edit.Command {
		return v.run().WithEnd(s.Table(), v.shownS(x))
	}))
	width := param.Spec{Name: "width", Unit: param.Length, Lo: 0, Hi: l.S1 - l.S0}
	grid.Add(v.add(width, func(x float64) edit.Command { return v.run().WithWidth(s.Table(), x) }))
}

// shownS turns an arclength into that of the display's sense, and back.
func (v *Values) shownS(s float64) float64 {
	t := v.desk.Session.Table()
	if t.Design().Study.Display.Sense == table.Clockwise {
		return t.Length() - s
	}
	return s
}

// coatNumbers are the values of the rows, in their order.
func (v *Values) coatNumbers() []float64 {
	s := v.desk.Session
	t := s.Table()
	r, ok := tool.SelectedCoat(s)
	if !ok {
		now := numbersOf(t.Law())
		if _, dielectric := t.Law().(wall.Dielectric); !dielectric {
			if n, filled := tool.Medium(t); filled {
				now = append(now, n)
			}
		}
		return now
	}
	from, to := r.Fractions(t)
	now := []float64{from, to}
	if r.Loop >= 0 {
		now = append(now, v.shownS(r.From), v.shownS(r.End(t)), r.Width)
	}
	return append(now, numbersOf(r.Law)...)
}

// itemTitle is an item as a sentence names it.
func (v *Values) itemTitle(i int) string {
	if f, ok := v.desk.Session.Table().Design().Items[i].Shape.(shape.Figure); ok {
		return strings.ToLower(f.Family().Title)
	}
	return "free wall"
}
