package leak

import (
	"math"
	"sort"

	"cavitywright/sim"
	"cavitywright/sim/measure"
)

// Survival follows weighted rays and keeps what is left of them at given paths
// and after given counts of bounces. Weight that a wall lets out or absorbs is
// gone; a ray is followed until its path is beyond the last of Times and its
// bounces are beyond the last of Counts, it has made Each bounces, or it carries
// less than Cut.
type Survival struct {
	Starts  Starts
	Lattice measure.Lattices
	Times   []float64 // paths, ascending
	Counts  []int     // bounces, ascending
	Each    int
	Cut     float64
}

// Orbits is the number of rays.
func (m Survival) Orbits() int { return m.Lattice.Size() }

// Bounces is Each.
func (m Survival) Bounces() int { return m.Each }

// Start is a point of a lattice in the start measure.
func (m Survival) Start(i int, uniform func() float64) sim.Start {
	u, v := m.Lattice.At(i)
	return m.Starts.At(u, v, uniform)
}

// Tally is a *SurvivalTally.
func (m Survival) Tally() measure.Tally {
	return &SurvivalTally{of: m, lots: measure.Lots[losses]{Size: m.Lattice.Points.Size()}}
}

// losses are what one lattice lost between its marks: entry k at a path above
// Times[k-1] and up to Times[k], and likewise by bounces.
type losses struct {
	byPath, byCount []float64
	account         Account
}

// SurvivalTally is the losses of each lattice.
type SurvivalTally struct {
	Stops   measure.Stops
	Flights int64
	later   measure.Sample // flights after the first bounce on
	Short   float64        // weight of rays given up before their path was followed to its end
	of      Survival
	lots    measure.Lots[losses]
	ray     course
}

// Open begins ray i.
func (t *SurvivalTally) Open(i int) {
	t.lots.Open(i)
	if row := t.lots.Last(); row.byPath == nil {
		row.byPath = make([]float64, len(t.of.Times)+1)
		row.byCount = make([]float64, len(t.of.Counts)+1)
	}
	t.ray.open()
}

// Add takes a bounce.
func (t *SurvivalTally) Add(b *sim.Bounce) {
	t.ray.take(b)
	if b.N == 0 {
		return
	}
	if !math.IsInf(b.Flight, 1) {
		t.Flights++
		if b.N > 1 {
			t.later.Take(b.Flight)
		}
	}
	gone := t.ray.left + t.ray.absorbed
	if gone == 0 {
		return
	}
	row := t.lots.Last()
	t.ray.book(&row.account)
	row.byPath[sort.SearchFloat64s(t.of.Times, t.ray.path)] += gone
	row.byCount[sort.SearchInts(t.of.Counts, b.N)] += gone
}

// Enough ends a ray that carries too little or has flown far enough.
func (t *SurvivalTally) Enough() bool {
	return t.ray.weight < t.of.Cut || t.ray.path > t.of.last() && t.ray.bounces >= t.of.Counts[len(t.of.Counts)-1]
}

func (m Survival) last() float64 { return m.Times[len(m.Times)-1] }

// Close ends the ray.
func (t *SurvivalTally) Close() {
	if t.ray.stop != sim.Going {
		t.Stops[t.ray.stop]++
	} else if t.ray.path < t.of.last() {
		t.Short += t.ray.weight
	}
	t.ray.close(&t.lots.Last().account)
}

// Merge adds the next tally.
func (t *SurvivalTally) Merge(next measure.Tally) {
	o := next.(*SurvivalTally)
	t.Stops.Add(o.Stops)
	t.Flights += o.Flights
	t.later.Merge(o.later)
	t.Short += o.Short
	t.lots.Merge(&o.lots, func(into, from *losses) {
		addTo(into.byPath, from.byPath)
		addTo(into.byCount, from.byCount)
		into.account.add(&from.account)
	})
}

// addTo adds the entries of from to those of into.
func addTo(into, from []float64) {
	for i, x := range from {
		into[i] += x
	}
}

// Account is what became of all rays.
func (t *SurvivalTally) Account() Account {
	var sum Account
	for i := range t.lots.Rows {
		sum.add(&t.lots.Rows[i].account)
	}
	return sum
}

// ByPath is what is left of each lattice, as a share of what started, at each
// of Times.
func (t *SurvivalTally) ByPath() Lefts {
	return t.lefts(func(l *losses) []float64 { return l.byPath })
}

// ByBounce is the same after each of Counts.
func (t *SurvivalTally) ByBounce() Lefts {
	return t.lefts(func(l *losses) []float64 { return l.byCount })
}

func (t *SurvivalTally) lefts(of func(*losses) []float64) Lefts {
	var all Lefts
	for i := range t.lots.Rows {
		l := of(&t.lots.Rows[i])
		row := make([]float64, len(l)-1)
		started := t.lots.Rows[i].account.Started
		// From the end: what is left is what goes later or stays, and the sum
		// of small shares keeps its digits.
		a := t.lots.Rows[i].account
		rest := a.Kept + a.Undecided + l[len(row)]
		for k := len(row) - 1; k >= 0; k-- {
			row[k] = rest / started
			rest += l[k]
		}
		all = append(all, row)
	}
	return all
}

// Lefts are the shares left of each lattice at a row of marks.
type Lefts [][]float64

// At is the share left at mark k with its standard error.
func (l Lefts) At(k int) (share, stderr float64) {
	var s measure.Sample
	for _, row := range l {
		s.Take(row[k])
	}
	return s.Mean()
}

// Fall is how much the logarithm of what is left falls from mark a to mark b,
// with its standard error.
func (l Lefts) Fall(a, b int) (fall, stderr float64) {
	pa, _ := l.At(a)
	pb, _ := l.At(b)
	square, n := 0.0, float64(len(l))
	for _, row := range l {
		d := row[a]/pa - row[b]/pb
		square += d * d
	}
	return math.Log(pa / pb), math.Sqrt(square / (n * (n - 1)))
}
