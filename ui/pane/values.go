package pane

import (
	"fmt"
	"math"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
	"gonum.org/v1/gonum/spatial/r2"
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
}

// selected says for what the form was built.
type selected struct {
	item, handle int
	shape        string
	nodes        int
}

// NewValues is the strip on a desk.
func NewValues(d *Desk) *Values {
	v := &Values{desk: d, Box: container.NewVBox(), name: widget.NewLabel("")}
	v.name.TextStyle.Bold = true
	v.View = container.NewVScroll(v.Box)
	return v
}

// tallest is the height that the strip may take from the table's pane.
const tallest = 178

// fit gives the strip the height that it needs, up to the tallest.
func (v *Values) fit() {
	v.View.SetMinSize(fyne.NewSize(0, fyne.Min(v.Box.MinSize().Height, tallest)))
}

// Refresh brings the numbers up to date, and makes the form anew where another
// thing is selected.
func (v *Values) Refresh() {
	now := v.selected()
	if now != v.of || len(v.rows) == 0 {
		v.of = now
		v.build()
		v.fit()
	}
	v.update()
}

func (v *Values) selected() selected {
	s := v.desk.Session.Selection
	of := selected{item: s.Item, handle: s.Handle}
	if s.Item >= 0 {
		sh := v.item().Shape
		of.shape = sh.Kind()
		if f, ok := sh.(shape.Freeform); ok {
			of.nodes = len(f.Nodes())
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
		if span, ok := bowedSpan(s, v.of.handle); ok {
			v.arcRows(grid, span)
		} else {
			v.nodeRows(grid, s)
		}
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
		v.Box.Add(container.NewBorder(nil, nil, head, nil, about))
	} else {
		v.Box.Add(container.NewHScroll(container.NewHBox(v.name, v.spanControls(it.Shape.(shape.Freeform)))))
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

// nodeRows are the coordinates of the selected handle of a free wall.
func (v *Values) nodeRows(grid *fyne.Container, f shape.Freeform) {
	h := v.of.handle
	if h < 0 {
		return
	}
	l := param.Spec{Unit: param.Length, Lo: -1e6, Hi: 1e6}
	move := func(axis int) func(float64) edit.Command {
		return func(x float64) edit.Command {
			it := v.item()
			to := it.Place.Apply(it.Shape.Handles()[h].At)
			if axis == 0 {
				to.X = x
			} else {
				to.Y = x
			}
			return edit.Drag{Item: v.of.item, Handle: h, To: to}
		}
	}
	l.Name = "x"
	grid.Add(v.add(l, move(0)))
	l.Name = "y"
	grid.Add(v.add(l, move(1)))
}

// bowedSpan is the arc whose middle handle h is.
func bowedSpan(f shape.Freeform, h int) (span int, ok bool) {
	if h < 0 || h >= len(f.Handles()) || f.Handles()[h].Role != shape.Bow {
		return 0, false
	}
	return f.Handles()[h].Of, true
}

// arcRows are the radius and the sweep of an arc of a free wall.
func (v *Values) arcRows(grid *fyne.Container, span int) {
	bent := func(bulge func(now, chord float64) float64) edit.Command {
		it := v.item()
		f := it.Shape.(shape.Freeform)
		n := f.Nodes()
		chord := r2.Norm(r2.Sub(n[(span+1)%len(n)].At, n[span].At)) * it.Place.Scale
		return edit.Reshape{Item: v.of.item, Shape: f.SetBulge(span, bulge(n[span].Bulge, chord)), Name: "bend an arc"}
	}
	r := param.Spec{Name: "radius", Unit: param.Length, Lo: 1e-9, Hi: 1e9}
	grid.Add(v.add(r, func(x float64) edit.Command {
		return bent(func(now, chord float64) float64 {
			// A chord c of a circle of radius R spans 2 asin(c/2R); the larger
			// arc keeps being the larger one.
			half := math.Asin(math.Min(1, chord/(2*x)))
			if math.Abs(now) > 1 {
				half = math.Pi - half
			}
			return math.Copysign(math.Tan(half/2), now)
		})
	}))
	a := param.Spec{Name: "sweep", Unit: param.Angle, Lo: -6.2, Hi: 6.2}
	grid.Add(v.add(a, func(x float64) edit.Command {
		return bent(func(float64, float64) float64 { return math.Tan(x / 4) })
	}))
}

// spanControls choose the joint of the selected node and the span that leaves
// it.
func (v *Values) spanControls(f shape.Freeform) fyne.CanvasObject {
	h := v.of.handle
	if h < 0 || f.Handles()[h].Of < 0 {
		return widget.NewLabel("Click a node to change it; click the wall twice to add one.")
	}
	node, name := f.Handles()[h].Of, f.Handles()[h].Name
	reshape := func(g shape.Freeform, name string) {
		if err := v.desk.Session.Do(edit.Reshape{Item: v.of.item, Shape: g, Name: name}); err != nil {
			v.desk.Say(err.Error())
		}
		v.of = selected{item: -2}
		v.Refresh()
	}
	n := f.Nodes()[node]
	joint := widget.NewSelect([]string{"corner", "smooth"}, nil)
	joint.SetSelectedIndex(int(n.Joint - shape.Corner))
	joint.OnChanged = func(string) {
		reshape(f.SetJoint(node, shape.Corner+shape.Joint(joint.SelectedIndex())), "change a joint")
	}
	span := widget.NewSelect([]string{"straight", "arc", "smooth"}, nil)
	span.SetSelectedIndex(int(n.Span - shape.Straight))
	span.OnChanged = func(string) {
		reshape(f.SetSpan(node, shape.Straight+shape.SpanKind(span.SelectedIndex())), "change a span")
	}
	return container.NewHBox(
		widget.NewLabel(fmt.Sprintf("%s of %d, joint", name, len(f.Nodes()))), joint,
		widget.NewLabel("next span"), span,
		widget.NewButton("Delete node", func() { reshape(f.DeleteNode(node), "delete a node") }))
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
	if v.of.item < 0 {
		return
	}
	it := v.item()
	var now []float64
	switch s := it.Shape.(type) {
	case shape.Figure:
		now = append(now, s.Values()...)
	case shape.Freeform:
		if span, ok := bowedSpan(s, v.of.handle); ok {
			n := s.Nodes()
			sweep := 4 * math.Atan(n[span].Bulge)
			chord := r2.Norm(r2.Sub(n[(span+1)%len(n)].At, n[span].At)) * it.Place.Scale
			now = append(now, chord/(2*math.Abs(math.Sin(sweep/2))), sweep)
		} else if h := v.of.handle; h >= 0 && h < len(s.Handles()) {
			p := it.Place.Apply(s.Handles()[h].At)
			now = append(now, p.X, p.Y)
		}
	}
	if v.of.handle < 0 {
		now = append(now, it.Place.Shift.X, it.Place.Shift.Y, it.Place.Angle, it.Place.Scale)
	}
	busy := v.desk.Session.InGesture()
	size := plane.Diagonal(v.desk.Session.Table().Bounds())
	for i, r := range v.rows {
		if i < len(now) {
			r.bring(now[i], v.desk.Session.Table().Design().Unit, size, busy)
		}
	}
}
