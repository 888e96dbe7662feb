package leak

import (
	"math"
	"slices"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/table/plane"
)

// Fall is how what is left of a table's rays falls with the path, and what can
// be read from it.
type Fall struct {
	Starts  Starts
	Times   []float64 // paths, ascending, from 0
	ByPath  Lefts     // at Times
	Counts  []int     // bounces, ascending
	ByCount Lefts     // after Counts
	Account Account
	Stops   measure.Stops
	Rays    int
	Flights int64
	Short   float64 // share of the weight given up before the last path
	Flight  float64 // mean flight

	Window    Window
	HasWindow bool
	Tail      *Tail // nil for none
	// PerBounce is the window of what is left by bounces: From and To count
	// them, and the rate is per bounce.
	PerBounce    Window
	HasPerBounce bool
	// Naive is the rate of a small opening in a mixing table, W / (pi A) for
	// openings of total width W; 0 where openings are not the only way out.
	Naive float64
}

const (
	// survivalWork is the number of flights at effort 1.
	survivalWork = 2e7
	leastRays    = 700
	mostRays     = 4e6
	// fallenTo is the share down to which the path is chosen, where nobody
	// chooses one. Four lattices of at most pathPoints points find that path,
	// with pathWork flights each time, or at an effort below quick quickWork.
	fallenTo   = 2e-3
	pathPoints = 610
	pathLeast  = 34
	pathWork   = 4e5
	quickWork  = 4e4
	quick      = 0.02
	// firstPath and mostPath bound that path, in mean flights.
	firstPath = 40
	mostPath  = 4000
	quickPath = 500 // at an effort below quick
	stillPath = 400 // where nothing has left at all
	// mostTurns is how many times more bounces than path over mean flight a
	// ray may make: one that creeps along the wall makes many.
	mostTurns = 20
	// survivalCut is the weight below which a ray is not followed: far below
	// what a curve shows.
	survivalCut = 1e-6
	// pilotCut is that of the pilot.
	pilotCut = 1e-4
	// A curve goes flat, and it does not pay to look further, where the
	// logarithm falls by less than flatFall while the path doubles, and by
	// less than while it doubled before.
	flatFall    = 0.07
	evenMarks   = 1000
	decadeMarks = 24
)

// MeasureFall measures survival from a start measure up to the path until (0
// for one that suits the table); effort multiplies the number of flights. The
// error is a *BadSeeding, a *measure.NotMeasured or the runner's.
func MeasureFall(tr *sim.Tracer, run measure.Runner, s Seeding, until, effort float64) (*Fall, error) {
	starts, err := s.On(tr)
	if err != nil {
		return nil, err
	}
	if why := Leaks(tr.Table()); why != "" {
		return nil, &measure.NotMeasured{Name: "survival", Why: why}
	}
	f := &Fall{Starts: starts, Flight: sim.MeanChord(tr.Table())}
	if tr.Table().Open() {
		f.Flight = plane.Diagonal(tr.Table().Bounds()) / 2
	}
	shifts, err := measure.DrawnShifts(tr, run)
	if err != nil {
		return nil, err
	}
	share := 1.0
	path := until
	if path == 0 {
		path = firstPath * f.Flight
	}
	var mean float64 // flights of a ray
	most, work, fall := float64(mostPath), pathWork, 0.0
	if effort < quick {
		most, work = quickPath, quickWork
	}
	for {
		points := min(max(work/4/(1+2*mean), pathLeast), pathPoints)
		m := f.sized(path, measure.Lattices{Points: measure.NewFibonacci(int(points)), Shifts: shifts[:4]})
		m.Cut = pilotCut
		ran, err := run(m)
		if err != nil {
			return nil, err
		}
		t := ran.(*SurvivalTally)
		mean = float64(t.Flights) / float64(m.Orbits())
		before, fell := share, fall
		share, _ = t.ByPath().At(len(m.Times) - 1)
		if until > 0 {
			break
		}
		fall = math.Log(before / share)
		if share <= fallenTo || path >= most*f.Flight || fall < flatFall && fall < fell || share == 1 && path > stillPath*f.Flight {
			if fall < flatFall && share > fallenTo && path > firstPath*f.Flight {
				path /= 2 // the last doubling showed nothing new
			}
			if tr.Table().Open() {
				path = shortened(m.Times, t.ByPath())
			}
			break
		}
		path *= 2
	}
	if until == 0 && share == 1 {
		return nil, &measure.NotMeasured{Name: "survival", Why: "no ray that was tried ever meets a place that lets it out"}
	}
	rays := survivalWork * effort / measure.Slowness(tr.Table()) / (1 + mean)
	points := measure.NewFibonacci(int(min(max(rays, leastRays), mostRays)) / measure.LeastLattices)
	m := f.sized(path, measure.Lattices{Points: points, Shifts: shifts[:measure.LeastLattices]})
	ran, err := run(m)
	if err != nil {
		return nil, err
	}
	f.read(m, ran.(*SurvivalTally))
	return f, nil
}

// shortened is the path to which a curve is worth following that falls fast
// between posts: as many times as far as where pilotShare is left.
func shortened(times []float64, l Lefts) float64 {
	const (
		pilotShare = 0.02 // of which a pilot is sure
		further    = 5
	)
	last := times[len(times)-1]
	for k := range times {
		if share, _ := l.At(k); share <= pilotShare {
			return min(last, further*times[k])
		}
	}
	return last
}

// sized is the measurement up to a path.
func (f *Fall) sized(path float64, l measure.Lattices) Survival {
	m := Survival{Starts: f.Starts, Lattice: l, Cut: survivalCut, Each: int(mostTurns*path/f.Flight) + 100}
	for k := range evenMarks + 1 {
		m.Times = append(m.Times, path*float64(k)/evenMarks)
	}
	for k := 1.0; ; k++ { // denser than the even marks only near 0
		at := path * math.Pow(10, -k/decadeMarks)
		if at < 0.1*f.Flight || at < 1e-6*path {
			break
		}
		m.Times = append(m.Times, at)
	}
	slices.Sort(m.Times)
	m.Times = slices.Compact(m.Times)
	most := max(int(path/f.Flight), 1)
	step := most/evenMarks + 1
	for n := 0; n <= most; n += step {
		m.Counts = append(m.Counts, n)
	}
	for n := 1; n < step; n = max(n+1, n*9/8) {
		m.Counts = append(m.Counts, n)
	}
	slices.Sort(m.Counts)
	return m
}

// read takes the curves from a tally and looks for the window.
func (f *Fall) read(m Survival, t *SurvivalTally) {
	f.Times, f.Counts, f.ByPath, f.ByCount = m.Times, m.Counts, t.ByPath(), t.ByBounce()
	f.Account, f.Stops, f.Rays, f.Flights = t.Account(), t.Stops, m.Orbits(), t.Flights
	f.Short = t.Short / f.Account.Started
	if tab := m.Starts.tracer.Table(); Opens(tab) == "" {
		_, width := Openings(tab)
		f.Naive = width / (math.Pi * tab.Area())
	}
	flight, _ := t.later.Mean()
	f.Window, f.Tail, f.HasWindow = evenly(f.Times, m.last()/evenMarks, f.ByPath, flight).window()
	f.PerBounce, _, f.HasPerBounce = evenly(f.Bounces(), float64(max(int(m.last()/f.Flight), 1)/evenMarks+1), f.ByCount, 1).window()
}

// Bounces are Counts as numbers on an axis.
func (f *Fall) Bounces() []float64 {
	all := make([]float64, len(f.Counts))
	for i, n := range f.Counts {
		all[i] = float64(n)
	}
	return all
}

// evenly is a curve at those of its marks that are a step apart.
func evenly(marks []float64, step float64, lefts Lefts, flight float64) curve {
	var times []float64
	even := make(Lefts, len(lefts))
	for k, at := range marks {
		if n := at / step; math.Abs(n-math.Round(n)) < 1e-6 && len(times) == int(math.Round(n)) {
			times = append(times, at)
			for r := range even {
				even[r] = append(even[r], lefts[r][k])
			}
		}
	}
	return newCurve(times, even, flight)
}

// Between is the mean rate between two paths: the fall of the logarithm over
// their distance, with its standard error. The paths must be marks, or the
// next mark is taken.
func (f *Fall) Between(from, to float64) (rate, stderr float64) {
	a, _ := slices.BinarySearch(f.Times, from)
	b, _ := slices.BinarySearch(f.Times, to)
	b = min(b, len(f.Times)-1)
	a = min(a, b-1)
	fall, err := f.ByPath.Fall(a, b)
	d := f.Times[b] - f.Times[a]
	return fall / d, err / d
}

// Dwell is the mean path of the weight that was lost before the last path,
// with its standard error.
func (f *Fall) Dwell() (mean, stderr float64) {
	var s measure.Sample
	last := len(f.Times) - 1
	for _, row := range f.ByPath {
		sum := 0.0
		for k := 1; k <= last; k++ {
			sum += (row[k-1] - row[k]) * (f.Times[k] + f.Times[k-1]) / 2
		}
		s.Take(sum / (1 - row[last]))
	}
	return s.Mean()
}

// Left is what is left at the mark at or after a path, with its standard
// error.
func (f *Fall) Left(path float64) (share, stderr float64) {
	k, _ := slices.BinarySearch(f.Times, path)
	return f.ByPath.At(min(k, len(f.Times)-1))
}
