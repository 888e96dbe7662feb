package outline

import (
	"math"

	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// laid is a row of points with nodes along it: all but the last of an open
// row, of which only the handle is kept.
type laid struct {
	nodes  []shape.Node
	in     r2.Vec
	miss   []float64 // the distance of each point
	within bool      // all are within the tolerance
}

// along lays the simplest wall along a row: a line, an arc, or a spline of
// more and more intervals.
func along(row []r2.Vec, tol float64, closed bool) laid {
	if !closed {
		for _, try := range []func([]r2.Vec) laid{lineAlong, arcAlong} {
			if l := try(row); l.worst() <= tol {
				l.within = true
				return l
			}
		}
	}
	return splineAlong(row, tol, closed)
}

func (l *laid) worst() float64 {
	worst := 0.0
	for _, v := range l.miss {
		worst = math.Max(worst, v)
	}
	return worst
}

func lineAlong(row []r2.Vec) laid {
	l := laid{nodes: []shape.Node{{At: row[0]}}, miss: make([]float64, len(row))}
	for i, p := range row {
		l.miss[i] = distance(p, row[0], row[len(row)-1])
	}
	return l
}

// arcAlong is the arc from end to end whose middle is, for a point half way,
// where the points are: the mean of the bulges through each point, weighted by
// its distance from the ends.
func arcAlong(row []r2.Vec) laid {
	a, b := row[0], row[len(row)-1]
	l := laid{miss: make([]float64, len(row))}
	chord := r2.Norm(r2.Sub(b, a))
	sum, weights := 0.0, 0.0
	for _, p := range row[1 : len(row)-1] {
		// The angle at p over the chord is half a turn less half the sweep.
		quarter := 0.5 * plane.Angle(r2.Sub(p, a), r2.Sub(b, p))
		w := math.Min(r2.Norm(r2.Sub(p, a)), r2.Norm(r2.Sub(b, p)))
		sum += w * w * quarter
		weights += w * w
	}
	bulge := math.Tan(sum / weights)
	sweep := 4 * math.Atan(bulge)
	if chord == 0 || weights == 0 || math.Abs(bulge) < 1e-6 || math.Abs(bulge) > 20 || math.IsNaN(bulge) {
		l.miss[0] = math.Inf(1)
		return l
	}
	radius := chord / (2 * math.Abs(math.Sin(sweep/2)))
	off := chord / 2 * math.Cos(sweep/2) / math.Sin(sweep/2)
	centre := r2.Add(plane.Lerp(a, b, 0.5), r2.Scale(off/chord, plane.Left(r2.Sub(b, a))))
	middle := r2.Sub(plane.Lerp(a, b, 0.5), r2.Scale(chord/2*bulge, plane.Left(plane.Unit(r2.Sub(b, a)))))
	toMiddle := r2.Sub(middle, centre)
	for i, p := range row {
		d := r2.Sub(p, centre)
		l.miss[i] = math.Abs(r2.Norm(d) - radius)
		if math.Abs(plane.Angle(toMiddle, d)) > math.Abs(sweep)/2 { // beyond the ends
			l.miss[i] = math.Min(r2.Norm(r2.Sub(p, a)), r2.Norm(r2.Sub(p, b)))
		}
	}
	l.nodes = []shape.Node{{At: a, Span: shape.Bowed, Bulge: bulge}}
	return l
}

const (
	// searched is the number of points of a row, evenly taken, on which a
	// spline is sought; all are held to the tolerance at the end.
	searched = 8000
	// rounds is the number of fits for one number of intervals, between which
	// every point moves to its foot.
	rounds = 5
)

// splineAlong fits splines of more and more intervals until all points are
// within the tolerance, then of fewer as long as they are.
func splineAlong(row []r2.Vec, tol float64, closed bool) laid {
	few, u := thinned(row, closed)
	fewest := 1
	most := min(mostFitNodes, len(row)-2)
	if closed {
		fewest, most = 4, min(mostFitNodes, len(row)/2)
	}
	most = max(most, fewest)
	try := func(k int, knot []float64) (*spline, float64) {
		return fitted(few, u, knot, closed)
	}
	var best *spline
	var knot []float64
	failed := fewest - 1
	for k := fewest; ; k = min(most, k+1+k/4) {
		knot = spaced(best, k)
		s, worst := try(k, knot)
		if s != nil {
			best = s
		}
		if s != nil && worst <= tol || k == most {
			for lo, hi := failed+1, k; s != nil && worst <= tol && lo < hi; { // fewer will do
				mid := (lo + hi) / 2
				if t, w := try(mid, spaced(best, mid)); t != nil && w <= tol {
					best, hi = t, mid
				} else {
					lo = mid + 1
				}
			}
			if s != nil && worst <= tol {
				best = refined(best, few, u, tol, closed)
			}
			l := best.laid(row, closed)
			if l.within = l.worst() <= tol; l.within || k == most {
				return l
			}
		}
		failed = k
	}
}

const (
	// wellWithin is the part of the tolerance below which a fit is not made
	// better; pays the part to which half as many nodes more must bring the
	// residual, or it is the points' own scatter.
	wellWithin, pays = 0.25, 0.8
	// pointsEach is the number of points that a node more must have.
	pointsEach = 8
)

// refined is the spline with more intervals as long as they bring it nearer to
// the points: the fewest within the tolerance still cut bends short.
func refined(s *spline, few []r2.Vec, u []float64, tol float64, closed bool) *spline {
	rms, worst := s.residual(few, u)
	for {
		k := len(s.knot) - 1
		k += max(2, k/2)
		if worst <= wellWithin*tol || k > mostFitNodes || k*pointsEach > len(few) {
			return s
		}
		next, _ := fitted(few, u, spaced(s, k), closed)
		if next == nil {
			return s
		}
		r, w := next.residual(few, u)
		if r > pays*rms || w > tol {
			return s
		}
		s, rms, worst = next, r, w
	}
}

// residual is the root of the mean square distance of the points, and the
// greatest.
func (s *spline) residual(points []r2.Vec, u []float64) (rms, worst float64) {
	sum := 0.0
	for i, p := range points {
		_, d := s.foot(u[i], p, 4)
		sum += d * d
		worst = math.Max(worst, d)
	}
	return math.Sqrt(sum / float64(len(points))), worst
}

// thinned are at most searched of the points, with their parameters: shares of
// the length.
func thinned(row []r2.Vec, closed bool) (few []r2.Vec, u []float64) {
	all := shares(row, closed)
	step := max(1, (len(row)+searched-1)/searched)
	for i := 0; i < len(row); i += step {
		few, u = append(few, row[i]), append(u, all[i])
	}
	if !closed && u[len(u)-1] < 1 {
		few, u = append(few, row[len(row)-1]), append(u, 1)
	}
	return few, u
}

// shares are the lengths up to each point, of the whole.
func shares(row []r2.Vec, closed bool) []float64 {
	s := make([]float64, len(row))
	for i := 1; i < len(row); i++ {
		s[i] = s[i-1] + r2.Norm(r2.Sub(row[i], row[i-1]))
	}
	total := s[len(s)-1]
	if closed {
		total += r2.Norm(r2.Sub(row[0], row[len(row)-1]))
	}
	for i := range s {
		s[i] /= total
	}
	return s
}
