package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var disc = Kind{
	Name: "disc", Title: "Disc",
	About:   "Integrable: p is conserved at every bounce.",
	Formula: "x² + y² = R²; s starts at the rightmost point",
	Specs:   []param.Spec{length("radius", 1, "radius R")},
	Loops: func(v param.Values) []Loop {
		return ring(curve.NewArc(r2.Vec{}, v[0], 0, fullTurn))
	},
	Grips: func(v param.Values) []Handle {
		return []Handle{{At: r2.Vec{X: v[0]}, Name: "radius", Of: -1}}
	},
	Pull: func(v param.Values, _ int, to r2.Vec) param.Values {
		v[0] = math.Hypot(to.X, to.Y)
		return v
	},
}
