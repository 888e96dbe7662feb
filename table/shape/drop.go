package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

var drop = Kind{
	Name: "drop", Title: "Drop",
	About: "Ergodic: the circle lies within the wall, the tip is straight (Bunimovich, Commun. Math. Phys. 65, 295 (1979)); " +
		"diameters and polygons that miss the tip are marginal families; convex, with one corner.",
	Formula: "x² + y² ≤ R² with its two tangents through (0, tip); s starts where the left tangent touches, along the arc",
	Specs: []param.Spec{
		length("radius", 1, "radius R of the arc"),
		length("tip", 2, "distance of the tip from the arc's centre"),
	},
	Fits: func(v param.Values) error {
		if !below(v[0], v[1]) {
			return misfit("the tip lies within the disc; make tip greater than radius")
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		r, tip := v[0], r2.Vec{Y: v[1]}
		touch := math.Atan2(r, halfChord(v[1], r))
		right := r2.Scale(r, plane.Polar(touch))
		return ring(
			curve.NewArc(r2.Vec{}, r, math.Pi-touch, math.Pi+2*touch),
			curve.NewLine(right, tip),
			curve.NewLine(tip, r2.Vec{X: -right.X, Y: right.Y}),
		)
	},
	Grips: func(v param.Values) []Handle {
		return []Handle{grip("radius", 0, -v[0]), grip("tip", 0, v[1])}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = [2]float64{-to.Y, to.Y}[i]
		return v
	},
}
