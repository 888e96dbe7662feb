package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

var tiltedMushroom = Kind{
	Name: "tilted-mushroom", Title: "Mushroom with a tilted cap",
	About: "The cap's rim is tilted against the stem: the island of the mushroom stays, chains of smaller ones appear around it " +
		"(da Costa et al., Commun. Nonlinear Sci. Numer. Simul. 91, 105440 (2020)).",
	Formula: "half disc of the radius above the line at the angle tilt through the origin, a stem of width 2 × stem-half-width below it down to y = -stem-length; " +
		"s starts at the stem's lower left corner",
	Specs: []param.Spec{
		length("radius", 1, "radius of the cap"),
		length("stem-half-width", 0.4, "half of the stem's width"),
		length("stem-length", 1, "length of the stem below the cap's centre"),
		{Name: "tilt", Unit: param.Angle, Lo: -1.3, Hi: 1.3, Default: 0.25, Description: "angle of the cap's rim with the x axis"},
	},
	Fits: func(v param.Values) error {
		sin, cos := math.Sincos(v[3])
		switch {
		case !below(v[1], v[0]*cos):
			return misfit("the stem is as wide as the cap; make stem-half-width smaller than radius × cos tilt")
		case !below(v[1]*math.Abs(sin), v[2]*cos):
			return misfit("the rim reaches the stem's end; make stem-length greater than stem-half-width × tan tilt, or tilt smaller")
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		r, w, l := v[0], v[1], v[2]
		rim := r2.Scale(r, plane.Polar(v[3]))
		mouth := r2.Vec{X: w, Y: w * math.Tan(v[3])}
		return ring(
			curve.NewLine(r2.Vec{X: -w, Y: -l}, r2.Vec{X: w, Y: -l}),
			curve.NewLine(r2.Vec{X: w, Y: -l}, mouth),
			curve.NewLine(mouth, rim),
			curve.NewArc(r2.Vec{}, r, v[3], math.Pi),
			curve.NewLine(r2.Scale(-1, rim), r2.Scale(-1, mouth)),
			curve.NewLine(r2.Scale(-1, mouth), r2.Vec{X: -w, Y: -l}),
		)
	},
	Grips: func(v param.Values) []Handle {
		top, rim := plane.Left(plane.Polar(v[3])), plane.Polar(v[3])
		return []Handle{
			grip("radius", v[0]*top.X, v[0]*top.Y),
			grip("stem-half-width", v[1], -v[2]/2),
			grip("stem-length", 0, -v[2]),
			grip("tilt", v[0]*rim.X, v[0]*rim.Y),
		}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = [4]float64{plane.Dot(to, plane.Left(plane.Polar(v[3]))), to.X, -to.Y, math.Atan2(to.Y, to.X)}[i]
		return v
	},
}
