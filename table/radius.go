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
		if k := p.FrameAt(p.T(p.Sharpest())).Curvature; k != 0 {
			least = math.Min(least, 1/math.Abs(k))
		}
	}
	return least
}

// radiusSamples is the number of stretches of a piece, which turns by less than
// a quarter turn, in which its sharpest place is sought.
const radiusSamples = 32

// Sharpest is the length from the start of a curved piece at which it curves
// most: the greatest of a set of samples, refined by golden sections, to half of
// the digits in place and so all of them in curvature.
func (p *Piece) Sharpest() float64 {
	if p.Kind == curve.Circle {
		return 0
	}
	f := func(x float64) float64 { return math.Abs(p.FrameAt(p.T(x)).Curvature) }
	step := p.Length / radiusSamples
	best := 0.0
	for k := range radiusSamples + 1 {
		if x := p.Length * float64(k) / radiusSamples; f(x) > f(best)*(1+1e-12) {
			best = x
		}
	}
	const section = 0.6180339887498949
	lo, hi := math.Max(0, best-step), math.Min(p.Length, best+step)
	for hi-lo > 1e-9*p.Length {
		a, c := hi-section*(hi-lo), lo+section*(hi-lo)
		if f(a) < f(c) {
			lo = a
		} else {
			hi = c
		}
	}
	if x := 0.5 * (lo + hi); f(x) > f(best) {
		return x
	}
	return best
}
