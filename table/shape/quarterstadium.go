package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var quarterStadium = Kind{
	Name: "quarter-stadium", Title: "Quarter stadium",
	About: "Ergodic: the stadium folded on both axes, with a marginal family of bounces between the long sides " +
		"(Bunimovich, Commun. Math. Phys. 65, 295 (1979)); convex.",
	Formula: "rectangle straight × radius with a quarter disc of the radius at its right; s starts at the lower left corner",
	Specs: []param.Spec{
		length("straight", 1, "length of the straight side beside the arc"),
		length("radius", 1, "radius of the arc, the height"),
	},
	Loops: func(v param.Values) []Loop {
		a, r := v[0], v[1]
		return ring(
			curve.NewLine(r2.Vec{}, r2.Vec{X: a + r}),
			curve.NewArc(r2.Vec{X: a}, r, 0, math.Pi/2),
			curve.NewLine(r2.Vec{X: a, Y: r}, r2.Vec{Y: r}),
			curve.NewLine(r2.Vec{Y: r}, r2.Vec{}),
		)
	},
	Grips: func(v param.Values) []Handle {
		return []Handle{grip("straight", v[0]+v[1], 0), grip("radius", 0, v[1])}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = [2]float64{to.X - v[1], to.Y}[i]
		return v
	},
}
