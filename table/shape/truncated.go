package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var truncatedEllipse = Kind{
	Name: "truncated-ellipse", Title: "Truncated ellipse",
	About: "Two parallel cuts across an ellipse: ergodic for a range of axes and cuts (Del Magno, Nonlinearity 14, 1761 (2001)), " +
		"else with islands; bounces between the cuts are a marginal family; convex.",
	Formula: "x²/a² + y²/b² ≤ 1, |x| ≤ cut; s starts at the lower end of the right cut",
	Specs: []param.Spec{
		length("a", 1.3, "semi-axis of the ellipse along x"),
		length("b", 1, "semi-axis along y"),
		length("cut", 0.8, "distance of the cuts from the middle"),
	},
	Fits: func(v param.Values) error {
		switch {
		case !below(v[2], v[0]):
			return misfit("the cuts miss the ellipse; make cut smaller than a")
		case v[2] < v[0]/farthestTip:
			return misfit("the cuts leave next to nothing of the ellipse; make cut at least a/%v", farthestTip)
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		a, b, c := v[0], v[1], v[2]
		from := math.Atan2(halfChord(a, c), c)
		y := b * math.Sin(from)
		return ring(
			curve.NewLine(r2.Vec{X: c, Y: -y}, r2.Vec{X: c, Y: y}),
			curve.NewOval(curve.Arc{Major: a, Minor: b, From: from, Sweep: math.Pi - 2*from}),
			curve.NewLine(r2.Vec{X: -c, Y: y}, r2.Vec{X: -c, Y: -y}),
			curve.NewOval(curve.Arc{Major: a, Minor: b, From: math.Pi + from, Sweep: math.Pi - 2*from}),
		)
	},
	Grips: func(v param.Values) []Handle {
		return []Handle{grip("a", -v[0], 0), grip("b", 0, v[1]), grip("cut", v[2], 0)}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = [3]float64{-to.X, to.Y, to.X}[i]
		return v
	},
}

// farthestTip bounds a, relative to the distance of the cuts: the wall is
// computed from the ellipse's middle, to the rounding of a, and must close to
// 1e-12 of what the cuts leave.
const farthestTip = 1000
