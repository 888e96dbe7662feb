package measure

import (
	"math"

	"cavitywright/sim"
)

// Escape follows rays on a table that they leave, and keeps, at chosen counts
// of bounces, how much of them is left and how far it has flown.
//
// The rays start evenly in ds dp, on lattices that are each shifted as a whole
// by a place of its own. Each lattice yields an estimate that is free of the
// others: their scatter is an honest error of their mean, smaller than that of
// independent starts (Cranley and Patterson, SIAM J. Numer. Anal. 13, 904
// (1976)). Cells may leave out the parts of the section from which no ray lasts
// to the first mark; what is left at the marks is then the same.
type Escape struct {
	Tracer *sim.Tracer
	Cells  Cells
	Points Fibonacci // of each lattice
	Shifts []Shift   // one a lattice
	Marks  []int     // counts of bounces, ascending, at least 1
	// Rate is the guess (1/length) about which the sums over survivors are
	// expanded, Flight the guess of the survivors' mean flight.
	Rate, Flight float64
}

// Orbits is the number of points of all lattices.
func (e Escape) Orbits() int { return len(e.Shifts) * e.Points.Size() }

// Bounces is the last mark.
func (e Escape) Bounces() int { return e.Marks[len(e.Marks)-1] }

// Start is a point of a lattice, those of the first lattice first.
func (e Escape) Start(i int, _ func() float64) sim.Start {
	n := e.Points.Size()
	return sim.Start{State: e.Tracer.Uniform(e.Cells.At(e.Points.At(i%n, e.Shifts[i/n])))}
}

// Tally is an *EscapeTally.
func (e Escape) Tally() Tally { return &EscapeTally{of: e} }

// terms is the number of terms of the expansion in the rate. At the rate
// solved for, the exponent is away from the guess by less than 2 (a rate that
// falls to zero over a window of e^-1.6): the first term left out is below
// 2^12/12!, 1e-5 of the sum.
const terms = 12

// Left is what is left of a lattice at a mark: the number of rays, their
// weight, their weight times path, and, for k from 0, the sums over them of
// w exp(Rate t) (t - N Flight)^k after N bounces.
type Left struct {
	Rays         int64
	Weight, Path float64
	sums         [terms]float64
}

func (l *Left) add(o *Left) {
	l.Rays += o.Rays
	l.Weight += o.Weight
	l.Path += o.Path
	for k := range l.sums {
		l.sums[k] += o.sums[k]
	}
}

// EscapeTally is what is left of each lattice at each mark.
type EscapeTally struct {
	Stops   Stops
	Flights int64 // that ended on the wall
	of      Escape
	first   int      // the lattice of the first row
	rows    [][]Left // by lattice and mark
	path    float64  // of the orbit at hand
	mark    int      // the next one
}

// Open begins orbit i.
func (t *EscapeTally) Open(i int) {
	k := i / t.of.Points.Size()
	if len(t.rows) == 0 {
		t.first = k
	}
	for t.first+len(t.rows) <= k {
		t.rows = append(t.rows, make([]Left, len(t.of.Marks)))
	}
	t.path, t.mark = 0, 0
}

// Add takes a bounce.
func (t *EscapeTally) Add(b *sim.Bounce) {
	if !math.IsInf(b.Flight, 1) && b.N > 0 {
		t.Flights++
	}
	if b.Stop != sim.Going {
		t.Stops[b.Stop]++
		return
	}
	t.path += b.Flight
	if b.N != t.of.Marks[t.mark] {
		return
	}
	l := &t.rows[len(t.rows)-1][t.mark]
	l.Rays++
	l.Weight += b.Weight
	l.Path += b.Weight * t.path
	x := t.path - float64(b.N)*t.of.Flight
	w := b.Weight * math.Exp(t.of.Rate*t.path)
	for k := range l.sums {
		l.sums[k] += w
		w *= x
	}
	t.mark++
}

// Close does nothing.
func (t *EscapeTally) Close() {}

// Merge adds the next tally.
func (t *EscapeTally) Merge(next Tally) {
	o := next.(*EscapeTally)
	t.Flights += o.Flights
	for i := range o.Stops {
		t.Stops[i] += o.Stops[i]
	}
	if len(t.rows) == 0 {
		t.first = o.first
	}
	for i, row := range o.rows {
		k := o.first + i - t.first
		if k == len(t.rows) {
			t.rows = append(t.rows, row)
			continue
		}
		for m := range row {
			t.rows[k][m].add(&row[m])
		}
	}
}

// Left is what is left at mark m of all lattices together.
func (t *EscapeTally) Left(m int) Left {
	var sum Left
	for r := range t.rows {
		sum.add(&t.rows[r][m])
	}
	return sum
}
