package pane

import (
	"fmt"
	"math"

	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/ui/session"
	"cavitywright/ui/tool"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
	"gonum.org/v1/gonum/spatial/r2"
)

// The strip of values while a wall is drawn node by node: what the next span
// is, and where the next node goes, typed exactly. What is left empty follows
// the pointer.

// drawStrip are the fields.
type drawStrip struct {
	x, y, length, direction, radius *number
}

// drawForm says whether the strip is that of drawing.
func (v *Values) drawForm() bool {
	return v.desk.Session.Settings.Tool == session.Chain && v.desk.Tool != nil
}

// buildDraw makes the strip.
func (v *Values) buildDraw() {
	t := v.desk.Tool
	v.name.SetText("Draw")
	kind := widget.NewSelect([]string{"line", "arc", "curve", "ellipse"}, nil)
	kind.SetSelectedIndex(int(t.Next))
	kind.OnChanged = func(string) { t.Next = shape.SpanKind(kind.SelectedIndex()); v.desk.Session.Touch() }
	keeps := widget.NewSelect(keptNames(), nil)
	if i := keptIndex(t.Symmetry); i >= 0 {
		keeps.SetSelectedIndex(i)
	}
	keeps.OnChanged = func(string) { t.Symmetry = kept[keeps.SelectedIndex()].s; v.desk.Session.Touch() }
	as := widget.NewSelect([]string{"by its place", "as the wall", "as obstacle"}, nil)
	as.SetSelectedIndex(int(t.As))
	as.OnChanged = func(string) { t.As = tool.Drawn(as.SelectedIndex()) }
	v.Box.Add(container.NewHScroll(container.NewHBox(v.name, widget.NewLabel("next"), kind, container.NewGridWrap(fyne.NewSize(158, 36), keeps), as,
		widget.NewButton("Close", func() { v.sayErr(t.CloseChain()) }))))
	d := &drawStrip{}
	v.draw = d
	grid := container.New(&columns{least: 200})
	for _, f := range []struct {
		name string
		into **number
		take func()
	}{
		{"x", &d.x, v.setXY}, {"y", &d.y, v.setXY},
		{"length", &d.length, v.setPolar}, {"direction", &d.direction, v.setPolar},
		{"radius", &d.radius, v.setRadius},
	} {
		e := newNumber()
		// Enter takes it; leaving the field only goes to the next.
		e.stay = true
		e.OnSubmitted = func(string) { f.take() }
		*f.into = e
		grid.Add(container.NewBorder(nil, nil, container.NewGridWrap(fyne.NewSize(72, 30), widget.NewLabel(f.name)), nil, e))
	}
	v.Box.Add(grid)
}

func (v *Values) sayErr(err error) {
	if err != nil {
		v.desk.Say(err.Error())
	}
}

// typed is what stands in a field; ok is false where nothing does or what does
// is no number, which is said.
func (v *Values) typed(n *number, name string) (x float64, given, ok bool) {
	if n.Text == "" {
		return 0, false, true
	}
	x, err := Evaluate(n.Text, v.desk.Session.Table().Design().Unit)
	if err != nil {
		v.desk.Say(fmt.Sprintf("%s: %v", name, err))
		return 0, false, false
	}
	return x, true, true
}

// setXY sets a node at the place typed.
func (v *Values) setXY() {
	_, _, hover, _ := v.desk.Tool.Drawing()
	x, givenX, okX := v.typed(v.draw.x, "x")
	y, givenY, okY := v.typed(v.draw.y, "y")
	if !okX || !okY {
		return
	}
	if !givenX {
		x = hover.X
	}
	if !givenY {
		y = hover.Y
	}
	v.set(r2.Vec{X: x, Y: y})
}

// setPolar sets a node at the distance and in the direction typed, from the
// last.
func (v *Values) setPolar() {
	n, last, hover, _ := v.desk.Tool.Drawing()
	if n == 0 {
		v.desk.Say("there is no node yet to measure from; click the first, or type its x and y")
		return
	}
	l, givenL, okL := v.typed(v.draw.length, "length")
	d, givenD, okD := v.typed(v.draw.direction, "direction")
	if !okL || !okD {
		return
	}
	to := r2.Sub(hover, last)
	if !givenL {
		l = r2.Norm(to)
	}
	angle := d * math.Pi / 180
	if !givenD {
		angle = math.Atan2(to.Y, to.X)
	}
	v.set(r2.Add(last, r2.Scale(l, plane.Polar(angle))))
}

// set sets a node, and bends the span to it where a radius stands there.
func (v *Values) set(p r2.Vec) {
	t := v.desk.Tool
	t.SetNode(p)
	if _, _, _, bending := t.Drawing(); bending && v.draw.radius.Text != "" {
		v.setRadius()
	}
	for _, n := range []*number{v.draw.x, v.draw.y, v.draw.length, v.draw.direction, v.draw.radius} {
		n.SetText("")
	}
	v.Refresh()
}

// setRadius bends the last span to the radius typed. Before its end is set it
// waits for that.
func (v *Values) setRadius() {
	r, given, ok := v.typed(v.draw.radius, "radius")
	if !ok || !given {
		return
	}
	if _, _, _, bending := v.desk.Tool.Drawing(); !bending {
		if v.draw.x.Text+v.draw.y.Text != "" {
			v.setXY()
			return
		}
		v.setPolar()
		return
	}
	v.sayErr(v.desk.Tool.SetRadius(r))
	v.draw.radius.SetText("")
}

// followDraw shows in the empty fields what follows the pointer.
func (v *Values) followDraw() {
	n, last, hover, _ := v.desk.Tool.Drawing()
	unit := v.desk.Session.Table().Design().Unit
	show := func(f *number, text string) {
		if f.PlaceHolder != text {
			f.SetPlaceHolder(text)
		}
	}
	show(v.draw.x, short(hover.X)+" "+unit.String())
	show(v.draw.y, short(hover.Y)+" "+unit.String())
	if n > 0 {
		d := r2.Sub(hover, last)
		show(v.draw.length, short(r2.Norm(d))+" "+unit.String())
		show(v.draw.direction, short(math.Atan2(d.Y, d.X)*180/math.Pi)+"°")
	}
	show(v.draw.radius, "by the pointer")
}
