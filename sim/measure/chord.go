package measure

import (
	"math"

	"cavitywright/sim"
)

// Chord measures the mean flight between bounces over the uniform measure ds dp
// of the section. The orbits start independently and evenly, and the uniform
// measure is preserved, so each orbit's mean is an independent sample of the
// same expectation: the standard error is that of the mean of orbit means,
// with no correlation overlooked.
type Chord struct {
	Tracer *sim.Tracer
	N      int // orbits
	Each   int // bounces an orbit
}

// Orbits is N.
func (c Chord) Orbits() int { return c.N }

// Bounces is Each.
func (c Chord) Bounces() int { return c.Each }

// Start is a state drawn evenly in ds dp.
func (c Chord) Start(_ int, uniform func() float64) sim.Start {
	return sim.Start{State: c.Tracer.Uniform(uniform(), uniform())}
}

// Tally is a *ChordTally.
func (c Chord) Tally() Tally { return &ChordTally{} }

// ChordTally is the sum over orbits of their mean flights and its square.
type ChordTally struct {
	Stops   Stops
	Count   int64   // flights
	means   Sample  // of the orbits
	path    float64 // of the orbit at hand
	flights int64
}

// Mean is the mean with its standard error, NaN for fewer than two orbits.
func (t *ChordTally) Mean() (mean, stderr float64) { return t.means.Mean() }

// Open begins an orbit.
func (t *ChordTally) Open(int) { t.path, t.flights = 0, 0 }

// Add takes a bounce.
func (t *ChordTally) Add(b *sim.Bounce) {
	if b.Stop != sim.Going {
		t.Stops[b.Stop]++
	}
	if b.N > 0 && !math.IsInf(b.Flight, 0) {
		t.path += b.Flight
		t.flights++
		t.Count++
	}
}

// Close ends the orbit.
func (t *ChordTally) Close() {
	if t.flights == 0 {
		return
	}
	t.means.Take(t.path / float64(t.flights))
}

// Merge adds the next tally.
func (t *ChordTally) Merge(next Tally) {
	o := next.(*ChordTally)
	t.Count += o.Count
	t.means.Merge(o.means)
	t.Stops.Add(o.Stops)
}
