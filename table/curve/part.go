package curve

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Part is a stretch of a span between two values of its private parameter on
// which the tangent turns one way by less than half a turn: it lies in the
// triangle of its ends P, Q and the apex V where the end tangents meet. Halving
// a part shrinks its triangle, so that questions about where a curve is are
// answered with proof, without solving for anything.
type Part struct {
	Span    *Span
	T, U    float64 // parameters at P and Q
	P, V, Q r2.Vec
}

// Parts cuts the span into parts.
func (s *Span) Parts() []Part {
	n := 1
	if s.Kind == Circle || s.Kind == Oval {
		n = int(math.Ceil(math.Abs(s.T1-s.T0) / maxTurn))
	}
	parts := make([]Part, n)
	at := func(i int) (t float64, p r2.Vec) {
		switch i {
		case 0:
			return s.T0, s.A
		case n:
			return s.T1, s.B
		}
		t = s.T0 + (s.T1-s.T0)*float64(i)/float64(n)
		p, _, _ = s.Jet(t)
		return t, p
	}
	for i := range parts {
		t, p := at(i)
		u, q := at(i + 1)
		parts[i] = newPart(s, t, u, p, q)
	}
	return parts
}

func newPart(s *Span, t, u float64, p, q r2.Vec) Part {
	part := Part{Span: s, T: t, U: u, P: p, Q: q}
	a := s.direction(t, u)
	b := s.direction(u, t)
	den := plane.Cross(a, b)
	if s.Kind == Segment || math.Abs(den) < 1e-9 {
		part.V = plane.Lerp(p, q, 0.5)
	} else {
		part.V = r2.Add(p, r2.Scale(plane.Cross(r2.Sub(q, p), b)/den, a))
	}
	return part
}

// Halves are the part cut at the middle of its parameter.
func (p Part) Halves() (Part, Part) {
	m := 0.5 * (p.T + p.U)
	c, _, _ := p.Span.Jet(m)
	return newPart(p.Span, p.T, m, p.P, c), newPart(p.Span, m, p.U, c, p.Q)
}

// Box is the box of the part's triangle.
func (p Part) Box() r2.Box { return plane.Around(p.P, p.V, p.Q) }

// Size is the longest side of the part's triangle.
func (p Part) Size() float64 {
	return math.Max(dist(p.P, p.Q), math.Max(dist(p.P, p.V), dist(p.V, p.Q)))
}

func dist(a, b r2.Vec) float64 { return math.Hypot(b.X-a.X, b.Y-a.Y) }

// Apart reports whether the triangles of the two parts can be separated by a
// line parallel to one of their sides with a gap between them.
func (p Part) Apart(q Part) bool {
	if plane.Apart(p.Box(), q.Box(), 0) {
		return true
	}
	a, b := [3]r2.Vec{p.P, p.V, p.Q}, [3]r2.Vec{q.P, q.V, q.Q}
	return splits(a, b) || splits(b, a)
}

func splits(a, b [3]r2.Vec) bool {
	for i := range a {
		n := plane.Left(r2.Sub(a[(i+1)%3], a[i]))
		if n == (r2.Vec{}) {
			continue
		}
		aLo, aHi := span1(a, a[i], n)
		bLo, bHi := span1(b, a[i], n)
		if aHi < bLo || bHi < aLo {
			return true
		}
	}
	return false
}

// span1 is the extent of the triangle along n, measured from o.
func span1(t [3]r2.Vec, o, n r2.Vec) (lo, hi float64) {
	lo, hi = math.Inf(1), math.Inf(-1)
	for _, v := range t {
		d := plane.Dot(r2.Sub(v, o), n)
		lo, hi = math.Min(lo, d), math.Max(hi, d)
	}
	return lo, hi
}

// Subtended is the angle (radians, signed) by which the direction from x to the
// part turns along it. Outside the triangle it is that of the chord.
func (p Part) Subtended(x r2.Vec) float64 {
	b := p.Box()
	if x.X < b.Min.X || x.X > b.Max.X || x.Y < b.Min.Y || x.Y > b.Max.Y || !p.holds(x) {
		return plane.Angle(r2.Sub(p.P, x), r2.Sub(p.Q, x))
	}
	if p.Size() < 1e-12*(math.Abs(x.X)+math.Abs(x.Y)+p.Size()) || math.Abs(p.U-p.T) < 1e-14*(math.Abs(p.U)+1e-300) {
		return plane.Angle(r2.Sub(p.P, x), r2.Sub(p.Q, x))
	}
	l, r := p.Halves()
	return l.Subtended(x) + r.Subtended(x)
}

// holds reports whether x lies in the closed triangle.
func (p Part) holds(x r2.Vec) bool {
	a := plane.Cross(r2.Sub(p.V, p.P), r2.Sub(x, p.P))
	b := plane.Cross(r2.Sub(p.Q, p.V), r2.Sub(x, p.V))
	c := plane.Cross(r2.Sub(p.P, p.Q), r2.Sub(x, p.Q))
	return a >= 0 && b >= 0 && c >= 0 || a <= 0 && b <= 0 && c <= 0
}
