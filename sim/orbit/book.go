package orbit

import "math"

// book holds the orbits found so far, by period.
type book struct {
	*prover
	of [][]Orbit
	// near are the numbers of the orbits of a period that have a bounce in a
	// cell of the arclength, cells of knownPlace.
	near []map[int64][]int32
	// threads are the members of the families found, by period.
	threads [][]thread
	group   []isometry
}

func newBook(p *prover, upTo int) *book {
	b := &book{prover: p, of: make([][]Orbit, upTo+1), near: make([]map[int64][]int32, upTo+1), threads: make([][]thread, upTo+1)}
	for n := range b.near {
		b.near[n] = map[int64][]int32{}
	}
	return b
}

// cell is the number of the cell of the arclength s.
func (b *book) cell(s float64) int64 {
	return int64(math.Floor(s / (knownPlace * b.mirror.Length())))
}

// enter puts an orbit into the book.
func (b *book) enter(o *Orbit) {
	n := o.Period()
	number := int32(len(b.of[n]))
	b.of[n] = append(b.of[n], *o)
	put := func(s float64) { k := b.cell(s); b.near[n][k] = append(b.near[n][k], number) }
	edge := 2 * knownPlace * b.mirror.Length()
	for _, x := range o.Bounces {
		put(x.S)
		l := &b.mirror.Loops()[x.Loop]
		if x.S-l.S0 < edge { // also where it is looked for from the other end of the loop
			put(x.S + l.S1 - l.S0)
		}
		if l.S1-x.S < edge {
			put(x.S - l.S1 + l.S0)
		}
	}
}

// beside is the number of the first orbit of n bounces, of those that have one
// near s, that is it; -1 where none is.
func (b *book) beside(n int, s float64, is func(*Orbit) bool) int {
	k := b.cell(s)
	for d := int64(-1); d <= 1; d++ {
		for _, i := range b.near[n][k+d] {
			if is(&b.of[n][i]) {
				return int(i)
			}
		}
	}
	return -1
}

// holds reports whether the orbit, run in either sense, is in the book.
func (b *book) holds(o *Orbit) bool {
	return b.beside(o.Period(), o.Bounces[0].S, func(x *Orbit) bool { return b.same(x, o) }) >= 0
}

// known reports whether the places s lie at an orbit of the book.
func (b *book) known(s []float64, loops []int) bool {
	return b.beside(len(s), s[0], func(o *Orbit) bool {
		for k := range s {
			if b.follows(s, loops, o, k, 1) || b.follows(s, loops, o, k, -1) {
				return true
			}
		}
		return false
	}) >= 0
}

// follows reports whether the places lie at the bounces of o from number k on.
func (b *book) follows(s []float64, loops []int, o *Orbit, k, sense int) bool {
	n := len(s)
	for i, x := range s {
		y := &o.Bounces[((k+sense*i)%n+n)%n]
		if loops[i] != y.Loop || math.Abs(apart(&b.mirror.Loops()[y.Loop], x, y.S)) > knownPlace*b.mirror.Length() {
			return false
		}
	}
	return true
}

// add takes a polished chain into the book, if it is an orbit, prime, and new;
// and with it its images by the wall's symmetries.
func (b *book) add(c *chain) {
	if !b.addOne(c) {
		return
	}
	s, loops := make([]float64, len(c.s)), make([]int, len(c.s))
	for i := range b.group {
		g := &b.group[i]
		for k, x := range c.s {
			s[k], loops[k] = g.at(b.mirror, x, c.loop[k]), g.loops[c.loop[k]].to
		}
		if b.known(s, loops) {
			continue
		}
		if m := newChain(b.mirror, s); m.polish(sameTol * b.mirror.Length()) {
			b.addOne(m)
		}
	}
}

// addOne adds the chain without its images.
func (b *book) addOne(c *chain) bool {
	o, ok := b.prove(c)
	if !ok || b.holds(&o) {
		return false
	}
	if b.marginal(c) {
		return b.addFamily(c, &o)
	}
	if !b.prime(&o) {
		return false
	}
	b.enter(&o)
	return true
}
