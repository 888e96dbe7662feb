package table

import (
	"math"

	"gonum.org/v1/gonum/spatial/r2"
)

// Nearest is the arclength of the point of the wall nearest to x, and its
// distance. Of each piece whose box is near enough the distance is sampled and
// the least sample refined, to 1e-9 of the piece's length; where two places of
// one piece are equally near within its sampling, either may be answered.
func (t *Table) Nearest(x r2.Vec) (s, dist float64) { return t.nearestOf(t.pieces, x) }

// NearestOn is Nearest among the places of one loop.
func (t *Table) NearestOn(loop int, x r2.Vec) (s, dist float64) {
	l := &t.loops[loop]
	return t.nearestOf(t.pieces[l.First:l.Last], x)
}

func (t *Table) nearestOf(pieces []Piece, x r2.Vec) (s, dist float64) {
	dist = math.Inf(1)
	for i := range pieces {
		p := &pieces[i]
		if boxDistance(p.Bounds(), x) >= dist {
			continue
		}
		if l, d := p.nearest(x); d < dist {
			s, dist = p.S0+l, d
		}
	}
	return t.Wrap(s), dist
}

// nearestSamples is the number of stretches in which a piece is searched; a
// piece turns by at most half a turn, full circles by one.
const nearestSamples = 24

func (p *Piece) nearest(x r2.Vec) (local, dist float64) {
	away := func(l float64) float64 {
		if p.Whole() { // its ends are one place
			if l < 0 {
				l += p.Length
			} else if l > p.Length {
				l -= p.Length
			}
		}
		d := r2.Sub(p.FrameAt(p.T(l)).Point, x)
		return math.Hypot(d.X, d.Y)
	}
	step := p.Length / nearestSamples
	best, at := math.Inf(1), 0.0
	for k := range nearestSamples + 1 {
		if d := away(float64(k) * step); d < best {
			best, at = d, float64(k)*step
		}
	}
	lo, hi := at-step, at+step
	if !p.Whole() {
		lo, hi = math.Max(0, lo), math.Min(p.Length, hi)
	}
	const shrink = 0.6180339887498949
	for hi-lo > 1e-9*p.Length {
		a, b := hi-shrink*(hi-lo), lo+shrink*(hi-lo)
		if away(a) < away(b) {
			hi = b
		} else {
			lo = a
		}
	}
	at = 0.5 * (lo + hi)
	return at, away(at)
}

// boxDistance is the distance from x to the box, 0 inside.
func boxDistance(b r2.Box, x r2.Vec) float64 {
	dx := math.Max(0, math.Max(b.Min.X-x.X, x.X-b.Max.X))
	dy := math.Max(0, math.Max(b.Min.Y-x.Y, x.Y-b.Max.Y))
	return math.Hypot(dx, dy)
}
