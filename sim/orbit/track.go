package orbit

import (
	"math"
	"slices"

	"cavitywright/sim"
	"cavitywright/table"
)

// edges are the arclengths at which the sides of a loop begin, its end included:
// between two of them a place keeps its fraction while the wall changes.
func edges(t *table.Table, loop int) (all []float64) {
	l := &t.Loops()[loop]
	for i := l.First; i < l.Last; i++ {
		p := &t.Pieces()[i]
		if i == l.First || p.Side != t.Pieces()[i-1].Side {
			all = append(all, p.S0)
		}
	}
	return append(all, l.S1)
}

// along is the arclength s in sides: 2.25 a quarter along the third side.
func along(at []float64, s float64) float64 {
	k, found := slices.BinarySearch(at, s)
	if !found {
		k--
	}
	k = min(max(k, 0), len(at)-2)
	return float64(k) + (s-at[k])/(at[k+1]-at[k])
}

// arclength is that of a place, which may lie beyond the ends of the loop.
func arclength(at []float64, x float64) float64 {
	n := float64(len(at) - 1)
	x -= n * math.Floor(x/n)
	k := min(int(x), len(at)-2)
	return at[k] + (x-float64(k))*(at[k+1]-at[k])
}

// stand is an orbit at a value of the number, with the symmetries that it has.
type stand struct {
	p   *prover
	v   float64
	o   Orbit
	own uint64
}

// generic is the symmetry that the wall has at all values: the least of those at
// three of them, chosen where no round number falls.
func (f *course) generic() error {
	for i, x := range []float64{0.1369, 0.5193, 0.8717} {
		p, err := f.prover(f.From + x*(f.To-f.From))
		if err != nil {
			return err
		}
		if g := symmetries(p.mirror); i == 0 || len(g) < len(f.group) {
			f.group, f.model = g, p
		}
	}
	return nil
}

// symmetries are those of the generic wall on that of p: a side goes to the
// same side.
func (f *course) symmetries(p *prover) []isometry {
	group := make([]isometry, len(f.group))
	for i, g := range f.group {
		group[i] = isometry{mirror: g.mirror}
		for _, x := range g.loops {
			x.s0 = arclength(edges(p.mirror, x.to), along(edges(f.model.mirror, x.to), x.s0))
			group[i].loops = append(group[i].loops, x)
		}
	}
	return group
}

// stand is an orbit on the wall of p.
func (f *course) stand(p *prover, v float64, o Orbit) *stand {
	s := &stand{p: p, v: v, o: o}
	images := []Orbit{o}
	for _, g := range f.symmetries(p) {
		images = append(images, p.image(&g, &o))
	}
	for i := range images {
		for half, sense := range []int{1, -1} {
			for k := range o.Bounces {
				if p.matches(&o, &images[i], k, sense) {
					s.own |= 1 << ((2*i + half) % 64)
					break
				}
			}
		}
	}
	return s
}

// guess are the arclengths of the orbit of b on the wall of p, drawn on from a
// to b where there is an a.
func guess(a, b *stand, p *prover, v float64) []float64 {
	s := make([]float64, b.o.Period())
	for i, x := range b.o.Bounces {
		here, there := edges(b.p.mirror, x.Loop), edges(p.mirror, x.Loop)
		if len(here) != len(there) {
			return nil
		}
		to := along(here, x.S)
		if a != nil {
			from := along(edges(a.p.mirror, x.Loop), a.o.Bounces[i].S)
			to += math.Remainder(to-from, float64(len(here)-1)) * (v - b.v) / (b.v - a.v)
		}
		s[i] = arclength(there, to)
	}
	return s
}

const (
	// followedPlace, relative to the length of the wall, is how far from where
	// it is guessed an orbit may be found, and followedLength how much its length
	// may differ: orbits are further apart, or the step is too long.
	followedPlace  = 0.02
	followedLength = 0.01
)

// failure says why an orbit is not found where it is guessed.
type failure uint8

const (
	none failure = iota
	astray
	inTheWay
	atJoint
	repeated // on a shorter orbit
	merged   // on one of another symmetry
)

// next is the orbit of b at the value v.
func (f *course) next(a, b *stand, v float64) (*stand, failure, error) {
	p, err := f.kept(v)
	if err != nil {
		return nil, astray, err
	}
	if len(p.mirror.Loops()) != len(b.p.mirror.Loops()) {
		return nil, astray, nil
	}
	s := guess(a, b, p, v)
	if s == nil {
		return nil, astray, nil
	}
	c := newChain(p.mirror, s)
	length := p.mirror.Length()
	if !c.polish(0.25 * followedPlace * length) {
		return nil, astray, nil
	}
	for i, x := range s {
		if c.loop[i] != b.o.Bounces[i].Loop || math.Abs(apart(&p.mirror.Loops()[c.loop[i]], x, c.s[i])) > followedPlace*length {
			return nil, astray, nil
		}
	}
	if math.Abs(c.length/length-b.o.Length/b.p.mirror.Length()) > followedLength {
		return nil, astray, nil
	}
	o, ok := p.prove(c)
	switch {
	case !ok && o.Closure == blocked:
		return nil, inTheWay, nil
	case !ok:
		return nil, atJoint, nil
	case !p.prime(&o):
		return nil, repeated, nil
	}
	p.finishInPlace(&o)
	to := f.stand(p, v, o)
	if to.own != b.own {
		return nil, merged, nil
	}
	return to, none, nil
}

// finishInPlace fills what follows from the bounces and leaves them in order.
func (p *prover) finishInPlace(o *Orbit) {
	bounces, m := o.Bounces, o.Monodromy
	p.finish(o)
	o.Bounces, o.Monodromy = bounces, m
	o.Word = p.word(o)
}

// kept is a prover at v, for the use of the caller's goroutine.
func (f *course) kept(v float64) (*prover, error) {
	f.mu.Lock()
	p := f.keep[v]
	f.mu.Unlock()
	if p != nil {
		return p.another(), nil
	}
	for k, q := range f.grid {
		if f.at(k) == v {
			return q.another(), nil
		}
	}
	p, err := f.prover(v)
	if err != nil {
		return nil, err
	}
	f.mu.Lock()
	if len(f.keep) < mostKept {
		f.keep[v] = p
	}
	f.mu.Unlock()
	return p.another(), nil
}

// mostKept bounds the walls held at values between those of the grid.
const mostKept = 4000

// run follows the track both ways from where it was opened.
func (f *course) run(t *track) error {
	k := t.k[0]
	first := f.stand(f.grid[k].another(), t.v[0], t.orbits[0])
	up, end, err := f.walk(first, k, 1)
	if err != nil {
		return err
	}
	down, start, err := f.walk(first, k, -1)
	if err != nil {
		return err
	}
	all := []*stand{first}
	slices.Reverse(down)
	all = append(append(down, all...), up...)
	t.start, t.end = start, end
	t.v, t.k, t.orbits = nil, nil, nil
	for _, s := range all {
		t.v, t.orbits = append(t.v, s.v), append(t.orbits, s.o)
		at := -1
		for k := range f.grid {
			if f.at(k) == s.v {
				at = k
			}
		}
		t.k = append(t.k, at)
	}
	t.passed, err = f.passed(t, all)
	return err
}

// walk follows from a stand at grid value k in the direction dir to the end of
// the range or of the orbit.
func (f *course) walk(from *stand, k, dir int) (all []*stand, end Event, err error) {
	var before *stand
	cur, why := from, none
	for k += dir; k >= 0 && k <= f.Steps; k += dir {
		target := f.at(k)
		h := target - cur.v
		for cur.v != target {
			v := cur.v + h
			if math.Abs(v-target) < 0.01*math.Abs(h) {
				v = target
			}
			var to *stand
			if to, why, err = f.next(before, cur, v); err != nil {
				return nil, end, err
			}
			if to != nil && f.jumped(before, cur, to) {
				to, why = nil, astray
			}
			if to == nil {
				if h *= 0.5; math.Abs(h) < smallestStep*(f.To-f.From) {
					return all, f.verdict(cur, why), nil
				}
				continue
			}
			before, cur = cur, to
			all = append(all, to)
			if h *= 2; math.Abs(h) > math.Abs(target-cur.v) {
				h = target - cur.v
			}
		}
	}
	return all, Event{V: cur.v, What: AtEdge}, nil
}

// jumpTol is the jump of the trace against the line through the two stands
// before, relative to its size and slope, beyond which a step is taken again in
// halves: the orbit found may be another one.
const jumpTol = 0.25

// jumped reports whether the trace does not go on as it did.
func (f *course) jumped(a, b, c *stand) bool {
	scale := 1 + math.Abs(b.o.Trace())
	step := c.o.Trace() - b.o.Trace()
	if a != nil {
		step -= (b.o.Trace() - a.o.Trace()) * (c.v - b.v) / (b.v - a.v)
	}
	return math.Abs(step) > jumpTol*scale
}

// verdict says why the orbit ends at the stand.
func (f *course) verdict(s *stand, why failure) Event {
	e := Event{V: s.v, What: Unclear}
	n := s.o.Period()
	length := s.p.mirror.Length()
	joint := math.Inf(1)
	for _, b := range s.o.Bounces {
		for _, j := range s.p.joints {
			joint = math.Min(joint, math.Abs(math.Remainder(j-b.S, length)))
		}
	}
	switch {
	case why == inTheWay:
		e.What = Blocked
		return e
	case why == atJoint || joint < 1e-6*length:
		e.What = AtJoint
		return e
	}
	if why == merged {
		e.What, e.Other = Joined, n
		return e
	}
	if math.Abs(s.o.Trace()-2) > nearTwo*(1+size(s.o.Monodromy)) {
		return e
	}
	for d := 1; d < n; d++ { // nearly a repetition
		if n%d == 0 && s.p.away(&s.o, &s.o, d, 1) < nearMerge*length {
			e.What, e.Other = Joined, d
			return e
		}
	}
	e.What = Fold
	return e
}

const (
	// nearTwo is how near to 2 the trace must be, relative to the entries of the
	// matrix, where an orbit ends smallestStep before the place at which it is 2:
	// it goes there as the square root.
	nearTwo = 2e-3
	// nearMerge, relative to the length of the wall, is how near two orbits are
	// that meet a smallestStep further on.
	nearMerge = 2e-3
)

func size(m sim.Jacobian) float64 { return math.Abs(m.SS) + math.Abs(m.PP) }

// away is the greatest distance in s between the bounces of a and those of b
// from number k on, run forwards or backwards; infinite where the loops differ.
func (p *prover) away(a, b *Orbit, k, sense int) (far float64) {
	n := a.Period()
	for i, x := range a.Bounces {
		y := b.Bounces[((k+sense*i)%n+n)%n]
		if x.Loop != y.Loop {
			return math.Inf(1)
		}
		far = math.Max(far, math.Abs(apart(&p.mirror.Loops()[x.Loop], x.S, y.S)))
		far = math.Max(far, p.mirror.Length()*math.Abs(x.P-float64(sense)*y.P)/10)
	}
	return far
}
