package orbit

import (
	"math"
	"slices"

	"cavitywright/sim"
	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/wall"
)

const (
	// closureTol is the miss that a bounce of an orbit may have when the tracer
	// runs it: relative to the length of the wall in s, and in p. The tracer's
	// rounding is some 1e-15 times the stretching of one bounce. Where a chord
	// is shorter than a thousandth of the wall the miss in p may be greater in
	// proportion (chain.short); never that in s, by which a ray that turns back
	// in a corner is told from an orbit.
	closureTol = 1e-12
	// sameTol, relative to the length of the wall in s, is how near two orbits
	// of equal length are one: the rounding of a polished orbit (1e-16) over
	// the least eigenvalue that counts (1e-7), with a margin.
	sameTol = 1e-8
)

// prover runs polished chains through the tracer.
type prover struct {
	t      *table.Table // as drawn, with its laws
	mirror *table.Table // the same wall, all of it a mirror
	tracer *sim.Tracer
	w      *sim.Walker
	chart  chart
	joints []float64 // in s
	jumps  []float64 // those without a corner, where the curvature jumps
	// sides are the letters of the pieces, of so many.
	sides   []int
	letters int
}

func newProver(t *table.Table) (*prover, error) {
	d := t.Design()
	d.Bare, d.Coats = wall.Mirror{}, nil
	m, err := table.New(d)
	if err != nil {
		return nil, err
	}
	p := &prover{t: t, mirror: m, tracer: sim.Compile(m), chart: chartOf(m)}
	p.w = p.tracer.Walker()
	for _, j := range m.Joints() {
		p.joints = append(p.joints, j.S)
		if j.Continuity == table.Tangent {
			p.jumps = append(p.jumps, j.S)
		}
	}
	p.numberSides()
	return p, nil
}

// another is a prover of the same wall for another goroutine.
func (p *prover) another() *prover {
	q := *p
	q.w = p.tracer.Walker()
	return &q
}

// atJump reports whether the wall's curvature jumps at s. Corners are left to
// the tracer.
func (p *prover) atJump(s float64, loop int) bool {
	for _, j := range p.jumps {
		if l := &p.mirror.Loops()[loop]; j >= l.S0 && j < l.S1 && math.Abs(apart(l, j, s)) <= sameTol*p.mirror.Length() {
			return true
		}
	}
	return false
}

// blocked is the Closure of a chain that is no orbit because a wall is in the
// way of a chord.
var blocked = math.Inf(1)

// prove runs every bounce of the chain. Each is started anew at the chain's own
// point: run through, an unstable orbit would leave by its rounding times its
// multiplier. ok is false where a wall is in the way or the miss is too great.
func (p *prover) prove(c *chain) (o Orbit, ok bool) {
	n := len(c.s)
	o = Orbit{Bounces: make([]Bounce, n), Length: c.length, Monodromy: sim.Identity()}
	for i := range n {
		_, cos := c.cosines(i)
		if !(cos > 0) {
			o.Closure = blocked
			return o, false
		}
		if p.atJump(c.s[i], c.loop[i]) {
			return o, false
		}
		o.Bounces[i] = Bounce{State: sim.State{S: c.s[i], P: plane.Dot(c.frame[i].Tangent, c.u[i])}, Point: c.frame[i].Point, Loop: c.loop[i]}
	}
	if slices.Min(c.l) < leastChord*p.mirror.Length() {
		return o, false
	}
	short := c.short()
	for i, from := range o.Bounces {
		to := o.Bounces[(i+1)%n]
		if p.w.Start(from.State).Stop != sim.Going {
			return o, false
		}
		b := p.w.Next(0)
		if b.Stop != sim.Going {
			o.Closure = math.NaN()
			return o, false
		}
		loop := &p.mirror.Loops()[to.Loop]
		if b.S < loop.S0 || b.S >= loop.S1 {
			o.Closure = blocked
			return o, false
		}
		missS := math.Abs(apart(loop, to.S, b.S)) / p.mirror.Length()
		o.Closure = math.Max(o.Closure, math.Max(missS, math.Abs(b.P-to.P)/short))
		if missS > closureTol {
			return o, false
		}
		o.Monodromy = p.w.Jacobian().Times(o.Monodromy)
	}
	return o, o.Closure <= closureTol
}

// prime reports whether the orbit is no repetition of a shorter one.
func (p *prover) prime(o *Orbit) bool {
	n := o.Period()
	for d := 1; d <= n/2; d++ {
		if n%d == 0 && p.matches(o, o, d, 1) {
			return false
		}
	}
	return true
}

// same reports whether two orbits are one, run in either sense.
func (p *prover) same(a, b *Orbit) bool {
	if a.Period() != b.Period() || math.Abs(a.Length-b.Length) > sameTol*p.mirror.Length() {
		return false
	}
	for k := range a.Bounces {
		if p.matches(a, b, k, 1) || p.matches(a, b, k, -1) {
			return true
		}
	}
	return false
}

// matches reports whether a's bounces are those of b from number k on, run
// forwards (sense 1) or backwards (-1).
func (p *prover) matches(a, b *Orbit, k, sense int) bool {
	n := a.Period()
	for i, x := range a.Bounces {
		y := b.Bounces[((k+sense*i)%n+n)%n]
		if x.Loop != y.Loop || !p.close(x.State, sim.State{S: y.S, P: float64(sense) * y.P}, x.Loop) {
			return false
		}
	}
	return true
}

func (p *prover) close(a, b sim.State, loop int) bool {
	l := &p.mirror.Loops()[loop]
	return math.Abs(apart(l, a.S, b.S)) <= sameTol*p.mirror.Length() && math.Abs(a.P-b.P) <= 100*sameTol
}
