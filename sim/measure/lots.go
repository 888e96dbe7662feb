package measure

import (
	"math"

	"cavitywright/sim"
)

// Lattices are starts on lattices that are each shifted as a whole by a place
// of its own: what each yields is free of the others, so that their scatter is
// an honest error of their mean, smaller than that of independent starts
// (Cranley and Patterson, SIAM J. Numer. Anal. 13, 904 (1976)).
type Lattices struct {
	Points Fibonacci // of each
	Shifts []Shift   // one a lattice
}

const (
	// LeastLattices is the least number of lattices: their scatter then gives
	// the error to one part in eight. mostLattices is reached where the next
	// larger lattice would just be too large.
	LeastLattices = 32
	mostLattices  = 56
)

// DrawnShifts are as many shifts as a set of lattices may need, drawn by the
// runner.
func DrawnShifts(tr *sim.Tracer, run Runner) ([]Shift, error) {
	moved, err := run(draws{tr, mostLattices})
	if err != nil {
		return nil, err
	}
	return moved.(*drawn).shifts, nil
}

// DrawnLattices has about n points in all, at least one on each lattice.
func DrawnLattices(tr *sim.Tracer, run Runner, n int) (Lattices, error) {
	shifts, err := DrawnShifts(tr, run)
	if err != nil {
		return Lattices{}, err
	}
	points := NewFibonacci(n / LeastLattices)
	count := min(max(n/points.Size(), LeastLattices), mostLattices)
	return Lattices{points, shifts[:count]}, nil
}

// Size is the number of points of all lattices.
func (l Lattices) Size() int { return len(l.Shifts) * l.Points.Size() }

// At is point i, those of the first lattice first, as fractions of the
// section's sides.
func (l Lattices) At(i int) (u, v float64) {
	n := l.Points.Size()
	return l.Points.At(i%n, l.Shifts[i/n])
}

// Lots are sums of one kind, a row for each lattice of size points.
type Lots[T any] struct {
	Size  int
	Rows  []T
	first int // the lattice of the first row
}

// Open makes the row of orbit i the last one.
func (l *Lots[T]) Open(i int) {
	k := i / l.Size
	if len(l.Rows) == 0 {
		l.first = k
	}
	for l.first+len(l.Rows) <= k {
		l.Rows = append(l.Rows, *new(T))
	}
}

// Last is the row of the orbit at hand.
func (l *Lots[T]) Last() *T { return &l.Rows[len(l.Rows)-1] }

// Merge takes the rows of the orbits that come next.
func (l *Lots[T]) Merge(next *Lots[T], add func(into, from *T)) {
	if len(l.Rows) == 0 {
		l.first = next.first
	}
	for i := range next.Rows {
		if k := next.first + i - l.first; k == len(l.Rows) {
			l.Rows = append(l.Rows, next.Rows[i])
		} else {
			add(&l.Rows[k], &next.Rows[i])
		}
	}
}

// Ratio is the ratio of the sums of two numbers over the lattices, with the
// standard error of a ratio of means.
func (l *Lots[T]) Ratio(of func(*T) (a, b float64)) (ratio, stderr float64) {
	var sa, sb, sum float64
	for i := range l.Rows {
		a, b := of(&l.Rows[i])
		sa, sb = sa+a, sb+b
	}
	ratio = sa / sb
	for i := range l.Rows {
		a, b := of(&l.Rows[i])
		sum += (a - ratio*b) * (a - ratio*b)
	}
	n := float64(len(l.Rows))
	return ratio, math.Sqrt(sum*n/(n-1)) / sb
}
