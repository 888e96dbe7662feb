package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var mushroom = Kind{
	Name: "mushroom", Title: "Mushroom",
	About: "One regular island and one chaotic sea with a sharp border: orbits of the cap that never reach the stem's mouth are regular " +
		"(Bunimovich, Chaos 11, 802 (2001)).",
	Formula: "half disc of the radius above y = 0, rectangle of width 2 × stem-half-width and height stem-length below; s starts at the stem's lower left corner",
	Specs: []param.Spec{
		length("radius", 1, "radius of the cap"),
		length("stem-half-width", 0.5, "half of the stem's width"),
		length("stem-length", 1, "length of the stem"),
	},
	Fits: func(v param.Values) error {
		if !below(v[1], v[0]) {
			return misfit("the stem is as wide as the cap; make stem-half-width smaller than radius")
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		r, w, l := v[0], v[1], v[2]
		return ring(
			curve.NewLine(r2.Vec{X: -w, Y: -l}, r2.Vec{X: w, Y: -l}),
			curve.NewLine(r2.Vec{X: w, Y: -l}, r2.Vec{X: w}),
			curve.NewLine(r2.Vec{X: w}, r2.Vec{X: r}),
			curve.NewArc(r2.Vec{}, r, 0, math.Pi),
			curve.NewLine(r2.Vec{X: -r}, r2.Vec{X: -w}),
			curve.NewLine(r2.Vec{X: -w}, r2.Vec{X: -w, Y: -l}),
		)
	},
	Grips: func(v param.Values) []Handle {
		return []Handle{
			grip("radius", 0, v[0]),
			grip("stem-half-width", v[1], -v[2]/2),
			grip("stem-length", 0, -v[2]),
		}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = [3]float64{to.Y, to.X, -to.Y}[i]
		return v
	},
}
