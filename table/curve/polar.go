package curve

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Form is a radius as a sum of harmonics of the polar angle,
// r(phi) = Mean + sum over m of Cos[m-1] cos m phi + Sin[m-1] sin m phi.
// Cos and Sin have equal length.
type Form struct {
	Mean     float64
	Cos, Sin []float64
}

// Eval is r with its first two derivatives by phi, and the sine and cosine of
// phi. The higher harmonics follow from the addition theorem.
func (f *Form) Eval(phi float64) (r, d1, d2, sin, cos float64) {
	sin, cos = math.Sincos(phi)
	r = f.Mean
	sm, cm := sin, cos
	for k, a := range f.Cos {
		b, m := f.Sin[k], float64(k+1)
		if a != 0 || b != 0 {
			v, w := float64(a*cm)+float64(b*sm), float64(b*cm)-float64(a*sm)
			r += v
			d1 += m * w
			d2 -= m * m * v
		}
		if k+1 < len(f.Cos) {
			sm, cm = float64(sm*cos)+float64(cm*sin), float64(cm*cos)-float64(sm*sin)
		}
	}
	return r, d1, d2, sin, cos
}

// scaled is the form with every length multiplied by k.
func (f *Form) scaled(k float64) *Form {
	g := &Form{Mean: f.Mean * k, Cos: make([]float64, len(f.Cos)), Sin: make([]float64, len(f.Sin))}
	for i := range f.Cos {
		g.Cos[i], g.Sin[i] = f.Cos[i]*k, f.Sin[i]*k
	}
	return g
}

// Polar is the curve r(phi) about Centre, phi measured from the direction Tilt
// (radians from +x), from From over Sweep.
type Polar struct {
	Centre      r2.Vec
	Tilt        float64
	Form        *Form
	From, Sweep float64
	chain
}

// NewPolar is the curve that the fields of p describe. r must not be negative
// on it.
func NewPolar(p Polar) Polar {
	proto := Span{Kind: Harmonic, Centre: p.Centre, Axis: plane.Polar(p.Tilt), Form: p.Form, T0: p.From, T1: p.From + p.Sweep}
	lo, hi := math.Min(proto.T0, proto.T1), math.Max(proto.T0, proto.T1)
	p.chain = smoothSpans(proto, proto.T0, proto.T1, p.Form.bends(lo, hi))
	if math.Abs(p.Sweep) >= 2*math.Pi-1e-12 {
		p.chain[len(p.chain)-1].B = p.chain[0].A
	}
	return p
}

// bends are the zeros of the curvature's numerator
// r^2 + 2 r'^2 - r r” in [lo, hi], a trigonometric polynomial of degree
// 2M: none is missed, since Bernstein's inequality (max |f'| <= degree max |f|)
// bounds how fast it can change (S. Bernstein 1912).
func (f *Form) bends(lo, hi float64) []float64 {
	size := math.Abs(f.Mean)
	m := float64(len(f.Cos))
	for k := range f.Cos {
		size += math.Abs(f.Cos[k]) + math.Abs(f.Sin[k])
	}
	top := size * size * (1 + 3*m*m) // bound of |numerator|
	num := func(t float64) float64 {
		r, d1, d2, _, _ := f.Eval(t)
		return float64(r*r) + float64(2*d1*d1) - float64(r*d2)
	}
	slope := func(t float64) float64 {
		r, d1, d2, _, _ := f.Eval(t)
		return float64(2*r*d1) + float64(3*d1*d2) - float64(r*f.third(t))
	}
	w := zeros{f: num, slope: slope, lip: 2 * m * top, bend: 4 * m * m * top}
	w.find(lo, hi)
	return w.merged(lo, hi)
}

// third is the third derivative of r by phi.
func (f *Form) third(phi float64) float64 {
	sum := 0.0
	for k := range f.Cos {
		m := float64(k + 1)
		sin, cos := math.Sincos(m * phi)
		sum += m * m * m * (float64(f.Cos[k]*sin) - float64(f.Sin[k]*cos))
	}
	return sum
}

// zeros finds every zero of f by halving, given its derivative and bounds on
// the first (lip) and second (bend) derivative.
type zeros struct {
	f, slope  func(float64) float64
	lip, bend float64
	at        []float64
}

// undecided is the half width at which an interval that can neither be cleared
// nor shown to be monotone is taken to hold a double zero.
const undecided = 1e-8

func (z *zeros) find(lo, hi float64) {
	mid, half := 0.5*(lo+hi), 0.5*(hi-lo)
	if math.Abs(z.f(mid)) > z.lip*half {
		return
	}
	if math.Abs(z.slope(mid)) > z.bend*half { // monotone here: at most one zero
		a, b := z.f(lo), z.f(hi)
		if (a < 0) != (b < 0) {
			z.at = append(z.at, Root(z.f, lo, hi, a, b))
		}
		return
	}
	if half < undecided {
		z.at = append(z.at, mid)
		return
	}
	z.find(lo, mid)
	z.find(mid, hi)
}

// merged are the zeros with those of one double zero replaced by the place
// where the slope vanishes: a cusp must be cut exactly there.
func (z *zeros) merged(lo, hi float64) []float64 {
	var out []float64
	for i := 0; i < len(z.at); {
		j := i
		for j+1 < len(z.at) && z.at[j+1]-z.at[j] < 8*undecided {
			j++
		}
		t := 0.5 * (z.at[i] + z.at[j])
		a, b := z.at[i]-8*undecided, z.at[j]+8*undecided
		if sa, sb := z.slope(a), z.slope(b); (sa < 0) != (sb < 0) && z.isDouble(t) {
			t = Root(z.slope, a, b, sa, sb)
		}
		if t > lo && t < hi {
			out = append(out, t)
		}
		i = j + 1
	}
	return out
}

// isDouble reports whether f does not change sign about t.
func (z *zeros) isDouble(t float64) bool {
	return (z.f(t-32*undecided) < 0) == (z.f(t+32*undecided) < 0)
}

// Placed is the curve after m.
func (p Polar) Placed(m plane.Similarity) Curve {
	p.Centre, p.Tilt = m.Apply(p.Centre), p.Tilt+m.Angle
	if m.Scale != 1 {
		p.Form = p.Form.scaled(m.Scale)
	}
	return NewPolar(p)
}

// Reversed is the curve run backwards.
func (p Polar) Reversed() Curve {
	p.From, p.Sweep = p.From+p.Sweep, -p.Sweep
	return NewPolar(p)
}
