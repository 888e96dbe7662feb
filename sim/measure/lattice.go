package measure

import (
	"math"

	"cavitywright/sim"
)

// Fibonacci is a lattice of F points in the unit square, where F is a number of
// Fibonacci's sequence 1, 1, 2, 3, 5, ...: the most even of the lattices of
// rank one in the plane (Niederreiter, Random Number Generation and Quasi-Monte
// Carlo Methods, 1992, ch. 5).
type Fibonacci struct{ points, step uint64 }

// NewFibonacci is the largest lattice of at most n points; of one point where
// n < 1.
func NewFibonacci(n int) Fibonacci {
	f := Fibonacci{points: 1, step: 1}
	for next := f.points + f.step; next <= uint64(max(n, 1)); next = f.points + f.step {
		f.points, f.step = next, f.points
	}
	return f
}

// Size is the number of points.
func (f Fibonacci) Size() int { return int(f.points) }

// Shift is where a lattice begins, as fractions of the square's sides in
// [0, 1).
type Shift struct{ U, V float64 }

// At is point i of the lattice moved by the shift, modulo 1.
func (f Fibonacci) At(i int, by Shift) (u, v float64) {
	n := float64(f.points)
	u = by.U + float64(i)/n
	v = by.V + float64(uint64(i)*f.step%f.points)/n
	return wrapped(u), wrapped(v)
}

// wrapped is x >= 0 modulo 1, and below 1 whatever the rounding.
func wrapped(x float64) float64 {
	if x -= math.Floor(x); x >= 1 {
		return 0
	}
	return x
}

// draws are places drawn evenly from the unit square, for the shifts of
// lattices: the opening states of orbits that go nowhere.
type draws struct {
	tracer *sim.Tracer
	n      int
}

func (d draws) Orbits() int  { return d.n }
func (d draws) Bounces() int { return 0 }
func (d draws) Start(_ int, uniform func() float64) sim.Start {
	return sim.Start{State: d.tracer.Uniform(uniform(), uniform())}
}
func (d draws) Tally() Tally { return &drawn{length: d.tracer.Length()} }

// drawn are the places drawn so far.
type drawn struct {
	length float64
	shifts []Shift
}

func (t *drawn) Open(int) {}
func (t *drawn) Add(b *sim.Bounce) {
	t.shifts = append(t.shifts, Shift{wrapped(b.S / t.length), wrapped((b.P + 1) / 2)})
}
func (t *drawn) Close()           {}
func (t *drawn) Merge(next Tally) { t.shifts = append(t.shifts, next.(*drawn).shifts...) }
