package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var lemon = Kind{
	Name: "lemon", Title: "Lemon",
	About: "Convex, with two corners; regular islands and a chaotic sea together " +
		"(Heller and Tomsovic, Physics Today 46(7), 38 (1993)).",
	Formula: "the points within R of both (±separation/2, 0); s starts at the lower tip, along the right arc",
	Specs: []param.Spec{
		length("radius", 1, "radius R of both circles"),
		length("separation", 1, "distance of the circles' centres"),
	},
	Fits: func(v param.Values) error {
		if !below(v[1], 2*v[0]) {
			return misfit("the two discs have nothing in common; make separation smaller than 2 radius")
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		r, d := v[0], v[1]/2
		half := math.Atan2(halfChord(r, d), d)
		return ring(
			curve.NewArc(r2.Vec{X: -d}, r, -half, 2*half),
			curve.NewArc(r2.Vec{X: d}, r, math.Pi-half, 2*half),
		)
	},
	Grips: func(v param.Values) []Handle {
		d := v[1] / 2
		return []Handle{grip("radius", 0, halfChord(v[0], d)), grip("separation", v[0]-d, 0)}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		if i == 0 {
			v[0] = math.Hypot(math.Max(0, to.Y), v[1]/2)
		} else {
			v[1] = 2 * (v[0] - to.X)
		}
		return v
	},
}
