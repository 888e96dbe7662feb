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
	Stops     Stops
	Count     int64 // flights
	orbits    int64
	sum, sum2 float64
	path      float64 // of the orbit at hand
	n         int64
}

// Open begins an orbit.
func (t *ChordTally) Open(int) { t.path, t.n = 0, 0 }

// Add takes a bounce.
func (t *ChordTally) Add(b *sim.Bounce) {
	if b.Stop != sim.Going {
		t.Stops[b.Stop]++
	}
	if b.N > 0 && !math.IsInf(b.Flight, 0) {
		t.path += b.Flight
		t.n++
		t.Count++
	}
}

// Close ends the orbit.
func (t *ChordTally) Close() {
	if t.n == 0 {
		return
	}
	m := t.path / float64(t.n)
	t.orbits++
	t.sum += m
	t.sum2 += m * m
}

// Merge adds the next tally.
func (t *ChordTally) Merge(next Tally) {
	o := next.(*ChordTally)
	t.orbits += o.orbits
	t.Count += o.Count
	t.sum += o.sum
	t.sum2 += o.sum2
	for i := range o.Stops {
		t.Stops[i] += o.Stops[i]
	}
}

// Mean is the mean flight with its standard error.
func (t *ChordTally) Mean() (mean, stderr float64) {
	n := float64(t.orbits)
	mean = t.sum / n
	return mean, math.Sqrt(math.Max(0, t.sum2/n-mean*mean) / (n - 1))
}
