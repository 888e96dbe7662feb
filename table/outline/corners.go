package outline

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// cornerReach is the length, in tolerances, over which the directions before
// and after a point are taken: points that lie within the tolerance of a
// smooth wall then bend by less than defaultCornerDeg.
const cornerReach = 6

// corners are the indices of the points of a closed polygon at which it bends
// by more than the fit's angle, the sharpest of those that lie together.
func corners(points []r2.Vec, f Fit) []int {
	n := len(points)
	reach := cornerReach * f.Tolerance
	bend := make([]float64, n)
	for i, p := range points {
		a := reached(points, i, -1, reach)
		b := reached(points, i, 1, reach)
		bend[i] = math.Abs(plane.Angle(r2.Sub(p, a), r2.Sub(b, p)))
	}
	least := f.CornerDeg * math.Pi / 180
	var at []int
	for i := range points {
		if bend[i] > least && sharpest(points, bend, i, reach) {
			at = append(at, i)
		}
	}
	return at
}

// reached is the first point at least reach away along the polygon.
func reached(points []r2.Vec, i, step int, reach float64) r2.Vec {
	n, gone := len(points), 0.0
	k := i
	for range n / 4 {
		next := (k + step + n) % n
		gone += r2.Norm(r2.Sub(points[next], points[k]))
		if k = next; gone >= reach {
			return points[k]
		}
	}
	if k == i {
		k = (k + step + n) % n
	}
	return points[k]
}

// sharpest reports whether no point within reach bends more than point i.
func sharpest(points []r2.Vec, bend []float64, i int, reach float64) bool {
	n := len(points)
	for _, step := range [2]int{-1, 1} {
		gone := 0.0
		for k := i; ; {
			next := (k + step + n) % n
			gone += r2.Norm(r2.Sub(points[next], points[k]))
			if k = next; gone > reach || k == i {
				break
			}
			if bend[k] > bend[i] || bend[k] == bend[i] && k < i {
				return false
			}
		}
	}
	return true
}
