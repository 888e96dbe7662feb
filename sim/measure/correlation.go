package measure

import (
	"fmt"
	"math"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/table"
)

// Observable is what is seen of a bounce.
type Observable uint8

// The observables.
const (
	Momentum Observable = iota // p = sin chi
	Flight                     // the length of the flight that ended there
)

// String is the observable's name.
func (o Observable) String() string { return [...]string{"p", "flight"}[o] }

func (o Observable) of(b *sim.Bounce) float64 {
	if o == Flight {
		return b.Flight
	}
	return b.P
}

// Correlation measures how an observable is correlated with itself some bounces
// later, over orbits that start evenly in ds dp: 1 at lag 0, and falling to 0
// where the table mixes.
type Correlation struct {
	Tracer *sim.Tracer
	Starts Lattices
	Of     Observable
	Lags   int // the greatest lag, in bounces
	Each   int // bounces of an orbit that count, besides the lags
}

// Orbits is the number of starts.
func (m Correlation) Orbits() int { return m.Starts.Size() }

// Bounces is the length of an orbit.
func (m Correlation) Bounces() int { return m.Each + m.Lags }

// Start is a point of a lattice.
func (m Correlation) Start(i int, _ func() float64) sim.Start {
	return sim.Start{State: m.Tracer.Uniform(m.Starts.At(i))}
}

// On is the table that the orbits fly on.
func (m Correlation) On() *sim.Tracer { return m.Tracer }

// Tally is a *CorrelationTally.
func (m Correlation) Tally() Tally {
	return &CorrelationTally{of: m, seen: make([]float64, 0, m.Bounces()), lots: Lots[products]{Size: m.Starts.Points.Size()}}
}

// products are the sums of a lattice: of the observable, of it at each lag
// after, and of the products of both.
type products struct {
	n, sum       float64
	later, cross []float64
}

func (f *products) room(lags int) {
	if f.later == nil {
		f.later, f.cross = make([]float64, lags+1), make([]float64, lags+1)
	}
}

func (f *products) add(o *products) {
	if o.later == nil {
		return
	}
	f.room(len(o.later) - 1)
	f.n, f.sum = f.n+o.n, f.sum+o.sum
	for k := range o.later {
		f.later[k] += o.later[k]
		f.cross[k] += o.cross[k]
	}
}

// CorrelationTally is the sums of each lattice.
type CorrelationTally struct {
	Stops  Stops
	Walked int64 // bounces
	of     Correlation
	seen   []float64
	lots   Lots[products]
}

// Open begins orbit i.
func (t *CorrelationTally) Open(i int) {
	t.lots.Open(i)
	t.seen = t.seen[:0]
}

// Add takes a bounce.
func (t *CorrelationTally) Add(b *sim.Bounce) {
	switch {
	case b.Stop != sim.Going:
		t.Stops[b.Stop]++
	case b.N > 0:
		t.seen = append(t.seen, t.of.Of.of(b))
	}
}

// Close counts the orbit. One that stopped on the way is left out.
func (t *CorrelationTally) Close() {
	t.Walked += int64(len(t.seen))
	if len(t.seen) < t.of.Bounces() {
		return
	}
	row := t.lots.Last()
	row.room(t.of.Lags)
	first := t.seen[:t.of.Each]
	row.n += float64(len(first))
	for _, x := range first {
		row.sum += x
	}
	for k := range row.later {
		later := t.seen[k : k+len(first)]
		sum, cross := 0.0, 0.0
		for i, y := range later {
			sum += y
			cross += y * first[i]
		}
		row.later[k] += sum
		row.cross[k] += cross
	}
}

// Merge adds the next tally.
func (t *CorrelationTally) Merge(next Tally) {
	o := next.(*CorrelationTally)
	t.Walked += o.Walked
	t.Stops.Add(o.Stops)
	t.lots.Merge(&o.lots, (*products).add)
}

// At is the correlation at a lag with its standard error; NaN where no orbit
// could be followed or the observable does not vary.
func (t *CorrelationTally) At(lag int) (value, stderr float64) {
	n, sum := 0.0, 0.0
	for i := range t.lots.Rows {
		n, sum = n+t.lots.Rows[i].n, sum+t.lots.Rows[i].sum
	}
	m := sum / n
	of := func(f *products, k int) float64 {
		if f.later == nil {
			return 0
		}
		return f.cross[k] - m*(f.sum+f.later[k]) + m*m*f.n
	}
	return t.lots.Ratio(func(f *products) (a, b float64) { return of(f, lag), of(f, 0) })
}

// Figure is the correlation by the lag. program is the name and version that
// the caption ends with.
func (t *CorrelationTally) Figure(tab *table.Table, program string) figure.Series {
	c := figure.Curve{Hue: 0}
	lo := 0.0
	for k := 0; k <= t.of.Lags; k++ {
		v, e := t.At(k)
		c.X, c.Y, c.Err = append(c.X, float64(k)), append(c.Y, v), append(c.Err, e)
		lo = math.Min(lo, v-e)
	}
	head := fmt.Sprintf("%scorrelation of %s with itself some bounces later; %d orbits of %d bounces, starts even in ds dp; the band is one standard error.",
		Head(tab), map[Observable]string{Momentum: "p = sin χ", Flight: "the flight"}[t.of.Of], t.of.Orbits(), t.of.Bounces())
	return figure.Series{
		X:       figure.Axis{Label: "lag", Unit: "bounces", Lo: 0, Hi: float64(t.of.Lags)},
		Y:       figure.Axis{Label: "correlation of " + t.of.Of.String(), Lo: 1.1 * lo, Hi: 1.05, Marks: []figure.Mark{{At: 0, Kind: figure.Event}}},
		Curves:  []figure.Curve{c},
		Caption: []string{head, Foot(tab, program)},
	}
}

func pathsCaption(tab *table.Table, m, me, v, ve float64, unit string, t *FreePathsTally) string {
	return fmt.Sprintf("%s%d flights, starts even in ds dp; mean %.6g ± %.1g %s (πA/L = %.6g %s), variance %.5g ± %.1g %s²; the band is one standard error.",
		Head(tab), t.Count, m, me, unit, sim.MeanChord(tab), unit, v, ve, unit)
}
