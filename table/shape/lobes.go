package shape

import (
	"math"

	"cavitywright/table/param"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

var oval = Kind{
	Name: "oval", Title: "Oval of m lobes",
	About: "Convex to eps = 1/(1 + m²); while it is strictly convex, caustics line the wall (Lazutkin, Math. USSR Izv. 7, 185 (1973)), " +
		"with chains of islands and a chaotic sea inside of them. One lobe is the limaçon, two are the quadrupole.",
	Formula: "r = R (1 + eps cos mφ); s starts at φ = 0",
	Specs: []param.Spec{
		count("lobes", 1, 24, 3, "number of lobes m"),
		length("radius", 1, "mean radius R"),
		pure("eps", 0, 0.95, 0.08, "deformation eps; 0 is the disc"),
	},
	Loops: func(v param.Values) []Loop {
		m := int(v[0])
		cos := make([]float64, m)
		cos[m-1] = v[2]
		return ring(wave(v[1], cos, make([]float64, m)))
	},
	Grips: func(v param.Values) []Handle {
		even, dip := lobeRays(v[0])
		at, in := r2.Scale(v[1], even), r2.Scale(v[1]*(1-v[2]), dip)
		return []Handle{grip("radius", at.X, at.Y), grip("eps", in.X, in.Y)}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		even, dip := lobeRays(v[0])
		if i == 0 {
			v[1] = plane.Dot(to, even)
		} else {
			v[2] = 1 - plane.Dot(to, dip)/v[1]
		}
		return v
	},
}

// lobeRays are the directions in which the oval's radius is R, and least.
func lobeRays(lobes float64) (even, dip r2.Vec) {
	return plane.Polar(math.Pi / (2 * lobes)), plane.Polar(math.Pi / lobes)
}
