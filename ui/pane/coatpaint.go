package pane

import (
	"math"

	"cavitywright/render"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/ui/session"
	"cavitywright/ui/tool"

	"fyne.io/fyne/v2"
	"gonum.org/v1/gonum/spatial/r2"
)

// laysCoats reports whether the pointer holds the coat tool.
func (e *Editor) laysCoats() bool { return e.desk.Session.Settings.Tool == session.Coats }

// coatHandles are the handles of the selected coat.
func (e *Editor) coatHandles(v render.View) []tool.CoatHandle {
	return e.tool.Coats().Handles(reachUnits * e.Scale() / v.Scale)
}

// coatOut is how far outside the coloured band the selected coat is marked, in
// hairlines.
const coatOut = 3

// drawCoatHandles marks the selected coat along its outside and draws what can
// be dragged of it.
func (e *Editor) drawCoatHandles(v render.View, look render.Look) {
	r, ok := tool.SelectedCoat(e.desk.Session)
	if !ok || r.Loop < 0 {
		return
	}
	t := e.desk.Session.Table()
	l := t.Loops()[r.Loop]
	out := (look.Wall + coatOut*look.Hair) / v.Scale
	n := int(math.Min(math.Max(r.Width*v.Scale/3, 2), 2000))
	var p render.Path
	for i := range n + 1 {
		s := r.From + r.Width*float64(i)/float64(n)
		if s >= l.S1 {
			s -= l.S1 - l.S0
		}
		f := t.At(t.Wrap(s))
		c := v.ToCanvas(f.Point.X-out*f.Normal().X, f.Point.Y-out*f.Normal().Y)
		if i == 0 {
			p.MoveTo(c.X, c.Y)
		} else {
			p.LineTo(c.X, c.Y)
		}
	}
	e.canvas.Stroke(render.ClipStroke(p, v.Box.Inset(-8*look.Hair), 1), render.Pen{Width: 2 * look.Hair, Color: look.Accent})
	for i, h := range e.coatHandles(v) {
		radius := 4.5 * look.Hair
		if i == 0 {
			radius = 5.5 * look.Hair // the middle, which slides the whole
		}
		e.dot(v.ToCanvas(h.At.X, h.At.Y), radius, i > 0)
	}
}

// drawLegend says in a corner of the pane what the textures of the wall mean: in
// the one where it was, unless the wall runs through it and not through another.
func (e *Editor) drawLegend(v render.View, look render.Look) {
	keys := measure.Keys(e.desk.Session.Table())
	if len(keys) == 0 {
		return
	}
	size := e.Pixels()
	room := render.NewBox(0, 0, float64(size.X), float64(size.Y)).Inset(look.Margin / 2)
	box := render.KeysBox(keys, room.Min, look)
	right, low := room.Max.X-box.W(), room.Max.Y-box.H()
	corners := [...]render.Point{room.Min, {X: right, Y: room.Min.Y}, {X: right, Y: low}, {X: room.Min.X, Y: low - 2*look.Small}} // over the scale bar
	covered := func(i int) float64 {
		return e.wallIn(render.KeysBox(keys, corners[i], look).Inset(-look.Wall), v)
	}
	if least := covered(e.legend); least > 0 {
		for i := range corners {
			if c := covered(i); c < least {
				e.legend, least = i, c
			}
		}
	}
	render.DrawKeys(e.canvas, keys, corners[e.legend], look)
}

// wallIn is the length of wall on the canvas that lies in a box.
func (e *Editor) wallIn(box render.Box, v render.View) float64 {
	sum := 0.0
	for _, l := range e.outline {
		if l.Role != figure.Wall && l.Role != figure.Coat {
			continue
		}
		for i := 1; i < len(l.X); i++ {
			p, q, ok := box.Clip(v.ToCanvas(l.X[i-1], l.Y[i-1]), v.ToCanvas(l.X[i], l.Y[i]))
			if ok {
				sum += math.Hypot(q.X-p.X, q.Y-p.Y)
			}
		}
	}
	return sum
}

// coatPlaces are the places of the handles of the selected coat in units of
// the window, from the pane's corner: the middle first.
func (e *Editor) coatPlaces() []fyne.Position {
	v := e.view()
	var all []fyne.Position
	for _, h := range e.coatHandles(v) {
		c := v.ToCanvas(h.At.X, h.At.Y)
		all = append(all, e.unit(c.X, c.Y))
	}
	return all
}

// PixelOf is where the pane shows a point of the table, in pixels of its
// picture: the place a pointer would have to press.
func (e *Editor) PixelOf(p r2.Vec) (x, y float64) {
	c := e.view().ToCanvas(p.X, p.Y)
	return c.X, c.Y
}
