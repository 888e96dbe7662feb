package wish

import (
	"math"
	"slices"
)

const (
	// endPart is the part of the tries that each end of a front has; a gap has
	// gapTries and gapEach a dial, with a simplex of gapSimplex.
	endPart    = 0.1
	gapTries   = 6
	gapEach    = 6
	gapSimplex = 0.05
)

// front seeks the front: each wish alone, then what lies in the widest gap of the
// front so far, again and again. There the greater of the two distances from the
// best of each is made small, in terms of what the front spans and aimed at the
// middle of the gap (Chebyshev's norm, which reaches a front that is not convex
// too).
func (s *search) front() {
	ends := []func(*Try) (float64, float64){first, second}
	least := gapTries + gapEach*len(s.Dials)
	for _, s.cost = range ends {
		s.descend(max(least, int(math.Ceil(endPart*float64(s.Plan.Tries)))), firstSimplex)
	}
	tried := map[[2]*Try]bool{}
	for turn, before := 0, 0; s.failed == nil && len(s.Tries) < s.Plan.Tries; turn++ {
		i, u, v := gap(s.Front, tried)
		if i < 0 { // no gap is left: the ends may still move out
			if turn%len(ends) == 0 && len(s.Tries) == before {
				return
			}
			before, s.cost = len(s.Tries), ends[turn%len(ends)]
			s.descend(least, firstSimplex)
			continue
		}
		a, b := s.Front[0], s.Front[len(s.Front)-1]
		spanA, spanB := (b.Cost-a.Cost)*u, (a.Against-b.Against)*v
		s.cost = func(y *Try) (float64, float64) {
			u, v := (y.Cost-a.Cost)/spanA, (y.Against-b.Against)/spanB
			if u > v {
				return u + 0.01*v, y.CostErr / spanA
			}
			return v + 0.01*u, y.AgainstErr / spanB
		}
		tried[[2]*Try{s.Front[i], s.Front[i+1]}] = true
		s.descend(least, gapSimplex)
	}
}

// gap is the widest step of the front that was not tried yet, from i to i+1, and
// its middle, relative to what the front spans; i is -1 for none.
func gap(f []*Try, tried map[[2]*Try]bool) (i int, u, v float64) {
	i = -1
	if len(f) < 2 {
		return i, 0, 0
	}
	a, b := f[0], f[len(f)-1]
	spanA, spanB := b.Cost-a.Cost, a.Against-b.Against
	widest := 0.0
	for k := range f[:len(f)-1] {
		p, q := f[k], f[k+1]
		du, dv := (q.Cost-p.Cost)/spanA, (p.Against-q.Against)/spanB
		if d := math.Hypot(du, dv); d > widest && !tried[[2]*Try{p, q}] {
			widest, i = d, k
			u, v = (0.5*(p.Cost+q.Cost)-a.Cost)/spanA, (0.5*(p.Against+q.Against)-b.Against)/spanB
		}
	}
	return i, u, v
}

// front are the sound tries that no other beats in both wishes, by the first.
func front(tries []*Try) []*Try {
	var all []*Try
	for _, y := range tries {
		if y.Sound() {
			all = append(all, y)
		}
	}
	slices.SortStableFunc(all, func(a, b *Try) int {
		switch {
		case a.Cost < b.Cost, a.Cost == b.Cost && a.Against < b.Against:
			return -1
		case a.Cost > b.Cost, a.Against > b.Against:
			return 1
		}
		return 0
	})
	var out []*Try
	least := math.Inf(1)
	for _, y := range all {
		if y.Against < least {
			out, least = append(out, y), y.Against
		}
	}
	return out
}

// middle is the try of a front that is nearest to the best of both wishes.
func middle(f []*Try) (best *Try) {
	if len(f) == 0 {
		return nil
	}
	spanA, spanB := f[len(f)-1].Cost-f[0].Cost, f[0].Against-f[len(f)-1].Against
	least := math.Inf(1)
	for _, y := range f {
		u, v := 0.0, 0.0
		if spanA > 0 {
			u, v = (y.Cost-f[0].Cost)/spanA, (y.Against-f[len(f)-1].Against)/spanB
		}
		if d := math.Max(u, v); d < least {
			best, least = y, d
		}
	}
	return best
}
