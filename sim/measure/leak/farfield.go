package leak

import (
	"fmt"
	"math"

	"cavitywright/sim"
	"cavitywright/sim/measure"
)

// FarField is what leaves a table against direction and against the place
// along its wall.
type FarField struct {
	Starts  Starts
	Bins    int
	Cells   int
	Each    int
	Cut     float64
	Skip    float64
	Rays    int
	Flights int64
	Stops   measure.Stops
	Account Account
	Skipped float64 // weight that left before Skip
	Again   float64 // share of what was counted that would meet the wall again
	Watched bool    // whether that was looked for: on a convex wall it cannot happen
	rows    []sent
}

// EmissionPlan is how emission is measured. What is zero has its default.
type EmissionPlan struct {
	Rays int     // 20,000
	Bins int     // 720, half a degree each
	Each int     // 400 bounces
	Cut  float64 // weight 1e-4
	Skip float64 // no transient cut
}

// EmissionRays is the number of rays where nobody says otherwise.
const EmissionRays = 20000

// The other defaults are common practice for ray models of dielectric cavities.
const (
	emissionBins  = 720
	emissionEach  = 400
	emissionCut   = 1e-4
	emissionCells = 240
)

func (p EmissionPlan) filled() EmissionPlan {
	if p.Rays == 0 {
		p.Rays = EmissionRays
	}
	if p.Bins == 0 {
		p.Bins = emissionBins
	}
	if p.Each == 0 {
		p.Each = emissionEach
	}
	if p.Cut == 0 {
		p.Cut = emissionCut
	}
	return p
}

// MeasureEmission measures what leaves from a start measure. The error is a
// *BadSeeding, a *measure.NotMeasured or the runner's.
func MeasureEmission(tr *sim.Tracer, run measure.Runner, s Seeding, p EmissionPlan) (*FarField, error) {
	t := tr.Table()
	starts, err := s.On(tr)
	if err != nil {
		return nil, err
	}
	if why := Emits(t); why != "" {
		return nil, &measure.NotMeasured{Name: "far field", Why: why}
	}
	p = p.filled()
	l, err := measure.DrawnLattices(tr, run, p.Rays)
	if err != nil {
		return nil, err
	}
	m := Emission{Starts: starts, Lattice: l, Bins: p.Bins, Cells: emissionCells, Each: p.Each, Cut: p.Cut, Skip: p.Skip, outside: newOutside(t)}
	ran, err := run(m)
	if err != nil {
		return nil, err
	}
	f := ran.(*EmissionTally).FarField()
	if f.counted() == 0 {
		return nil, &measure.NotMeasured{Name: "far field", Why: fmt.Sprintf("nothing of %d rays leaves within %d bounces", f.Rays, f.Each)}
	}
	return f, nil
}

// FarField is what the tally holds so far.
func (t *EmissionTally) FarField() *FarField {
	m := t.of
	f := &FarField{Starts: m.Starts, Bins: m.Bins, Cells: m.Cells, Each: m.Each, Cut: m.Cut, Skip: m.Skip,
		Flights: t.Flights, Stops: t.Stops, Watched: m.outside != nil}
	again := 0.0
	for i := range t.lots.Rows {
		row := &t.lots.Rows[i]
		f.Account.add(&row.account)
		f.Skipped += row.skipped
		again += row.again
		if row.counted() > 0 {
			f.rows = append(f.rows, *row)
		}
	}
	f.Rays = int(f.Account.Started)
	if f.counted() > 0 {
		f.Again = again / f.counted()
	}
	return f
}

func (s *sent) counted() float64 { return s.account.Left - s.skipped }

// counted is the weight in the far field.
func (f *FarField) counted() float64 { return f.Account.Left - f.Skipped }

// of is a number of the far field, read from the sum of the lattices, and its
// standard error by leaving out each lattice in turn (Tukey's jackknife).
func (f *FarField) of(read func(*sent) float64) (value, stderr float64) {
	n := len(f.rows)
	all := sum(f.rows)
	value = read(&all)
	if n < 2 {
		return value, math.NaN()
	}
	var mean float64
	parts := make([]float64, n)
	for i := range parts {
		without := all.without(&f.rows[i])
		parts[i] = read(&without)
		mean += parts[i] / float64(n)
	}
	square := 0.0
	for _, x := range parts {
		square += (x - mean) * (x - mean)
	}
	return value, math.Sqrt(square * float64(n-1) / float64(n))
}

func sum(rows []sent) sent {
	s := sent{byAngle: make([]float64, len(rows[0].byAngle)), byPlace: make([]float64, len(rows[0].byPlace))}
	for i := range rows {
		s.add(&rows[i])
	}
	return s
}

// without is the sum less one of its parts.
func (s *sent) without(o *sent) sent {
	less := sent{byAngle: make([]float64, len(s.byAngle)), byPlace: make([]float64, len(s.byPlace)),
		cos: s.cos - o.cos, path: s.path - o.path, skipped: s.skipped - o.skipped}
	less.account.Left = s.account.Left - o.account.Left
	for i := range less.byAngle {
		less.byAngle[i] = s.byAngle[i] - o.byAngle[i]
	}
	for i := range less.byPlace {
		less.byPlace[i] = s.byPlace[i] - o.byPlace[i]
	}
	return less
}
