package shape

import (
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var rectangle = Kind{
	Name: "rectangle", Title: "Rectangle",
	About:   "Integrable: the size of both components of the velocity is conserved; no Lyapunov exponent, families of parallel bounces.",
	Formula: "|x| ≤ width/2, |y| ≤ height/2; s starts at the lower left corner, along the bottom",
	Specs: []param.Spec{
		length("width", 1.618, "width, along x"),
		length("height", 1, "height, along y"),
	},
	Loops: func(v param.Values) []Loop { return ring(box(v[0]/2, v[1]/2)...) },
	Grips: func(v param.Values) []Handle {
		return []Handle{grip("width", v[0]/2, 0), grip("height", 0, v[1]/2)}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = 2 * [2]float64{to.X, to.Y}[i]
		return v
	},
}
