package sim

import (
	"math"

	"cavitywright/table/curve"

	"gonum.org/v1/gonum/spatial/r2"
)

// jet is curve.Span.Jet of a smooth span.
func (s *span) jet(t float64) (p, d1, d2 r2.Vec) {
	if s.kind != curve.Harmonic || !s.plain {
		return s.src.Jet(t)
	}
	form := s.src.Form
	sin, cos := sincos(t)
	r, r1, r2nd := form.Mean, 0.0, 0.0
	sm, cm := sin, cos
	for k, a := range form.Cos {
		b, m := form.Sin[k], float64(k+1)
		v, w := float64(a*cm)+float64(b*sm), float64(b*cm)-float64(a*sm)
		r += v
		r1 += float64(m * w)
		r2nd -= float64(m * m * v)
		if k+1 < len(form.Cos) {
			sm, cm = float64(sm*cos)+float64(cm*sin), float64(cm*cos)-float64(sm*sin)
		}
	}
	ex, ey := float64(cos*s.axis.X)-float64(sin*s.axis.Y), float64(cos*s.axis.Y)+float64(sin*s.axis.X)
	p = r2.Vec{X: s.centre.X + float64(r*ex), Y: s.centre.Y + float64(r*ey)}
	d1 = r2.Vec{X: float64(r1*ex) - float64(r*ey), Y: float64(r1*ey) + float64(r*ex)}
	r2nd -= r
	r1 *= 2
	d2 = r2.Vec{X: float64(r2nd*ex) - float64(r1*ey), Y: float64(r2nd*ey) + float64(r1*ex)}
	return p, d1, d2
}

// turns is the number of steps of a full turn at which sines are tabled.
const turns = 256

var (
	sines [turns]struct{ sin, cos float64 }
	// stepHigh + stepLow is the step; multiples of stepHigh are exact.
	stepHigh = math.Float64frombits(math.Float64bits(2*math.Pi/turns) &^ (1<<24 - 1))
	stepLow  = 2*math.Pi/turns - stepHigh + 2.4492935982947064e-16/turns // what 2 pi misses in a float64
)

func init() {
	for i := range sines {
		// From the nearest quarter turn, so that the rounding of a large angle
		// is not felt.
		quarter := (i + turns/8) / (turns / 4)
		s, c := math.Sincos(2 * math.Pi * float64(i-quarter*turns/4) / turns)
		for range quarter {
			s, c = c, -s
		}
		sines[i].sin, sines[i].cos = s, c
	}
}

// whole is the number of full turns up to which an angle may be negative.
const whole = 16

// sincos is math.Sincos for angles of a few turns, to some 2e-16: from the
// table's nearest angle by the addition theorem.
func sincos(t float64) (sin, cos float64) {
	i := int(t*(turns/(2*math.Pi))+(turns*whole+0.5)) - turns*whole
	k, at := float64(i), &sines[i&(turns-1)]
	r := t - float64(k*stepHigh) - float64(k*stepLow)
	q := r * r
	s := r - float64(r*q*(1.0/6-float64(q*(1.0/120))))
	c := float64(q * (0.5 - float64(q*(1.0/24-float64(q*(1.0/720))))))
	return at.sin + (float64(at.cos*s) - float64(at.sin*c)), at.cos - (float64(at.sin*s) + float64(at.cos*c))
}
