package shape

import (
	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var cappedRectangle = Kind{
	Name: "capped-rectangle", Title: "Rectangle with caps",
	About: "Between the rectangle and the stadium; islands stay about the long axis while the caps' radius is above half of the whole length " +
		"(the two-bounce criterion of Kogelnik and Li, Appl. Opt. 5, 1550 (1966)); bounces between the long sides are a marginal family; convex.",
	Formula: "rectangle width × height, its left and right sides replaced by arcs that stand out by sagitta; s starts at the left end of the bottom side",
	Specs: []param.Spec{
		length("width", 2, "length of the straight sides"),
		length("height", 1, "distance of the straight sides"),
		length("sagitta", 0.2, "height of the caps; height/2 makes a stadium"),
	},
	Fits: func(v param.Values) error {
		if v[2] > v[1]/2 {
			return misfit("the caps are more than half circles; make sagitta at most height/2")
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		x, y, bulge := v[0]/2, v[1]/2, 2*v[2]/v[1]
		return ring(
			curve.NewLine(r2.Vec{X: -x, Y: -y}, r2.Vec{X: x, Y: -y}),
			curve.ArcThrough(r2.Vec{X: x, Y: -y}, r2.Vec{X: x, Y: y}, bulge),
			curve.NewLine(r2.Vec{X: x, Y: y}, r2.Vec{X: -x, Y: y}),
			curve.ArcThrough(r2.Vec{X: -x, Y: y}, r2.Vec{X: -x, Y: -y}, bulge),
		)
	},
	Grips: func(v param.Values) []Handle {
		x, y := v[0]/2, v[1]/2
		return []Handle{grip("width", x, -y), grip("height", 0, y), grip("sagitta", x+v[2], 0)}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = [3]float64{2 * to.X, 2 * to.Y, to.X - v[0]/2}[i]
		return v
	},
}
