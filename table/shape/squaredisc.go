package shape

import (
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var squareWithDisc = Kind{
	Name: "square-with-disc", Title: "Square with a disc",
	About:   "Ergodic and fully chaotic: the disc disperses, the square only folds (Sinai, Russ. Math. Surveys 25, 137 (1970)).",
	Formula: "|x|, |y| ≤ side/2 without the disc of the radius about the origin; s starts at the lower left corner, then runs around the disc clockwise",
	Specs: []param.Spec{
		length("side", 2, "side of the square"),
		length("radius", 0.5, "radius of the disc"),
	},
	Fits: func(v param.Values) error {
		if !below(2*v[1], v[0]) {
			return misfit("the disc touches the square; make radius smaller than side/2")
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		return append(ring(box(v[0]/2, v[0]/2)...), post(r2.Vec{}, v[1]))
	},
	Grips: func(v param.Values) []Handle {
		return []Handle{grip("side", v[0]/2, 0), grip("radius", 0, v[1])}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = [2]float64{2 * to.X, to.Y}[i]
		return v
	},
}
