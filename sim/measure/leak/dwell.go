package leak

import (
	"cavitywright/sim/measure"
	"slices"

	"cavitywright/sim"
	"cavitywright/table"
	"cavitywright/table/wall"
)

// Dwell lets rays in through the openings of a table by the cosine law (even
// in s over the openings and in p over [-1, 1], as an isotropic field outside
// sends them) and measures their path until they leave. The mean is pi A / W
// for openings of total width W, on any table all of whose section can be
// reached from them (Kac, Bull. Am. Math. Soc. 53, 1002 (1947), on the bounce
// map; common practice in room acoustics).
type Dwell struct {
	Tracer *sim.Tracer
	N      int // rays
	Each   int // most bounces of a ray
	doors  []table.Stretch
	width  float64
}

// NewDwell measures n rays of at most each bounces.
func NewDwell(tr *sim.Tracer, n, each int) Dwell {
	d := Dwell{Tracer: tr, N: n, Each: each}
	d.doors, d.width = Openings(tr.Table())
	return d
}

// Openings are the stretches of wall that let everything out, where no later
// coat covers them, and their total width.
func Openings(t *table.Table) (doors []table.Stretch, width float64) {
	open := func(l wall.Law) bool { _, is := l.(wall.Opening); return is }
	pieces := t.Pieces()
	for i := range pieces {
		p := &pieces[i]
		at := []float64{p.S0, p.S0 + p.Length}
		var coats []table.Stretch
		for _, s := range t.Stretches() {
			if s.Piece == i {
				coats = append(coats, s)
				at = append(at, s.S0, s.S1)
			}
		}
		slices.Sort(at)
		for k := 1; k < len(at); k++ {
			law := t.Law()
			for _, s := range coats {
				if s.S0 <= at[k-1] && s.S1 >= at[k] {
					law = s.Law
				}
			}
			if at[k] > at[k-1] && open(law) {
				doors = append(doors, table.Stretch{Piece: i, S0: at[k-1], S1: at[k], Law: law})
				width += at[k] - at[k-1]
			}
		}
	}
	return doors, width
}

// Orbits is N.
func (d Dwell) Orbits() int { return d.N }

// Bounces is Each.
func (d Dwell) Bounces() int { return d.Each }

// Start is a ray through an opening.
func (d Dwell) Start(_ int, uniform func() float64) sim.Start {
	x := uniform() * d.width
	st := sim.State{P: 2*uniform() - 1}
	for _, s := range d.doors {
		st.S = s.S0 + x
		if x -= s.S1 - s.S0; x < 0 {
			break
		}
	}
	return sim.Start{State: st}
}

// Tally is a *DwellTally.
func (d Dwell) Tally() measure.Tally { return &DwellTally{} }

// DwellTally is the sum of the paths of the rays that left, and its square.
type DwellTally struct {
	Stops   measure.Stops
	Flights int64
	Left    int64          // rays that left
	Kept    int64          // rays that were still inside at the last bounce
	paths   measure.Sample // of those that left
	path    float64        // of the ray at hand
	stop    sim.Stop
}

// Mean is the mean path with its standard error, NaN for fewer than two rays.
func (t *DwellTally) Mean() (mean, stderr float64) { return t.paths.Mean() }

// Open begins a ray.
func (t *DwellTally) Open(int) { t.path, t.stop = 0, sim.Going }

// Add takes a bounce.
func (t *DwellTally) Add(b *sim.Bounce) {
	t.stop = b.Stop
	if b.N > 0 {
		t.path += b.Flight
		t.Flights++
	}
}

// Close ends the ray.
func (t *DwellTally) Close() {
	switch t.stop {
	case sim.Going:
		t.Kept++
		return
	case sim.Escaped:
		t.Left++
		t.paths.Take(t.path)
	}
	t.Stops[t.stop]++
}

// Merge adds the next tally.
func (t *DwellTally) Merge(next measure.Tally) {
	o := next.(*DwellTally)
	t.Flights += o.Flights
	t.Left += o.Left
	t.Kept += o.Kept
	t.paths.Merge(o.paths)
	t.Stops.Add(o.Stops)
}
