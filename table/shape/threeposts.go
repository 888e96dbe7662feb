package shape

import (
	"math"

	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var threePosts = Kind{
	Name: "three-posts", Title: "Three posts",
	About: "Open and fully chaotic: almost every ray escapes, those that stay form a fractal " +
		"(Gaspard and Rice, J. Chem. Phys. 90, 2225 (1989)).",
	Formula: "discs of the radius on the corners of an equilateral triangle of side separation about the origin; " +
		"s runs through the lower left, the lower right and the top post, each clockwise from its rightmost point",
	Specs: []param.Spec{
		length("radius", 1, "radius of the posts"),
		length("separation", 6, "distance of the posts' centres"),
	},
	Fits: func(v param.Values) error {
		if !below(2*v[0], v[1]) {
			return misfit("the posts touch; make separation greater than 2 radius")
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		c := threeCentres(v[1])
		return []Loop{post(c[0], v[0]), post(c[1], v[0]), post(c[2], v[0])}
	},
	Grips: func(v param.Values) []Handle {
		c := threeCentres(v[1])
		return []Handle{
			grip("radius", c[2].X, c[2].Y+v[0]),
			grip("separation", c[1].X, c[1].Y),
		}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		c := threeCentres(v[1])
		if i == 0 {
			v[0] = to.Y - c[2].Y
		} else {
			// The lower right centre runs along its ray from the origin.
			v[1] *= (float64(to.X*c[1].X) + float64(to.Y*c[1].Y)) / (float64(c[1].X*c[1].X) + float64(c[1].Y*c[1].Y))
		}
		return v
	},
}

func threeCentres(side float64) [3]r2.Vec {
	h := side / (2 * math.Sqrt(3)) // the centroid's height over the base
	return [3]r2.Vec{{X: -side / 2, Y: -h}, {X: side / 2, Y: -h}, {Y: 2 * h}}
}
