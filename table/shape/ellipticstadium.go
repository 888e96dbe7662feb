package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var ellipticStadium = Kind{
	Name: "elliptic-stadium", Title: "Elliptic stadium",
	About: "Chaotic where 1 < a/b < √2 and the straight sides are long enough, else with islands " +
		"(Markarian, Oliffson Kamphorst and Pinto de Carvalho, Commun. Math. Phys. 174, 661 (1996)); bounces between the straight sides are a marginal family; convex.",
	Formula: "two straight sides of length 2 × half-length at y = ±b, joined by half ellipses; s starts at the left end of the bottom side",
	Specs: []param.Spec{
		length("half-length", 1, "half of one straight side"),
		length("a", 1.2, "semi-axis of the caps along the straight sides"),
		length("b", 1, "semi-axis across them, half of the height"),
	},
	Loops: func(v param.Values) []Loop {
		h, a, b := v[0], v[1], v[2]
		return ring(
			curve.NewLine(r2.Vec{X: -h, Y: -b}, r2.Vec{X: h, Y: -b}),
			curve.NewOval(curve.Arc{Centre: r2.Vec{X: h}, Major: a, Minor: b, From: -math.Pi / 2, Sweep: math.Pi}),
			curve.NewLine(r2.Vec{X: h, Y: b}, r2.Vec{X: -h, Y: b}),
			curve.NewOval(curve.Arc{Centre: r2.Vec{X: -h}, Major: a, Minor: b, From: math.Pi / 2, Sweep: math.Pi}),
		)
	},
	Grips: func(v param.Values) []Handle {
		return []Handle{grip("half-length", v[0], -v[2]), grip("a", v[0]+v[1], 0), grip("b", 0, v[2])}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = [3]float64{to.X, to.X - v[0], to.Y}[i]
		return v
	},
}
