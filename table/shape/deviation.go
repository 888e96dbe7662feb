package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// tracedChords is the number of chords into which a piece, on which the tangent
// turns by less than half a turn, is cut to look where it is.
const tracedChords = 16

// place is a point of a span at its private parameter.
type place struct {
	span *curve.Span
	t    float64
	at   r2.Vec
}

// trace are places along the whole wall, in order, and the greatest distance of
// one to the next.
type trace struct {
	places []place
	step   float64
}

func (n nodes) traced() trace {
	var t trace
	if r, _, err := n.rounded(); err == nil {
		n = r
	}
	for _, c := range n.curves() {
		spans := c.Spans()
		for i := range spans {
			s := &spans[i]
			for k := range tracedChords {
				u := s.T0 + (s.T1-s.T0)*float64(k)/tracedChords
				at, _, _ := s.Jet(u)
				t.places = append(t.places, place{s, u, at})
			}
		}
	}
	for i, p := range t.places {
		t.step = math.Max(t.step, r2.Norm(r2.Sub(p.at, t.places[(i+1)%len(t.places)].at)))
	}
	return t
}

// Deviation is the greatest distance of the points from the wall, each taken to
// the foot of its perpendicular (so that it is never less than the true one);
// infinite where the wall cannot be built.
func (f Freeform) Deviation(points []r2.Vec) float64 {
	if f.nodes.fault() != nil {
		return math.Inf(1)
	}
	line := f.nodes.traced()
	worst := 0.0
	for _, p := range points {
		worst = math.Max(worst, line.distance(p))
	}
	return worst
}

// distance is that of p from the wall, by Newton's method from every place that
// is nearly the nearest: on either side of a corner, or of a narrow neck.
func (t trace) distance(p r2.Vec) float64 {
	least := math.Inf(1)
	for i := range t.places {
		least = math.Min(least, r2.Norm2(r2.Sub(p, t.places[i].at)))
	}
	least = math.Sqrt(least)
	best := least
	for i := range t.places {
		if r2.Norm(r2.Sub(p, t.places[i].at)) <= least+t.step {
			best = math.Min(best, foot(t.places[i], p))
		}
	}
	return best
}

// footSteps bounds the steps of Newton's method; they are many only where the
// speed vanishes, at the end of a null handle.
const footSteps = 60

func foot(start place, p r2.Vec) float64 {
	s, t := start.span, start.t
	lo, hi := math.Min(s.T0, s.T1), math.Max(s.T0, s.T1)
	best := r2.Norm(r2.Sub(p, start.at))
	for range footSteps {
		at, d1, d2 := s.Jet(t)
		miss := r2.Sub(p, at)
		bend := plane.Dot(d1, d1) - plane.Dot(miss, d2)
		if bend <= 0 {
			break
		}
		t = math.Min(math.Max(t+plane.Dot(miss, d1)/bend, lo), hi)
		at, _, _ = s.Jet(t)
		d := r2.Norm(r2.Sub(p, at))
		if d >= best {
			break
		}
		best = d
	}
	return best
}

// selfCrosses reports whether two chords of the traced wall cross: enough to
// turn down a fit, while a table decides on the curves themselves.
func (n nodes) selfCrosses() bool {
	line := n.traced().places
	m := len(line)
	for i := range line {
		a, b := line[i].at, line[(i+1)%m].at
		for j := i + 2; j < m && (i > 0 || j < m-1); j++ {
			if crosses(a, b, line[j].at, line[(j+1)%m].at) {
				return true
			}
		}
	}
	return false
}
