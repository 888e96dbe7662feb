package shape

import (
	"math"

	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var posts = Kind{
	Name: "posts", Title: "Posts in rows",
	About: "Open and dispersing: almost every ray escapes; what stays is a fractal, or bounces along a row " +
		"(Gaspard and Rice, J. Chem. Phys. 90, 2225 (1989), for three).",
	Formula: "rows of discs of the radius in the open plane, about the origin, every second row moved to the right by shift × separation; " +
		"s runs through the posts row by row from the lower left, around each clockwise from its rightmost point",
	Specs: []param.Spec{
		count("columns", 1, 100, 4, "number of posts in a row"),
		count("rows", 1, 100, 3, "number of rows"),
		length("radius", 1, "radius of the posts"),
		length("separation", 3, "distance of neighbours in a row, centre to centre"),
		length("row-separation", 2.6, "distance of the rows"),
		pure("shift", 0, 1, 0.5, "by how much of the separation every second row is moved"),
	},
	Fits: func(v param.Values) error {
		wide := 2 * v[2]
		switch {
		case v[0] > 1 && !below(wide, v[3]):
			return misfit("the posts of a row touch; make separation greater than 2 radius")
		case v[1] > 1 && !below(wide, math.Hypot(v[4], nearestShift(v)*v[3])) || v[1] > 2 && !below(wide, 2*v[4]):
			return misfit("the rows touch; make row-separation greater, or radius smaller")
		}
		return nil
	},
	Loops: func(v param.Values) []Loop {
		var loops []Loop
		for row := range int(v[1]) {
			for col := range int(v[0]) {
				loops = append(loops, post(postAt(v, col, row), v[2]))
			}
		}
		return loops
	},
	Grips: postGrips,
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		switch postGrips(v)[i].Name {
		case "radius":
			v[2] = postAt(v, 0, 0).Y - to.Y
		case "separation":
			v[3] = 2 * to.X / (v[0] - 1)
		case "row-separation":
			v[4] = 2 * to.Y / (v[1] - 1)
		case "shift":
			v[5] = (to.X - postAt(v, 0, 0).X) / v[3]
		}
		return v
	},
}

// postAt is the centre of a post; the rows without a shift are centred.
func postAt(v param.Values, col, row int) r2.Vec {
	x := float64(col) - (v[0]-1)/2
	if row%2 == 1 {
		x += v[5]
	}
	return r2.Vec{X: v[3] * x, Y: v[4] * (float64(row) - (v[1]-1)/2)}
}

// nearestShift is by how much of the separation a post lies beside the nearest
// one of the next row.
func nearestShift(v param.Values) float64 {
	if v[0] > 1 {
		return math.Min(v[5], 1-v[5])
	}
	return v[5]
}

// postGrips leaves out the grips of what one row, or one column, does not show.
func postGrips(v param.Values) []Handle {
	first := postAt(v, 0, 0)
	h := []Handle{grip("radius", first.X, first.Y-v[2])}
	if v[0] > 1 {
		last := postAt(v, int(v[0])-1, 0)
		h = append(h, grip("separation", last.X, last.Y))
	}
	if v[1] > 1 {
		top, second := postAt(v, int(v[0])-1, int(v[1])-1), postAt(v, 0, 1)
		h = append(h, grip("row-separation", top.X, top.Y), grip("shift", second.X, second.Y))
	}
	return h
}
