package orbit

import (
	"math"

	"cavitywright/sim"
	"cavitywright/table"
	"cavitywright/table/plane"
)

// thread is a family followed: the states of all its members.
type thread struct {
	length float64
	family *Family
	loops  []int // of the bounces whose ranges the family has
	states []sim.State
}

// holds reports whether the orbit, run in either sense, is a member.
func (t *thread) holds(p *prover, o *Orbit) bool {
	if math.Abs(o.Length-t.length) > 10*sameTol*p.mirror.Length() {
		return false
	}
	return t.has(p, o, 1) || t.has(p, o, -1)
}

// has reports whether an orbit of the same length, run in the sense, is a
// member.
func (t *thread) has(p *prover, o *Orbit, sense int) bool {
	if !t.near(p, o.Bounces[0], float64(sense)) {
		return false
	}
	for k := range o.Bounces {
		if t.within(p, o, k, sense) {
			return true
		}
	}
	return false
}

// near reports whether a member has a bounce within a step of b.
func (t *thread) near(p *prover, b Bounce, sense float64) bool {
	const wide = 1.2 * familyStep
	loop := &p.mirror.Loops()[b.Loop]
	for _, st := range t.states {
		if math.Abs(st.P-sense*b.P) < 10*wide && math.Abs(apart(loop, st.S, b.S)) < wide*p.mirror.Length() {
			return true
		}
	}
	return false
}

// within reports whether the bounces of o from number k on lie in the family's
// ranges.
func (t *thread) within(p *prover, o *Orbit, k, sense int) bool {
	n := o.Period()
	slack := sameTol * p.mirror.Length()
	if t.family.Closed {
		slack = familyStep * p.mirror.Length() // the turning points lie between members
	}
	for i, r := range t.family.Ranges {
		b := o.Bounces[((k+sense*i)%n+n)%n]
		if b.Loop != t.loops[i] || !r.holds(&p.mirror.Loops()[b.Loop], b.S, slack) {
			return false
		}
	}
	return true
}

// holds reports whether s lies in the range, or within slack of it.
func (r Range) holds(l *table.Loop, s, slack float64) bool {
	if r.From <= r.To {
		return s >= r.From-slack && s <= r.To+slack
	}
	return s >= r.From-slack || s <= r.To+slack
}

// woven reports whether a seed lies at a known family to the second order, so
// that it need not be polished.
func (b *book) woven(c *chain) bool {
	n := len(c.s)
	if n >= len(b.threads) {
		return false
	}
	for i := range b.threads[n] {
		t := &b.threads[n][i]
		if math.Abs(c.length-t.length) > 1e-6*b.mirror.Length() || c.miss() > 1e-3 {
			continue
		}
		o := Orbit{Bounces: make([]Bounce, n), Length: t.length}
		for i := range n {
			o.Bounces[i] = Bounce{State: sim.State{S: c.s[i], P: plane.Dot(c.frame[i].Tangent, c.u[i])}, Loop: c.loop[i]}
		}
		if t.holds(b.prover, &o) {
			return true
		}
	}
	return false
}
