package shape

import (
	"math"

	"cavitywright/table/param"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

var polygon = Kind{
	Name: "polygon", Title: "Regular polygon",
	About: "No Lyapunov exponent; integrable with 3 or 4 sides, pseudo-integrable with more " +
		"(Richens and Berry, Physica D 2, 495 (1981)).",
	Formula: "corners on the circle of the radius about the origin, one side at the bottom; s starts at the left end of that side",
	Specs: []param.Spec{
		count("sides", 3, 1000, 6, "number of sides"),
		length("radius", 1, "radius of the circle through the corners"),
	},
	Loops: func(v param.Values) []Loop {
		corners := make([]r2.Vec, int(v[0]))
		for i := range corners {
			corners[i] = corner(v, i)
		}
		return ring(outline(corners...)...)
	},
	Grips: func(v param.Values) []Handle {
		p := corner(v, 1)
		return []Handle{grip("radius", p.X, p.Y)}
	},
	Pull: func(v param.Values, _ int, to r2.Vec) param.Values {
		v[1] = math.Hypot(to.X, to.Y)
		return v
	},
}

func corner(v param.Values, i int) r2.Vec {
	return r2.Scale(v[1], plane.Polar(-math.Pi/2+math.Pi*float64(2*i-1)/v[0]))
}
