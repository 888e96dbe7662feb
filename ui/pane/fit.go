package pane

import (
	"cavitywright/render"
	"cavitywright/table"
	"cavitywright/table/plane"
)

const (
	// leastSeen is the share of a pane's smaller side below which a table is a
	// speck.
	leastSeen = 0.1
	// mostGrown is how much a table's size may change before a view that was
	// left for the old one is none for the new one.
	mostGrown = 3
)

// fitted is a view of the table that is at work, which has come after another:
// the one given, or the one that fits (of no Scale) where the table would be
// out of sight, a speck, or of another size altogether.
func (s *Surface) fitted(v render.View, before, now *table.Table) render.View {
	if v.Scale == 0 || s.px.X < 2 {
		return v
	}
	b := now.Bounds()
	least, most := v.ToCanvas(b.Min.X, b.Max.Y), v.ToCanvas(b.Max.X, b.Min.Y)
	wide, high := float64(s.px.X), float64(s.px.Y)
	if most.X < 0 || most.Y < 0 || least.X > wide || least.Y > high {
		return render.View{}
	}
	if max(most.X-least.X, most.Y-least.Y) < leastSeen*min(wide, high) {
		return render.View{}
	}
	if k := plane.Diagonal(b) / plane.Diagonal(before.Bounds()); k > mostGrown || k < 1/float64(mostGrown) {
		return render.View{}
	}
	return v
}

// Fitted is a view for the table at work, which has come after another: the
// one given, or one of no Scale, which fits the table.
func (e *Editor) Fitted(v render.View, before *table.Table) render.View {
	return e.fitted(v, before, e.desk.Session.Table())
}

// Fitted is the same for the rays.
func (r *Rays) Fitted(v render.View, before *table.Table) render.View {
	return r.fitted(v, before, r.desk.Session.Table())
}
