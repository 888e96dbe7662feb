package shape

import (
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var ell = Kind{
	Name: "l-shape", Title: "L",
	About: "Pseudo-integrable: one corner of 270 degrees parts neighbouring rays, but no Lyapunov exponent " +
		"(Richens and Berry, Physica D 2, 495 (1981)); bounces between parallel sides are marginal families; not convex.",
	Formula: "the rectangle width × height without the one above y = foot and right of x = stem; s starts at the lower left corner, the origin",
	Specs: []param.Spec{
		length("width", 2, "whole width"),
		length("height", 2, "whole height"),
		length("stem", 0.8, "width of the upright part"),
		length("foot", 0.7, "height of the lying part"),
	},
	Fits: func(v param.Values) error {
		switch {
		case !below(v[2], v[0]):
			return misfit("the upright part is as wide as the whole; make stem smaller than width")
		case !below(v[3], v[1]):
			return misfit("the lying part is as high as the whole; make foot smaller than height")
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		w, h, s, f := v[0], v[1], v[2], v[3]
		return ring(outline(r2.Vec{}, r2.Vec{X: w}, r2.Vec{X: w, Y: f}, r2.Vec{X: s, Y: f}, r2.Vec{X: s, Y: h}, r2.Vec{Y: h})...)
	},
	Grips: func(v param.Values) []Handle {
		w, h, s, f := v[0], v[1], v[2], v[3]
		return []Handle{grip("width", w, f/2), grip("height", s/2, h), grip("stem", s, (f+h)/2), grip("foot", (s+w)/2, f)}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = [4]float64{to.X, to.Y, to.X, to.Y}[i]
		return v
	},
}
