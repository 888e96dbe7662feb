package chaos

import (
	"math"

	"cavitywright/sim"
)

// winding takes the rotation number of an orbit: the mean advance of s a
// bounce, forward along the outer wall, in parts of its length. It is averaged
// with the weight of birkhoff, and converges on a regular orbit faster than any
// power of the bounces (S. Das, Y. Saiki, E. Sander and J. A. Yorke,
// Nonlinearity 30, 4111 (2017)). On a chaotic orbit it is a mean that settles
// as the root of the bounces.
type winding struct {
	length float64 // of the outer wall
	s      float64 // the last place
	steps  []float64
	off    bool // an obstacle was met: no rotation is defined
}

func newWinding(tr *sim.Tracer, n int) winding {
	return winding{length: tr.Table().Loops()[0].S1, steps: make([]float64, 0, n)}
}

func (w *winding) open(b *sim.Bounce) {
	w.s, w.steps, w.off = b.S, w.steps[:0], b.S >= w.length
}

func (w *winding) add(b *sim.Bounce) {
	step := (b.S - w.s) / w.length
	if step < 0 {
		step++
	}
	w.s, w.steps, w.off = b.S, append(w.steps, step), w.off || b.S >= w.length
}

// number is the rotation number in [0, 1) and the number of digits to which
// those of the halves of the orbit agree; NaN where there is none.
func (w *winding) number() (rotation, digits float64) {
	n := len(w.steps)
	if w.off || n < 2 {
		return math.NaN(), 0
	}
	a, b := bumped(w.steps[:n/2]), bumped(w.steps[n-n/2:])
	return bumped(w.steps), -math.Log10(math.Max(math.Abs(a-b), 1e-16))
}

// bumped is the weighted average of a sequence.
func bumped(x []float64) float64 {
	sum, norm := 0.0, 0.0
	for i, v := range x {
		w := bump((float64(i) + 0.5) / float64(len(x)))
		sum, norm = sum+w*v, norm+w
	}
	return sum / norm
}
