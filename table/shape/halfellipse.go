package shape

import (
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var halfEllipse = Kind{
	Name: "half-ellipse", Title: "Half ellipse",
	About:   "Integrable: the ellipse folded on an axis, the product of the angular momenta about the foci is conserved (Berry, Eur. J. Phys. 2, 91 (1981)); convex.",
	Formula: "x²/a² + y²/b² ≤ 1, y ≥ 0; s starts at the left end of the straight side",
	Specs: []param.Spec{
		length("a", 2, "semi-axis along the straight side"),
		length("b", 1, "semi-axis across it"),
	},
	Loops: func(v param.Values) []Loop { return halfOval(v[0], v[1]) },
	Grips: func(v param.Values) []Handle { return []Handle{grip("a", v[0], 0), grip("b", 0, v[1])} },
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = [2]float64{to.X, to.Y}[i]
		return v
	},
}
