package curve

import (
	"math"
	"sort"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Cubic is the Bézier cubic with the control points P.
type Cubic struct {
	P [4]r2.Vec
	chain
}

// NewCubic is the cubic from p[0] to p[3], tangent to p[1] and p[2] there.
func NewCubic(p [4]r2.Vec) Cubic {
	e := func(w0, w1, w2, w3 float64) r2.Vec {
		return r2.Vec{
			X: float64(w0*p[0].X) + float64(w1*p[1].X) + float64(w2*p[2].X) + float64(w3*p[3].X),
			Y: float64(w0*p[0].Y) + float64(w1*p[1].Y) + float64(w2*p[2].Y) + float64(w3*p[3].Y),
		}
	}
	proto := Span{Kind: Bezier, T1: 1, Coef: [4]r2.Vec{p[0], e(-3, 3, 0, 0), e(3, -6, 3, 0), e(-1, 3, -3, 1)}}
	c := Cubic{P: p, chain: smoothSpans(proto, 0, 1, cubicBends(&proto))}
	c.chain[0].A = p[0]
	c.chain[len(c.chain)-1].B = p[3]
	return c
}

// cubicBends are the cuts in (0, 1) that a cubic needs whatever it turns by: the
// zeros of its curvature (the cross product of first and second derivative is a
// quadratic, its cubic term cancels), and the cusps, where it turns right about.
func cubicBends(s *Span) []float64 {
	c := &s.Coef
	k0 := 2 * plane.Cross(c[1], c[2])
	k1 := 6 * plane.Cross(c[1], c[3])
	k2 := 6 * plane.Cross(c[2], c[3])
	in := cubicCusps(s)
	cusps := in[:len(in):len(in)]
	for _, t := range quadraticRoots(k2, k1, k0) {
		if t > 1e-12 && t < 1-1e-12 && !nearAny(t, cusps) {
			in = append(in, t)
		}
	}
	return in
}

// cuspReach is the distance in the parameter within which a zero of the
// curvature counts as part of a cusp: a double zero is found to the root of the
// rounding.
const cuspReach = 1e-7

func nearAny(t float64, at []float64) bool {
	for _, u := range at {
		if math.Abs(t-u) < cuspReach {
			return true
		}
	}
	return false
}

// cubicCusps are the places in (0, 1) where the speed is least and counts as
// none: zeros of the product of first and second derivative, a cubic.
func cubicCusps(s *Span) []float64 {
	c := &s.Coef
	f := func(t float64) float64 {
		_, d1, d2 := s.Jet(t)
		return plane.Dot(d1, d2)
	}
	slope0 := 4*plane.Dot(c[2], c[2]) + 6*plane.Dot(c[1], c[3])
	at := []float64{0}
	for _, t := range quadraticRoots(54*plane.Dot(c[3], c[3]), 36*plane.Dot(c[2], c[3]), slope0) {
		if t > 0 && t < 1 {
			at = append(at, t)
		}
	}
	at = append(at, 1)
	sort.Float64s(at)
	var in []float64
	for i := 1; i < len(at); i++ {
		lo, hi := f(at[i-1]), f(at[i])
		if !(lo < 0 && hi >= 0) { // only where the speed has a minimum
			continue
		}
		t := Root(f, at[i-1], at[i], lo, hi)
		_, d1, d2 := s.Jet(t)
		if t > 1e-12 && t < 1-1e-12 && plane.Dot(d1, d1) <= cuspSpeed2*plane.Dot(d2, d2) {
			in = append(in, t)
		}
	}
	return in
}

// quadraticRoots are the real roots of a t^2 + b t + c, a double one once.
// The stable form: no difference of nearly equal numbers.
func quadraticRoots(a, b, c float64) []float64 {
	scale := math.Abs(a) + math.Abs(b) + math.Abs(c)
	if math.Abs(a) <= 1e-15*scale {
		if math.Abs(b) <= 1e-15*scale {
			return nil
		}
		return []float64{-c / b}
	}
	disc := b*b - 4*a*c
	if disc < 0 {
		if -disc > 1e-14*scale*scale {
			return nil
		}
		return []float64{-b / (2 * a)} // a cusp, to rounding: cut there
	}
	q := -0.5 * (b + math.Copysign(math.Sqrt(disc), b))
	if q == 0 {
		return []float64{0}
	}
	return []float64{q / a, c / q}
}

// Placed is the cubic after m.
func (c Cubic) Placed(m plane.Similarity) Curve {
	var p [4]r2.Vec
	for i := range p {
		p[i] = m.Apply(c.P[i])
	}
	return NewCubic(p)
}

// Reversed is the cubic run backwards.
func (c Cubic) Reversed() Curve { return NewCubic([4]r2.Vec{c.P[3], c.P[2], c.P[1], c.P[0]}) }

// smoothSpans cuts the curve that proto describes between from and to (which
// may descend) into smooth spans. bends are the zeros of its curvature between.
func smoothSpans(proto Span, from, to float64, bends []float64) chain {
	lo, hi := math.Min(from, to), math.Max(from, to)
	at := cuts(&proto, lo, hi, bends)
	if from > to {
		for i, j := 0, len(at)-1; i < j; i, j = i+1, j-1 {
			at[i], at[j] = at[j], at[i]
		}
	}
	spans := make([]Span, len(at)-1)
	for i := range spans {
		s := &spans[i]
		*s = proto
		s.T0, s.T1 = at[i], at[i+1]
		s.A, _, _ = s.Jet(s.T0)
		s.B, _, _ = s.Jet(s.T1)
		s.setTurn()
		s.chart = newChart(s)
		s.Length = s.chart.length
	}
	return join(spans)
}
