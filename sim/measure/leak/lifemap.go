package leak

import (
	"fmt"
	"math"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
)

// Shown says what a map of leaking rays shows.
type Shown uint8

// The maps.
const (
	// Lifetime is the path until half of what starts at a place has gone.
	Lifetime Shown = iota
	// Survivors is the share of what starts at a place that is still inside
	// after a number of bounces.
	Survivors
	// Pasts is the share that would be left of a ray that is at a place now,
	// followed backwards over that number of bounces: where what has not left
	// came from.
	Pasts
)

// Life is what becomes of rays that start at each place of the section, as a
// field that a Mosaic maps.
type Life struct {
	Tracer *sim.Tracer
	Each   int // bounces
	Shows  Shown
}

// NewLife is the field of a name: "time", "survivors" or "pasts".
func NewLife(tr *sim.Tracer, name string, each int) Life {
	return Life{tr, each, map[string]Shown{"survivors": Survivors, "pasts": Pasts}[name]}
}

// Value is the axis of the values.
func (l Life) Value() figure.Axis {
	switch l.Shows {
	case Survivors:
		return figure.Axis{Label: fmt.Sprintf("left after %d bounces", l.Each), Lo: 0, Hi: 1}
	case Pasts:
		return figure.Axis{Label: fmt.Sprintf("left after %d bounces, backwards", l.Each), Lo: 0, Hi: 1}
	}
	return figure.Axis{Label: "path until half has gone", Unit: l.Tracer.Table().Design().Unit.String(), Scale: figure.Log}
}

// Along follows the rays, or their reversals.
func (l Life) Along(starts []sim.State) measure.Measurement { return lives{l, starts} }

// MapCaption says what a map of a Life shows.
func MapCaption(t *table.Table, m *measure.Mosaic, l Life) string {
	text := measure.Head(t)
	switch l.Shows {
	case Lifetime:
		text += fmt.Sprintf("path until half of what starts at a place has left or was absorbed; blank where half stays for %d bounces", l.Each)
	case Survivors:
		text += fmt.Sprintf("share of what starts at a place that is still inside after %d bounces", l.Each)
	case Pasts:
		text += fmt.Sprintf("share of what comes to a place that is left after the %d bounces before, by the reversed ray", l.Each)
	}
	text += fmt.Sprintf("; %d × %d cells", m.Columns, m.Rows)
	if n := m.Blank(); n > 0 {
		text += fmt.Sprintf(", %d of them blank", n)
	}
	return text + "."
}

type lives struct {
	Life
	starts []sim.State
}

func (m lives) Orbits() int  { return len(m.starts) }
func (m lives) Bounces() int { return m.Each }
func (m lives) Start(i int, _ func() float64) sim.Start {
	st := m.starts[i]
	if m.Shows == Pasts {
		st = st.Reversed()
	}
	return sim.Start{State: st}
}
func (m lives) Tally() measure.Tally { return &lifeTally{of: m} }

// lifeTally is the value of each place; NaN for a Lifetime beyond the last
// bounce and for a ray that ends undecided.
type lifeTally struct {
	measure.Row
	of   lives
	ray  course
	life float64
}

// Open begins a place.
func (t *lifeTally) Open(int) {
	t.ray.open()
	t.life = math.NaN()
}

// Add takes a bounce.
func (t *lifeTally) Add(b *sim.Bounce) {
	t.ray.take(b)
	if math.IsNaN(t.life) && t.ray.weight <= 0.5 {
		t.life = t.ray.path
	}
}

// Enough ends a ray of which all that is asked is known.
func (t *lifeTally) Enough() bool {
	return t.of.Shows == Lifetime && t.ray.weight <= 0.5 || t.ray.weight < survivalCut
}

// Close keeps the place's value.
func (t *lifeTally) Close() {
	v := t.ray.weight
	if t.of.Shows == Lifetime {
		v = t.life
	}
	switch t.ray.stop {
	case sim.Corner, sim.Grazing, sim.Lost:
		v = math.NaN()
	}
	t.Keep(v)
}

// Merge appends the next places.
func (t *lifeTally) Merge(next measure.Tally) { t.Append(next.(*lifeTally).Row) }
