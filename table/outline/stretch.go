package outline

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/spatial/r2"
)

// stretch is a smooth stretch of wall after the bias, given by its formula: a
// line from a to b; an arc of a circle; or a part of a span, each point of it
// moved along the normal.
type stretch struct {
	kind        Kind // Line, Arc, or Cubic for what a span is evaluated for
	a, b        r2.Vec
	centre      r2.Vec
	radius      float64
	from, sweep float64
	span        *curve.Span
	t0, t1      float64
	bias        float64
	home        r2.Vec // where its start was before the bias
}

// chain is a loop of stretches, or an open row of them.
type chain struct {
	side shape.Side
	open bool
	list []stretch
}

// at is the point at the fraction f of the stretch's parameter, and its
// derivative by f.
func (s *stretch) at(f float64) (p, d r2.Vec) {
	switch s.kind {
	case Line:
		return plane.Lerp(s.a, s.b, f), r2.Sub(s.b, s.a)
	case Arc:
		e := plane.Polar(s.from + s.sweep*f)
		switch f {
		case 0:
			p = s.a
		case 1:
			p = s.b
		default:
			p = r2.Add(s.centre, r2.Scale(s.radius, e))
		}
		return p, r2.Scale(s.radius*s.sweep, plane.Left(e))
	}
	width := s.t1 - s.t0
	t := s.t0 + width*f
	if f == 1 {
		t = s.t1
	}
	p, d1, d2 := s.span.Jet(t)
	switch t {
	case s.span.T0:
		p = s.span.A
	case s.span.T1:
		p = s.span.B
	}
	d = r2.Scale(width, d1)
	if s.bias == 0 {
		return p, d
	}
	frame := s.span.FrameAt(t)
	curl := width * plane.Cross(d1, d2) / plane.Dot(d1, d1) // of the tangent, by f
	if math.IsNaN(curl) {
		curl = 0
	}
	// d(p - b n)/df = d + b (dθ/df) T.
	return r2.Sub(p, r2.Scale(s.bias, frame.Normal())), r2.Add(d, r2.Scale(s.bias*curl, frame.Tangent))
}

// tangent is the unit tangent at the fraction f.
func (s *stretch) tangent(f float64) r2.Vec {
	if s.kind == Cubic {
		return s.span.FrameAt(s.t0 + (s.t1-s.t0)*f).Tangent
	}
	_, d := s.at(f)
	return plane.Unit(d)
}

// curvature is that of the moved wall at the fraction f.
func (s *stretch) curvature(f float64) float64 {
	switch s.kind {
	case Line:
		return 0
	case Arc:
		return math.Copysign(1/s.radius, s.sweep)
	}
	k := s.span.FrameAt(s.t0 + (s.t1-s.t0)*f).Curvature
	return k / (1 + s.bias*k)
}

// part is the stretch between two fractions of it.
func (s stretch) part(lo, hi float64) stretch {
	if lo == 0 && hi == 1 {
		return s
	}
	a, _ := s.at(lo)
	b, _ := s.at(hi)
	w := s.t1 - s.t0
	s.t0, s.t1 = s.t0+w*lo, s.t0+w*hi
	s.from, s.sweep = s.from+s.sweep*lo, s.sweep*(hi-lo)
	s.a, s.b = a, b
	return s
}

// gauss is the number of nodes of the quadrature of a stretch.
const gauss = 48

// measured is the signed area that the chain encloses and its length.
func (c *chain) measured() (area, length float64) {
	origin := c.list[0].a
	for i := range c.list {
		s := &c.list[i]
		switch s.kind {
		case Line:
			area += 0.5 * plane.Cross(r2.Sub(s.a, origin), r2.Sub(s.b, origin))
			length += r2.Norm(r2.Sub(s.b, s.a))
		case Arc:
			area += 0.5 * (s.radius*s.radius*s.sweep + plane.Cross(r2.Sub(s.centre, origin), r2.Sub(s.b, s.a)))
			length += s.radius * math.Abs(s.sweep)
		default:
			for k := range 4 {
				lo, hi := float64(k)/4, float64(k+1)/4
				area += quad.Fixed(func(f float64) float64 {
					p, d := s.at(f)
					return 0.5 * plane.Cross(r2.Sub(p, origin), d)
				}, lo, hi, gauss, nil, 0)
				length += quad.Fixed(func(f float64) float64 {
					_, d := s.at(f)
					return r2.Norm(d)
				}, lo, hi, gauss, nil, 0)
			}
		}
	}
	return area, length
}
