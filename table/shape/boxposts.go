package shape

import (
	"math"

	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var boxOfPosts = Kind{
	Name: "box-of-posts", Title: "Box of posts",
	About: "A Lorentz gas in a box: every post disperses, so the motion is fully chaotic; corridors between the rows let rays fly far " +
		"(Bunimovich and Sinai, Commun. Math. Phys. 78, 479 (1981)).",
	Formula: "square of the side about the origin, cut into a grid of n = ⌈√count⌉ cells a side, a post in the middle of each, " +
		"row by row from the lower left; s starts at the lower left corner, then runs around each post clockwise from its rightmost point",
	Specs: []param.Spec{
		length("side", 10, "side of the square"),
		count("count", 1, 20000, 16, "number of posts"),
		length("radius", 0.5, "radius of the posts"),
	},
	Fits: func(v param.Values) error {
		n := cellsASide(v[1])
		if !below(2*n*v[2], v[0]) {
			return misfit("a post does not fit in its cell; make radius smaller than side/%.0f, or take fewer posts", 2*n)
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		loops := ring(box(v[0]/2, v[0]/2)...)
		for i := range int(v[1]) {
			loops = append(loops, post(cell(v, i), v[2]))
		}
		return loops
	},
	Grips: func(v param.Values) []Handle {
		c := cell(v, 0)
		return []Handle{grip("side", v[0]/2, 0), grip("radius", c.X, c.Y+v[2])}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		if i == 0 {
			v[0] = 2 * to.X
		} else {
			v[2] = to.Y - cell(v, 0).Y
		}
		return v
	},
}

func cellsASide(count float64) float64 { return math.Ceil(math.Sqrt(count)) }

// cell is the middle of cell i, counted along the rows from the lower left.
func cell(v param.Values, i int) r2.Vec {
	n := cellsASide(v[1])
	row, col := math.Floor(float64(i)/n), math.Mod(float64(i), n)
	return r2.Vec{X: v[0] * ((col+0.5)/n - 0.5), Y: v[0] * ((row+0.5)/n - 0.5)}
}
