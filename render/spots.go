package render

import "cavitywright/sim/figure"

const (
	// spotSize is half the size of a spot in lengths of a tick, and spotEdge how
	// much of the paper's colour stands around its strokes, in hairlines, so that
	// it is read across a dense sea.
	spotSize = 0.85
	spotEdge = 3.2
)

// drawSpots draws the spots of a scatter, those within the frame: their forms
// differ, so that they are told apart without colour.
func drawSpots(c Canvas, f figure.Dots, p Plot, look Look) {
	r := spotSize * look.Tick
	room := p.Frame.Inset(r)
	for _, s := range f.Spots {
		q := Point{p.ToX(s.X), p.ToY(s.Y)}
		if !q.finite() || !p.Frame.Inset(-look.Hair).Contains(q) { // a place on the frame is rounded off it
			continue
		}
		if !room.Empty() { // a spot at the frame's edge is moved inside whole
			q = Point{min(max(q.X, room.Min.X), room.Max.X), min(max(q.Y, room.Min.Y), room.Max.Y)}
		}
		for _, pen := range []Pen{
			{Width: (2*spotEdge + 2) * look.Hair, Color: Fade(look.Paper, 0.85)},
			{Width: 2 * look.Hair, Color: look.Orbit(s.Hue)},
		} {
			for _, line := range spotLines(s.Kind, q, r) {
				c.Stroke(line, pen)
			}
		}
	}
}

// spotLines are the strokes of a spot of half the size r.
func spotLines(kind figure.SpotKind, q Point, r float64) []Path {
	cross := func(r float64) []Path {
		return []Path{Segment(Point{q.X - r, q.Y - r}, Point{q.X + r, q.Y + r}), Segment(Point{q.X - r, q.Y + r}, Point{q.X + r, q.Y - r})}
	}
	switch kind {
	case figure.Ring:
		return []Path{Disc(q, r)}
	case figure.Cross:
		return cross(0.8 * r)
	case figure.CrossRing:
		return append(cross(0.7*r), Disc(q, r))
	}
	return []Path{Segment(Point{q.X - 1.4*r, q.Y}, Point{q.X + 1.4*r, q.Y})}
}
