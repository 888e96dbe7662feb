package orbit

import (
	"math"

	"cavitywright/sim"
	"cavitywright/table"
	"cavitywright/table/plane"
)

// thread is a family followed: the states of all its members.
type thread struct {
	orbit  int // its number among those of its period in the book
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
	for i := range o.Bounces {
		if !t.near(p, &o.Bounces[i], float64(sense)) {
			return false
		}
	}
	for k := range o.Bounces {
		if t.within(p, o, k, sense) {
			return true
		}
	}
	return false
}

// besideTol, in s relative to the length of the wall and in p, is how far from
// the line through two members in turn a third may lie: a step of a twentieth in
// p bends by a sixteenth of its square.
const besideTol = 1e-3

// near reports whether b lies beside the states of two members in turn.
func (t *thread) near(p *prover, b *Bounce, sense float64) bool {
	loop, length := &p.mirror.Loops()[b.Loop], p.mirror.Length()
	n := len(t.loops)
	for i, from := range t.states {
		x0, y0 := apart(loop, from.S, b.S)/length, sense*b.P-from.P
		next := i + n
		if next >= len(t.states) {
			next = i // the last member: it may be the only one
			if t.family.Closed {
				next = i - len(t.states) + n
			}
		}
		to := t.states[next]
		dx, dy := apart(loop, from.S, to.S)/length, to.P-from.P
		if far := 2 * familyStep; math.Abs(x0) > far || math.Abs(y0) > 10*far || math.Abs(dx) > 3*far || t.loops[i%n] != b.Loop {
			continue
		}
		share := 0.0
		if d := dx*dx + dy*dy; d > 0 {
			share = math.Min(math.Max((x0*dx+y0*dy)/d, 0), 1)
		}
		if math.Hypot(x0-share*dx, y0-share*dy) < besideTol {
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
