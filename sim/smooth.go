package sim

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// quantity is what is brought to zero along a span: the signed distance of the
// wall from the ray's line, or its derivative by the parameter.
type quantity uint8

const (
	distance quantity = iota
	slope
)

// value is the quantity at the parameter t of the span, with its derivative by
// t.
func (q quantity) value(s *span, t float64, r *ray) (f, df float64) {
	c, d1, d2 := s.jet(t)
	if q == slope {
		return float64(r.d.X*d1.Y) - float64(r.d.Y*d1.X), float64(r.d.X*d2.Y) - float64(r.d.Y*d2.X)
	}
	f = float64(r.d.X*(c.Y-r.p.Y)) - float64(r.d.Y*(c.X-r.p.X))
	return f, float64(r.d.X*d1.Y) - float64(r.d.Y*d1.X)
}

// zero is where the quantity vanishes between lo and hi, where it has the sign
// loLeft (true: positive) and its opposite: Newton's method held to the
// bracket, from the guess t.
func (s *span) zero(q quantity, lo, hi, t float64, loLeft bool, r *ray) float64 {
	last := math.Inf(1)
	for range newtonSteps {
		f, df := q.value(s, t, r)
		if (f >= 0) == loLeft {
			lo = t
		} else {
			hi = t
		}
		step := f / df
		if s.settled(math.Abs(step), last, t) {
			return t
		}
		next := t - step
		last = math.Abs(step)
		if !between(next, lo, hi) {
			next, last = 0.5*(lo+hi), math.Inf(1)
		}
		t = next
	}
	return t
}

// crossing is the zero of the distance between lo and hi.
func (s *span) crossing(lo, hi, t float64, loLeft bool, r *ray) float64 {
	return s.zero(distance, lo, hi, t, loLeft, r)
}

// extremum is the zero of the slope between lo and hi.
func (s *span) extremum(lo, hi float64, loLeft bool, r *ray) float64 {
	return s.zero(slope, lo, hi, 0.5*(lo+hi), loLeft, r)
}

// settled reports whether Newton's iteration is at its end: its step is the
// last bit of the parameter, or steps that are already tiny no longer shrink,
// which is the rounding of the distance.
func (s *span) settled(step, last, t float64) bool {
	return step <= lastBit*(s.width+math.Abs(t)) || step < tinyStep*s.width && step > 0.5*last
}

const (
	// newtonSteps ends an iteration that rounding keeps from settling; halving
	// alone exhausts a double in 60.
	newtonSteps = 100
	lastBit     = 0x1p-52
	// tinyStep, relative to the span, is where Newton's steps must be shrinking
	// quadratically.
	tinyStep = 1e-6
)

// between reports whether x lies strictly between lo and hi, in either order.
func between(x, lo, hi float64) bool { return x > lo && x < hi || x < lo && x > hi }

// meetSmooth: the span lies in the triangle of its ends and its apex. With the
// ends on different sides of the line it is crossed once. With all three on one
// side, never. Else the distance has one extremum, and it decides.
func (tr *Tracer) meetSmooth(k int, s *span, sa, sb bool, r *ray, h *hit) {
	if sa != sb {
		fa, _ := r.side(s.a)
		fb, _ := r.side(s.b)
		guess := 0.5
		if fa != fb {
			guess = math.Min(math.Max(fa/(fa-fb), 0.01), 0.99)
		}
		at := s.t0 + guess*(s.t1-s.t0)
		if s.fine != nil {
			at = s.fine.crossing(r, sa)
		}
		t := s.crossing(s.t0, s.t1, at, sa, r)
		h.take(k, t, s.at(t), r)
		return
	}
	if v, sv := r.side(s.apex); sv == sa && math.Abs(v) > passTol*tr.size {
		return
	}
	ga := plane.Cross(r.d, s.tanA)
	gb := plane.Cross(r.d, s.tanB)
	if (ga >= 0) == (gb >= 0) {
		return
	}
	te := s.extremum(s.t0, s.t1, (ga >= 0) == (s.sense > 0), r)
	f, _ := distance.value(s, te, r)
	if math.Abs(f) < passTol*tr.size {
		h.graze(plane.Dot(r.d, r2.Sub(s.at(te), r.p)))
		return
	}
	if (f >= 0) == sa {
		return
	}
	t := s.crossing(s.t0, te, 0.5*(s.t0+te), sa, r)
	h.take(k, t, s.at(t), r)
	t = s.crossing(te, s.t1, 0.5*(s.t1+te), !sa, r)
	h.take(k, t, s.at(t), r)
}

// leaveSmooth is the other crossing with the smooth span that the ray leaves:
// beyond the extremum of the distance, which lies between it and the point
// left (Rolle), so that the point left is not in the bracket.
func (tr *Tracer) leaveSmooth(k int, s *span, ahead bool, r *ray, h *hit) {
	// Along increasing s the distance falls at the point left.
	end, endLeft := s.t0, false
	if ahead {
		end, endLeft = s.t1, true
	}
	// slope by t: negative times sense at the point left.
	te := s.extremum(r.t, end, s.sense < 0, r)
	guess := 2*te - r.t
	if !between(guess, te, end) {
		guess = 0.5 * (te + end)
	}
	t := s.crossing(te, end, guess, !endLeft, r)
	h.take(k, t, s.at(t), r)
}

// at is the point at the parameter t.
func (s *span) at(t float64) r2.Vec {
	p, _, _ := s.jet(t)
	return p
}
