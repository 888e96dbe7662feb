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

// drawnLattices has about n points in all, at least one on each lattice.
func drawnLattices(tr *sim.Tracer, run Runner, n int) (Lattices, error) {
	moved, err := run(draws{tr, mostLattices})
	if err != nil {
		return Lattices{}, err
	}
	points := NewFibonacci(n / lattices)
	count := min(max(n/points.Size(), lattices), mostLattices)
	return Lattices{points, moved.(*drawn).shifts[:count]}, nil
}

// Size is the number of points of all lattices.
func (l Lattices) Size() int { return len(l.Shifts) * l.Points.Size() }

// At is point i, those of the first lattice first, as fractions of the
// section's sides.
func (l Lattices) At(i int) (u, v float64) {
	n := l.Points.Size()
	return l.Points.At(i%n, l.Shifts[i/n])
}

// lots are sums of one kind, a row for each lattice of size points.
type lots[T any] struct {
	size  int
	first int // the lattice of the first row
	rows  []T
}

// open makes the row of orbit i the last one.
func (l *lots[T]) open(i int) {
	k := i / l.size
	if len(l.rows) == 0 {
		l.first = k
	}
	for l.first+len(l.rows) <= k {
		l.rows = append(l.rows, *new(T))
	}
}

// last is the row of the orbit at hand.
func (l *lots[T]) last() *T { return &l.rows[len(l.rows)-1] }

// merge takes the rows of the orbits that come next.
func (l *lots[T]) merge(next *lots[T], add func(into, from *T)) {
	if len(l.rows) == 0 {
		l.first = next.first
	}
	for i := range next.rows {
		if k := next.first + i - l.first; k == len(l.rows) {
			l.rows = append(l.rows, next.rows[i])
		} else {
			add(&l.rows[k], &next.rows[i])
		}
	}
}

// ratio is the ratio of the sums of two numbers over the lattices, with the
// standard error of a ratio of means.
func (l *lots[T]) ratio(of func(*T) (a, b float64)) (ratio, stderr float64) {
	var sa, sb, sum float64
	for i := range l.rows {
		a, b := of(&l.rows[i])
		sa, sb = sa+a, sb+b
	}
	ratio = sa / sb
	for i := range l.rows {
		a, b := of(&l.rows[i])
		sum += (a - ratio*b) * (a - ratio*b)
	}
	n := float64(len(l.rows))
	return ratio, math.Sqrt(sum*n/(n-1)) / sb
}
