package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

var belt = Kind{
	Name: "belt", Title: "Belt of two radii",
	About: "Ergodic: both circles lie within the wall and the straight sides are not parallel where the radii differ " +
		"(Bunimovich, Commun. Math. Phys. 65, 295 (1979)); diameters of the greater arc are a marginal family; convex.",
	Formula: "the hull of a disc of left-radius about (-separation/2, 0) and one of right-radius about (separation/2, 0); s starts at the left end of the bottom side",
	Specs: []param.Spec{
		length("left-radius", 1, "radius of the left arc"),
		length("right-radius", 0.5, "radius of the right arc"),
		length("separation", 2, "distance of the arcs' centres"),
	},
	Fits: func(v param.Values) error {
		if !below(math.Abs(v[0]-v[1]), v[2]) {
			return misfit("one disc holds the other; make separation greater than the difference of the radii")
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		p, q := r2.Vec{X: -v[2] / 2}, r2.Vec{X: v[2] / 2}
		up := beltAngle(v)
		touch := func(c r2.Vec, radius, angle float64) r2.Vec { return r2.Add(c, r2.Scale(radius, plane.Polar(angle))) }
		return ring(
			curve.NewLine(touch(p, v[0], -up), touch(q, v[1], -up)),
			curve.NewArc(q, v[1], -up, 2*up),
			curve.NewLine(touch(q, v[1], up), touch(p, v[0], up)),
			curve.NewArc(p, v[0], up, fullTurn-2*up),
		)
	},
	Grips: func(v param.Values) []Handle {
		d := v[2] / 2
		return []Handle{grip("left-radius", -d-v[0], 0), grip("right-radius", d+v[1], 0), grip("separation", d, 0)}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		d := v[2] / 2
		v[i] = [3]float64{-to.X - d, to.X - d, 2 * to.X}[i]
		return v
	},
}

// beltAngle is the direction (radians from +x) of the normal of the upper
// straight side.
func beltAngle(v param.Values) float64 {
	return math.Atan2(halfChord(v[2], v[0]-v[1]), v[0]-v[1])
}
