package pane

import (
	"cavitywright/render"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// drawFree draws what belongs to free walls and whole shapes: the lines of a
// symmetry, what is selected together, and the grips that turn and scale.
func (e *Editor) drawFree(v render.View, look render.Look) {
	if e.laysCoats() {
		return
	}
	e.drawSymmetry(v, look)
	t := e.desk.Session.Table()
	g := e.tool.Group()
	if g.Size() > 1 {
		for _, n := range g.Nodes {
			it := t.Design().Items[g.Item]
			p := it.Place.Apply(it.Shape.(shape.Freeform).Nodes()[n].At)
			e.ringAt(v, p, 9*look.Hair)
		}
		for _, i := range g.Items {
			e.boxOf(v, i)
		}
	}
	if f, ok := e.tool.Frame(e.reach()); ok && e.desk.Session.Settings.Tool == 0 {
		turn, scale := v.ToCanvas(f.Turn.X, f.Turn.Y), v.ToCanvas(f.Scale.X, f.Scale.Y)
		e.canvas.Stroke(render.Disc(turn, 4.5*look.Hair), render.Pen{Width: 1.6 * look.Hair, Color: look.Accent})
		r := 4 * look.Hair
		var square render.Path
		square.MoveTo(scale.X-r, scale.Y-r)
		square.LineTo(scale.X+r, scale.Y-r)
		square.LineTo(scale.X+r, scale.Y+r)
		square.LineTo(scale.X-r, scale.Y+r)
		square.Close()
		e.canvas.Stroke(square, render.Pen{Width: 1.6 * look.Hair, Color: look.Accent})
	}
}

// reach is how far the pointer reaches, in table units.
func (e *Editor) reach() float64 { return reachUnits * e.Scale() / e.view().Scale }

func (e *Editor) ringAt(v render.View, p r2.Vec, radius float64) {
	e.canvas.Stroke(render.Disc(v.ToCanvas(p.X, p.Y), radius), render.Pen{Width: 1.6 * e.desk.Look.Hair, Color: e.desk.Look.Accent})
}

// boxOf draws a dashed box about an item.
func (e *Editor) boxOf(v render.View, item int) {
	box := plane.Around()
	t := e.desk.Session.Table()
	for i := range t.Pieces() {
		if p := &t.Pieces()[i]; p.Item == item {
			box = plane.Join(box, p.Bounds())
		}
	}
	a, b := v.ToCanvas(box.Min.X, box.Min.Y), v.ToCanvas(box.Max.X, box.Max.Y)
	look := e.desk.Look
	var p render.Path
	p.MoveTo(a.X, a.Y)
	p.LineTo(b.X, a.Y)
	p.LineTo(b.X, b.Y)
	p.LineTo(a.X, b.Y)
	p.Close()
	e.canvas.Stroke(p, render.Pen{Width: look.Hair, Color: look.Accent, Dash: []float64{4 * look.Hair, 3 * look.Hair}})
}

// drawSymmetry draws the mirror lines and the centre of what is kept: by the
// wall that is being drawn, or by the one that is selected.
func (e *Editor) drawSymmetry(v render.View, look render.Look) {
	s, place := e.tool.Symmetry, plane.Identity()
	if !e.desk.drawing() {
		i := e.desk.Session.Selection.Item
		if i < 0 {
			return
		}
		it := e.desk.Session.Table().Design().Items[i]
		f, ok := it.Shape.(shape.Freeform)
		if !ok {
			return
		}
		s, place = f.Symmetry(), it.Place
	}
	if s.None() {
		return
	}
	centre := place.Apply(s.Centre)
	c := v.ToCanvas(centre.X, centre.Y)
	pen := render.Pen{Width: look.Hair, Color: render.Fade(look.Accent, 0.6), Dash: []float64{8 * look.Hair, 3 * look.Hair, 2 * look.Hair, 3 * look.Hair}}
	if s.Mirror {
		far := float64(e.Pixels().X + e.Pixels().Y)
		for _, angle := range s.Mirrors() {
			u := plane.Polar(angle + place.Angle)
			e.canvas.Stroke(render.Segment(render.Point{X: c.X - far*u.X, Y: c.Y + far*u.Y}, render.Point{X: c.X + far*u.X, Y: c.Y - far*u.Y}), pen)
		}
	}
	e.canvas.Stroke(render.Disc(c, 3*look.Hair), render.Pen{Width: look.Hair, Color: look.Accent})
}
