package shape

import (
	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var spiral = Kind{
	Name: "spiral", Title: "Spiral",
	About: "A disc that winds outwards, closed by a notch; no mirror line, so the two senses of rotation differ: one of them runs into the notch " +
		"(Chern et al., Appl. Phys. Lett. 83, 1710 (2003)).",
	Formula: "r = R (1 + eps φ/2π), φ from 0 to 2π, closed by the notch on φ = 0; s starts at the notch's inner corner",
	Specs: []param.Spec{
		length("radius", 1, "radius R at the start"),
		pure("eps", 1e-3, 2, 0.1, "growth eps in a turn; the notch is R eps deep"),
	},
	Loops: func(v param.Values) []Loop {
		r, deep := v[0], v[0]*v[1]
		return ring(
			curve.NewPolar(curve.Polar{Form: &curve.Form{Mean: r, Slope: deep / fullTurn}, Sweep: fullTurn}),
			curve.NewLine(r2.Vec{X: r + deep}, r2.Vec{X: r}),
		)
	},
	Grips: func(v param.Values) []Handle {
		return []Handle{grip("radius", v[0], 0), grip("eps", v[0]*(1+v[1]), 0)}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		if i == 0 {
			v[0] = to.X
		} else {
			v[1] = to.X/v[0] - 1
		}
		return v
	},
}
