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

// The strip of values of a free wall: the numbers of the node, the span or the
// handle that is selected, or of the whole wall.

// freeNumber is a number of a free wall that can be read and typed. Lengths are
// in the table's unit, angles against its x axis.
type freeNumber struct {
	spec param.Spec
	name string // what typing it does
	get  func(f shape.Freeform, it table.Item) float64
	set  func(f shape.Freeform, it table.Item, x float64) shape.Freeform
}

func lengthSpec(name string, lo float64) param.Spec {
	return param.Spec{Name: name, Unit: param.Length, Lo: lo, Hi: 1e6}
}

func angleSpec(name string, lo, hi float64) param.Spec {
	return param.Spec{Name: name, Unit: param.Angle, Lo: lo, Hi: hi}
}

// leastTyped is the least length that can be typed where 0 makes no sense.
const leastTyped = 1e-9

// freeForm says which numbers the strip of a free wall shows; another is
// another form.
func freeForm(f shape.Freeform, handle int) string {
	if handle < 0 || handle >= len(f.Handles()) {
		s := f.Symmetry()
		return fmt.Sprint("whole ", s.Fold, s.Mirror)
	}
	h := f.Handles()[handle]
	n := f.Nodes()[h.Of]
	return fmt.Sprint(h.Role, n.Joint, n.Span)
}

// freeNumbers are those of the form.
func (v *Values) freeNumbers(f shape.Freeform) []freeNumber {
	handle := v.of.handle
	if handle < 0 || handle >= len(f.Handles()) {
		list := []freeNumber{everyFillet()}
		if s := f.Symmetry(); !s.None() {
			list = append(list, v.symmetryNumbers(s)...)
		}
		return list
	}
	h := f.Handles()[handle]
	list := placeNumbers(handle)
	switch h.Role {
	case shape.Anchor:
		list = append(list, v.nodeNumbers(f, h.Of)...)
		return append(list, spanNumbers(f, h.Of)...)
	case shape.Bow:
		return append(spanNumbers(f, h.Of), throughNumbers(f, h.Of)...)
	}
	return append(list, tangentNumbers(f, handle)...)
}

// placeNumbers are the coordinates of a handle.
func placeNumbers(handle int) []freeNumber {
	axis := func(name string, of func(p *r2.Vec) *float64) freeNumber {
		return freeNumber{lengthSpec(name, -1e6), "move a node",
			func(f shape.Freeform, it table.Item) float64 {
				p := it.Place.Apply(f.Handles()[handle].At)
				return *of(&p)
			},
			func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
				p := it.Place.Apply(f.Handles()[handle].At)
				*of(&p) = x
				return f.Moved(handle, it.Place.Back(p)).(shape.Freeform)
			}}
	}
	return []freeNumber{
		axis("x", func(p *r2.Vec) *float64 { return &p.X }),
		axis("y", func(p *r2.Vec) *float64 { return &p.Y }),
	}
}

// nodeNumbers are the fillet of a corner and its interior angle.
func (v *Values) nodeNumbers(f shape.Freeform, node int) []freeNumber {
	if f.Nodes()[node].Joint != shape.Corner {
		return nil
	}
	it := v.item()
	fillet := lengthSpec("fillet radius", 0)
	if most := f.GreatestFillet(node) * it.Place.Scale; most > 0 {
		fillet.Hi = most
	}
	return []freeNumber{
		{fillet, "fillet a corner",
			func(f shape.Freeform, it table.Item) float64 { return f.Nodes()[node].Fillet * it.Place.Scale },
			func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
				return f.SetFillet(node, x/it.Place.Scale)
			}},
		{angleSpec("interior angle", 1e-3, 2*math.Pi-1e-3), "set an angle",
			func(f shape.Freeform, it table.Item) float64 { return insideOf(f.InteriorAngle(node), it) },
			func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
				return f.WithInteriorAngle(node, insideOf(x, it))
			}},
	}
}

// insideOf is the angle on the table's side: outside the outline of an obstacle.
func insideOf(angle float64, it table.Item) float64 {
	if it.Role == table.Post {
		return 2*math.Pi - angle
	}
	return angle
}

// spanNumbers are the length and the direction of a span, and how it bends.
func spanNumbers(f shape.Freeform, span int) []freeNumber {
	list := []freeNumber{
		{lengthSpec("span length", leastTyped), "set a length",
			func(f shape.Freeform, it table.Item) float64 { return f.SpanLength(span) * it.Place.Scale },
			func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
				return f.WithLength(span, x/it.Place.Scale)
			}},
		{angleSpec("direction", -math.Pi, math.Pi), "set a direction",
			func(f shape.Freeform, it table.Item) float64 {
				return math.Remainder(f.Direction(span)+it.Place.Angle, 2*math.Pi)
			},
			func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
				return f.WithDirection(span, x-it.Place.Angle)
			}},
	}
	sweep := freeNumber{angleSpec("sweep", -6.2, 6.2), "bend an arc",
		func(f shape.Freeform, _ table.Item) float64 { return f.Sweep(span) },
		func(f shape.Freeform, _ table.Item, x float64) shape.Freeform {
			return f.SetBulge(span, math.Tan(x/4))
		}}
	switch f.Nodes()[span].Span {
	case shape.Bowed:
		list = append(list,
			freeNumber{lengthSpec("radius", leastTyped), "bend an arc",
				func(f shape.Freeform, it table.Item) float64 { r, _ := f.Axes(span); return r * it.Place.Scale },
				func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
					return f.WithRadius(span, x/it.Place.Scale)
				}},
			freeNumber{lengthSpec("sagitta", -1e6), "bend an arc",
				func(f shape.Freeform, it table.Item) float64 { return f.Sagitta(span) * it.Place.Scale },
				func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
					return f.WithSagitta(span, x/it.Place.Scale)
				}}, sweep)
	case shape.Elliptic:
		list = append(list, ellipseNumbers(span)...)
		list = append(list, sweep)
	}
	return list
}

// ellipseNumbers are the semi-axes and the tilt of an ellipse's arc.
func ellipseNumbers(span int) []freeNumber {
	axes := func(f shape.Freeform, it table.Item) (a, b, tilt float64) {
		a, b = f.Axes(span)
		return a * it.Place.Scale, b * it.Place.Scale, math.Remainder(f.Nodes()[span].Tilt+it.Place.Angle, math.Pi)
	}
	with := func(f shape.Freeform, it table.Item, a, b, tilt float64) shape.Freeform {
		return f.WithAxes(span, a/it.Place.Scale, b/it.Place.Scale, tilt-it.Place.Angle)
	}
	return []freeNumber{
		{lengthSpec("semi-axis a", leastTyped), "bend an ellipse",
			func(f shape.Freeform, it table.Item) float64 { a, _, _ := axes(f, it); return a },
			func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
				_, b, t := axes(f, it)
				return with(f, it, x, b, t)
			}},
		{lengthSpec("semi-axis b", leastTyped), "bend an ellipse",
			func(f shape.Freeform, it table.Item) float64 { _, b, _ := axes(f, it); return b },
			func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
				a, _, t := axes(f, it)
				return with(f, it, a, x, t)
			}},
		{angleSpec("tilt of a", -math.Pi/2, math.Pi/2), "bend an ellipse",
			func(f shape.Freeform, it table.Item) float64 { _, _, t := axes(f, it); return t },
			func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
				a, b, _ := axes(f, it)
				return with(f, it, a, b, x)
			}},
	}
}

// throughNumbers are the place in the middle of an arc: typed, the arc passes
// there.
func throughNumbers(f shape.Freeform, span int) []freeNumber {
	middle := func(f shape.Freeform) r2.Vec {
		for _, h := range f.Handles() {
			if h.Role == shape.Bow && h.Of == span {
				return h.At
			}
		}
		return f.Nodes()[span].At
	}
	axis := func(name string, of func(p *r2.Vec) *float64) freeNumber {
		return freeNumber{lengthSpec(name, -1e6), "bend an arc",
			func(f shape.Freeform, it table.Item) float64 {
				p := it.Place.Apply(middle(f))
				return *of(&p)
			},
			func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
				p := it.Place.Apply(middle(f))
				*of(&p) = x
				return f.Through(span, it.Place.Back(p))
			}}
	}
	return []freeNumber{
		axis("through x", func(p *r2.Vec) *float64 { return &p.X }),
		axis("through y", func(p *r2.Vec) *float64 { return &p.Y }),
	}
}

// tangentNumbers are the length and the direction of a tangent handle.
func tangentNumbers(f shape.Freeform, handle int) []freeNumber {
	node := f.Handles()[handle].Of
	arm := func(f shape.Freeform, it table.Item) r2.Vec {
		return r2.Sub(it.Place.Apply(f.Handles()[handle].At), it.Place.Apply(f.Nodes()[node].At))
	}
	to := func(f shape.Freeform, it table.Item, v r2.Vec) shape.Freeform {
		return f.Moved(handle, it.Place.Back(r2.Add(it.Place.Apply(f.Nodes()[node].At), v))).(shape.Freeform)
	}
	return []freeNumber{
		{lengthSpec("handle length", leastTyped), "drag a handle",
			func(f shape.Freeform, it table.Item) float64 { return r2.Norm(arm(f, it)) },
			func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
				v := arm(f, it)
				return to(f, it, r2.Scale(x/r2.Norm(v), v))
			}},
		{angleSpec("handle direction", -math.Pi, math.Pi), "drag a handle",
			func(f shape.Freeform, it table.Item) float64 { v := arm(f, it); return math.Atan2(v.Y, v.X) },
			func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
				return to(f, it, r2.Scale(r2.Norm(arm(f, it)), plane.Polar(x)))
			}},
	}
}

// everyFillet rounds all corners alike; it shows the greatest fillet that is
// there.
func everyFillet() freeNumber {
	return freeNumber{lengthSpec("fillet all corners", 0), "fillet all corners",
		func(f shape.Freeform, it table.Item) float64 {
			most := 0.0
			for _, n := range f.Nodes() {
				most = math.Max(most, n.Fillet)
			}
			return most * it.Place.Scale
		},
		func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
			for i, n := range f.Nodes() {
				if n.Joint == shape.Corner {
					f = f.SetFillet(i, x/it.Place.Scale)
				}
			}
			return f
		}}
}

// freeRows are the rows of a free wall.
func (v *Values) freeRows(grid *fyne.Container, f shape.Freeform) {
	v.free = v.freeNumbers(f)
	for _, n := range v.free {
		grid.Add(v.add(n.spec, func(x float64) edit.Command {
			it := v.item()
			f := it.Shape.(shape.Freeform)
			return edit.Reshape{Item: v.of.item, Shape: n.set(f, it, x), Name: n.name}
		}))
	}
}

// freeValues are the values of the rows.
func (v *Values) freeValues(f shape.Freeform, it table.Item) []float64 {
	now := make([]float64, len(v.free))
	for i, n := range v.free {
		now[i] = n.get(f, it)
	}
	return now
}

// freeHead is the line over the rows: what is selected, its joint and the span
// that leaves it; or what the whole wall keeps.
func (v *Values) freeHead(f shape.Freeform) fyne.CanvasObject {
	h := v.of.handle
	reshape := func(g shape.Freeform, name string) {
		v.lay(edit.Reshape{Item: v.of.item, Shape: g, Name: name})
		v.of = selected{item: -2} // the choices say what came of it
		v.Refresh()
	}
	if h < 0 || h >= len(f.Handles()) {
		return container.New(&flow{}, v.name, container.NewHBox(widget.NewLabel("keeps"), v.symmetries(f)),
			widget.NewLabel("Click a node to change it."))
	}
	node := f.Handles()[h].Of
	n := f.Nodes()[node]
	joint := widget.NewSelect([]string{"corner", "tangent", "curvature"}, nil)
	joint.SetSelectedIndex(int(n.Joint))
	joint.OnChanged = func(string) {
		want := shape.Joint(joint.SelectedIndex())
		g := f.SetJoint(node, want)
		reshape(g, "change a joint")
		if g.Nodes()[node].Joint != want {
			v.desk.Say("The joint cannot be that between these spans; make one of them a curve first")
		}
	}
	span := widget.NewSelect([]string{"line", "arc", "curve", "ellipse"}, nil)
	span.SetSelectedIndex(int(n.Span))
	span.OnChanged = func(string) { reshape(f.SetSpan(node, shape.SpanKind(span.SelectedIndex())), "change a span") }
	v.name.SetText(f.Handles()[h].Name)
	return container.New(&flow{}, v.name, container.NewHBox(widget.NewLabel("joint"), joint), container.NewHBox(widget.NewLabel("span"), span),
		widget.NewButton("Split span", func() { reshape(f.InsertNode(node, 0.5), "split a span") }),
		widget.NewButton("Merge spans", func() { reshape(f.DeleteNode(node), "merge two spans") }))
}

// freeing turns a shape of the catalogue into a free wall.
func (v *Values) freeing() fyne.CanvasObject {
	return widget.NewButton("Make it a free wall", func() { v.desk.Free(v.of.item) })
}
