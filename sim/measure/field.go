package measure

import (
	"cavitywright/sim"
	"cavitywright/sim/figure"
)

// Field is a number at every place of the section, told by the orbit that
// starts there: what a map of the section shows.
type Field interface {
	// Value is the number's axis. Its ends are 0 where they are to be those of
	// the numbers found.
	Value() figure.Axis
	// Along measures the number for orbits from these states. Its tally is a
	// Valued. The walls are those of the tracer that the measurement is run
	// with.
	Along(starts []sim.State) Measurement
}

// Valued is the tally of a field.
type Valued interface {
	Tally
	// Values are the numbers of the orbits in order, NaN where an orbit has
	// none.
	Values() []float64
}

// Row is the numbers of a field's tally, for the tally to hold.
type Row struct{ values []float64 }

// Open does nothing: a number is kept when its orbit closes.
func (r *Row) Open(int) {}

// Keep adds the number of the orbit at hand.
func (r *Row) Keep(v float64) { r.values = append(r.values, v) }

// Append adds the numbers of the orbits that come next.
func (r *Row) Append(next Row) { r.values = append(r.values, next.values...) }

// Values are the numbers in order.
func (r *Row) Values() []float64 { return r.values }
