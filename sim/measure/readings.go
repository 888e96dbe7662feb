package measure

import (
	"fmt"
	"math"
	"strings"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/wall"
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

// The kinds of reading. Awaited ones have a name and no measurement yet.
const (
	Exact Exactness = iota
	Measured
	Awaited
)

// NotMeasured is why a reading has no value on a table, in a sentence.
type NotMeasured struct{ Name, Why string }

func (e *NotMeasured) Error() string { return fmt.Sprintf("There is no %s here: %s.", e.Name, e.Why) }

// NoReading says that no reading has the name.
type NoReading struct{ Name string }

func (e *NoReading) Error() string {
	var names []string
	for _, r := range readings {
		if r.Kind != Awaited {
			names = append(names, r.Name)
		}
	}
	return fmt.Sprintf("There is no reading called %q; use one of %s.", e.Name, strings.Join(names, ", "))
}

// readings is the list; a new one is a line here.
var readings = []Reading{
	{"perimeter", "Length L of all walls, in the table's unit (exact).", Exact, always, perimeter},
	{"area", "Area A of the table without its obstacles, in the unit squared (exact).", Exact, closed, area},
	{"mean-chord", "Mean flight between bounces over starts even in ds dp, in the unit (measured).", Measured, closed, meanChord},
	{"mean-chord-exact", "What the mean flight must be, pi A / L, in the unit (Santaló 1976; with obstacles Chernov 1997).", Exact, closed, meanChordExact},
	{"escape-rate", "Rate at which what is left of rays started evenly in ds dp falls per path length, in 1/unit (Gaspard and Rice 1989).", Measured, leaks, escapeRate},
	{"mean-dwell", "Mean path of rays that enter through the openings by the cosine law until they leave, in the unit (pi A / W by Kac 1947).", Measured, opens, meanDwell},
	{"lyapunov-per-length", "Largest Lyapunov exponent of the chaotic orbits off mirrors, in 1/unit of path (Benettin and Strelcyn 1978).", Measured, mirrors, lyapunovPerLength},
	{"lyapunov-per-bounce", "The same per bounce.", Measured, mirrors, lyapunovPerBounce},
	{"chaotic-share-section", "Share of ds dp whose orbits off mirrors are chaotic, by the growth of a tangent vector and by weighted Birkhoff averages (Sander and Meiss 2020).", Measured, mirrors, chaoticSection},
	{"chaotic-share-energy", "The same share of the energy surface: starts count by their mean flight.", Measured, mirrors, chaoticEnergy},
	awaited("window-share"),
	awaited("lobe-width"),
}

func awaited(name string) Reading {
	return Reading{Name: name, About: "Not measured by this version.", Kind: Awaited,
		fits: func(*table.Table) string { return "this version does not measure it yet" }}
}

// Readings lists all readings.
func Readings() []Reading { return readings }

// Wanted are the readings to take of a table: those named, or all that the
// table has where none is named. The error is a *NoReading or, for a named
// reading that the table does not have, a *NotMeasured.
func Wanted(t *table.Table, names []string) ([]Reading, error) {
	var all []Reading
	if len(names) == 0 {
		for _, r := range readings {
			if r.fits(t) == "" {
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
			return nil, &NotMeasured{name, why}
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
	run    Runner
	effort float64
}

// Take takes the reading, which must be Wanted on the tracer's table. run
// knows the seed, which is only noted here; effort multiplies the number of
// bounces. The error is a *NotMeasured where it comes out that there is no
// such number, or run's.
func (r Reading) Take(tr *sim.Tracer, run Runner, effort float64, seed uint64) (figure.Scalar, error) {
	s, err := r.take(bench{tr, run, effort})
	s.Name, s.Seed = r.Name, seed
	return s, err
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

// slowness is how many times longer a bounce takes than on a stadium, roughly
// (measured: three times on smooth spans, and growing as the root of the
// number of pieces, most of which a flight passes by): it divides the work of
// a reading, so that a reading takes about the same time on any table.
func slowness(t *table.Table) float64 {
	pieces := t.Pieces()
	slow := math.Max(1, math.Sqrt(float64(len(pieces)))/2)
	for i := range pieces {
		if k := pieces[i].Kind; k == curve.Bezier || k == curve.Harmonic {
			return 3 * slow
		}
	}
	return slow
}

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
	work := b.effort / slowness(b.tracer.Table())
	c := Chord{Tracer: b.tracer, N: max(int(chordWork*work/chordEach), 2), Each: chordEach}
	note := "starts even in ds dp"
	if leaks(b.tracer.Table()) == "" {
		// Those that stay are not even any more: one flight each.
		c.N, c.Each = max(int(chordStarts*work), 2), 1
		note += ", one flight each, since rays leave"
	}
	ran, err := b.run(c)
	if err != nil {
		return figure.Scalar{}, err
	}
	t := ran.(*ChordTally)
	s := figure.Scalar{Unit: b.unit(), Bounces: t.Count, Note: note + t.Stops.remark()}
	s.Value, s.StdErr = t.Mean()
	return s, nil
}

func escapeRate(b bench) (figure.Scalar, error) {
	r, err := MeasureEscape(b.tracer, b.run, b.effort)
	if err != nil {
		return figure.Scalar{}, err
	}
	note := fmt.Sprintf("starts even in ds dp; fall of what is left from %d to %d bounces, per path", r.From, r.To)
	if r.Slows() {
		note += fmt.Sprintf("; it slows: %.3g from %d to %d bounces", r.Next.Rate, r.Next.From, r.Next.To)
	}
	return figure.Scalar{Value: r.Rate, StdErr: r.Err, Unit: "1/" + b.unit(), Bounces: r.Flights, Note: note + r.Stops.remark()}, nil
}

func meanDwell(b bench) (figure.Scalar, error) {
	t := b.tracer.Table()
	_, width := Openings(t)
	bounces := t.Length() / width // mean number until a ray leaves: Kac 1947
	rays := int(dwellWork * b.effort / slowness(t) / bounces)
	ran, err := b.run(NewDwell(b.tracer, max(rays, 2), int(dwellEach*bounces)))
	if err != nil {
		return figure.Scalar{}, err
	}
	d := ran.(*DwellTally)
	if d.Left < 2 {
		return figure.Scalar{}, &NotMeasured{"mean-dwell", "hardly any ray that enters leaves again"}
	}
	s := figure.Scalar{Unit: b.unit(), Bounces: d.Flights}
	s.Value, s.StdErr = d.Mean()
	s.Note = fmt.Sprintf("entering by the cosine law, %d rays", d.Left)
	if d.Kept > 0 {
		s.Note += fmt.Sprintf("; %d rays that stayed %d bounces left out", d.Kept, int(dwellEach*bounces))
	}
	s.Note += d.Stops.remark()
	return s, nil
}

func (b bench) unit() string { return b.tracer.Table().Design().Unit.String() }

// remark says how many orbits could not be followed, as the end of a note.
func (s Stops) remark() string {
	text := ""
	for _, stop := range []sim.Stop{sim.Corner, sim.Grazing, sim.Lost} {
		if s[stop] > 0 {
			text += fmt.Sprintf("; %d stopped (%s)", s[stop], stop)
		}
	}
	return text
}

func always(*table.Table) string { return "" }

func closed(t *table.Table) string {
	if t.Open() {
		return "the table has no outer wall"
	}
	return ""
}

// probes is the number of angles at which a law is asked what it keeps.
const probes = 32

// loses reports whether a law lets anything out or absorbs it.
func loses(l wall.Law) bool {
	for i := range probes {
		p := (2*float64(i)+1)/probes - 1
		if l.Scatter(wall.Incidence{P: p}, 0.5).Back.Weight < 1 {
			return true
		}
	}
	return false
}

func leaks(t *table.Table) string {
	if t.Open() || loses(t.Law()) {
		return ""
	}
	for _, s := range t.Stretches() {
		if loses(s.Law) {
			return ""
		}
	}
	return "nothing leaves this table; lay an opening, a lossy or a dielectric coat on its wall"
}

func opens(t *table.Table) string {
	if why := closed(t); why != "" {
		return why
	}
	if _, width := Openings(t); width == 0 {
		return "the wall has no opening; lay one on it"
	}
	for _, s := range append(t.Stretches()[:len(t.Stretches()):len(t.Stretches())], table.Stretch{Law: t.Law()}) {
		if _, is := s.Law.(wall.Opening); !is && loses(s.Law) {
			return "openings are not the only way out, and it is measured only where they are"
		}
	}
	if math.Abs(t.Area()) == 0 {
		return "the table has no area"
	}
	return ""
}
