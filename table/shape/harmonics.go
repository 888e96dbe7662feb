package shape

import (
	"fmt"
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// harmonicCount is the number of harmonics that the family offers.
const harmonicCount = 8

// gripped is the number of harmonics with a grip, those that are drawn most.
const gripped = 4

var harmonics = Kind{
	Name: "harmonics", Title: "Harmonics",
	About:   "Any smooth wall seen once from its centre: the disc, limaçon and quadrupole are special cases; regular and chaotic motion mostly together.",
	Formula: "r = R (1 + Σ a_m cos mφ + b_m sin mφ), m = 1 to 8; s starts at φ = 0",
	Specs:   harmonicSpecs("mean radius R"),
	Fits:    harmonicFits,
	Loops: func(v param.Values) []Loop {
		cos, sin := coefficients(v)
		return ring(wave(v[0], cos, sin))
	},
	Grips: func(v param.Values) []Handle {
		h := []Handle{grip("radius", harmonicRadius(v, 0), 0)}
		for m := 1; m <= gripped; m++ {
			phi := math.Pi / float64(m)
			p := r2.Scale(harmonicRadius(v, phi), plane.Polar(phi))
			h = append(h, grip(harmonicName('a', m), p.X, p.Y))
		}
		return h
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		if i == 0 {
			v[0] *= to.X / harmonicRadius(v, 0)
			return v
		}
		// cos mφ = -1 at the grip of a_m.
		phi := math.Pi / float64(i)
		v[2*i-1] -= (plane.Dot(to, plane.Polar(phi)) - harmonicRadius(v, phi)) / v[0]
		return v
	},
}

func harmonicFits(v param.Values) error {
	cos, sin := coefficients(v)
	f := waveForm(1, cos, sin)
	f.Mean -= slack
	if phi, sinks := sink(f); sinks {
		return misfit("the wall reaches its centre at %.1f deg; make the harmonics smaller", phi*180/math.Pi)
	}
	return nil
}

func harmonicName(letter rune, m int) string { return fmt.Sprintf("%c%d", letter, m) }

func harmonicSpecs(radius string) []param.Spec {
	specs := []param.Spec{length("radius", 1, radius)}
	def := map[string]float64{"a2": 0.06, "a3": 0.08, "b3": 0.03}
	for m := 1; m <= harmonicCount; m++ {
		a, b := harmonicName('a', m), harmonicName('b', m)
		specs = append(specs,
			pure(a, -1, 1, def[a], fmt.Sprintf("amplitude of cos %dφ", m)),
			pure(b, -1, 1, def[b], fmt.Sprintf("amplitude of sin %dφ", m)))
	}
	return specs
}

func coefficients(v param.Values) (cos, sin []float64) {
	for m := range harmonicCount {
		cos, sin = append(cos, v[1+2*m]), append(sin, v[2+2*m])
	}
	return cos, sin
}

func harmonicRadius(v param.Values, phi float64) float64 {
	cos, sin := coefficients(v)
	r, _, _, _, _ := waveForm(v[0], cos, sin).Eval(phi)
	return r
}

// sinkWidth is the half width (radians) at which an interval that cannot be
// shown to keep r above zero counts as a place where r vanishes. By Taylor's
// formula r is below 1e-11 of its mean there.
const sinkWidth = 1e-7

// sink looks for a place where r is not positive. None is missed: |r”| is at
// most the sum of m² |a_m| and m² |b_m|.
func sink(f *curve.Form) (phi float64, sinks bool) {
	bend := 0.0
	for i := range f.Cos {
		m := float64(i + 1)
		bend += m * m * (math.Abs(f.Cos[i]) + math.Abs(f.Sin[i]))
	}
	var look func(lo, hi float64) (float64, bool)
	look = func(lo, hi float64) (float64, bool) {
		mid, half := 0.5*(lo+hi), 0.5*(hi-lo)
		r, d1, _, _, _ := f.Eval(mid)
		if r <= 0 || half < sinkWidth {
			return mid, true
		}
		if r-math.Abs(d1)*half-0.5*bend*half*half > 0 {
			return 0, false
		}
		if at, found := look(lo, mid); found {
			return at, true
		}
		return look(mid, hi)
	}
	// From 0, so that the middle of the first halving is π, the cusp of a
	// cardioid.
	return look(0, fullTurn)
}
