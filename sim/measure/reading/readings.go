// Package reading is the list of the numbers that a table is measured for, each
// with its definition, unit and error. How they are measured stands in the
// packages that it calls.
package reading

import (
	"fmt"
	"strings"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/chaos"
	"cavitywright/sim/measure/leak"
	"cavitywright/table"
)

// Reading is a number that a table is measured for.
type Reading struct {
	Name  string
	About string // what it is, with unit and source, in one sentence
	Kind  Exactness
	fits  func(*table.Table) string // why the table has no such number, "" where it has
	take  func(bench) (figure.Scalar, error)
}

// Exactness says how a reading comes about.
type Exactness uint8

// The kinds of reading. Asked ones are measured, but only where they are named.
const (
	Exact Exactness = iota
	Measured
	Asked
)

// NoReading says that no reading has the name.
type NoReading struct{ Name string }

func (e *NoReading) Error() string {
	var names []string
	for _, r := range readings {
		names = append(names, r.Name)
	}
	return fmt.Sprintf("There is no reading called %q; use one of %s.", e.Name, strings.Join(names, ", "))
}

// readings is the list; a new one is a line here.
var readings = []Reading{
	{"perimeter", "Length L of all walls, in the table's unit (exact).", Exact, always, perimeter},
	{"area", "Area A of the table without its obstacles, in the unit squared (exact).", Exact, measure.Closed, area},
	{"mean-chord", "Mean flight between bounces over starts even in ds dp, in the unit (measured).", Measured, measure.Closed, meanChord},
	{"mean-chord-exact", "What the mean flight must be, pi A / L, in the unit (Santaló 1976; with obstacles Chernov 1997).", Exact, measure.Closed, meanChordExact},
	{"escape-rate", "Rate at which what is left of rays started evenly in ds dp falls per path length, in 1/unit (Gaspard and Rice 1989).", Measured, leak.Leaks, escapeRate},
	{"mean-dwell", "Mean path of rays that enter through the openings by the cosine law until they leave, in the unit (pi A / W by Kac 1947).", Measured, leak.Opens, meanDwell},
	{"lyapunov-per-length", "Largest Lyapunov exponent of the chaotic orbits off mirrors, in 1/unit of path (Benettin and Strelcyn 1978).", Measured, chaos.Mirrors, lyapunovPerLength},
	{"lyapunov-per-bounce", "The same per bounce.", Measured, chaos.Mirrors, lyapunovPerBounce},
	{"lyapunov-per-second", "The same per second at a speed that is given, divided by the index inside a dielectric wall, in 1/s.", Asked, chaos.Mirrors, lyapunovPerSecond},
	{"precision-horizon", "Bounces after which double precision has lost an orbit: the logarithm of 2^53 by the exponent per bounce.", Measured, parts, precisionHorizon},
	{"chaotic-share-section", "Share of ds dp whose orbits off mirrors are chaotic, by the growth of a tangent vector and by weighted Birkhoff averages (Sander and Meiss 2020).", Measured, chaos.Mirrors, chaoticSection},
	{"chaotic-share-energy", "The same share of the energy surface: starts count by their mean flight.", Measured, chaos.Mirrors, chaoticEnergy},
	{"free-path-variance", "Variance of the flights between bounces over starts even in ds dp, in the unit squared (8/3 - pi^2/4 on a disc of radius 1).", Measured, measure.Closed, freePathVariance},
	{"flight-correlation", "Correlation of a flight with the next one off mirrors: 0 where they are independent.", Measured, chaos.Mirrors, flightCorrelation},
	{"window-share", "Share of what leaves within 30° of +x, refracted by Snell's law, from rays that start above the critical angle where the wall has one, else even in ds dp.", Measured, leak.Emits, windowShare},
	{"back-share", "The same within 30° of the opposite direction.", Measured, leak.Emits, backShare},
	{"lobe-width", "Full width at half maximum of the greatest lobe of the same far field, in degrees.", Measured, leak.Emits, lobeWidth},
	{"mean-cosine", "Mean cosine of the direction of the same far field from +x.", Measured, leak.Emits, meanCosine},
	{"far-field-entropy", "Entropy of the same far field relative to an even one: 1 where as much goes in every direction.", Measured, leak.Emits, farEntropy},
}

// Readings lists all readings.
func Readings() []Reading { return readings }

// Wanted are the readings to take of a table: those named, or all that the
// table has where none is named. The error is a *NoReading or, for a named
// reading that the table does not have, a *measure.NotMeasured.
func Wanted(t *table.Table, names []string) ([]Reading, error) {
	var all []Reading
	if len(names) == 0 {
		for _, r := range readings {
			if r.Kind != Asked && r.fits(t) == "" {
				all = append(all, r)
			}
		}
		return all, nil
	}
	for _, name := range names {
		r, err := find(name)
		if err != nil {
			return nil, err
		}
		if why := r.fits(t); why != "" {
			return nil, &measure.NotMeasured{Name: name, Why: why}
		}
		all = append(all, r)
	}
	return all, nil
}

func find(name string) (Reading, error) {
	for _, r := range readings {
		if r.Name == name {
			return r, nil
		}
	}
	return Reading{}, &NoReading{name}
}

// bench is what a reading is taken with.
type bench struct {
	tracer *sim.Tracer
	run    measure.Runner
	effort float64
	speed  Speed
	kept   *kept
}

// Take takes this one reading, which must be Wanted on the tracer's table, as a
// Taker does; without a speed. The error is a *measure.NotMeasured where it comes out that there is no
// such number, or run's.
func (r Reading) Take(tr *sim.Tracer, run measure.Runner, effort float64, seed uint64) (figure.Scalar, error) {
	return NewTaker(tr, run, effort, seed, 0).Take(r)
}

const (
	// chordWork is the number of bounces of the mean chord at effort 1, in
	// orbits of chordEach; chordStarts that of its flights where a ray that
	// goes on may leave.
	chordWork   = 1e7
	chordEach   = 200
	chordStarts = 3e6
	// dwellWork is the number of bounces of the mean dwell at effort 1, and
	// dwellEach the most of one ray, in mean dwells.
	dwellWork = 1e7
	dwellEach = 1000
)

func perimeter(b bench) (figure.Scalar, error) {
	return figure.Scalar{Value: b.tracer.Length(), Unit: b.unit(), Note: "exact"}, nil
}

func area(b bench) (figure.Scalar, error) {
	return figure.Scalar{Value: b.tracer.Table().Area(), Unit: b.unit() + "²", Note: "exact"}, nil
}

func meanChordExact(b bench) (figure.Scalar, error) {
	return figure.Scalar{Value: sim.MeanChord(b.tracer.Table()), Unit: b.unit(), Note: "exact, pi A / L"}, nil
}

func meanChord(b bench) (figure.Scalar, error) {
	work := b.effort / measure.Slowness(b.tracer.Table())
	c := measure.Chord{Tracer: b.tracer, N: max(int(chordWork*work/chordEach), 2), Each: chordEach}
	note := "starts even in ds dp"
	if leak.Leaks(b.tracer.Table()) == "" {
		// Those that stay are not even any more: one flight each.
		c.N, c.Each = max(int(chordStarts*work), 2), 1
		note += ", one flight each, since rays leave"
	}
	ran, err := b.run(c)
	if err != nil {
		return figure.Scalar{}, err
	}
	t := ran.(*measure.ChordTally)
	s := figure.Scalar{Unit: b.unit(), Bounces: t.Count, Note: note + t.Stops.Remark()}
	s.Value, s.StdErr = t.Mean()
	return s, nil
}

func escapeRate(b bench) (figure.Scalar, error) {
	r, err := leak.MeasureEscape(b.tracer, b.run, b.effort)
	if err != nil {
		return figure.Scalar{}, err
	}
	note := fmt.Sprintf("starts even in ds dp; fall of what is left from %d to %d bounces, per path", r.From, r.To)
	if r.Slows() {
		note += fmt.Sprintf("; it slows: %.3g from %d to %d bounces", r.Next.Rate, r.Next.From, r.Next.To)
	}
	return figure.Scalar{Value: r.Rate, StdErr: r.Err, Unit: "1/" + b.unit(), Bounces: r.Flights, Note: note + r.Stops.Remark()}, nil
}

func meanDwell(b bench) (figure.Scalar, error) {
	t := b.tracer.Table()
	_, width := leak.Openings(t)
	bounces := t.Length() / width // mean number until a ray leaves: Kac 1947
	rays := int(dwellWork * b.effort / measure.Slowness(t) / bounces)
	ran, err := b.run(leak.NewDwell(b.tracer, max(rays, 2), int(dwellEach*bounces)))
	if err != nil {
		return figure.Scalar{}, err
	}
	d := ran.(*leak.DwellTally)
	if d.Left < 2 {
		return figure.Scalar{}, &measure.NotMeasured{Name: "mean-dwell", Why: "hardly any ray that enters leaves again"}
	}
	s := figure.Scalar{Unit: b.unit(), Bounces: d.Flights}
	s.Value, s.StdErr = d.Mean()
	s.Note = fmt.Sprintf("entering by the cosine law, %d rays", d.Left)
	if d.Kept > 0 {
		s.Note += fmt.Sprintf("; %d rays that stayed %d bounces left out", d.Kept, int(dwellEach*bounces))
	}
	s.Note += d.Stops.Remark()
	return s, nil
}

func (b bench) unit() string { return b.tracer.Table().Design().Unit.String() }

func always(*table.Table) string { return "" }
