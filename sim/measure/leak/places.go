package leak

import (
	"math"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/wall"
)

// Places is the rate of an opening against its place along the wall, for each
// of its widths.
type Places struct {
	Tracer   *sim.Tracer // of the table without openings
	S        []float64   // middles
	Widths   []float64
	From, To float64   // the path over which the rate is read
	Rates    []float64 // widths by places
	Errs     []float64
	Late     []float64 // the rate from To to twice as far
	LateErrs []float64
	Naive    []float64 // W / (pi A), one a width
	Rays     int
	Flights  int64
	Stops    measure.Stops
}

// PlacementPlan is what is asked of MeasurePlaces. Widths are in the table's
// unit; From and To, paths, are chosen where both are 0.
type PlacementPlan struct {
	Widths   []float64
	Places   int
	From, To float64
	Effort   float64
}

const (
	// placesWork is the number of flights at effort 1.
	placesWork = 1.5e6
	// In units of 1/naive: where the rate is read from, and to.
	placesFrom = 1.1
	placesTo   = 3.7
)

// MeasurePlaces measures the rate of an opening for every place along the
// wall of a table whose own openings are closed for it. The error is a
// *measure.NotMeasured or the runner's; run must run on tr.
func MeasurePlaces(tr *sim.Tracer, run measure.Runner, p PlacementPlan) (*Places, error) {
	t := tr.Table()
	if why := measure.Closed(t); why != "" {
		return nil, &measure.NotMeasured{Name: "rate of an opening", Why: why}
	}
	if _, width := Openings(t); width > 0 {
		panic("leak: places are measured on a wall without openings")
	}
	out := &Places{Tracer: tr, Widths: p.Widths, From: p.From, To: p.To}
	least := math.Inf(1)
	for _, w := range p.Widths {
		if !(w > 0 && w < t.Length()) {
			return nil, &measure.NotMeasured{Name: "rate of an opening", Why: "its width must be above 0 and below the length of the wall"}
		}
		out.Naive = append(out.Naive, w/(math.Pi*t.Area()))
		least = math.Min(least, w)
	}
	middle := p.Widths[len(p.Widths)/2] / (math.Pi * t.Area())
	if out.From == 0 && out.To == 0 {
		out.From, out.To = placesFrom/middle, placesTo/middle
	}
	for k := range p.Places {
		out.S = append(out.S, (float64(k)+0.5)/float64(p.Places)*t.Length())
	}
	late := 2*out.To - out.From
	chord := sim.MeanChord(t)
	rays := placesWork * p.Effort / measure.Slowness(t) * chord / late
	l, err := measure.DrawnLattices(tr, run, max(int(rays), 3000))
	if err != nil {
		return nil, err
	}
	m := NewPlacement(tr, l, out.S, p.Widths, []float64{out.From, out.To, late}, int(mostTurns*late/chord)+100)
	ran, err := run(m)
	if err != nil {
		return nil, err
	}
	tally := ran.(*PlacementTally)
	out.Rays, out.Flights, out.Stops = m.Orbits(), tally.Flights, tally.Stops
	for i := range m.Sites {
		rate, err := tally.Rate(i, 0, 1)
		out.Rates, out.Errs = append(out.Rates, rate), append(out.Errs, err)
		rate, err = tally.Rate(i, 1, 2)
		out.Late, out.LateErrs = append(out.Late, rate), append(out.LateErrs, err)
	}
	return out, nil
}

// Slow reports whether, at place i of width k, the rate falls later by more
// than chance: what is left does not fall exponentially there.
func (p *Places) Slow(k, i int) bool {
	n := k*len(p.S) + i
	return p.Late[n] < p.Rates[n]*(1-tailShare) && p.Rates[n]-p.Late[n] > tailErrors*math.Hypot(p.Errs[n], p.LateErrs[n])
}

// OpeningAt is a design with one opening of a width centred at the place s of
// its wall, in place of those that it has. The opening is laid side by side
// where it crosses joints.
func OpeningAt(t *table.Table, s, width float64) table.Design {
	d := Unopened(t.Design())
	loop := t.Loops()[t.LoopAt(s)]
	span := loop.S1 - loop.S0
	for _, turn := range []float64{-span, 0, span} {
		lo, hi := s-width/2+turn, s+width/2+turn
		last := [2]int{-1, -1}
		for i := loop.First; i < loop.Last; i++ {
			p := &t.Pieces()[i]
			if at := [2]int{p.Item, p.Side}; at != last {
				last = at
				s0, s1, _ := t.SideRange(p.Item, p.Side)
				from, to := math.Max(lo, s0), math.Min(hi, s1)
				if from < to {
					d.Coats = append(d.Coats, table.Coat{Item: p.Item, Side: p.Side, From: (from - s0) / (s1 - s0), To: (to - s0) / (s1 - s0), Law: wall.Opening{}})
				}
			}
		}
	}
	return d
}
