package orbit

import (
	"math"
	"slices"
)

const (
	// familyStep, relative to the length of the wall, is the step with which a
	// family is followed; its ends are found by halving it down to familyEnd.
	familyStep = 1.0 / 240
	familyEnd  = 1e-10
	// snapTol, relative to the length of the wall, is how near to a joint a
	// family counts as ending at it: nearer to a corner than leastChord no
	// orbit is proved, and several bounces may run into corners at once.
	snapTol = 5 * leastChord
	// mostMembers bounds the members that are followed each way.
	mostMembers = 4000
)

// marginal reports whether the length stays stationary in some direction.
func (b *book) marginal(c *chain) bool {
	e, ok := c.eigen()
	if !ok {
		return false
	}
	_, ok = e.null(nil)
	return ok
}

func (c *chain) clone() *chain { return newChain(c.t, c.s) }

// moved is the chain moved along d by h, and polished; ok is false where no
// proved orbit of the same length lies there.
func (b *book) moved(c *chain, d []float64, h float64) (m *chain, o Orbit, ok bool) {
	m = c.clone()
	for i := range m.s {
		m.put(i, wrap(&b.mirror.Loops()[m.loop[i]], m.s[i]+h*d[i]))
	}
	if !m.fill() || m.miss() > seedMiss || !m.polish(math.Abs(h)) || math.Abs(m.length-c.length) > sameTol*b.mirror.Length() {
		return m, o, false
	}
	far := 0.0
	for i := range m.s {
		far = math.Max(far, math.Abs(apart(&b.mirror.Loops()[m.loop[i]], c.s[i], m.s[i])))
	}
	if !(far > 0.3*math.Abs(h) && far < 3*math.Abs(h)) {
		return m, o, false
	}
	o, ok = b.prove(m)
	return m, o, ok
}

// addFamily follows the family of the marginal orbit o of the chain c, and
// enters it; one that cannot be moved is an isolated orbit.
func (b *book) addFamily(c *chain, o *Orbit) bool {
	n := o.Period()
	for i := range b.threads[n] {
		if b.threads[n][i].holds(b.prover, o) {
			return false
		}
	}
	if !b.prime(o) && !b.primeNearby(c) {
		return false
	}
	f := follower{b: b, from: c, lo: make([]float64, n), hi: make([]float64, n), family: &Family{}}
	f.follow(o)
	if len(f.members) == 1 {
		if !b.prime(o) {
			return false
		}
		b.enter(o)
		return true
	}
	rep := f.representative()
	f.ranges(rep)
	kept := *f.family
	kept.Ranges = slices.Clone(kept.Ranges)
	rep.Family = &kept
	t := thread{orbit: len(b.of[n]), length: o.Length, family: f.family, loops: f.from.loop, states: f.states()}
	rep.TwoSenses = !t.has(b.prover, rep, -1)
	b.enter(rep)
	b.threads[n] = append(b.threads[n], t)
	return true
}

// primeNearby reports whether a neighbour in the family is prime, where the
// orbit itself is a repetition.
func (b *book) primeNearby(c *chain) bool {
	e, ok := c.eigen()
	if !ok {
		return false
	}
	for k, v := range e.values {
		if math.Abs(v) > e.least {
			continue
		}
		d := make([]float64, len(c.s))
		for i := range d {
			d[i] = e.vectors.At(i, k)
		}
		for _, h := range []float64{1e-3, -1e-3, 1e-5, -1e-5} {
			if _, o, ok := b.moved(c, d, h*b.mirror.Length()); ok && b.prime(&o) {
				return true
			}
		}
	}
	return false
}
