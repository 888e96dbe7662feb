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

// Clip gives the part of the straight segment from p to q that lies in the box,
// and whether there is any; it cuts at one side of the box after the other, as
// Cohen and Sutherland did, so that an end that is cut off lies exactly on a
// side. A segment with an end that is not finite has no part.
func (b Box) Clip(p, q Point) (Point, Point, bool) {
	if !p.finite() || !q.finite() {
		return p, q, false
	}
	if b.Contains(p) && b.Contains(q) {
		return p, q, true
	}
	for side := range sides {
		dp, dq := b.depth(side, p), b.depth(side, q)
		switch {
		case dp < 0 && dq < 0:
			return p, q, false
		case dp < 0:
			p = b.crossing(side, p, q)
		case dq < 0:
			q = b.crossing(side, p, q)
		}
	}
	return p, q, true
}

// sides is the number of sides of a box: 0 left, 1 right, 2 top, 3 bottom.
const sides = 4

// depth is how far inside one side of the box a point lies, negative outside.
func (b Box) depth(side int, p Point) float64 {
	switch side {
	case 0:
		return p.X - b.Min.X
	case 1:
		return b.Max.X - p.X
	case 2:
		return p.Y - b.Min.Y
	}
	return b.Max.Y - p.Y
}

// crossing is where the segment from p to q, one of them outside, crosses the
// line of one side of the box.
func (b Box) crossing(side int, p, q Point) Point {
	// Halved before they are subtracted: the difference of two finite
	// coordinates may overflow, that of their halves cannot.
	dp, dq := b.depth(side, p)/2, b.depth(side, q)/2
	t := dp / (dp - dq)
	m := Point{(1-t)*p.X + t*q.X, (1-t)*p.Y + t*q.Y}
	switch side {
	case 0:
		m.X = b.Min.X
	case 1:
		m.X = b.Max.X
	case 2:
		m.Y = b.Min.Y
	default:
		m.Y = b.Max.Y
	}
	return m
}
