package orbit

import (
	"cmp"
	"math"
	"slices"
)

// passed are the events on the way of an orbit: its trace passes 2 or -2, or
// touches them as that of an orbit does that is its own image by symmetry, whose
// matrix is a square.
func (f *course) passed(t *track, all []*stand) (events []Event, err error) {
	n := all[0].o.Period()
	for _, l := range levels(n, f.UpTo) {
		for i := 1; i < len(all); i++ {
			v, ok, err := f.passes(all, i, l.trace)
			if err != nil {
				return nil, err
			}
			if ok && !t.ends(v, 10*LocatedTo*(f.To-f.From)) {
				events = append(events, Event{V: v, What: l.what, Other: l.period})
			}
		}
	}
	slices.SortStableFunc(events, func(a, b Event) int { return cmp.Compare(a.V, b.V) })
	return dropNear(events, LocatedTo*(f.To-f.From)), nil
}

// level is a trace at which something happens, with the period of the orbits
// that take part.
type level struct {
	trace  float64
	what   What
	period int
}

// levels are those for orbits of n bounces where up to most are of interest.
// Doublings always are.
func levels(n, most int) []level {
	all := []level{{2, Split, n}, {-2, Doubling, 2 * n}}
	for m := 3; m*n <= most; m++ {
		for j := 1; 2*j < m; j++ {
			if coprime(j, m) {
				all = append(all, level{2 * math.Cos(2*math.Pi*float64(j)/float64(m)), Multiple, m * n})
			}
		}
	}
	return all
}

func coprime(a, b int) bool {
	for b > 0 {
		a, b = b, a%b
	}
	return a == 1
}

// ends reports whether the branch begins or ends at v on another orbit, where
// its trace is 2.
func (t *track) ends(v, near float64) bool {
	for _, e := range []Event{t.start, t.end} {
		if (e.What == Joined || e.What == Fold) && math.Abs(v-e.V) < near {
			return true
		}
	}
	return false
}

// passes is the value at which the trace crosses the level between the stands
// i-1 and i, or touches it about i-1.
func (f *course) passes(all []*stand, i int, level float64) (v float64, ok bool, err error) {
	a, b := all[i-1], all[i]
	ya, yb := a.o.Trace()-level, b.o.Trace()-level
	if (ya < 0) != (yb < 0) {
		return f.crossing(a, b, level)
	}
	if i+1 == len(all) || math.Abs(level) != 2 {
		return 0, false, nil
	}
	c := all[i+1]
	yc := c.o.Trace() - level
	if (yb < 0) == (yc < 0) && math.Abs(yb) < math.Abs(ya) && math.Abs(yb) <= math.Abs(yc) && math.Abs(yb) < touchFrom {
		return f.touch(a, b, c, level)
	}
	return 0, false, nil
}

// dropNear leaves one of events of one kind at one place.
func dropNear(events []Event, near float64) (kept []Event) {
	for _, e := range events {
		if n := len(kept); n == 0 || kept[n-1].What != e.What || math.Abs(kept[n-1].V-e.V) > near {
			kept = append(kept, e)
		}
	}
	return kept
}

const (
	// crossedTo, relative to the range, is how well a crossing is located.
	crossedTo = 1e-10
	// crossedTol is the distance from the level, relative to the entries of the
	// matrix, at a located crossing: otherwise it was a jump to another orbit.
	crossedTol = 1e-5
	// touchFrom is the distance from a level below which it is looked whether
	// the trace touches it, and touchTol that at which it does, relative to the
	// entries of the matrix: what is left of a parabola at its located end.
	touchFrom = 0.5
	touchTol  = 1e-8
)

// crossing is the value at which the trace crosses the level between two stands,
// by the secant within a bracket (Illinois rule, M. Dowell and P. Jarratt, BIT
// 11, 168, 1971, from memory).
func (f *course) crossing(a, b *stand, level float64) (v float64, ok bool, err error) {
	ya, yb := a.o.Trace()-level, b.o.Trace()-level
	best, least := a, math.Abs(ya)
	for range 80 {
		if math.Abs(b.v-a.v) <= crossedTo*(f.To-f.From) {
			break
		}
		v := a.v - ya*(b.v-a.v)/(yb-ya)
		if !(v > math.Min(a.v, b.v) && v < math.Max(a.v, b.v)) {
			v = 0.5 * (a.v + b.v)
		}
		m, _, err := f.next(nil, nearer(a, b, v), v)
		if err != nil {
			return 0, false, err
		}
		if m == nil {
			return 0, false, nil
		}
		ym := m.o.Trace() - level
		if math.Abs(ym) < least {
			best, least = m, math.Abs(ym)
		}
		if ym == 0 || math.Abs(ym) < 1e-13*(1+size(m.o.Monodromy)) {
			break
		}
		if (ym < 0) == (yb < 0) {
			b, yb, ya = m, ym, 0.5*ya
		} else {
			a, ya = b, yb
			b, yb = m, ym
		}
	}
	return best.v, least < crossedTol*(1+size(best.o.Monodromy)), nil
}

// nearer is the stand nearer to v.
func nearer(a, b *stand, v float64) *stand {
	if math.Abs(a.v-v) < math.Abs(b.v-v) {
		return a
	}
	return b
}

// touch is the value between a and c at which the trace comes nearest to the
// level, by the parabola through three stands that close in on it; ok reports
// whether it touches it.
func (f *course) touch(a, b, c *stand, level float64) (v float64, ok bool, err error) {
	span := f.To - f.From
	h := math.Max(c.v-b.v, b.v-a.v)
	for range 12 {
		ya, yb, yc := a.o.Trace(), b.o.Trace(), c.o.Trace()
		p, q := (yb-ya)/(b.v-a.v), (yc-yb)/(c.v-b.v)
		bend := (q - p) / (c.v - a.v)
		v = 0.5*(a.v+b.v) - p/(2*bend)
		if !(v > a.v && v < c.v) {
			return 0, false, nil
		}
		if h < 2e-4*span { // nearer, the parabola is lost in rounding
			break
		}
		h = math.Max(h/8, 1e-4*span)
		if v-h < f.From || v+h > f.To {
			h = math.Min(v-f.From, f.To-v)
		}
		base := b
		for i, at := range []float64{v - h, v, v + h} {
			s, _, err := f.next(nil, base, at)
			if err != nil {
				return 0, false, err
			}
			if s == nil {
				return 0, false, nil
			}
			*[]**stand{&a, &b, &c}[i] = s
		}
	}
	s, _, err := f.next(nil, b, v)
	if err != nil || s == nil {
		return 0, false, err
	}
	return v, math.Abs(s.o.Trace()-level) < touchTol*(1+size(s.o.Monodromy)), nil
}
