package measure

import (
	"math"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Rays follows the launches of the study and keeps their paths in the plane.
// Hues are those of the portrait of the same launches.
type Rays struct {
	Portrait
	size float64
}

// NewRays is the paths of the launches, of each bounces. The sea of an even
// seeding is drawn only where nothing else is launched: it would cover the
// rays.
func NewRays(tr *sim.Tracer, launches []table.Launch, each int) Rays {
	p := NewPortrait(tr, launches, each)
	if own := p.Coloured(); own.Orbits() > 0 {
		p = own
	}
	return Rays{p, plane.Diagonal(tr.Table().Bounds())}
}

// Tally is a *RaysTally.
func (r Rays) Tally() Tally { return &RaysTally{of: r} }

// RaysTally is the path of each orbit.
type RaysTally struct {
	Stops Stops
	of    Rays
	lines []figure.Line
}

// Open begins orbit i.
func (t *RaysTally) Open(i int) {
	t.lines = append(t.lines, figure.Line{Role: figure.Ray, Hue: t.of.hues[i]})
}

// stub is how far beyond the wall a ray is drawn that left through an opening,
// in sizes of the table.
const stub = 0.1

// Add keeps a bounce. A ray that leaves into the open plane is drawn on for
// the size of the table, one that leaves undeflected through the wall for a
// stub.
func (t *RaysTally) Add(b *sim.Bounce) {
	if b.Stop != sim.Going {
		t.Stops[b.Stop]++
	}
	l := &t.lines[len(t.lines)-1]
	if b.Stop == sim.Lost {
		return
	}
	if math.IsInf(b.Flight, 1) {
		at := r2.Add(b.Point, r2.Scale(t.of.size, b.Dir))
		l.X, l.Y = append(l.X, at.X), append(l.Y, at.Y)
		return
	}
	l.X, l.Y = append(l.X, b.Point.X), append(l.Y, b.Point.Y)
	if n := len(l.X); b.Stop == sim.Escaped && b.ExitP == b.P && n > 1 {
		d := r2.Vec{X: l.X[n-1] - l.X[n-2], Y: l.Y[n-1] - l.Y[n-2]}
		at := r2.Add(b.Point, r2.Scale(stub*t.of.size, plane.Unit(d)))
		l.X, l.Y = append(l.X, at.X), append(l.Y, at.Y)
	}
}

// Close does nothing.
func (t *RaysTally) Close() {}

// Merge appends the next orbits.
func (t *RaysTally) Merge(next Tally) {
	o := next.(*RaysTally)
	t.lines = append(t.lines, o.lines...)
	t.Stops.Add(o.Stops)
}

// Lines are the orbits' paths.
func (t *RaysTally) Lines() []figure.Line { return t.lines }
