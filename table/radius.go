package table

import (
	"math"

	"cavitywright/table/curve"
)

// SmallestRadius is the smallest radius of curvature of the wall, corners left
// out; +Inf where the wall is straight, 0 at a cusp.
func (t *Table) SmallestRadius() float64 {
	least := math.Inf(1)
	for i := range t.pieces {
		p := &t.pieces[i]
		if p.Kind == curve.Segment {
			continue
		}
		if k := p.FrameAt(p.sharpest()).Curvature; k != 0 {
			least = math.Min(least, 1/math.Abs(k))
		}
	}
	return least
}

// Sharpest is the length from the start of a curved piece at which it curves
// most.
func (p *Piece) Sharpest() float64 { return p.S(p.sharpest()) }

const (
	// radiusSamples is the number of stretches of a piece, which turns by less
	// than a quarter turn, in which its sharpest place is sought.
	radiusSamples = 32
	// sharpestWithin is how near, as a share of the piece, the place is found:
	// the curvature there differs from the greatest by the square of it.
	sharpestWithin = 1e-9
)

// sharpest is the private parameter at which the piece curves most: the
// greatest of a set of samples, refined by golden sections. Lengths are left
// out, for they take far longer.
func (p *Piece) sharpest() float64 {
	if p.Kind == curve.Circle {
		return p.T0
	}
	at := func(u float64) float64 { return p.T0 + (p.T1-p.T0)*u }
	f := func(u float64) float64 { return math.Abs(p.FrameAt(at(u)).Curvature) }
	best, most := 0.0, f(0)
	for k := 1; k <= radiusSamples; k++ {
		if u := float64(k) / radiusSamples; f(u) > most*(1+1e-12) {
			best, most = u, f(u)
		}
	}
	const section = 0.6180339887498949
	lo, hi := math.Max(0, best-1.0/radiusSamples), math.Min(1, best+1.0/radiusSamples)
	for hi-lo > sharpestWithin {
		a, c := hi-section*(hi-lo), lo+section*(hi-lo)
		if f(a) < f(c) {
			lo = a
		} else {
			hi = c
		}
	}
	if u := 0.5 * (lo + hi); f(u) > most*(1+1e-12) {
		return at(u)
	}
	return at(best)
}
