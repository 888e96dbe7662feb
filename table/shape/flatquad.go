package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var flatQuadrupole = Kind{
	Name: "flattened-quadrupole", Title: "Flattened quadrupole",
	About: "Convex to eps = 1/6, flatter at the waist than the quadrupole; keeps the area πR² of its disc; regular islands and a chaotic sea together " +
		"(Gmachl et al., Science 280, 1556 (1998)).",
	Formula: "r = R √(1 + 2 eps cos 2φ); s starts at φ = 0",
	Specs: []param.Spec{
		length("radius", 1, "radius R of the disc of the same area"),
		pure("eps", 0, 0.49, 0.1, "deformation eps; 0 is the disc"),
	},
	Loops: func(v param.Values) []Loop {
		square := v[0] * v[0]
		f := &curve.Form{Of: curve.Square, Mean: square, Cos: []float64{0, 2 * v[1] * square}, Sin: []float64{0, 0}}
		return ring(curve.NewPolar(curve.Polar{Form: f, Sweep: fullTurn}))
	},
	Grips: func(v param.Values) []Handle {
		d := v[0] * math.Sqrt2 / 2
		return []Handle{grip("radius", d, d), grip("eps", 0, v[0]*math.Sqrt(1-2*v[1]))}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		if i == 0 {
			v[0] = (to.X + to.Y) * math.Sqrt2 / 2
		} else {
			waist := math.Max(0, to.Y/v[0])
			v[1] = (1 - waist*waist) / 2
		}
		return v
	},
}
