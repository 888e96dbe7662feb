package pane

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// Values is the strip of numbers of what is selected: a form made from the
// parameters' descriptions. Every number can be typed, dragged on its slider
// and nudged with the wheel.
type Values struct {
	Box  *fyne.Container
	View *container.Scroll // the box, scrolled where it is long
	desk *Desk
	rows []*row
	of   selected
	name *widget.Label
	free []freeNumber // those of the rows
	draw *drawStrip
}

// selected says for what the form was built.
type selected struct {
	item, handle int
	shape        string
	nodes        int
	coats        string // the form of the coat tool; empty for another tool
	free         string // the form of a free wall
	draw         bool   // the form of drawing node by node
}

// NewValues is the strip on a desk.
func NewValues(d *Desk) *Values {
	v := &Values{desk: d, Box: container.New(tower{}), name: widget.NewLabel("")}
	v.name.TextStyle.Bold = true
	v.View = container.NewVScroll(v.Box)
	v.View.SetMinSize(fyne.NewSize(0, stripHeight))
	return v
}

// stripHeight is the height of the strip. It is one for all that can be
// selected: the table must not move when a hand takes hold of it.
const stripHeight = 178

// Refresh brings the numbers up to date, and makes the form anew where another
// thing is selected.
func (v *Values) Refresh() {
	now := v.selected()
	if now != v.of || len(v.rows) == 0 && now.coats == "" && !now.draw {
		v.of = now
		v.build()
	}
	v.update()
}

func (v *Values) selected() selected {
	s := v.desk.Session.Selection
	if form := v.coatForm(); form != "" {
		return selected{coats: form}
	}
	if v.drawForm() {
		return selected{item: -1, draw: true}
	}
	of := selected{item: s.Item, handle: s.Handle}
	if s.Item >= 0 {
		sh := v.item().Shape
		of.shape = sh.Kind()
		if f, ok := sh.(shape.Freeform); ok {
			of.nodes = len(f.Nodes())
			of.free = freeForm(f, s.Handle)
		} else {
			of.handle = -1
		}
	}
	return of
}

func (v *Values) item() table.Item {
	return v.desk.Session.Table().Design().Items[v.desk.Session.Selection.Item]
}

// build makes the rows.
func (v *Values) build() {
	v.rows = nil
	v.Box.RemoveAll()
	if v.of.coats != "" {
		v.buildCoats()
		return
	}
	if v.of.draw {
		v.buildDraw()
		return
	}
	if v.of.item < 0 {
		v.name.SetText("Nothing selected")
		v.Box.Add(container.NewHBox(v.name, widget.NewLabel("Click a wall or a handle; its numbers appear here.")))
		return
	}
	it := v.item()
	grid := container.New(&columns{least: 268})
	switch s := it.Shape.(type) {
	case shape.Figure:
		v.name.SetText(s.Family().Title)
		for i, spec := range s.Family().Specs {
			grid.Add(v.add(spec, func(x float64) edit.Command { return edit.SetValue{Item: v.of.item, Param: i, Value: x} }))
		}
	case shape.Freeform:
		v.name.SetText("Free wall")
		v.freeRows(grid, s)
	}
	v.placeRows(grid, it)
	head := container.NewHBox(v.name)
	if f, ok := it.Shape.(shape.Figure); ok {
		note := f.Family().About
		if it.Role == table.Post {
			note = "An obstacle; make it the wall by the Edit menu."
		}
		about := widget.NewLabel(note)
		about.Truncation = fyne.TextTruncateEllipsis
		v.Box.Add(container.NewBorder(nil, nil, head, v.freeing(), about))
	} else {
		v.Box.Add(v.freeHead(it.Shape.(shape.Freeform)))
	}
	v.Box.Add(grid)
}

// placeRows are the item's position and angle.
func (v *Values) placeRows(grid *fyne.Container, it table.Item) {
	where := func(set func(p *plane.Similarity, x float64)) func(float64) edit.Command {
		return func(x float64) edit.Command {
			p := v.item().Place
			set(&p, x)
			return edit.Shift{Item: v.of.item, Place: p}
		}
	}
	if v.of.handle >= 0 {
		return
	}
	l := param.Spec{Unit: param.Length, Lo: -1e6, Hi: 1e6}
	l.Name = "x"
	grid.Add(v.add(l, where(func(p *plane.Similarity, x float64) { p.Shift.X = x })))
	l.Name = "y"
	grid.Add(v.add(l, where(func(p *plane.Similarity, x float64) { p.Shift.Y = x })))
	a := param.Spec{Name: "turn", Unit: param.Angle, Lo: -math.Pi, Hi: math.Pi}
	grid.Add(v.add(a, where(func(p *plane.Similarity, x float64) { p.Angle = x })))
	grid.Add(v.add(param.Spec{Name: "scale", Lo: 1e-3, Hi: 1e3, Default: 1}, where(func(p *plane.Similarity, x float64) { p.Scale = x })))
}

// add makes the row of a parameter.
func (v *Values) add(spec param.Spec, set func(float64) edit.Command) fyne.CanvasObject {
	r := &row{spec: spec, set: set, value: math.NaN()}
	r.entry = newNumber()
	r.entry.OnSubmitted = func(text string) {
		x, err := r.parse(text, v.desk.Session.Table().Design().Unit)
		if err == nil {
			err = v.desk.Session.Do(r.set(x))
		}
		if err != nil {
			v.desk.Say(err.Error())
		}
		r.value, r.entry.focused = math.NaN(), false
		v.Refresh()
	}
	r.entry.nudge = func(k float64) {
		_ = v.desk.Session.Do(r.set(r.spec.Clamp(r.nudged(k))))
		v.Refresh()
	}
	r.slider = widget.NewSlider(0, 1)
	r.slider.Step = 0
	r.slider.OnChanged = func(x float64) {
		if r.quiet {
			return
		}
		if !v.desk.Session.InGesture() {
			v.desk.Session.Begin()
		}
		if err := v.desk.Session.Amend(r.set(r.spec.Clamp(x))); err != nil {
			v.desk.Say(err.Error())
		}
	}
	r.slider.OnChangeEnded = func(float64) {
		v.desk.Session.End()
		r.value = math.NaN()
		v.Refresh()
	}
	v.rows = append(v.rows, r)
	name := widget.NewLabel(spec.Name)
	return container.NewBorder(nil, nil, container.NewGridWrap(fyne.NewSize(108, 30), name), nil,
		container.NewBorder(nil, nil, container.NewGridWrap(fyne.NewSize(104, 30), r.entry), nil, r.slider))
}

// update reads the numbers off the document.
func (v *Values) update() {
	if v.of.coats != "" {
		v.bring(v.coatNumbers())
		return
	}
	if v.of.draw {
		v.followDraw()
		return
	}
	if v.of.item < 0 {
		return
	}
	it := v.item()
	var now []float64
	switch s := it.Shape.(type) {
	case shape.Figure:
		now = append(now, s.Values()...)
	case shape.Freeform:
		now = append(now, v.freeValues(s, it)...)
	}
	if v.of.handle < 0 {
		now = append(now, it.Place.Shift.X, it.Place.Shift.Y, it.Place.Angle, it.Place.Scale)
	}
	v.bring(now)
}

// bring shows a value in each row.
func (v *Values) bring(now []float64) {
	busy := v.desk.Session.InGesture()
	size := plane.Diagonal(v.desk.Session.Table().Bounds())
	for i, r := range v.rows {
		if i < len(now) {
			r.bring(now[i], v.desk.Session.Table().Design().Unit, size, busy)
		}
	}
}
