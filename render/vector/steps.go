package vector

import (
	"math"

	"cavitywright/render"
)

// steps calls yield for each step of a path with its points. A step with a
// coordinate that is not finite is left out, and the next one then starts
// anew; a contour so broken is not closed.
func steps(p render.Path, yield func(render.Op, []render.Point)) {
	count := [...]int{render.Move: 1, render.Line: 1, render.Cubic: 3, render.Close: 0}
	i, whole, open := 0, true, false
	for _, op := range p.Ops {
		points := p.Points[i : i+count[op]]
		i += len(points)
		switch {
		case op == render.Close:
			if whole && open {
				yield(op, nil)
			}
			whole, open = true, false
		case !finite(points):
			whole, open = false, false
		case op == render.Move:
			yield(op, points)
			whole, open = true, true
		case !open:
			yield(render.Move, points[len(points)-1:])
			open = true
		default:
			yield(op, points)
		}
	}
}

func finite(points []render.Point) bool {
	for _, q := range points {
		if math.IsNaN(q.X) || math.IsInf(q.X, 0) || math.IsNaN(q.Y) || math.IsInf(q.Y, 0) {
			return false
		}
	}
	return true
}
