package render

import "math"

// Point is a place on the canvas, in canvas units, y down. It is deliberately
// not the type of a point of a table.
type Point struct{ X, Y float64 }

// finite says whether both coordinates are numbers.
func (p Point) finite() bool { return finite(p.X) && finite(p.Y) }

func finite(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }

// Box is an upright rectangle of the canvas; Min is its top left corner.
type Box struct{ Min, Max Point }

// NewBox is the box with its top left corner at (x, y), w wide and h high.
func NewBox(x, y, w, h float64) Box { return Box{Point{x, y}, Point{x + w, y + h}} }

// W is the width of the box.
func (b Box) W() float64 { return b.Max.X - b.Min.X }

// H is the height of the box.
func (b Box) H() float64 { return b.Max.Y - b.Min.Y }

// Center is the middle of the box.
func (b Box) Center() Point { return Point{(b.Min.X + b.Max.X) / 2, (b.Min.Y + b.Max.Y) / 2} }

// Empty says whether the box has no area.
func (b Box) Empty() bool { return !(b.W() > 0 && b.H() > 0) }

// Inset is the box made smaller by d on each side, larger where d < 0.
func (b Box) Inset(d float64) Box {
	return Box{Point{b.Min.X + d, b.Min.Y + d}, Point{b.Max.X - d, b.Max.Y - d}}
}

// Contains says whether the point lies in the box or on its edge.
func (b Box) Contains(p Point) bool {
	return p.X >= b.Min.X && p.X <= b.Max.X && p.Y >= b.Min.Y && p.Y <= b.Max.Y
}

// Path is the outline of the box.
func (b Box) Path() Path {
	var p Path
	p.MoveTo(b.Min.X, b.Min.Y)
	p.LineTo(b.Max.X, b.Min.Y)
	p.LineTo(b.Max.X, b.Max.Y)
	p.LineTo(b.Min.X, b.Max.Y)
	p.Close()
	return p
}

// Clip gives the part of the straight segment from a to b that lies in the box
// (Liang and Barsky 1984), and whether there is any. A segment with an end that
// is not finite has none.
func (b Box) Clip(p, q Point) (Point, Point, bool) {
	if !p.finite() || !q.finite() {
		return p, q, false
	}
	if b.Contains(p) && b.Contains(q) {
		return p, q, true
	}
	// Halved before they are subtracted: the difference of two finite
	// coordinates may overflow, that of their halves cannot.
	dx, dy := q.X/2-p.X/2, q.Y/2-p.Y/2
	t0, t1 := 0.0, 2.0
	ok := cut(-dx, p.X-b.Min.X, &t0, &t1) && cut(dx, b.Max.X-p.X, &t0, &t1) &&
		cut(-dy, p.Y-b.Min.Y, &t0, &t1) && cut(dy, b.Max.Y-p.Y, &t0, &t1)
	if !ok {
		return p, q, false
	}
	from, to := p, q
	if t0 > 0 {
		from = b.clamped(Point{p.X + t0*dx, p.Y + t0*dy})
	}
	if t1 < 2 {
		to = b.clamped(Point{p.X + t1*dx, p.Y + t1*dy})
	}
	return from, to, true
}

// cut narrows the range [t0, t1] to where t*d <= room, and says whether
// anything of it is left.
func cut(d, room float64, t0, t1 *float64) bool {
	switch {
	case d == 0:
		return room >= 0
	case d < 0:
		*t0 = max(*t0, room/d)
	default:
		*t1 = min(*t1, room/d)
	}
	return *t0 <= *t1
}

// clamped puts a computed point of the edge onto it.
func (b Box) clamped(p Point) Point {
	return Point{min(max(p.X, b.Min.X), b.Max.X), min(max(p.Y, b.Min.Y), b.Max.Y)}
}
