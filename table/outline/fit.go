package outline

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// Fit is how a smooth wall is laid through measured points: no point farther
// from it than Tolerance (> 0, in the unit of the points); a bend by more than
// CornerDeg within a few points stays a corner (0: 30 degrees).
type Fit struct {
	Tolerance float64
	CornerDeg float64
}

// Residual is how a fitted wall lies to its points.
type Residual struct {
	Points, Nodes int
	Corners       int
	RMS, Greatest float64 // distances across the wall, in the points' unit
	At            r2.Vec  // the point farthest from it
}

// With is the residual of two walls together.
func (r Residual) With(o Residual) Residual {
	sum := r.RMS*r.RMS*float64(r.Points) + o.RMS*o.RMS*float64(o.Points)
	r.Points, r.Nodes, r.Corners = r.Points+o.Points, r.Nodes+o.Nodes, r.Corners+o.Corners
	r.RMS = math.Sqrt(sum / float64(max(1, r.Points)))
	if o.Greatest > r.Greatest {
		r.Greatest, r.At = o.Greatest, o.At
	}
	return r
}

const (
	defaultCornerDeg = 30
	// mostFitNodes bounds the nodes of a fitted loop.
	mostFitNodes = 400
	// MostPoints bounds the points of one loop that are fitted.
	MostPoints = 500_000
	// leastFitPoints is the number of points below which a loop says too
	// little about a smooth wall.
	leastFitPoints = 8
)

// Fitted is a wall of few nodes along the closed polygon of points, which must
// not cross itself: between its corners tangent and curvature are continuous
// (least squares on a cubic spline, the parameter of each point moved to the
// foot of its perpendicular). It has about the fewest nodes with which no point
// lies farther than the tolerance. The error is a *Refusal.
func Fitted(points []r2.Vec, f Fit, unit table.Unit) (shape.Freeform, Residual, error) {
	points = distinct(points)
	size := plane.Diagonal(plane.Around(points...))
	switch {
	case len(points) < leastFitPoints:
		return shape.Freeform{}, Residual{}, refuse("The outline has only %d points; a smooth wall needs %d, so take the polygon as it is.", len(points), leastFitPoints)
	case len(points) > MostPoints:
		return shape.Freeform{}, Residual{}, refuse("The outline has %d points; at most %d can be fitted, so thin it out first.", len(points), MostPoints)
	case !(f.Tolerance > 0) || f.Tolerance > 0.1*size:
		return shape.Freeform{}, Residual{}, refuse("The tolerance of the fit is %v %s; it must be above 0 and below a tenth of the outline's size, %.3g %s.", f.Tolerance, unit, 0.1*size, unit)
	}
	if f.CornerDeg == 0 {
		f.CornerDeg = defaultCornerDeg
	}
	at := corners(points, f)
	w := laying{points: points, f: f, unit: unit, r: Residual{Points: len(points), Corners: len(at)}}
	if err := w.lay(at); err != nil {
		return shape.Freeform{}, w.r, err
	}
	w.r.Nodes = len(w.list)
	w.r.RMS = math.Sqrt(w.sum / float64(len(points)))
	return shape.NewFreeform(w.list), w.r, nil
}

// laying is a fit at work.
type laying struct {
	points []r2.Vec
	f      Fit
	unit   table.Unit
	list   []shape.Node
	r      Residual
	sum    float64 // of the squares of the distances
}

// lay puts the nodes down, corner by corner; without a corner, all round.
func (w *laying) lay(at []int) error {
	if len(at) == 0 {
		_, err := w.row(w.points, true)
		return err
	}
	var in r2.Vec
	first := make([]int, len(at))
	for i, from := range at {
		to := at[(i+1)%len(at)]
		row := []r2.Vec{w.points[from]}
		for k := (from + 1) % len(w.points); ; k = (k + 1) % len(w.points) {
			row = append(row, w.points[k])
			if k == to {
				break
			}
		}
		first[i] = len(w.list)
		arrives, err := w.row(row, false)
		if err != nil {
			return err
		}
		if i > 0 {
			w.list[first[i]].In = in
		}
		in = arrives
	}
	w.list[0].In = in
	return nil
}

// row lays the nodes along a stretch between corners, all but the one at its
// end, whose handle it returns.
func (w *laying) row(row []r2.Vec, closed bool) (in r2.Vec, err error) {
	l := along(row, w.f.Tolerance, closed)
	for i, v := range l.miss {
		w.sum += v * v
		if v > w.r.Greatest {
			w.r.Greatest, w.r.At = v, row[i]
		}
	}
	w.list = append(w.list, l.nodes...)
	if !l.within {
		u := w.unit
		return in, refuseAt(w.r.At, "No smooth wall of up to %d nodes follows the outline within %.3g %s: %.3g %s is left at (%.6g, %.6g) %s; give a larger tolerance, or take the polygon as it is.",
			mostFitNodes, w.f.Tolerance, u, w.r.Greatest, u, w.r.At.X, w.r.At.Y, u)
	}
	return l.in, nil
}

// distinct are the points without those that lie on the one before.
func distinct(points []r2.Vec) []r2.Vec {
	var out []r2.Vec
	least := coincident * plane.Diagonal(plane.Around(points...))
	for _, p := range points {
		if len(out) == 0 || r2.Norm(r2.Sub(p, out[len(out)-1])) > least {
			out = append(out, p)
		}
	}
	for len(out) > 1 && r2.Norm(r2.Sub(out[0], out[len(out)-1])) <= least {
		out = out[:len(out)-1]
	}
	return out
}

// coincident is the distance, in sizes of the outline, below which neighbours
// count as one point: a free wall takes none nearer.
const coincident = 2e-9
