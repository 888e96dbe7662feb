package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var stadium = Kind{
	Name: "stadium", Title: "Stadium",
	About: "Ergodic for every half-length above 0, with a marginal family of bounces between the straight sides " +
		"(Bunimovich, Commun. Math. Phys. 65, 295 (1979)); convex.",
	Formula: "two straight sides of length 2 × half-length, joined by half circles of the radius; s starts at the left end of the bottom side",
	Specs: []param.Spec{
		length("half-length", 1, "half of one straight side"),
		length("radius", 1, "radius of the end caps"),
	},
	Loops: func(v param.Values) []Loop {
		a, r := v[0], v[1]
		return ring(
			curve.NewLine(r2.Vec{X: -a, Y: -r}, r2.Vec{X: a, Y: -r}),
			curve.NewArc(r2.Vec{X: a}, r, -math.Pi/2, math.Pi),
			curve.NewLine(r2.Vec{X: a, Y: r}, r2.Vec{X: -a, Y: r}),
			curve.NewArc(r2.Vec{X: -a}, r, math.Pi/2, math.Pi),
		)
	},
	Grips: func(v param.Values) []Handle {
		return []Handle{grip("half-length", v[0]+v[1], 0), grip("radius", 0, v[1])}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		if i == 0 {
			v[0] = to.X - v[1]
		} else {
			v[1] = to.Y
		}
		return v
	},
}
