package shape

import (
	"math"

	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var quadrupole = Kind{
	Name: "quadrupole", Title: "Quadrupole",
	About: "Convex to eps = 1/5; regular islands and a chaotic sea together, the islands shrinking as eps grows " +
		"(Nöckel and Stone, Nature 385, 45 (1997)).",
	Formula: "r = R (1 + eps cos 2φ); s starts at φ = 0",
	Specs: []param.Spec{
		length("radius", 1, "mean radius R"),
		pure("eps", 0, 0.95, 0.1, "deformation eps; 0 is the disc"),
	},
	Loops: func(v param.Values) []Loop {
		return ring(wave(v[0], []float64{0, v[1]}, []float64{0, 0}))
	},
	Grips: func(v param.Values) []Handle {
		d := v[0] * math.Sqrt2 / 2
		return []Handle{grip("radius", d, d), grip("eps", 0, v[0]*(1-v[1]))}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		if i == 0 {
			v[0] = (to.X + to.Y) * math.Sqrt2 / 2
		} else {
			v[1] = 1 - to.Y/v[0]
		}
		return v
	},
}
