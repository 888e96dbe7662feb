package curve

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Form is a radius as a function of the polar angle phi, given by the sum
// Mean + Slope phi + sum over m of Cos[m-1] cos m phi + Sin[m-1] sin m phi,
// which is the radius itself or, with Of Square, its square. Cos and Sin have
// equal length.
type Form struct {
	Of          Quantity
	Mean, Slope float64
	Cos, Sin    []float64
}

// Quantity is what the sum of a Form is.
type Quantity uint8

// The quantities: a length, or the square of one.
const (
	Radius Quantity = iota
	Square
)

// Eval is r with its first two derivatives by phi, and the sine and cosine of
// phi.
func (f *Form) Eval(phi float64) (r, d1, d2, sin, cos float64) {
	r, d1, d2, sin, cos = f.sum(phi)
	if f.Of == Square {
		r = math.Sqrt(r)
		d1 /= 2 * r
		d2 = (d2 - 2*d1*d1) / (2 * r)
	}
	return r, d1, d2, sin, cos
}

// sum is the sum with its derivatives. The higher harmonics follow from the
// addition theorem.
func (f *Form) sum(phi float64) (r, d1, d2, sin, cos float64) {
	sin, cos = math.Sincos(phi)
	r, d1 = f.Mean+float64(f.Slope*phi), f.Slope
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
	if f.Of == Square {
		k *= k
	}
	g := &Form{Of: f.Of, Mean: f.Mean * k, Slope: f.Slope * k, Cos: make([]float64, len(f.Cos)), Sin: make([]float64, len(f.Sin))}
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
	if math.Abs(p.Sweep) >= 2*math.Pi-1e-12 && p.Form.Slope == 0 {
		p.chain[len(p.chain)-1].B = p.chain[0].A
	}
	return p
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
