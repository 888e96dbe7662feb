package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var cutDisc = Kind{
	Name: "cut-disc", Title: "Cut disc",
	About: "Ergodic for every cut between the centre and the rim, with marginal families of diameters and polygons that miss the cut; " +
		"integrable at distance 0 (Bunimovich, Commun. Math. Phys. 65, 295 (1979)).",
	Formula: "the part y ≥ -distance of the disc x² + y² ≤ R²; s starts at the left end of the cut",
	Specs: []param.Spec{
		length("radius", 1, "radius R of the disc"),
		{Name: "distance", Unit: param.Length, Lo: 0, Hi: 1e6, Default: 0.5, Description: "distance of the cut from the centre; the larger part stays"},
	},
	Fits: func(v param.Values) error {
		if !below(v[1], v[0]) {
			return misfit("the cut misses the disc; make distance smaller than radius")
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		r, d := v[0], v[1]
		half := halfChord(r, d)
		from := -math.Atan2(d, half)
		return ring(
			curve.NewLine(r2.Vec{X: -half, Y: -d}, r2.Vec{X: half, Y: -d}),
			curve.NewArc(r2.Vec{}, r, from, math.Pi-2*from),
		)
	},
	Grips: func(v param.Values) []Handle {
		return []Handle{grip("radius", 0, v[0]), grip("distance", 0, -v[1])}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = [2]float64{to.Y, -to.Y}[i]
		return v
	},
}

// halfChord is half of the chord of a circle at a distance from its centre,
// without the difference of two nearly equal squares; 0 where it misses.
func halfChord(radius, distance float64) float64 {
	return math.Sqrt(math.Max(0, (radius-distance)*(radius+distance)))
}
