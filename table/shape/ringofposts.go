package shape

import (
	"math"

	"cavitywright/table/param"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

var ringOfPosts = Kind{
	Name: "ring-of-posts", Title: "Ring of posts",
	About: "Open and dispersing: almost every ray escapes, with three posts or more those that stay form a fractal " +
		"(Gaspard and Rice, J. Chem. Phys. 90, 2225 (1989), for three); two posts keep one orbit.",
	Formula: "discs of the radius, their centres evenly on a circle about the origin; " +
		"s runs through the posts counter-clockwise from the top one, around each clockwise from its rightmost point",
	Specs: []param.Spec{
		count("count", 2, 1000, 5, "number of posts"),
		length("radius", 1, "radius of the posts"),
		length("distance", 4, "distance of the posts' centres from the middle"),
	},
	Fits: func(v param.Values) error {
		if !below(v[1], v[2]*math.Sin(math.Pi/v[0])) {
			return misfit("the posts touch; make distance greater, or take fewer posts")
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		var loops []Loop
		for i := range int(v[0]) {
			loops = append(loops, post(r2.Scale(v[2], plane.Polar(math.Pi/2+fullTurn*float64(i)/v[0])), v[1]))
		}
		return loops
	},
	Grips: func(v param.Values) []Handle {
		return []Handle{grip("radius", 0, v[2]+v[1]), grip("distance", 0, v[2])}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		v[i+1] = [2]float64{to.Y - v[2], to.Y}[i]
		return v
	},
}
