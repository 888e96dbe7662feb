package shape

import (
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var wedge = Kind{
	Name: "wedge", Title: "Wedge",
	About: "A straight taper; no Lyapunov exponent, as in every polygon; pseudo-integrable where its angles are rational parts of π " +
		"(Richens and Berry, Physica D 2, 495 (1981)); convex.",
	Formula: "trapezium from x = -length/2, where it has the height wide, to x = length/2, where it has the height narrow; s starts at the lower left corner",
	Specs: []param.Spec{
		length("length", 2, "distance of the two ends"),
		length("wide", 1, "height of the left end"),
		length("narrow", 0.4, "height of the right end"),
	},
	Loops: func(v param.Values) []Loop {
		x, p, q := v[0]/2, v[1]/2, v[2]/2
		return ring(outline(r2.Vec{X: -x, Y: -p}, r2.Vec{X: x, Y: -q}, r2.Vec{X: x, Y: q}, r2.Vec{X: -x, Y: p})...)
	},
	Grips: func(v param.Values) []Handle {
		x := v[0] / 2
		return []Handle{grip("length", x, 0), grip("wide", -x, v[1]/2), grip("narrow", x, v[2]/2)}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = 2 * [3]float64{to.X, to.Y, to.Y}[i]
		return v
	},
}
