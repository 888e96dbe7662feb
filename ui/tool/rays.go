package tool

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/plane"
	"cavitywright/ui/session"

	"gonum.org/v1/gonum/spatial/r2"
)

// Rays is the pointer over the rays: press on the wall or inside the table and
// pull; the pull is the direction.
type Rays struct {
	s     *session.Session
	from  table.Launch
	at    r2.Vec
	state pull

	gesture int // the session's, of the pull
}

type pull uint8

const (
	idle pull = iota
	pressed
	pulled
)

// NewRays is the rays' pointer on the session.
func NewRays(s *session.Session) *Rays { return &Rays{s: s} }

// Press takes a starting point: on the wall within reach of p, else inside.
// Outside the table nothing is launched.
func (r *Rays) Press(p r2.Vec, reach float64) {
	t := r.s.Table()
	b := r.s.Settings.Bundle
	l := table.Launch{Pattern: b.Pattern, Count: b.Count, Point: p, From: table.Inside}
	switch b.Pattern {
	case table.Single:
		l.Count = 1
	case table.Fan:
		l.Spread = b.SpreadDeg * math.Pi / 180
	case table.Beam:
		l.Spread = b.Width * plane.Diagonal(t.Bounds())
	}
	r.at = p
	if s, d := t.Nearest(p); d <= reach {
		l.From, l.S, l.Point = table.OnWall, s/t.Length(), r2.Vec{}
		r.at = t.At(s).Point
	} else if !t.Contains(p) && !t.Open() {
		return
	}
	r.from, r.state = l, pressed
	r.s.Begin()
	r.gesture = r.s.Gesture()
}

// heed lets go where the gesture is over: undo, a command or another document
// came between.
func (r *Rays) heed() {
	if r.gesture != r.s.Gesture() {
		r.state = idle
	}
}

// Drag pulls the direction towards p.
func (r *Rays) Drag(p r2.Vec, k Keys) {
	if r.heed(); r.state == idle {
		return
	}
	if k.Has(Constrain) {
		p = constrained(r.at, p)
	}
	d := r2.Sub(p, r.at)
	if d == (r2.Vec{}) {
		return
	}
	r.state = pulled
	l := r.from
	if l.From == table.Inside {
		l.Angle = math.Atan2(d.Y, d.X)
	} else {
		t := r.s.Table()
		f := t.At(t.Wrap(l.S * t.Length()))
		l.P = sine(plane.Dot(d, f.Tangent), plane.Dot(d, f.Normal()))
	}
	_ = r.s.Amend(edit.Launch{New: []table.Launch{l}})
}

// greatestP is the steepest launch by hand: nearer to the wall the tracer
// would call it grazing.
const greatestP = 0.9999

// sine is p of the direction with the components along the tangent and along
// the normal; a direction out of the table is laid along the wall.
func sine(along, inward float64) float64 {
	if inward <= 0 {
		return math.Copysign(greatestP, along)
	}
	return math.Min(math.Max(along/math.Hypot(along, inward), -greatestP), greatestP)
}

// Release launches. A press without a pull on the wall launches along the
// normal.
func (r *Rays) Release() {
	r.heed()
	switch r.state {
	case pressed:
		if r.from.From == table.OnWall {
			_ = r.s.Amend(edit.Launch{New: []table.Launch{r.from}})
		}
		r.s.End()
	case pulled:
		r.s.End()
	}
	r.state = idle
}

// Cancel takes the launch back.
func (r *Rays) Cancel() {
	if r.heed(); r.state != idle {
		r.s.Cancel()
	}
	r.state = idle
}

// Hint is what a press would do.
func (r *Rays) Hint(p r2.Vec, reach float64) string {
	t := r.s.Table()
	what := map[table.Pattern]string{table.Single: "a ray", table.Fan: "a fan of rays", table.Beam: "a parallel beam"}[r.s.Settings.Bundle.Pattern]
	if _, d := t.Nearest(p); d <= reach {
		return "Press on the wall and pull into the table to launch " + what + "."
	}
	if !t.Contains(p) {
		return "Press inside the table and pull to launch " + what + "."
	}
	return "Press and pull to launch " + what + "; the pull is the direction. Shift holds it to 15 degrees."
}

// Portrait is the pointer over the portrait: press launches at (s, p), a pull
// sweeps a row of launches.
type Portrait struct {
	s        *session.Session
	s0, p0   float64
	state    pull
	together int
	gesture  int // the session's, of the pull
}

// NewPortrait is the portrait's pointer on the session.
func NewPortrait(s *session.Session) *Portrait { return &Portrait{s: s, together: 12} }

// Press launches at s (fraction of L) and p.
func (t *Portrait) Press(s, p float64) {
	if s < 0 || s >= 1 || math.Abs(p) >= 1 {
		return
	}
	t.s0, t.p0, t.state = s, p, pressed
	t.s.Begin()
	t.gesture = t.s.Gesture()
	_ = t.s.Amend(edit.Launch{New: []table.Launch{{S: s, P: p, Count: 1}}})
}

// heed lets go where the gesture is over, as for the rays.
func (t *Portrait) heed() {
	if t.gesture != t.s.Gesture() {
		t.state = idle
	}
}

// Drag sweeps a row of launches from the press to s, p.
func (t *Portrait) Drag(s, p float64, k Keys) {
	if t.heed(); t.state == idle {
		return
	}
	s, p = math.Min(math.Max(s, 0), math.Nextafter(1, 0)), math.Min(math.Max(p, -greatestP), greatestP)
	if k.Has(Constrain) {
		s = t.s0
	}
	t.state = pulled
	l := table.Launch{S: t.s0, P: t.p0, Pattern: table.Sweep, Count: t.together,
		Region: table.Region{S0: t.s0, S1: s, P0: t.p0, P1: p}}
	_ = t.s.Amend(edit.Launch{New: []table.Launch{l}})
}

// Release keeps the launches.
func (t *Portrait) Release() {
	if t.heed(); t.state != idle {
		t.s.End()
	}
	t.state = idle
}

// Cancel takes them back.
func (t *Portrait) Cancel() {
	if t.heed(); t.state != idle {
		t.s.Cancel()
	}
	t.state = idle
}

// SeedEvenly launches orbits evenly over what the portrait shows.
func SeedEvenly(s *session.Session) error {
	return s.Do(edit.Launch{New: []table.Launch{{Pattern: table.Even, Count: s.Settings.SeedAll, Region: s.Section}}})
}

// ClearLaunches takes all launches out of the study.
func ClearLaunches(s *session.Session) error {
	study := s.Table().Design().Study
	study.Launches = nil
	return s.Do(edit.SetStudy{Study: study, Name: "take out all launches"})
}
