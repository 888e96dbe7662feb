package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var notchedEllipse = Kind{
	Name: "notched-ellipse", Title: "Ellipse with a notch",
	About: "A notch at the end of an axis breaks the ellipse's integrability and sends what circles along the wall across " +
		"(Wang et al., Proc. Natl. Acad. Sci. 107, 22407 (2010)); not convex.",
	Formula: "x²/a² + y²/b² = 1 without the wedge from (a - notch-depth, 0) to the wall's points at y = ±notch-width/2; " +
		"s starts at the notch's upper edge, along the ellipse",
	Specs: []param.Spec{
		length("a", 1.2, "semi-axis along x"),
		length("b", 1, "semi-axis along y"),
		length("notch-width", 0.1, "width of the notch at the wall"),
		length("notch-depth", 0.1, "depth of the notch below the end of the axis"),
	},
	Fits: func(v param.Values) error {
		switch half, edge := notchEdge(v); {
		case !below(v[2], 2*v[1]):
			return misfit("the notch is as wide as the ellipse; make notch-width smaller than 2 b")
		case !below(v[0]*2*math.Pow(math.Sin(half/2), 2), v[3]) || !below(v[0]-v[3], edge.X):
			return misfit("the notch does not reach below the wall; make notch-depth greater, or notch-width smaller")
		case !below(v[3], 2*v[0]):
			return misfit("the notch cuts the ellipse in two; make notch-depth smaller than 2 a")
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		half, edge := notchEdge(v)
		tip := r2.Vec{X: v[0] - v[3]}
		return ring(
			curve.NewOval(curve.Arc{Major: v[0], Minor: v[1], From: half, Sweep: fullTurn - 2*half}),
			curve.NewLine(r2.Vec{X: edge.X, Y: -edge.Y}, tip),
			curve.NewLine(tip, edge),
		)
	},
	Grips: func(v param.Values) []Handle {
		_, edge := notchEdge(v)
		return []Handle{grip("a", -v[0], 0), grip("b", 0, v[1]), grip("notch-width", edge.X, edge.Y), grip("notch-depth", v[0]-v[3], 0)}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = [4]float64{-to.X, to.Y, 2 * to.Y, v[0] - to.X}[i]
		return v
	},
}

// notchEdge is the upper edge of the notch, and its eccentric angle.
func notchEdge(v param.Values) (half float64, at r2.Vec) {
	sin := math.Min(1, v[2]/(2*v[1]))
	half = math.Asin(sin)
	return half, r2.Vec{X: v[0] * math.Cos(half), Y: v[1] * sin}
}
