package chaos

import (
	"math"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/wall"
)

// Character is what an orbit turns out to be.
type Character uint8

// The characters. An orbit is Undecided where the two methods disagree: one
// that sticks to an island for most of its bounces, or a regular one near a
// separatrix.
const (
	Undecided Character = iota
	Regular
	Chaotic
)

// String is the character's name.
func (c Character) String() string { return [...]string{"undecided", "regular", "chaotic"}[c] }

// Portrayed is what is known of one orbit.
type Portrayed struct {
	Start            sim.State // its first bounce
	Bounces          int
	Stop             sim.Stop // why it ended early, if it did
	Character        Character
	PerBounce        float64 // growth of the tangent vector, 1/bounce
	PerLength        float64 // 1/length
	Digits           float64 // in which the averages of its halves agree
	Rotation         float64 // mean advance along the outer wall a bounce, in parts of its length; NaN for none
	RotationDigits   float64
	LeastP, MostP    float64 // of |p|
	Confined, Leaves bool    // nothing leaves it at any bounce; and whether anything could on this table
}

// Launched tells the character of orbits of their own: the launches of a study.
// All walls are taken as mirrors; whether something leaves is told by the laws.
type Launched struct {
	Bare   *sim.Tracer // with mirrors
	Table  *table.Table
	Starts []sim.Start
	Each   int
}

// NewLaunched are the launches of the table's study, without those that seed a
// region evenly; each is the number of bounces of one.
func NewLaunched(tr *sim.Tracer, each int) (Launched, error) {
	bare, err := Mirrored(tr)
	if err != nil {
		return Launched{}, err
	}
	m := Launched{Bare: bare, Table: tr.Table(), Each: each}
	for _, l := range tr.Table().Design().Study.Launches {
		if l.Pattern != table.Even {
			m.Starts = append(m.Starts, tr.Launched(l)...)
		}
	}
	return m, nil
}

// Orbits is the number of launches.
func (m Launched) Orbits() int { return len(m.Starts) }

// Bounces is Each.
func (m Launched) Bounces() int { return m.Each }

// Start is a launch.
func (m Launched) Start(i int, _ func() float64) sim.Start { return m.Starts[i] }

// On is the table with mirrors.
func (m Launched) On() *sim.Tracer { return m.Bare }

// Tally is a *LaunchedTally.
func (m Launched) Tally() measure.Tally {
	return &LaunchedTally{of: m, vector: newVector(m.Bare), birkhoff: newBirkhoff(m.Bare, m.Each), winding: newWinding(m.Bare, m.Each), leaks: leaks(m.Table)}
}

// LaunchedTally is the orbits in order.
type LaunchedTally struct {
	All      []Portrayed
	of       Launched
	vector   vector
	birkhoff birkhoff
	winding  winding
	leaks    []leak
	orbit    Portrayed
	last     sim.Bounce
}

// Open begins the next orbit.
func (t *LaunchedTally) Open(int) {
	t.orbit = Portrayed{LeastP: 1, Confined: true, Leaves: len(t.leaks) > 0, Rotation: math.NaN()}
	t.birkhoff.end = t.birkhoff.end[:0]
}

// Add takes a bounce that no derivative belongs to. The first on the wall opens
// the orbit.
func (t *LaunchedTally) Add(b *sim.Bounce) {
	t.last = *b
	if b.Piece < 0 || b.Stop != sim.Going {
		return
	}
	t.orbit.Start = b.State
	t.vector.open(b)
	t.birkhoff.open(b)
	t.winding.open(b)
	t.see(b)
}

// Step takes a bounce with the derivative of the step to it.
func (t *LaunchedTally) Step(b *sim.Bounce, j sim.Jacobian) {
	t.last = *b
	t.vector.step(j)
	t.birkhoff.add(b)
	t.winding.add(b)
	t.see(b)
}

func (t *LaunchedTally) see(b *sim.Bounce) {
	o := &t.orbit
	o.LeastP, o.MostP = math.Min(o.LeastP, math.Abs(b.P)), math.Max(o.MostP, math.Abs(b.P))
	o.Confined = o.Confined && !lets(t.leaks, b.State)
}

// Close judges the orbit.
func (t *LaunchedTally) Close() {
	t.orbit.Stop, t.orbit.Bounces = t.last.Stop, len(t.birkhoff.end)
	t.told(&t.orbit, &t.last)
	t.All = append(t.All, t.orbit)
}

// told judges an orbit that stands at b.
func (t *LaunchedTally) told(o *Portrayed, b *sim.Bounce) {
	if o.Bounces < leastLevel {
		return // too short to be told
	}
	o.Digits = t.birkhoff.digits()
	o.Rotation, o.RotationDigits = t.winding.number()
	if b.Stop != sim.Going {
		return // the tangent vector is not known where it stopped
	}
	growth := t.vector.growth(b)
	o.PerBounce, o.PerLength = growth/float64(o.Bounces), growth/t.birkhoff.path
	grows, averages := exponential(growth, o.Bounces), o.Digits < agreeing(o.Bounces)
	switch {
	case grows && averages:
		o.Character = Chaotic
	case !grows && !averages:
		o.Character = Regular
	}
}

// Merge appends the next orbits.
func (t *LaunchedTally) Merge(next measure.Tally) {
	t.All = append(t.All, next.(*LaunchedTally).All...)
}

// leak is a stretch of wall through which something leaves where |p| is at most
// sine.
type leak struct{ s0, s1, sine float64 }

// leaks are the parts of the wall where something leaves, those of coats that
// lie on top last.
func leaks(t *table.Table) []leak {
	of := func(s0, s1 float64, l wall.Law) leak {
		switch l := l.(type) {
		case wall.Opening:
			return leak{s0, s1, 1}
		case wall.Dielectric:
			return leak{s0, s1, l.Critical()}
		}
		return leak{s0, s1, -1}
	}
	all := []leak{of(0, t.Length(), t.Law())}
	any := all[0].sine >= 0
	for _, x := range t.Stretches() {
		l := of(x.S0, x.S1, x.Law)
		all, any = append(all, l), any || l.sine >= 0
	}
	if !any {
		return nil
	}
	return all
}

// lets reports whether something leaves at a state.
func lets(all []leak, st sim.State) bool {
	for i := len(all) - 1; i >= 0; i-- {
		if st.S >= all[i].s0 && st.S <= all[i].s1 {
			return math.Abs(st.P) <= all[i].sine
		}
	}
	return false
}
