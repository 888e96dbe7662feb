package pane

import (
	"errors"
	"math"

	"cavitywright/render"
	"cavitywright/table"
	"cavitywright/table/shape"
	"cavitywright/ui/session"
)

// What the editor draws over and under the wall.

// drawGrid draws the grid's points as a faint lattice outside and inside.
func (e *Editor) drawGrid(v render.View, look render.Look) {
	if e.desk.Session.Settings.Snap == session.SnapOff {
		return
	}
	step := session.GridStep(v.Scale, 2*gridPx*e.Scale())
	size := e.Pixels()
	x0, y1 := v.FromCanvas(render.Point{})
	x1, y0 := v.FromCanvas(render.Point{X: float64(size.X), Y: float64(size.Y)})
	var d render.Dots
	for x := math.Ceil(x0/step) * step; x <= x1; x += step {
		for y := math.Ceil(y0/step) * step; y <= y1; y += step {
			c := v.ToCanvas(x, y)
			d.X, d.Y = append(d.X, c.X), append(d.Y, c.Y)
		}
	}
	d.Radius, d.Color = 0.8*look.Hair, look.Faint
	e.canvas.Dots(d)
}

// drawOrigin marks s = 0 and the sense in which s increases.
func (e *Editor) drawOrigin(t *table.Table, v render.View, look render.Look) {
	f := t.At(0)
	n := f.Normal()
	k := look.Hair
	c := v.ToCanvas(f.Point.X, f.Point.Y)
	out := func(along, outward float64) render.Point {
		return render.Point{
			X: c.X + k*(along*f.Tangent.X-outward*n.X),
			Y: c.Y - k*(along*f.Tangent.Y-outward*n.Y),
		}
	}
	var stem render.Path
	a, b := out(0, 5), out(0, 15)
	stem.MoveTo(a.X, a.Y)
	stem.LineTo(b.X, b.Y)
	tip := out(12, 15)
	stem.LineTo(tip.X, tip.Y)
	e.canvas.Stroke(stem, render.Pen{Width: 1.2 * k, Color: look.Ink})
	var head render.Path
	for i, q := range []render.Point{out(17, 15), out(11, 18), out(11, 12)} {
		if i == 0 {
			head.MoveTo(q.X, q.Y)
		} else {
			head.LineTo(q.X, q.Y)
		}
	}
	head.Close()
	e.canvas.Fill(head, look.Ink)
	h := render.Center
	if n.X < -0.4 {
		h = render.Left
	} else if n.X > 0.4 {
		h = render.Right
	}
	at := out(-9, 19)
	if w, room := float64(e.Pixels().X), 3*look.Small; h == render.Left && at.X > w-room || h == render.Right && at.X < room {
		at, h = out(-9, -12), render.Left+render.Right-h // no room outside
	}
	e.canvas.Text(render.Text{At: at, Size: look.Small, String: "s = 0", H: h, V: render.Middle, Color: look.Ink})
}

func (e *Editor) dot(c render.Point, radius float64, rim bool) {
	look := e.desk.Look
	e.canvas.Dots(render.Dots{X: []float64{c.X}, Y: []float64{c.Y}, Radius: radius + 1.5*look.Hair, Color: look.Paper})
	e.canvas.Dots(render.Dots{X: []float64{c.X}, Y: []float64{c.Y}, Radius: radius, Color: look.Accent})
	if rim {
		e.canvas.Dots(render.Dots{X: []float64{c.X}, Y: []float64{c.Y}, Radius: radius - 2*look.Hair, Color: look.Paper})
	}
}

// drawHandles draws what can be dragged, in the one colour that says so: full
// for the selected item, rings for the others, small for tangent handles.
func (e *Editor) drawHandles(v render.View, look render.Look) {
	if e.laysCoats() {
		e.drawCoatHandles(v, look)
		return
	}
	items := e.desk.Session.Table().Design().Items
	sel := e.desk.Session.Selection
	handles := make([][]shape.Handle, len(items))
	for i := range items {
		handles[i] = items[i].Shape.Handles()
	}
	for _, h := range e.desk.Session.Handles() {
		own := handles[h.Item][h.Index]
		c := v.ToCanvas(h.At.X, h.At.Y)
		radius := 5.5 * look.Hair
		if own.Role == shape.Tangent {
			if f, ok := items[h.Item].Shape.(shape.Freeform); ok && own.Of >= 0 && own.Of < len(f.Nodes()) {
				n := items[h.Item].Place.Apply(f.Nodes()[own.Of].At)
				e.canvas.Stroke(render.Segment(v.ToCanvas(n.X, n.Y), c), render.Pen{Width: look.Hair, Color: render.Fade(look.Accent, 0.6)})
			}
			radius = 3.5 * look.Hair
		}
		if h.Item == sel.Item && h.Index == sel.Handle {
			radius += 1.5 * look.Hair
		}
		e.dot(c, radius, h.Item != sel.Item || own.Role == shape.Bow)
	}
}

// drawDraft draws the wall that is being drawn.
func (e *Editor) drawDraft(v render.View, look render.Look) {
	lines, nodes := e.tool.Draft()
	for _, line := range lines {
		var p render.Path
		for i, q := range line {
			c := v.ToCanvas(q.X, q.Y)
			if i == 0 {
				p.MoveTo(c.X, c.Y)
			} else {
				p.LineTo(c.X, c.Y)
			}
		}
		e.canvas.Stroke(p, render.Pen{Width: 2 * look.Hair, Color: look.Ink})
	}
	for i, q := range nodes {
		e.dot(v.ToCanvas(q.X, q.Y), 4.5*look.Hair, i == 0)
	}
}

// drawRefusal rings the place of a fault.
func (e *Editor) drawRefusal(v render.View, look render.Look) {
	var f *table.Fault
	if !errors.As(e.desk.Session.Refusal, &f) || f.Known != table.Somewhere {
		return
	}
	c := v.ToCanvas(f.At.X, f.At.Y)
	r := 13 * look.Hair
	e.canvas.Stroke(render.Disc(c, r), render.Pen{Width: 2 * look.Hair, Color: look.Ink, Dash: []float64{4 * look.Hair, 3 * look.Hair}})
}
