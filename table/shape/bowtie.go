package shape

import (
	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var bowTie = Kind{
	Name: "bow-tie", Title: "Bow-tie",
	About: "Chaotic up to the marginal family of bounces between its two flat ends: the arcs at the waist disperse " +
		"(So, Anlage, Ott and Oerter, Phys. Rev. Lett. 74, 2662 (1995), for a cavity of this kind); not convex.",
	Formula: "rectangle width × height, its long sides replaced by arcs that stand in to a waist; s starts at the lower left corner",
	Specs: []param.Spec{
		length("width", 2, "distance of the flat ends"),
		length("height", 1.2, "height of the flat ends"),
		length("waist", 0.5, "height in the middle"),
	},
	Fits: func(v param.Values) error {
		switch {
		case !below(v[2], v[1]):
			return misfit("the sides do not stand in; make waist smaller than height")
		case v[1]-v[2] > bowTieDepth*v[0]:
			return misfit("the arcs close the corners to slivers; make waist greater than height - %v width, or width greater", bowTieDepth)
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		x, y, bulge := v[0]/2, v[1]/2, (v[2]-v[1])/v[0]
		return ring(
			curve.ArcThrough(r2.Vec{X: -x, Y: -y}, r2.Vec{X: x, Y: -y}, bulge),
			curve.NewLine(r2.Vec{X: x, Y: -y}, r2.Vec{X: x, Y: y}),
			curve.ArcThrough(r2.Vec{X: x, Y: y}, r2.Vec{X: -x, Y: y}, bulge),
			curve.NewLine(r2.Vec{X: -x, Y: y}, r2.Vec{X: -x, Y: -y}),
		)
	},
	Grips: func(v param.Values) []Handle {
		return []Handle{grip("width", v[0]/2, 0), grip("height", v[0]/2, v[1]/2), grip("waist", 0, v[2]/2)}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i] = [3]float64{2 * to.X, 2 * to.Y, 2 * to.Y}[i]
		return v
	},
}

// bowTieDepth is the most by which both arcs together may stand in, relative to
// the width: at 1 they are half circles and the corners have no angle, at 0.98
// they have 1.2 degrees.
const bowTieDepth = 0.98
