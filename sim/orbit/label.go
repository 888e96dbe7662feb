package orbit

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"cavitywright/sim"
)

// gather fills the list from the book.
func (b *book) gather(list *List) {
	for i := range b.group {
		if b.group[i].mirror {
			list.Mirrors++
		} else {
			list.Turns++
		}
	}
	list.Turns++ // by nothing
	class := 0
	for n, of := range b.of {
		for i := range of {
			b.finish(&of[i])
		}
		for i := range of {
			if of[i].Class == 0 {
				class++
				b.class(n, i, class)
			}
		}
		list.Orbits = append(list.Orbits, of...)
	}
	list.sort()
	number := map[int]int{}
	for i := range list.Orbits {
		o := &list.Orbits[i]
		if number[o.Class] == 0 {
			number[o.Class] = len(number) + 1
		}
		o.Class = number[o.Class]
	}
	for _, of := range b.of {
		for i := range of {
			of[i].Class = number[of[i].Class]
		}
	}
}

// class gives orbit i of n bounces and its images by symmetry their class.
func (b *book) class(n, i, class int) {
	o := &b.of[n][i]
	all := []int{i}
	for k := range b.group {
		g := &b.group[k]
		image := b.image(g, o)
		at := b.number(&image)
		switch {
		case at == i && g.mirror:
			o.Mirrored = true
		case at == i:
			o.Turned = true
		case at >= 0 && !slices.Contains(all, at):
			all = append(all, at)
		}
	}
	for _, k := range all {
		x := &b.of[n][k]
		x.Class, x.Copies, x.Mirrored, x.Turned = class, len(all), o.Mirrored, o.Turned
	}
}

// image is where a symmetry puts an orbit.
func (p *prover) image(g *isometry, o *Orbit) Orbit {
	m := *o
	m.Bounces = slices.Clone(o.Bounces)
	for i := range m.Bounces {
		x := &m.Bounces[i]
		x.S, x.Loop = g.at(p.mirror, x.S, x.Loop), g.loops[x.Loop].to
		if g.mirror {
			x.P = -x.P
		}
	}
	return m
}

// number is the place of an orbit, or of the family of which it is a member,
// among those of its period; -1 where the book has it not.
func (b *book) number(o *Orbit) int {
	n := o.Period()
	if o.Family == nil {
		return b.beside(n, o.Bounces[0].S, func(x *Orbit) bool { return b.same(x, o) })
	}
	for i := range b.threads[n] {
		if t := &b.threads[n][i]; t.holds(b.prover, o) {
			return t.orbit
		}
	}
	return -1
}

// Symmetry says in a few words what the wall's symmetries make of the orbit.
func (o *Orbit) Symmetry() string {
	own := ""
	switch {
	case o.Mirrored:
		own = "its own mirror image"
	case o.Turned:
		own = "its own image by a turn"
	}
	switch {
	case o.Copies > 1 && own != "":
		return fmt.Sprintf("one of %d copies, %s", o.Copies, own)
	case o.Copies > 1:
		return fmt.Sprintf("one of %d copies", o.Copies)
	case own != "":
		return own
	}
	return "no copies"
}

// numberSides numbers the sides of the wall in the order of s, from 1: the
// letters of words.
func (p *prover) numberSides() {
	type side struct{ item, side int }
	seen := map[side]int{}
	for i := range p.mirror.Pieces() {
		x := &p.mirror.Pieces()[i]
		k := side{x.Item, x.Side}
		if seen[k] == 0 {
			seen[k] = len(seen) + 1
		}
		p.sides = append(p.sides, seen[k])
	}
	p.letters = len(seen)
}

// word is the sequence of sides that the orbit meets.
func (p *prover) word(o *Orbit) string {
	all := make([]string, len(o.Bounces))
	for i, b := range o.Bounces {
		piece, _ := p.mirror.Locate(b.S)
		all[i] = strconv.Itoa(p.sides[piece])
	}
	if p.letters < 10 {
		return strings.Join(all, "")
	}
	return strings.Join(all, " ")
}

// finish fills what follows from the bounces, and puts them in the order of the
// list.
func (p *prover) finish(o *Orbit) {
	if o.Family == nil {
		o.TwoSenses = true
		for _, b := range o.Bounces {
			o.TwoSenses = o.TwoSenses && math.Abs(b.P) > 100*sameTol
		}
	}
	p.order(o)
	if len(p.mirror.Loops()) == 1 {
		o.Winding = p.winding(o)
	}
	o.Word = p.word(o)
	o.Confined = true
	for _, b := range o.Bounces {
		o.Confined = o.Confined && p.held(b.State)
	}
}

// order starts the orbit at its smallest s, in the sense in which p is greater
// there; the monodromy matrix is taken anew.
func (p *prover) order(o *Orbit) {
	n := o.Period()
	eps := sameTol * p.mirror.Length()
	first := 0
	for i, b := range o.Bounces {
		f := o.Bounces[first]
		if b.S < f.S-eps || b.S <= f.S+eps && math.Abs(b.P) > math.Abs(f.P)+100*sameTol {
			first = i
		}
	}
	sense := 1
	if o.Bounces[first].P < 0 {
		sense = -1
	}
	bounces := make([]Bounce, n)
	var ranges []Range
	for i := range bounces {
		at := ((first+sense*i)%n + n) % n
		bounces[i] = o.Bounces[at]
		if sense < 0 {
			bounces[i].P = -bounces[i].P
		}
		if o.Family != nil {
			ranges = append(ranges, o.Family.Ranges[at])
		}
	}
	o.Bounces = bounces
	if o.Family != nil {
		o.Family.Ranges = ranges
	}
	o.Monodromy = sim.Identity()
	for _, b := range bounces {
		p.w.Start(b.State)
		p.w.Next(0)
		o.Monodromy = p.w.Jacobian().Times(o.Monodromy)
	}
}

func (p *prover) winding(o *Orbit) int {
	n := o.Period()
	length := p.mirror.Length()
	sum := 0.0
	for i, b := range o.Bounces {
		step := o.Bounces[(i+1)%n].S - b.S
		if step < 0 {
			step += length
		}
		sum += step / length
	}
	turns := int(math.Round(sum))
	return min(turns, n-turns)
}

// sort orders by period, length, trace, class and place.
func (l *List) sort() {
	const lengthTol = 1e-10 // relative: symmetric copies stand together
	slices.SortStableFunc(l.Orbits, func(a, b Orbit) int {
		if c := cmp.Compare(a.Period(), b.Period()); c != 0 {
			return c
		}
		if math.Abs(a.Length-b.Length) > lengthTol*a.Length {
			return cmp.Compare(a.Length, b.Length)
		}
		if math.Abs(a.Trace()-b.Trace()) > lengthTol*(10+math.Abs(a.Trace())) {
			return cmp.Compare(a.Trace(), b.Trace())
		}
		if c := cmp.Compare(a.Class, b.Class); c != 0 {
			return c
		}
		return cmp.Compare(a.Bounces[0].S, b.Bounces[0].S)
	})
}
