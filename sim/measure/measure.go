// Package measure holds one measurement a file: what is launched, how long it
// is followed, and what is kept of its bounces. A measurement knows neither
// workers nor clocks; sim/run carries it out, and its result depends on the
// measurement and the seed alone.
package measure

import (
	"fmt"
	"math"

	"cavitywright/sim"
)

// Measurement says which orbits to follow and makes the tallies that keep what
// is wanted of them.
type Measurement interface {
	// Orbits is the number of orbits, Bounces the greatest number of bounces
	// of each.
	Orbits() int
	Bounces() int
	// Start is where orbit i opens. uniform draws from [0, 1).
	Start(i int, uniform func() float64) sim.Start
	// Tally is an empty tally.
	Tally() Tally
}

// Tally keeps what a measurement wants of a block of orbits. One goroutine uses
// it.
type Tally interface {
	// Open announces that the bounces that follow are orbit i's.
	Open(i int)
	// Add takes one bounce, the opening one (N = 0) included.
	Add(b *sim.Bounce)
	// Close ends the orbit.
	Close()
	// Merge takes the tally of the orbits that come next in order. The other
	// tally is not used afterwards.
	Merge(next Tally)
}

// Sated is a Tally that may have had enough of an orbit before its bounces are
// used up: one whose ray carries too little, for example. It is asked after
// each bounce that it was given; true ends the orbit there.
type Sated interface{ Enough() bool }

// Elsewhere is a Measurement whose orbits fly on another table than the one at
// hand: on the same walls taken as mirrors, for example.
type Elsewhere interface{ On() *sim.Tracer }

// Runner carries out a measurement, on any number of workers and with a seed
// that it knows.
type Runner func(Measurement) (Tally, error)

// NotMeasured is why a reading has no value on a table, in a sentence.
type NotMeasured struct{ Name, Why string }

func (e *NotMeasured) Error() string { return fmt.Sprintf("There is no %s here: %s.", e.Name, e.Why) }

// Stops counts how orbits ended.
type Stops [sim.Stops]int64

// Add counts those of the next block.
func (s *Stops) Add(next Stops) {
	for i, n := range next {
		s[i] += n
	}
}

// Sample is a sum of independent values and of their squares.
type Sample struct {
	n         int64
	sum, sum2 float64
}

// Take adds a value.
func (s *Sample) Take(x float64) {
	s.n++
	s.sum += x
	s.sum2 += x * x
}

// Merge adds the values of the next block.
func (s *Sample) Merge(next Sample) {
	s.n += next.n
	s.sum += next.sum
	s.sum2 += next.sum2
}

// Mean is the mean with its standard error, NaN for fewer than two values.
func (s *Sample) Mean() (mean, stderr float64) {
	n := float64(s.n)
	mean = s.sum / n
	return mean, math.Sqrt(math.Max(0, s.sum2/n-mean*mean) / (n - 1))
}

// Undecided is the number of orbits that ended at a corner or a grazing
// tangent.
func (s Stops) Undecided() int64 { return s[sim.Corner] + s[sim.Grazing] }

// Remark says how many orbits could not be followed, as the end of a note.
func (s Stops) Remark() string {
	text := ""
	for _, stop := range []sim.Stop{sim.Corner, sim.Grazing, sim.Lost} {
		if s[stop] > 0 {
			text += fmt.Sprintf("; %d stopped (%s)", s[stop], stop)
		}
	}
	return text
}
