package leak

import (
	"cavitywright/sim/measure"
	"fmt"
	"math"

	"cavitywright/sim"
)

// EscapeRate is the escape rate of a table, with its window and what follows
// it.
type EscapeRate struct {
	Decay
	Next    Decay // over the window after it, of the same length
	HasNext bool
	Flights int64
	Stops   measure.Stops
}

// Slows reports whether what is left falls more slowly after the window than
// in it, by more than chance and rounding would: then it does not fall
// exponentially, and no single rate describes it.
func (r EscapeRate) Slows() bool {
	return r.HasNext && r.Next.Rate < r.Rate*(1-slowShare) && r.Decay.Apart(r.Next) > slowErrors
}

const (
	slowShare  = 0.02 // of the rate
	slowErrors = 4    // standard errors
	uncertain  = 0.3  // share of error beyond which a rate is none
	// The pilot's size: it finds the survival a bounce to a few hundredths,
	// which sizes the windows.
	pilotPoints  = 6765
	pilotShifts  = 4
	pilotBounces = 64
	pilotRays    = 200 // fewer left are too few to read a survival from
	// The window begins where what is left has fallen by e^forgetFall or
	// after forgetBounces, whichever is sooner, and not before the second
	// bounce: the start is then forgotten. Measured on three posts, the rate
	// is wrong by 5 % after one bounce at separation 3, and the fault shrinks
	// fourfold a bounce, to 1e-4 where 1/e^5 is left; at separation 6 by 1 %,
	// shrinking tenfold. A table with a small opening forgets at the rate at
	// which its rays part: the cardioid shows no drift beyond 4 bounces.
	forgetFall    = 5.0
	forgetBounces = 16
	// windowFall is the fall over a window, as an exponent, that yields the
	// smallest error for a number of starts (the least of
	// (e^x - 1)/x^2 is at x = 1.6, and it is flat there).
	windowFall    = 1.8
	windowBounces = 5000
	// sparse is the survival a bounce below which most starts are wasted and
	// the pilot looks for the cells from which rays last.
	sparse       = 0.6
	searchPoints = 1 << 22 // at effort 1 and above
	searchLeast  = 1 << 16
	// escapeWork is the number of flights at effort 1, and sparseWork how many
	// times more where most starts are wasted: among posts, where flights cost
	// little.
	escapeWork = 4e7
	sparseWork = 3
)

// MeasureEscape measures the escape rate of a table; effort multiplies the
// number of flights. The error is a *NotMeasured where there is no rate, or the
// runner's.
func MeasureEscape(tr *sim.Tracer, run measure.Runner, effort float64) (EscapeRate, error) {
	shifts, err := measure.DrawnShifts(tr, run)
	if err != nil {
		return EscapeRate{}, err
	}
	p := plan{tracer: tr, run: run, shifts: shifts}
	if err := p.pilot(); err != nil {
		return EscapeRate{}, err
	}
	if err := p.search(effort); err != nil {
		return EscapeRate{}, err
	}
	ran, err := run(p.main(effort))
	if err != nil {
		return EscapeRate{}, err
	}
	t := ran.(*EscapeTally)
	r := EscapeRate{Flights: t.Flights, Stops: t.Stops}
	ok := false
	if r.Decay, ok = t.Decay(0, 1); !ok {
		return r, escapeFault("of %d rays %d last %d bounces, too few or too unevenly to read a rate from",
			t.of.Orbits(), t.Left(1).Rays, p.to)
	}
	if !(r.Err < uncertain*r.Rate) {
		return r, escapeFault("what is left hardly falls between %d and %d bounces (%.2g ± %.1g per %s)",
			p.from, p.to, r.Rate, r.Err, tr.Table().Design().Unit)
	}
	r.Next, r.HasNext = t.Decay(1, 2)
	return r, nil
}

// plan is what a pilot finds out before an escape rate is measured.
type plan struct {
	tracer   *sim.Tracer
	run      measure.Runner
	shifts   []measure.Shift
	keep     float64 // weight kept a bounce, once the start is forgotten
	flight   float64 // mean path of a flight
	share    [3]float64
	rays     float64 // rays kept a bounce
	staying  float64 // factor before rays^n
	from, to int     // the window, in bounces
	cells    Cells
}

func (p *plan) pilot() error {
	e := Escape{Tracer: p.tracer, Points: measure.NewFibonacci(pilotPoints), Shifts: p.shifts[:pilotShifts]}
	for n := 1; n <= pilotBounces; n = max(n+1, n*5/4) {
		e.Marks = append(e.Marks, n)
	}
	ran, err := p.run(e)
	if err != nil {
		return err
	}
	t := ran.(*EscapeTally)
	last := 0
	for last+1 < len(e.Marks) && t.Left(last+1).Rays >= pilotRays {
		last++
	}
	if last == 0 {
		last = 1
	}
	// From where the window may begin at the latest, or the middle.
	first := last - 1
	for first > 0 && e.Marks[first] > min(forgetBounces, (e.Marks[last]+1)/2) {
		first--
	}
	a, b := t.Left(first), t.Left(last)
	if b.Rays == 0 {
		return escapeFault("hardly any ray meets the wall more than %d times", e.Marks[first])
	}
	na, nb := float64(e.Marks[first]), float64(e.Marks[last])
	n := float64(e.Orbits())
	p.keep = math.Pow(b.Weight/a.Weight, 1/(nb-na))
	p.rays = math.Pow(float64(b.Rays)/float64(a.Rays), 1/(nb-na))
	p.staying = float64(b.Rays) / n / math.Pow(p.rays, nb)
	p.flight = b.Path / b.Weight / nb
	p.share = [3]float64{1, float64(t.Left(0).Rays) / n, float64(t.Left(1).Rays) / n}
	fall := -math.Log(p.keep)
	p.from = int(math.Round(min(max(forgetFall/fall, 2), forgetBounces)))
	p.to = p.from + int(math.Round(min(max(windowFall/fall, 1), windowBounces)))
	return nil
}

// search finds the cells of the section from which rays last, where they are
// few. They are sought by the second bounce, or by the first where the search
// would see too few of the strips from which a ray makes two.
func (p *plan) search(effort float64) error {
	if p.rays > sparse {
		return nil
	}
	l := Lasting{Tracer: p.tracer, Points: measure.NewFibonacci(int(max(searchPoints*min(effort, 1), searchLeast))), Shift: p.shifts[0], Each: 2}
	if p.share[2] < 0.01 {
		l.Each = 1
	}
	ran, err := p.run(l)
	if err != nil {
		return err
	}
	p.cells = ran.(*LastingTally).Cells()
	return nil
}

func (p *plan) main(effort float64) Escape {
	next := 2*p.to - p.from
	// The flights of one start: those of a geometric series.
	flights := float64(next)
	if p.rays < 1 {
		flights = p.staying * p.rays * (1 - math.Pow(p.rays, float64(next))) / (1 - p.rays)
	}
	starts := escapeWork * effort / (1 + flights/p.cells.Share()) / measure.Slowness(p.tracer.Table())
	if p.rays <= sparse {
		starts *= sparseWork
	}
	points := measure.NewFibonacci(int(starts / measure.LeastLattices))
	n := min(max(int(starts)/points.Size(), measure.LeastLattices), len(p.shifts))
	return Escape{
		Tracer: p.tracer, Cells: p.cells, Points: points, Shifts: p.shifts[:n],
		Marks: []int{p.from, p.to, next},
		Rate:  -math.Log(p.keep) / p.flight, Flight: p.flight,
	}
}

func escapeFault(format string, args ...any) error {
	return &measure.NotMeasured{Name: "escape-rate", Why: fmt.Sprintf(format, args...)}
}
