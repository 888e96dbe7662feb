package sim

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// ray is a flight in progress: from p along d. left is the span it leaves (-1
// from inside the table), t that span's parameter there. signA and signB are,
// for the ends of the span left, the sides of the line on which they lie.
type ray struct {
	p, d         r2.Vec
	left         int
	t            float64
	signA, signB bool // true: the end lies to the left of the line
}

// hit is the nearest crossing so far, at the distance u along the ray. edge is
// the nearest place that cannot be decided.
type hit struct {
	u, t     float64
	span     int
	at       r2.Vec
	edge     float64
	edgeStop Stop
}

// first finds the first crossing of the ray with the wall.
func (tr *Tracer) first(r *ray) hit {
	h := hit{u: math.Inf(1), span: -1, edge: math.Inf(1)}
	r.settleEnds(tr)
	if len(tr.tree) == 0 {
		for k := range tr.spans {
			tr.meet(k, r, &h)
		}
		return h
	}
	tr.descend(r, &h)
	return h
}

// side reports whether v lies to the left of the ray's line, and its signed
// distance from it.
func (r *ray) side(v r2.Vec) (f float64, left bool) {
	f = float64(r.d.X*(v.Y-r.p.Y)) - float64(r.d.Y*(v.X-r.p.X))
	return f, f >= 0
}

// settleEnds decides on which side of the line the ends of the span left lie.
// The distance of the wall from the line is zero at the point left and falls
// from positive to negative there, since the ray goes inwards. As long as the
// tangent at an end still points to the same side as at the point left, there
// was no extremum between, and the sign follows without looking at the
// distance, which near the end is all rounding (property N2).
func (r *ray) settleEnds(tr *Tracer) {
	if r.left < 0 {
		return
	}
	s := &tr.spans[r.left]
	if s.whole {
		return
	}
	r.signA, r.signB = true, false
	if plane.Cross(r.d, s.tanA) > 0 {
		_, r.signA = r.side(s.a)
	}
	if plane.Cross(r.d, s.tanB) > 0 {
		_, r.signB = r.side(s.b)
	}
}

// meet looks for a crossing with span k nearer than h.
func (tr *Tracer) meet(k int, r *ray, h *hit) {
	s := &tr.spans[k]
	if k == r.left {
		tr.meetLeft(k, r, h)
		return
	}
	if s.whole {
		if s.kind == curve.Circle {
			tr.meetCircle(k, s, r, h)
		} else {
			tr.meetOval(k, s, r, h)
		}
		return
	}
	fa, sa := r.side(s.a)
	fb, sb := r.side(s.b)
	if r.left >= 0 {
		l := &tr.spans[r.left]
		if int(l.next) == k {
			sa = r.signB
		}
		if int(l.prev) == k {
			sb = r.signA
		}
	}
	if s.cornerA && math.Abs(fa) < passTol*tr.size {
		tr.passCorner(s.a, r, h)
	}
	switch s.kind {
	case curve.Segment:
		if sa != sb {
			tr.meetSegment(k, s, fa, fb, r, h)
		}
	case curve.Circle:
		tr.meetArc(k, s, sa, sb, r, h)
	case curve.Oval:
		tr.meetOvalArc(k, s, sa, sb, r, h)
	default:
		tr.meetSmooth(k, s, sa, sb, r, h)
	}
}

// passCorner notes a corner that lies on the line to rounding.
func (tr *Tracer) passCorner(v r2.Vec, r *ray, h *hit) {
	u := plane.Dot(r.d, r2.Sub(v, r.p))
	if u > cornerTol*tr.size && u < h.edge {
		h.edge, h.edgeStop = u, Corner
	}
}

// graze notes a tangent of the wall that lies on the line to rounding.
func (h *hit) graze(u float64) {
	if u > 0 && u < h.edge {
		h.edge, h.edgeStop = u, Grazing
	}
}

// take notes a crossing at the point at of span k, if it is the nearest ahead.
func (h *hit) take(k int, t float64, at r2.Vec, r *ray) {
	u := plane.Dot(r.d, r2.Sub(at, r.p))
	if u > 0 && u < h.u {
		h.u, h.t, h.span, h.at = u, t, k, at
	}
}

func (tr *Tracer) meetSegment(k int, s *span, fa, fb float64, r *ray, h *hit) {
	if fa == fb {
		return
	}
	f := math.Min(math.Max(fa/(fa-fb), 0), 1)
	at := plane.Lerp(s.a, s.b, f)
	h.take(k, f*s.length, at, r)
}

// circle is the line's relation to the circle of span s: along is the distance
// from the foot of the perpendicular to p, off that of the centre from the
// line (positive to its left), half the half chord, 0 where the line misses.
func (tr *Tracer) circle(s *span, r *ray) (along, off, half float64) {
	q := r2.Sub(r.p, s.centre)
	along = plane.Dot(r.d, q)
	off = -plane.Cross(r.d, q)
	rest := (s.radius - off) * (s.radius + off)
	if rest > 0 {
		half = math.Sqrt(rest)
	}
	return along, off, half
}

// onCircle is the point of the circle at the distance u along the ray, put back
// on the circle.
func (s *span) onCircle(u float64, r *ray) r2.Vec {
	q := r2.Vec{X: r.p.X - s.centre.X + u*r.d.X, Y: r.p.Y - s.centre.Y + u*r.d.Y}
	k := s.radius / math.Sqrt(plane.Dot(q, q))
	return r2.Vec{X: s.centre.X + k*q.X, Y: s.centre.Y + k*q.Y}
}

func (tr *Tracer) meetCircle(k int, s *span, r *ray, h *hit) {
	along, off, half := tr.circle(s, r)
	if math.Abs(math.Abs(off)-s.radius) < passTol*tr.size {
		h.graze(-along)
		return
	}
	if half == 0 {
		return
	}
	u := -along - half
	if u <= 0 {
		u = -along + half
	}
	if u > 0 && u < h.u {
		h.take(k, math.NaN(), s.onCircle(u, r), r)
	}
}

// meetArc: with its ends on different sides of the line an arc of at most half
// a turn is crossed once, and which of the circle's two points it is follows
// from the sense; with both on one side it is crossed twice if the point of
// the circle farthest to the other side lies on it, else not at all.
func (tr *Tracer) meetArc(k int, s *span, sa, sb bool, r *ray, h *hit) {
	along, off, half := tr.circle(s, r)
	if sa != sb {
		u := -along + half
		if sb != (s.sense > 0) {
			u = -along - half
		}
		if u > 0 && u < h.u {
			h.take(k, math.NaN(), s.onCircle(u, r), r)
		}
		return
	}
	if math.Abs(off) >= s.radius*(1+passTol) && math.Abs(off) > s.radius+passTol*tr.size {
		return
	}
	e := r2.Vec{X: -r.d.Y, Y: r.d.X}
	if sa {
		e = r2.Vec{X: r.d.Y, Y: -r.d.X}
	}
	if s.sense*plane.Cross(r2.Sub(s.a, s.centre), e) < 0 || s.sense*plane.Cross(e, r2.Sub(s.b, s.centre)) < 0 {
		return
	}
	// e is the extreme to the other side; the line must pass between it and
	// the ends.
	depth := off + s.radius
	if sa {
		depth = s.radius - off
	}
	if math.Abs(depth) < passTol*tr.size {
		h.graze(-along)
		return
	}
	if depth < 0 || half == 0 {
		return
	}
	u := -along - half
	if u <= 0 {
		u = -along + half
	}
	if u > 0 && u < h.u {
		h.take(k, math.NaN(), s.onCircle(u, r), r)
	}
}

// meetLeft looks for the other crossing with the span that the ray leaves. A
// wall that does not focus has none ahead.
func (tr *Tracer) meetLeft(k int, r *ray, h *hit) {
	s := &tr.spans[k]
	if !s.focusing {
		return
	}
	ahead, behind := s.whole || r.signB, s.whole || !r.signA
	if !ahead && !behind {
		return
	}
	switch s.kind {
	case curve.Circle:
		u := -2 * plane.Dot(r.d, r2.Sub(r.p, s.centre)) / plane.Dot(r.d, r.d)
		h.take(k, math.NaN(), s.onCircle(u, r), r)
	case curve.Oval:
		tr.leaveOval(k, s, r, h)
	default:
		tr.leaveSmooth(k, s, ahead, r, h)
	}
}
