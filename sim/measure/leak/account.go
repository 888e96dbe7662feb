package leak

import (
	"math"

	"cavitywright/sim"
)

// Account is what became of the weight that started: every ray starts with 1.
// Left, Absorbed, Kept and Undecided add up to Started.
type Account struct {
	Started   float64
	Left      float64 // through the wall, or into the open plane
	Absorbed  float64 // by the wall
	Kept      float64 // still inside where the rays were given up
	Undecided float64 // of rays that ended at a corner or along a tangent
}

func (a *Account) add(o *Account) {
	a.Started += o.Started
	a.Left += o.Left
	a.Absorbed += o.Absorbed
	a.Kept += o.Kept
	a.Undecided += o.Undecided
}

// Balance is by how much the parts differ from what started, per ray.
func (a Account) Balance() float64 {
	return (a.Left + a.Absorbed + a.Kept + a.Undecided - a.Started) / a.Started
}

// course is the ray at hand: its path, its weight, and what the last bounce
// took from it.
type course struct {
	path, weight   float64
	bounces        int
	stop           sim.Stop
	left, absorbed float64 // at the last bounce
}

// open begins a ray.
func (c *course) open() { *c = course{weight: 1} }

// take follows a bounce. A flight into the open plane has no length: the ray
// counts as gone from its last bounce on.
func (c *course) take(b *sim.Bounce) {
	c.stop = b.Stop
	c.left, c.absorbed = 0, 0
	if b.N == 0 {
		return
	}
	c.bounces = b.N
	if !math.IsInf(b.Flight, 1) {
		c.path += b.Flight
	}
	if b.Stop == sim.Corner || b.Stop == sim.Lost || b.Stop == sim.Grazing {
		return
	}
	c.left = b.Exit
	rest := c.weight - b.Exit
	c.weight = b.Weight
	if b.Stop == sim.Escaped || b.Stop == sim.Spent {
		c.weight = 0
	}
	// What the law says it absorbed is the rest; a rounding below zero is none.
	c.absorbed = rest - c.weight
}

// book notes the bounce in the account, and closing its end.
func (c *course) book(a *Account) {
	a.Left += c.left
	a.Absorbed += c.absorbed
}

func (c *course) close(a *Account) {
	a.Started++
	switch c.stop {
	case sim.Corner, sim.Grazing, sim.Lost:
		a.Undecided += c.weight
	default:
		a.Kept += c.weight
	}
}
