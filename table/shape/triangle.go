package shape

import (
	"math"

	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var triangle = Kind{
	Name: "triangle", Title: "Triangle",
	About: "No Lyapunov exponent; an acute one has the triangle of its altitudes' feet as its shortest orbit " +
		"(Fagnano 1775; Coxeter, Introduction to Geometry, 1.6).",
	Formula: "side c from (-c/2, 0) to (c/2, 0) at the bottom, side a rises from its right end, side b returns; s starts at (-c/2, 0)",
	Specs: []param.Spec{
		length("a", 1.3, "right side a"),
		length("b", 1.4, "left side b"),
		length("c", 1.5, "bottom side c"),
	},
	Fits: func(v param.Values) error {
		for i, name := range [3]string{"a", "b", "c"} {
			if !below(v[i], v[(i+1)%3]+v[(i+2)%3]) {
				return misfit("side %s is as long as the two others together; shorten it, or lengthen the others", name)
			}
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		return ring(outline(r2.Vec{X: -v[2] / 2}, r2.Vec{X: v[2] / 2}, apex(v))...)
	},
	Grips: func(v param.Values) []Handle {
		top := apex(v)
		return []Handle{grip("a", top.X, top.Y), grip("c", v[2]/2, 0)}
	},
	// The upper corner goes where it is dragged, which changes a and b; the
	// bottom side changes alone.
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		if i == 0 {
			y := math.Max(0, to.Y)
			v[0], v[1] = math.Hypot(to.X-v[2]/2, y), math.Hypot(to.X+v[2]/2, y)
		} else {
			v[2] = 2 * to.X
		}
		return v
	},
}

// apex is the upper corner. Its height is that of Heron's area in the form that
// keeps its digits for needles (Kahan, Miscalculating Area and Angles of a
// Needle-like Triangle, 2014).
func apex(v param.Values) r2.Vec {
	x, y, z := v[0], v[1], v[2]
	if x < y {
		x, y = y, x
	}
	if y < z {
		y, z = z, y
	}
	if x < y {
		x, y = y, x
	}
	area := 0.25 * math.Sqrt(math.Max(0, (x+(y+z))*(z-(x-y))*(z+(x-y))*(x+(y-z))))
	return r2.Vec{X: (v[1] - v[0]) * (v[1] + v[0]) / (2 * v[2]), Y: 2 * area / v[2]}
}
