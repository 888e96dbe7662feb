package curve

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Kind says by which formula a span is evaluated and intersected.
type Kind uint8

// The kinds of span. Segment, Circle and Oval are met by a line in closed
// form; Bezier and Harmonic are smooth spans: their tangent turns one way by
// less than a quarter turn.
const (
	Segment  Kind = iota
	Circle        // arc of a circle of at most half a turn, or all of it
	Oval          // arc of an ellipse of at most half a turn of its parameter, or all of it
	Bezier        // stretch of a cubic
	Harmonic      // stretch of r(phi), a sum of harmonics or the root of one, or a spiral
)

// Span is the piece of wall that a tracer intersects. It runs from A to B as
// its private parameter runs from T0 to T1 (which may descend).
//
//	Segment   t is the length from A
//	Circle    Centre + Radius (cos t, sin t) in the axes Axis, Left(Axis)
//	Oval      Centre + (Radius cos t, Minor sin t) in those axes
//	Bezier    sum of Coef[k] t^k
//	Harmonic  Centre + r(t) (cos t, sin t) in those axes, r from Form
//
// Turn is the angle (radians) by which the tangent turns, positive to the
// left. Whole spans are closed in themselves: T1 - T0 is a full turn.
type Span struct {
	Kind          Kind
	A, B          r2.Vec
	T0, T1        float64
	Turn, Length  float64
	Centre, Axis  r2.Vec
	Radius, Minor float64
	Coef          [4]r2.Vec
	Form          *Form
	chart         *chart
}

// Whole reports whether the span is a full circle or ellipse.
func (s *Span) Whole() bool { return (s.Kind == Circle || s.Kind == Oval) && s.A == s.B }

// Sense is +1 where the private parameter ascends along the span, else -1.
func (s *Span) Sense() float64 {
	if s.T1 < s.T0 {
		return -1
	}
	return 1
}

// Jet is the point at the private parameter t with the first and second
// derivative by t.
func (s *Span) Jet(t float64) (p, d1, d2 r2.Vec) {
	switch s.Kind {
	case Segment:
		d := r2.Scale(1/s.Length, r2.Sub(s.B, s.A))
		return r2.Add(s.A, r2.Scale(t, d)), d, r2.Vec{}
	case Circle, Oval:
		minor := s.Minor
		if s.Kind == Circle {
			minor = s.Radius
		}
		sin, cos := math.Sincos(t)
		u := r2.Scale(s.Radius, s.Axis)
		v := r2.Scale(minor, plane.Left(s.Axis))
		e := r2.Add(r2.Scale(cos, u), r2.Scale(sin, v))
		return r2.Add(s.Centre, e), r2.Sub(r2.Scale(cos, v), r2.Scale(sin, u)), r2.Scale(-1, e)
	case Bezier:
		c := &s.Coef
		p = r2.Vec{X: c[0].X + t*(c[1].X+t*(c[2].X+t*c[3].X)), Y: c[0].Y + t*(c[1].Y+t*(c[2].Y+t*c[3].Y))}
		d1 = r2.Vec{X: c[1].X + t*(2*c[2].X+t*3*c[3].X), Y: c[1].Y + t*(2*c[2].Y+t*3*c[3].Y)}
		d2 = r2.Vec{X: 2*c[2].X + t*6*c[3].X, Y: 2*c[2].Y + t*6*c[3].Y}
		return p, d1, d2
	default:
		r, r1, r2nd, sin, cos := s.Form.Eval(t)
		u, v := s.Axis, plane.Left(s.Axis)
		e := r2.Add(r2.Scale(cos, u), r2.Scale(sin, v))
		f := r2.Sub(r2.Scale(cos, v), r2.Scale(sin, u))
		p = r2.Add(s.Centre, r2.Scale(r, e))
		d1 = r2.Add(r2.Scale(r1, e), r2.Scale(r, f))
		d2 = r2.Add(r2.Scale(r2nd-r, e), r2.Scale(2*r1, f))
		return p, d1, d2
	}
}

// FrameAt is the frame at the private parameter t. At a cusp the tangent is
// that of the span's inside and the curvature infinite.
func (s *Span) FrameAt(t float64) Frame {
	if s.Kind == Circle {
		sense := s.Sense()
		sin, cos := math.Sincos(t)
		u, v := s.Axis, plane.Left(s.Axis)
		e := r2.Add(r2.Scale(cos, u), r2.Scale(sin, v))
		f := r2.Sub(r2.Scale(cos, v), r2.Scale(sin, u))
		return Frame{Point: r2.Add(s.Centre, r2.Scale(s.Radius, e)), Tangent: r2.Scale(sense, f), Curvature: sense / s.Radius}
	}
	p, d1, d2 := s.Jet(t)
	switch t {
	case s.T0:
		p = s.A
	case s.T1:
		p = s.B
	}
	n2 := plane.Dot(d1, d1)
	if n2 <= cuspSpeed2*plane.Dot(d2, d2) {
		d := s.direction(t, 0.5*(s.T0+s.T1))
		return Frame{Point: p, Tangent: r2.Scale(s.Sense(), d), Curvature: math.Inf(1)}
	}
	n := math.Sqrt(n2)
	sense := s.Sense()
	return Frame{Point: p, Tangent: r2.Scale(sense/n, d1), Curvature: sense * plane.Cross(d1, d2) / (n2 * n)}
}

// cuspSpeed2 is the square of the speed, relative to the second derivative,
// below which a point counts as a cusp: the private parameter is then within
// 1e-9 of it, and the tangent is better taken from the second derivative.
const cuspSpeed2 = 1e-18

// direction is the unit tangent at t in the sense of ascending t; at a cusp,
// its limit from the side of toward.
func (s *Span) direction(t, toward float64) r2.Vec {
	_, d1, d2 := s.Jet(t)
	if plane.Dot(d1, d1) > cuspSpeed2*plane.Dot(d2, d2) {
		return plane.Unit(d1)
	}
	if d2 == (r2.Vec{}) {
		return r2.Vec{X: 1}
	}
	if toward < t {
		return plane.Unit(r2.Scale(-1, d2))
	}
	return plane.Unit(d2)
}

// Ends are the unit tangents at A and at B, along the span.
func (s *Span) Ends() (a, b r2.Vec) {
	k := s.Sense()
	mid := 0.5 * (s.T0 + s.T1)
	return r2.Scale(k, s.direction(s.T0, mid)), r2.Scale(k, s.direction(s.T1, mid))
}

// Apex is the point where the tangents at the ends of a smooth span meet. The
// span lies in the triangle A, Apex, B (its tangent turns one way by less than
// half a turn).
func (s *Span) Apex() r2.Vec {
	a, b := s.Ends()
	den := plane.Cross(a, b)
	if math.Abs(den) < 1e-9 {
		return plane.Lerp(s.A, s.B, 0.5)
	}
	return r2.Add(s.A, r2.Scale(plane.Cross(r2.Sub(s.B, s.A), b)/den, a))
}

// Bounds is a box that holds the span.
func (s *Span) Bounds() r2.Box {
	switch s.Kind {
	case Segment:
		return plane.Around(s.A, s.B)
	case Circle, Oval:
		return s.arcBounds()
	}
	return plane.Around(s.A, s.Apex(), s.B)
}

// S is the arclength from A to the private parameter t.
func (s *Span) S(t float64) float64 {
	switch s.Kind {
	case Segment:
		return t
	case Circle:
		return math.Abs(t-s.T0) * s.Radius
	}
	return s.chart.s(t)
}

// T is the private parameter at the arclength x from A; x is held to
// [0, Length].
func (s *Span) T(x float64) float64 {
	switch {
	case x <= 0:
		return s.T0
	case x >= s.Length:
		return s.T1
	case s.Kind == Segment:
		return x
	case s.Kind == Circle:
		return s.T0 + s.Sense()*x/s.Radius
	}
	return s.chart.t(s, x)
}

// Swept is the area (with sign) that the radius from origin to the span sweeps
// over: half the integral of (x dy - y dx). Summed over a closed loop it is the
// enclosed area, whatever the origin (Green's theorem).
func (s *Span) Swept(origin r2.Vec) float64 {
	a, b := r2.Sub(s.A, origin), r2.Sub(s.B, origin)
	switch s.Kind {
	case Segment:
		return 0.5 * plane.Cross(a, b)
	case Circle:
		c := r2.Sub(s.Centre, origin)
		return 0.5 * (s.Radius*s.Radius*(s.T1-s.T0) + plane.Cross(c, r2.Sub(s.B, s.A)))
	case Oval:
		c := r2.Sub(s.Centre, origin)
		return 0.5 * (s.Radius*s.Minor*(s.T1-s.T0) + plane.Cross(c, r2.Sub(s.B, s.A)))
	}
	return s.quad(func(t float64) float64 {
		p, d1, _ := s.Jet(t)
		return 0.5 * plane.Cross(r2.Sub(p, origin), d1)
	})
}

// setTurn fills Turn of a smooth span from the tangents at its ends.
func (s *Span) setTurn() {
	a, b := s.Ends()
	s.Turn = plane.Angle(a, b)
}
