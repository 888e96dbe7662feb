package curve

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/spatial/r2"
)

// chart is the arclength of a span as a function of its private parameter: on
// each of its panels the speed |dc/dt| is a Chebyshev series, integrated term
// by term (Clenshaw and Curtis 1960). A panel is halved until the last terms
// of its series are below chartTol of the first, so that both directions hold
// to 1e-12 of the length with a margin.
type chart struct {
	panels []panel
	t0, t1 float64
	length float64
	size   float64
}

// panel is one stretch [a, b] of the parameter (in the span's sense). The
// arclength at the normalised place x in [-1, 1] is s0 + sum coef[k] T_k(x).
type panel struct {
	a, b   float64
	s0, s1 float64
	coef   [chartTerms + 1]float64
}

const (
	chartTerms = 18
	chartTol   = 4e-16 // size of the last two terms against the first; below the rounding of the sum
	chartFloor = 1e-17 // size of those terms against the whole span: what no sum feels
	chartDepth = 24    // halvings; reached only at a cusp inside a span, where the panel left is 1e-7 long
)

var (
	chebNode [chartTerms]float64             // nodes in (-1, 1)
	chebCos  [chartTerms][chartTerms]float64 // T_k at node j, scaled to give coefficients
)

func init() {
	for j := range chebNode {
		th := math.Pi * (float64(j) + 0.5) / chartTerms
		chebNode[j] = math.Cos(th)
		for k := range chebCos {
			chebCos[k][j] = 2.0 / chartTerms * math.Cos(float64(k)*th)
		}
	}
}

func newChart(s *Span) *chart {
	c := &chart{t0: s.T0, t1: s.T1}
	for k := range 8 { // a bound of the length to within a small factor
		_, d1, _ := s.Jet(s.T0 + (s.T1-s.T0)*float64(k)/7)
		c.size = math.Max(c.size, math.Sqrt(plane.Dot(d1, d1))*math.Abs(s.T1-s.T0))
	}
	c.build(s, s.T0, s.T1, 0)
	return c
}

func (c *chart) build(s *Span, a, b float64, depth int) {
	var speed, g [chartTerms]float64
	half, mid := 0.5*(b-a), 0.5*(a+b)
	for j, x := range chebNode {
		_, d1, _ := s.Jet(mid + half*x)
		speed[j] = math.Sqrt(plane.Dot(d1, d1)) * math.Abs(half)
	}
	for k := range g {
		for j := range speed {
			g[k] += chebCos[k][j] * speed[j]
		}
	}
	g[0] *= 0.5
	tail := math.Abs(g[chartTerms-1]) + math.Abs(g[chartTerms-2])
	if tail > chartTol*chartTerms*math.Abs(g[0]) && tail > chartFloor*c.size && tail > s.rounding()*math.Abs(half) && depth < chartDepth {
		c.build(s, a, mid, depth+1)
		c.build(s, mid, b, depth+1)
		return
	}
	p := panel{a: a, b: b, s0: c.length}
	p.coef[1] = g[0] - g[2]/2
	for k := 2; k < chartTerms; k++ {
		next := 0.0
		if k+1 < chartTerms {
			next = g[k+1]
		}
		p.coef[k] = (g[k-1] - next) / (2 * float64(k))
	}
	p.coef[chartTerms] = g[chartTerms-1] / (2 * chartTerms)
	// The value at x = -1 is zero.
	for k, sign := 1, -1.0; k <= chartTerms; k, sign = k+1, -sign {
		p.coef[0] -= sign * p.coef[k]
	}
	p.s1 = p.s0 + p.at(1)
	c.length = p.s1
	c.panels = append(c.panels, p)
}

// at is the arclength from the panel's start at the normalised place x.
func (p *panel) at(x float64) float64 {
	var b1, b2 float64
	for k := chartTerms; k > 0; k-- {
		b1, b2 = 2*x*b1-b2+p.coef[k], b1
	}
	return x*b1 - b2 + p.coef[0]
}

func (c *chart) s(t float64) float64 {
	k := 0
	if n := len(c.panels); n > 1 {
		up := c.t1 > c.t0
		for lo, hi := 0, n-1; lo < hi; {
			m := (lo + hi) / 2
			if (t <= c.panels[m].b) == up {
				hi = m
			} else {
				lo = m + 1
			}
			k = lo
			if lo == hi {
				k = lo
			}
		}
	}
	p := &c.panels[k]
	return p.s0 + p.at((2*t-p.a-p.b)/(p.b-p.a))
}

// t inverts s by Newton's method from the panel's chord, held to the panel.
func (c *chart) t(s *Span, x float64) float64 {
	k := 0
	for k < len(c.panels)-1 && x > c.panels[k].s1 {
		k++
	}
	p := &c.panels[k]
	target := x - p.s0
	lo, hi := -1.0, 1.0
	u := 2*target/(p.s1-p.s0) - 1
	half := 0.5 * math.Abs(p.b-p.a)
	for range 60 {
		miss := p.at(u) - target
		if miss > 0 {
			hi = u
		} else {
			lo = u
		}
		_, d1, _ := s.Jet(0.5*(p.a+p.b) + 0.5*(p.b-p.a)*u)
		next := u - miss/(half*math.Sqrt(plane.Dot(d1, d1)))
		if !(next > lo && next < hi) {
			next = 0.5 * (lo + hi)
		}
		if math.Abs(next-u) <= 0x1p-52 {
			u = next
			break
		}
		u = next
	}
	return 0.5*(p.a+p.b) + 0.5*(p.b-p.a)*u
}

// quad is the integral of f over the private parameter, panel by panel.
func (s *Span) quad(f func(t float64) float64) float64 {
	sum := 0.0
	for i := range s.chart.panels {
		p := &s.chart.panels[i]
		lo, hi, sign := p.a, p.b, 1.0
		if hi < lo {
			lo, hi, sign = hi, lo, -1
		}
		sum += sign * quad.Fixed(f, lo, hi, chartTerms, quad.Legendre{}, 0)
	}
	return sum
}

// rounding is the size of the rounding error of the speed: the terms of the
// velocity cancel near the end of a short handle, near a dent that comes close
// to the centre of its harmonics, and at the tip of a slender ellipse.
func (s *Span) rounding() float64 {
	size := 0.0
	switch s.Kind {
	case Oval:
		size = s.Radius + s.Minor
	case Bezier:
		c := &s.Coef
		size = r2.Norm(c[1]) + 2*r2.Norm(c[2]) + 3*r2.Norm(c[3])
	case Harmonic:
		size = math.Abs(s.Form.Mean) + math.Abs(s.Form.Slope)*(1+math.Abs(s.T0)+math.Abs(s.T1))
		for k := range s.Form.Cos {
			size += float64(k+2) * (math.Abs(s.Form.Cos[k]) + math.Abs(s.Form.Sin[k]))
		}
		if s.Form.Of == Square {
			r, _, _, _, _ := s.Form.Eval(0.5 * (s.T0 + s.T1))
			size /= r
		}
	}
	return 4e-16 * size
}
