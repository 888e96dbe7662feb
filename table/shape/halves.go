package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var halfDisc = Kind{
	Name: "half-disc", Title: "Half disc",
	About:   "Integrable: the disc folded on a diameter, |p| is conserved at the arc; convex.",
	Formula: "x² + y² ≤ R², y ≥ 0; s starts at the left end of the straight side",
	Specs:   []param.Spec{length("radius", 1, "radius R")},
	Loops:   func(v param.Values) []Loop { return halfOval(v[0], v[0]) },
	Grips:   func(v param.Values) []Handle { return []Handle{grip("radius", 0, v[0])} },
	Pull: func(v param.Values, _ int, to r2.Vec) param.Values {
		v[0] = to.Y
		return v
	},
}

// halfOval is the upper half of the ellipse with the semi-axes a and b.
func halfOval(a, b float64) []Loop {
	return ring(
		curve.NewLine(r2.Vec{X: -a}, r2.Vec{X: a}),
		curve.NewOval(curve.Arc{Major: a, Minor: b, Sweep: math.Pi}),
	)
}
