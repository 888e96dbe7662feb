package leak

import (
	"math"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Emission follows weighted rays and keeps in which direction, and where along
// the wall, their weight leaves. A ray is followed for Each bounces or until it
// carries less than Cut; what it then still carries is accounted for.
type Emission struct {
	Starts  Starts
	Lattice measure.Lattices
	Bins    int // of the full turn
	Cells   int // of the wall
	Each    int
	Cut     float64
	// Skip is the path before which nothing that leaves is counted: the
	// transient.
	Skip    float64
	outside *outside // nil where no ray that left can meet the wall again
}

// Orbits is the number of rays.
func (m Emission) Orbits() int { return m.Lattice.Size() }

// Bounces is Each.
func (m Emission) Bounces() int { return m.Each }

// Start is a point of a lattice in the start measure.
func (m Emission) Start(i int, uniform func() float64) sim.Start {
	u, v := m.Lattice.At(i)
	return m.Starts.At(u, v, uniform)
}

// Tally is an *EmissionTally.
func (m Emission) Tally() measure.Tally {
	t := &EmissionTally{of: m, lots: measure.Lots[sent]{Size: m.Lattice.Points.Size()}}
	if m.outside != nil {
		t.walker = m.Starts.tracer.Walker()
	}
	return t
}

// sent is what left one lattice: by direction, counter-clockwise from +x, and
// by place along the wall; Skipped of it before the transient's end, and
// again that part of what was counted whose ray would meet the wall again.
type sent struct {
	byAngle, byPlace []float64
	skipped, again   float64
	cos, path        float64 // weighted sums of what was counted
	account          Account
}

func (s *sent) add(o *sent) {
	addTo(s.byAngle, o.byAngle)
	addTo(s.byPlace, o.byPlace)
	s.skipped += o.skipped
	s.again += o.again
	s.cos += o.cos
	s.path += o.path
	s.account.add(&o.account)
}

// EmissionTally is what left each lattice.
type EmissionTally struct {
	Stops   measure.Stops
	Flights int64
	of      Emission
	lots    measure.Lots[sent]
	ray     course
	walker  *sim.Walker // for rays outside; nil where none is followed
}

// Open begins ray i.
func (t *EmissionTally) Open(i int) {
	t.lots.Open(i)
	if row := t.lots.Last(); row.byAngle == nil {
		row.byAngle, row.byPlace = make([]float64, t.of.Bins), make([]float64, t.of.Cells)
	}
	t.ray.open()
}

// Add takes a bounce.
func (t *EmissionTally) Add(b *sim.Bounce) {
	t.ray.take(b)
	if b.N == 0 {
		return
	}
	t.Flights++
	row := t.lots.Last()
	t.ray.book(&row.account)
	w := t.ray.left
	if w == 0 {
		return
	}
	if t.ray.path < t.of.Skip {
		row.skipped += w
		return
	}
	d := Outward(b)
	angle := math.Atan2(d.Y, d.X) / (2 * math.Pi)
	angle -= math.Floor(angle)
	row.byAngle[min(int(angle*float64(t.of.Bins)), t.of.Bins-1)] += w
	row.cos += w * d.X
	row.path += w * t.ray.path
	if b.Piece >= 0 {
		s := b.S / t.of.Starts.tracer.Length() * float64(t.of.Cells)
		row.byPlace[min(int(s), t.of.Cells-1)] += w
		if t.walker != nil && t.of.outside.meets(t.walker, b, d) {
			row.again += w
		}
	}
}

// Outward is the unit direction, outside, of what left at a bounce: refracted
// by Snell's law where the wall did so.
func Outward(b *sim.Bounce) r2.Vec {
	if math.IsInf(b.Flight, 1) {
		return b.Dir
	}
	// Dir is p along the wall and cos along its inward normal, so that turning
	// it back gives the tangent.
	cos := math.Sqrt((1 - b.P) * (1 + b.P))
	tangent := plane.Unit(r2.Vec{X: float64(b.P*b.Dir.X) + float64(cos*b.Dir.Y), Y: float64(b.P*b.Dir.Y) - float64(cos*b.Dir.X)})
	out := math.Sqrt((1 - b.ExitP) * (1 + b.ExitP))
	// The outward normal is the tangent turned right.
	return r2.Vec{X: float64(b.ExitP*tangent.X) + float64(out*tangent.Y), Y: float64(b.ExitP*tangent.Y) - float64(out*tangent.X)}
}

// Enough ends a ray that carries too little.
func (t *EmissionTally) Enough() bool { return t.ray.weight < t.of.Cut }

// Close ends the ray.
func (t *EmissionTally) Close() {
	if t.ray.stop != sim.Going {
		t.Stops[t.ray.stop]++
	}
	t.ray.close(&t.lots.Last().account)
}

// Merge adds the next tally.
func (t *EmissionTally) Merge(next measure.Tally) {
	o := next.(*EmissionTally)
	t.Stops.Add(o.Stops)
	t.Flights += o.Flights
	t.lots.Merge(&o.lots, (*sent).add)
}

// Account is what became of all rays.
func (t *EmissionTally) Account() Account {
	var sum Account
	for i := range t.lots.Rows {
		sum.add(&t.lots.Rows[i].account)
	}
	return sum
}

// Weights are the weight in the far field and that noted along the wall.
func (t *EmissionTally) Weights() (angles, places float64) {
	for i := range t.lots.Rows {
		for _, w := range t.lots.Rows[i].byAngle {
			angles += w
		}
		for _, w := range t.lots.Rows[i].byPlace {
			places += w
		}
	}
	return angles, places
}

// outside tells whether a ray that left a closed table would meet its wall
// again from outside.
type outside struct{ size float64 }

// newOutside is nil for a table whose outer wall is convex, or that has none.
func newOutside(t *table.Table) *outside {
	if t.Open() || convex(t) {
		return nil
	}
	return &outside{plane.Diagonal(t.Bounds())}
}

// convex reports whether the outer wall turns left everywhere, so far as the
// ends and middles of its pieces tell: pieces of one kind of curve turn one
// way.
func convex(t *table.Table) bool {
	l := t.Loops()[0]
	pieces := t.Pieces()
	for i := l.First; i < l.Last; i++ {
		if pieces[i].Turn < 0 {
			return false
		}
	}
	for _, j := range t.Joints() {
		if t.Pieces()[j.Piece].Loop == 0 && j.Turn < 0 {
			return false
		}
	}
	return true
}

// offWall is how far outside the wall a ray is followed from, relative to the
// size: the walker keeps no side for a point that is not on the wall.
const offWall = 1e-9

// meets reports whether the ray from the place of a bounce along d, outside,
// meets the wall again.
func (o *outside) meets(w *sim.Walker, b *sim.Bounce, d r2.Vec) bool {
	w.StartInside(r2.Add(b.Point, r2.Scale(offWall*o.size, d)), d)
	hit := w.Next(0)
	return !math.IsInf(hit.Flight, 1)
}
