package chaos

import (
	"fmt"
	"math"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
)

// Growth is the finite-time stretching at each place of the section: the
// logarithm of the greatest growth of a tangent vector over Bounces bounces, by
// their number. All walls are taken as mirrors.
type Growth struct {
	Tracer  *sim.Tracer // of mirrors
	Bounces int
	Scale   figure.Scale
}

// Value is in 1/bounce.
func (f Growth) Value() figure.Axis {
	return figure.Axis{Label: fmt.Sprintf("stretching over %d bounces", f.Bounces), Unit: "1/bounce", Scale: f.Scale}
}

// Along follows the orbits.
func (f Growth) Along(starts []sim.State) measure.Measurement {
	return along{f.Tracer, starts, f.Bounces, func() measure.Tally {
		return &growthTally{bounces: f.Bounces, beam: newBeam(f.Tracer)}
	}}
}

// Averaging is the number of digits to which the weighted Birkhoff averages of
// the halves of an orbit of Bounces bounces agree: many where it is regular,
// few where it is chaotic. All walls are taken as mirrors.
type Averaging struct {
	Tracer  *sim.Tracer // of mirrors
	Bounces int
}

// Value counts digits.
func (f Averaging) Value() figure.Axis {
	return figure.Axis{Label: fmt.Sprintf("digits in which averages of halves agree, %d bounces", f.Bounces)}
}

// Along follows the orbits.
func (f Averaging) Along(starts []sim.State) measure.Measurement {
	return along{f.Tracer, starts, f.Bounces, func() measure.Tally {
		return &averagingTally{bounces: f.Bounces, birkhoff: newBirkhoff(f.Tracer, f.Bounces)}
	}}
}

// NewField is the field of a name on the table off mirrors: "growth" or
// "averages".
func NewField(name string, tr *sim.Tracer, bounces int, scale figure.Scale) (measure.Field, error) {
	bare, err := Mirrored(tr)
	if err != nil {
		return nil, err
	}
	if name == "averages" {
		return Averaging{bare, bounces}, nil
	}
	return Growth{bare, bounces, scale}, nil
}

// MapCaption says what a map shows of the table.
func MapCaption(t *table.Table, m *measure.Mosaic, f measure.Field) string {
	what := "finite-time stretching by the tangent map"
	if _, is := f.(Averaging); is {
		what = "weighted Birkhoff averages: many digits where orbits are regular, few where they are chaotic"
	}
	text := fmt.Sprintf("%s%s; %d × %d cells.", measure.Head(t), what, m.Columns, m.Rows)
	if n := m.Blank(); n > 0 {
		text += fmt.Sprintf(" %d of them blank, whose orbits stopped at a corner or grazing.", n)
	}
	if !BareMirrors(t) {
		text += " All walls taken as mirrors."
	}
	return text
}

// along is a measurement on orbits from given states.
type along struct {
	bare   *sim.Tracer
	starts []sim.State
	each   int
	tally  func() measure.Tally
}

func (m along) Orbits() int  { return len(m.starts) }
func (m along) Bounces() int { return m.each }
func (m along) Start(i int, _ func() float64) sim.Start {
	return sim.Start{State: m.starts[i]}
}
func (m along) Tally() measure.Tally { return m.tally() }
func (m along) On() *sim.Tracer      { return m.bare }

type growthTally struct {
	measure.Row
	bounces int
	beam    beam
	last    sim.Bounce
}

func (t *growthTally) Add(b *sim.Bounce) {
	if b.N == 0 && b.Stop == sim.Going {
		t.beam.open(b)
	}
	t.last = *b
}

// Step takes a bounce with the derivative of the step to it.
func (t *growthTally) Step(b *sim.Bounce, j sim.Jacobian) {
	t.beam.step(j)
	if b.N == t.bounces {
		t.last = *b
	}
}

func (t *growthTally) Close() {
	if t.last.Stop != sim.Going || t.last.N < t.bounces {
		t.Keep(math.NaN())
		return
	}
	t.Keep(t.beam.growth(&t.last) / float64(t.bounces))
}

func (t *growthTally) Merge(next measure.Tally) { t.Append(next.(*growthTally).Row) }

type averagingTally struct {
	measure.Row
	bounces  int
	birkhoff birkhoff
}

func (t *averagingTally) Add(b *sim.Bounce) {
	switch {
	case b.N == 0:
		t.birkhoff.open(b)
	case b.Stop == sim.Going:
		t.birkhoff.add(b)
	}
}

func (t *averagingTally) Close() {
	if len(t.birkhoff.end) < t.bounces {
		t.Keep(math.NaN())
		return
	}
	t.Keep(t.birkhoff.digits())
}

func (t *averagingTally) Merge(next measure.Tally) { t.Append(next.(*averagingTally).Row) }
