package shape

import (
	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var ellipse = Kind{
	Name: "ellipse", Title: "Ellipse",
	About:   "Integrable: the product of the angular momenta about the two foci is conserved (Berry, Eur. J. Phys. 2, 91 (1981)).",
	Formula: "x = a cos t, y = b sin t; s starts at (a, 0)",
	Specs: []param.Spec{
		length("a", 1.5, "semi-axis a, along x"),
		length("b", 1, "semi-axis b, along y"),
	},
	Loops: func(v param.Values) []Loop {
		return ring(curve.NewOval(curve.Arc{Major: v[0], Minor: v[1], Sweep: fullTurn}))
	},
	Grips: func(v param.Values) []Handle {
		return []Handle{grip("a", v[0], 0), grip("b", 0, v[1])}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = [2]float64{to.X, to.Y}[i]
		return v
	},
}
