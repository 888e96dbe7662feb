package leak

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

// Source says how the rays of a measurement start.
type Source uint8

// The sources. What leaves, and when, depends on it: a figure has to say which
// one was used.
const (
	Even    Source = iota // even in ds dp over the whole section
	Trapped               // even in ds dp where |p| is above the sine of the critical angle
	Area                  // even over the area and all directions
	Spot                  // from a point inside, even in all directions
	Segment               // even along a straight line inside and in all directions
	Ports                 // through the openings by the cosine law: even in s over them and in p
)

// Seeding is a start measure: a source with its places. At is the point of a
// Spot, At and To the ends of a Segment, in the table's unit; Port is the
// opening that rays come in through, counted from 1 along s, 0 for all.
type Seeding struct {
	From   Source
	At, To r2.Vec
	Port   int
}

// BadSeeding is why rays cannot start as was asked.
type BadSeeding struct{ Why string }

func (e *BadSeeding) Error() string { return e.Why }

func badSeeding(format string, args ...any) error {
	return &BadSeeding{fmt.Sprintf(format, args...)}
}

// SeedingForms are the ways in which a seeding is written on a command line.
const SeedingForms = "even, trapped, area, point:X,Y, line:X,Y,X,Y, openings or opening:N"

// ParseSeeding reads a seeding from one of SeedingForms.
func ParseSeeding(text string) (Seeding, error) {
	name, rest, _ := strings.Cut(text, ":")
	wrong := func() (Seeding, error) {
		return Seeding{}, badSeeding("%q is no way to start rays; use %s", text, SeedingForms)
	}
	numbers := func(n int) []float64 {
		var v []float64
		for _, f := range strings.Split(rest, ",") {
			x, err := strconv.ParseFloat(strings.TrimSpace(f), 64)
			if err != nil || math.IsNaN(x) || math.IsInf(x, 0) {
				return nil
			}
			v = append(v, x)
		}
		if len(v) != n {
			return nil
		}
		return v
	}
	plain := map[string]Source{"even": Even, "trapped": Trapped, "area": Area, "openings": Ports}
	if s, is := plain[name]; is && rest == "" {
		return Seeding{From: s}, nil
	}
	switch name {
	case "point":
		if v := numbers(2); v != nil {
			return Seeding{From: Spot, At: r2.Vec{X: v[0], Y: v[1]}}, nil
		}
	case "line":
		if v := numbers(4); v != nil {
			return Seeding{From: Segment, At: r2.Vec{X: v[0], Y: v[1]}, To: r2.Vec{X: v[2], Y: v[3]}}, nil
		}
	case "opening":
		if n, err := strconv.Atoi(rest); err == nil && n > 0 {
			return Seeding{From: Ports, Port: n}, nil
		}
	}
	return wrong()
}

// Starts is a seeding made ready on a table.
type Starts struct {
	Seeding
	tracer   *sim.Tracer
	critical float64
	doors    []table.Stretch
	width    float64
}

// Table is the table that the rays start on.
func (s Starts) Table() *table.Table { return s.tracer.Table() }

// On makes the seeding ready; the error is a *BadSeeding.
func (s Seeding) On(tr *sim.Tracer) (Starts, error) {
	t := tr.Table()
	st := Starts{Seeding: s, tracer: tr, critical: CriticalSine(t)}
	switch s.From {
	case Trapped:
		if st.critical >= 1 {
			return st, badSeeding("rays cannot start above a critical angle, because no part of the wall has one; lay a dielectric coat, or start them even in ds dp")
		}
	case Area:
		if t.Open() {
			return st, badSeeding("rays cannot start even over the area, because the table has no outer wall; start them even in ds dp")
		}
	case Spot, Segment:
		ends := []r2.Vec{s.At, s.To}
		if s.From == Spot {
			ends = ends[:1]
		}
		for _, at := range ends {
			if !t.Contains(at) {
				return st, badSeeding("(%.6g, %.6g) %s is not inside the table; rays start from places inside", at.X, at.Y, t.Design().Unit)
			}
		}
	case Ports:
		ports := PortsOf(t)
		if len(ports) == 0 {
			return st, badSeeding("rays cannot come in through openings, because the wall has none; lay one on it")
		}
		if s.Port > len(ports) {
			return st, badSeeding("there is no opening %d; the wall has %d", s.Port, len(ports))
		}
		for i, p := range ports {
			if s.Port == 0 || s.Port == i+1 {
				st.doors, st.width = append(st.doors, p.Doors...), st.width+p.Width
			}
		}
	}
	return st, nil
}

// At is the start at the fractions u and v in [0, 1): even u and v are even in
// the start measure. uniform is drawn from where two numbers are not enough.
func (s Starts) At(u, v float64, uniform func() float64) sim.Start {
	t := s.Table()
	inside := func(at r2.Vec, turn float64) sim.Start {
		return sim.Start{From: table.Inside, Point: at, Dir: plane.Polar(2 * math.Pi * turn)}
	}
	switch s.From {
	case Trapped:
		st := s.tracer.Uniform(u, v)
		st.P = math.Copysign(s.critical+math.Abs(st.P)*(1-s.critical), st.P)
		return sim.Start{State: st}
	case Area:
		box := t.Bounds()
		for {
			at := r2.Vec{X: box.Min.X + u*(box.Max.X-box.Min.X), Y: box.Min.Y + v*(box.Max.Y-box.Min.Y)}
			if t.Contains(at) {
				return inside(at, uniform())
			}
			u, v = uniform(), uniform()
		}
	case Spot:
		return inside(s.Seeding.At, u)
	case Segment:
		at := r2.Add(s.Seeding.At, r2.Scale(v, r2.Sub(s.To, s.Seeding.At)))
		if !t.Contains(at) { // an obstacle lies on the line
			return s.At(uniform(), uniform(), uniform)
		}
		return inside(at, u)
	case Ports:
		return sim.Start{State: through(s.doors, u*s.width, 2*v-1)}
	}
	return sim.Start{State: s.tracer.Uniform(u, v)}
}

// through is the state at the length x along the doors laid end to end.
func through(doors []table.Stretch, x, p float64) sim.State {
	st := sim.State{P: p}
	for _, d := range doors {
		st.S = d.S0 + x
		if x -= d.S1 - d.S0; x < 0 {
			break
		}
	}
	return st
}

// Words says how the rays start, for a caption or a note.
func (s Starts) Words() string {
	unit := s.tracer.Table().Design().Unit
	switch s.From {
	case Trapped:
		return fmt.Sprintf("starts even in ds dp with |p| > %.4g", s.critical)
	case Area:
		return "starts even over the area and all directions"
	case Spot:
		return fmt.Sprintf("starts at (%.4g, %.4g) %s in all directions", s.Seeding.At.X, s.Seeding.At.Y, unit)
	case Segment:
		return fmt.Sprintf("starts even from (%.4g, %.4g) to (%.4g, %.4g) %s and in all directions", s.Seeding.At.X, s.Seeding.At.Y, s.To.X, s.To.Y, unit)
	case Ports:
		if s.Port > 0 {
			return fmt.Sprintf("let in through opening %d by the cosine law", s.Port)
		}
		return "let in through the openings by the cosine law"
	}
	return "starts even in ds dp"
}

// CriticalSine is the sine of the least critical angle of the table's walls, 1
// where it has none.
func CriticalSine(t *table.Table) float64 {
	least := 1.0
	for _, l := range measure.Laws(t) {
		if d, ok := l.(wall.Dielectric); ok {
			least = math.Min(least, d.Critical())
		}
	}
	return least
}

// NaturalSeeding is how rays start on a table where nobody says otherwise:
// above the critical angle where there is one, else even in ds dp.
func NaturalSeeding(t *table.Table) Seeding {
	if CriticalSine(t) < 1 {
		return Seeding{From: Trapped}
	}
	return Seeding{}
}
