package shape

import (
	"math"

	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var discRing = Kind{
	Name: "ring", Title: "Ring",
	About: "A disc with an inner disc as an obstacle: integrable at offset 0, else regular along the outer wall and chaotic inside " +
		"(Bohigas, Boosé, Egydio de Carvalho and Marvulle, Nucl. Phys. A 560, 197 (1993)).",
	Formula: "x² + y² ≤ R² without the disc of inner-radius about (offset, 0); s starts at the rightmost point of the outer circle, then runs around the inner one clockwise",
	Specs: []param.Spec{
		length("radius", 1, "radius R of the outer circle"),
		length("inner-radius", 0.4, "radius of the inner circle"),
		{Name: "offset", Unit: param.Length, Lo: 0, Hi: 1e6, Default: 0.3, Description: "distance of the circles' centres"},
	},
	Fits: func(v param.Values) error {
		if !below(v[1]+v[2], v[0]) {
			return misfit("the inner disc touches the wall; make inner-radius + offset smaller than radius")
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		return append(disc.Loops(v[:1]), post(r2.Vec{X: v[2]}, v[1]))
	},
	Grips: func(v param.Values) []Handle {
		return []Handle{grip("radius", 0, v[0]), grip("inner-radius", v[2], v[1]), grip("offset", v[2], 0)}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = [3]float64{to.Y, to.Y, math.Max(0, to.X)}[i]
		return v
	},
}
