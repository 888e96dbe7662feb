package sim

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// frame is the wall at a hit, with the arclength from the span's start and the
// span's parameter there.
func (s *span) frame(h *hit) (f curve.Frame, x, t float64) {
	switch s.kind {
	case curve.Segment:
		return curve.Frame{Point: h.at, Tangent: s.tanA}, h.t, h.t
	case curve.Circle:
		n := plane.Unit(r2.Sub(h.at, s.centre))
		x = s.clip(float64(s.turned(n.X, n.Y) * s.radius))
		return curve.Frame{Point: h.at, Tangent: plane.Left(r2.Scale(s.sense, n)), Curvature: s.kappa}, x, h.t
	case curve.Oval:
		t = s.param(h.at, h.t)
		return s.ovalFrame(h.at), s.clip(s.src.S(t)), t
	}
	if s.fine != nil {
		return s.src.FrameAt(h.t), s.clip(s.fine.length(h.t)), h.t
	}
	return s.src.FrameAt(h.t), s.clip(s.src.S(h.t)), h.t
}

// clip holds an arclength to the span, from which rounding may have moved it.
func (s *span) clip(x float64) float64 { return min(max(x, 0), s.length) }

// param is the span's private parameter at a point of it; t where that is
// known. For arcs it is the angle, brought into the span's own turn.
func (s *span) param(at r2.Vec, t float64) float64 {
	switch s.kind {
	case curve.Circle:
		q := r2.Sub(at, s.centre)
		t = math.Atan2(plane.Cross(s.axis, q), plane.Dot(q, s.axis))
	case curve.Oval:
	default:
		return t
	}
	// Into [lo, lo + 2 pi), nearest to the span where it lies outside by
	// rounding.
	lo, width := s.t0, s.t1-s.t0
	if width < 0 {
		lo, width = s.t1, -width
	}
	x := math.Mod(t-lo, 2*math.Pi)
	if x < 0 {
		x += 2 * math.Pi
	}
	if x > width && x-width > 2*math.Pi-x {
		x = 0
	} else if x > width {
		x = width
	}
	return lo + x
}

// ovalFrame is the frame at a point of the ellipse, from its coordinates: the
// angle would add its own rounding.
func (s *span) ovalFrame(at r2.Vec) curve.Frame {
	q := r2.Sub(at, s.centre)
	x, y := plane.Dot(q, s.axis), plane.Cross(s.axis, q)
	a2, b2 := s.radius*s.radius, s.minor*s.minor
	// The tangent is (-a^2 y, b^2 x); the curvature 1/(a^2 b^2 h^3) with
	// h^2 = x^2/a^4 + y^2/b^4.
	tx, ty := -a2*y*s.sense, b2*x*s.sense
	n := 1 / math.Sqrt(float64(tx*tx)+float64(ty*ty))
	tx, ty = tx*n, ty*n
	gx, gy := x/a2, y/b2
	h := math.Sqrt(float64(gx*gx) + float64(gy*gy))
	return curve.Frame{
		Point:     at,
		Tangent:   r2.Vec{X: float64(tx*s.axis.X) - float64(ty*s.axis.Y), Y: float64(tx*s.axis.Y) + float64(ty*s.axis.X)},
		Curvature: s.sense / (a2 * b2 * h * h * h),
	}
}
