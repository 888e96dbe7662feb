package leak

import (
	"cavitywright/sim/measure"
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
	Points measure.Fibonacci // of each lattice
	Shifts []measure.Shift   // one a lattice
	Marks  []int             // counts of bounces, ascending, at least 1
	// Rate is a guess (1/length), Flight the mean flight of what is left: the
	// sums are kept in a form that is exact for rates up to 2 Rate.
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

// step is from one node to the next.
func (e Escape) step() float64 { return 2 * e.Rate / (nodes - 1) }

// Tally is an *EscapeTally.
func (e Escape) Tally() measure.Tally { return &EscapeTally{of: e} }

const (
	// nodes is the number of rates, from 0 to 2 Rate in equal steps, about
	// which the sums over what is left are expanded, and terms the number of
	// terms of each expansion. A rate is at most half a step, Rate/8, from a
	// node. Over the 8 units of Rate t that a measurement spans the exponent
	// is then at most 1: the first term left out is below 1/12!, 2e-9.
	nodes = 9
	terms = 12
)

// Left is what is left of a lattice at a mark: the number of rays, their
// weight, their weight times path, and, for each node g and k from 0, the sums
// over them of w exp(g t) (t - N Flight)^k after N bounces.
type Left struct {
	Rays         int64
	Weight, Path float64
	sums         [nodes][terms]float64
}

func (l *Left) add(o *Left) {
	l.Rays += o.Rays
	l.Weight += o.Weight
	l.Path += o.Path
	for g := range l.sums {
		for k := range l.sums[g] {
			l.sums[g][k] += o.sums[g][k]
		}
	}
}

// EscapeTally is what is left of each lattice at each mark.
type EscapeTally struct {
	Stops   measure.Stops
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
	by := math.Exp(t.of.step() * t.path)
	for g, w := 0, b.Weight; g < nodes; g, w = g+1, w*by {
		for k, y := 0, w; k < terms; k, y = k+1, y*x {
			l.sums[g][k] += y
		}
	}
	t.mark++
}

// Close does nothing.
func (t *EscapeTally) Close() {}

// Merge adds the next tally.
func (t *EscapeTally) Merge(next measure.Tally) {
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
