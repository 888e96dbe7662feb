package leak

import (
	"math"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/wall"
)

// Placement measures at what rate rays would leave through an opening, for
// every place and several widths of it, on one and the same set of rays: each
// ray is followed on the table without openings, and counts as gone for an
// opening from its first bounce within it. Differences between places are then
// not blurred by chance that the places do not share.
type Placement struct {
	Tracer  *sim.Tracer
	Lattice measure.Lattices
	Sites   []Site
	Times   []float64 // paths, ascending
	Each    int
	index   [][]int32 // by cell of the wall, the sites that may hold a place in it
}

// Site is a place for an opening: its middle and its width, in the table's
// unit. It does not leave its loop, and may run over the loop's start.
type Site struct{ S, Width float64 }

// NewPlacement measures openings of the given widths centred at n places along
// the wall, the same for each width.
func NewPlacement(tr *sim.Tracer, l measure.Lattices, places []float64, widths, times []float64, each int) Placement {
	m := Placement{Tracer: tr, Lattice: l, Times: times, Each: each}
	for _, w := range widths {
		for _, s := range places {
			m.Sites = append(m.Sites, Site{s, w})
		}
	}
	m.index = indexed(tr.Table(), m.Sites)
	return m
}

// indexCells is the number of cells of the wall in which sites are listed.
const indexCells = 2048

// indexed lists, for each cell of the wall, the sites that reach into it.
func indexed(t *table.Table, sites []Site) [][]int32 {
	cells := make([][]int32, indexCells)
	size := t.Length() / indexCells
	for i, site := range sites {
		for k := range cells {
			mid := (float64(k) + 0.5) * size
			if apart(t, site.S, mid) <= site.Width/2+size || k == int(site.S/size) {
				cells[k] = append(cells[k], int32(i))
			}
		}
	}
	return cells
}

// apart is the distance along the wall between two places of one loop, +Inf
// between loops.
func apart(t *table.Table, a, b float64) float64 {
	l := t.Loops()[t.LoopAt(a)]
	if b < l.S0 || b >= l.S1 {
		return math.Inf(1)
	}
	d := math.Abs(a - b)
	return math.Min(d, l.S1-l.S0-d)
}

// Orbits is the number of rays.
func (m Placement) Orbits() int { return m.Lattice.Size() }

// Bounces is Each.
func (m Placement) Bounces() int { return m.Each }

// Start is a point of a lattice, even in ds dp.
func (m Placement) Start(i int, _ func() float64) sim.Start {
	u, v := m.Lattice.At(i)
	return sim.Start{State: m.Tracer.Uniform(u, v)}
}

// Tally is a *PlacementTally.
func (m Placement) Tally() measure.Tally {
	return &PlacementTally{of: m, lots: measure.Lots[placed]{Size: m.Lattice.Points.Size()}}
}

// placed is, of one lattice, the weight left at each of Times for each site.
type placed struct {
	left    []float64 // Times by Sites
	started float64
}

// PlacementTally is what is left of each lattice.
type PlacementTally struct {
	Stops   measure.Stops
	Flights int64
	of      Placement
	lots    measure.Lots[placed]
	ray     course
	met     []bool // the sites that the ray at hand has met
	all     int    // their number
	mark    int    // the next of Times
}

// Open begins ray i.
func (t *PlacementTally) Open(i int) {
	t.lots.Open(i)
	row := t.lots.Last()
	if row.left == nil {
		row.left = make([]float64, len(t.of.Times)*len(t.of.Sites))
	}
	if t.met == nil {
		t.met = make([]bool, len(t.of.Sites))
	}
	row.started++
	clear(t.met)
	t.mark, t.all = 0, 0
	t.ray.open()
}

// Add takes a bounce.
func (t *PlacementTally) Add(b *sim.Bounce) {
	weight := t.ray.weight
	t.ray.take(b)
	if b.N == 0 {
		return
	}
	t.Flights++
	if b.Stop == sim.Corner || b.Stop == sim.Grazing || b.Stop == sim.Lost {
		t.pass(weight, math.Inf(1)) // counts as left inside, for every site
		return
	}
	t.pass(weight, t.ray.path)
	if b.Piece < 0 {
		return
	}
	tab := t.of.Tracer.Table()
	k := min(int(b.S/tab.Length()*indexCells), indexCells-1)
	for _, i := range t.of.index[k] {
		if !t.met[i] && apart(tab, t.of.Sites[i].S, b.S) <= t.of.Sites[i].Width/2 {
			t.met[i] = true
			t.all++
		}
	}
}

// pass counts a ray of a weight at the marks before a path.
func (t *PlacementTally) pass(weight, path float64) {
	row := t.lots.Last()
	n := len(t.of.Sites)
	for t.mark < len(t.of.Times) && t.of.Times[t.mark] < path {
		left := row.left[t.mark*n:]
		for i, met := range t.met {
			if !met {
				left[i] += weight
			}
		}
		t.mark++
	}
}

// Enough ends a ray that has met every site, passed every mark, or carries
// nothing.
func (t *PlacementTally) Enough() bool {
	return t.mark == len(t.of.Times) || t.all == len(t.met) || t.ray.weight < survivalCut
}

// Close counts a ray that was given up as left inside.
func (t *PlacementTally) Close() {
	if t.ray.stop != sim.Going {
		t.Stops[t.ray.stop]++
	}
	t.pass(t.ray.weight, math.Inf(1))
}

// Merge adds the next tally.
func (t *PlacementTally) Merge(next measure.Tally) {
	o := next.(*PlacementTally)
	t.Stops.Add(o.Stops)
	t.Flights += o.Flights
	t.lots.Merge(&o.lots, func(into, from *placed) {
		addTo(into.left, from.left)
		into.started += from.started
	})
}

// left is the share left at mark m for site i, lattice by lattice.
func (t *PlacementTally) left(m, i int) []float64 {
	all := make([]float64, len(t.lots.Rows))
	for r := range all {
		row := &t.lots.Rows[r]
		all[r] = row.left[m*len(t.of.Sites)+i] / row.started
	}
	return all
}

// Rate is the mean rate of site i between two of Times: the fall of the
// logarithm over their distance, with its standard error. Both are NaN where
// nothing is left.
func (t *PlacementTally) Rate(i, from, to int) (rate, stderr float64) {
	a, b := t.left(from, i), t.left(to, i)
	l := make(Lefts, len(a))
	for r := range l {
		l[r] = []float64{a[r], b[r]}
	}
	fall, err := l.Fall(0, 1)
	d := t.of.Times[to] - t.of.Times[from]
	if math.IsInf(fall, 0) {
		return math.NaN(), math.NaN()
	}
	return fall / d, err / d
}

// Unopened is a design without its openings: the wall as it would be before
// one is cut.
func Unopened(d table.Design) table.Design {
	var kept []table.Coat
	for _, c := range d.Coats {
		if _, is := c.Law.(wall.Opening); !is {
			kept = append(kept, c)
		}
	}
	d.Coats = kept
	if _, is := d.Bare.(wall.Opening); is {
		d.Bare = wall.Mirror{}
	}
	return d
}
