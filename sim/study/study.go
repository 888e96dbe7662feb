// Package study carries out sweeps: a number of a design, or several, is turned
// from value to value, and readings are taken at each point. A point is worked
// out on its own, with the seed of the study: its row depends on the design, the
// sweep and the seed alone, so that points may be done in any order and on any
// machine. The same seed at every point (common random numbers) makes the
// differences between neighbouring points steadier than the points themselves.
//
// It starts no goroutine and knows no files; package part writes the rows down.
package study

import (
	"fmt"
	"math"
	"strings"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/reading"
	"cavitywright/sim/orbit"
	"cavitywright/table"
	"cavitywright/table/dial"
	"cavitywright/table/param"
)

// MostPoints bounds the points of a sweep.
const MostPoints = 200_000

// Study is a sweep made ready on a design.
type Study struct {
	Base  *table.Table // as it was drawn
	Sweep table.DialSweep
	Dials []dial.Dial
	Specs []param.Spec // of the dials

	values [][]float64 // of each dial; of a sample its two ends
	points int
}

// Refusal is why a sweep cannot be carried out, in a sentence.
type Refusal struct{ Text string }

func (e *Refusal) Error() string { return e.Text }

func refuse(format string, args ...any) error { return &Refusal{fmt.Sprintf(format, args...)} }

// New makes a sweep ready. The error is a *Refusal, a *dial.Unknown, a
// *reading.NoReading or an *orbit.Limit.
func New(base *table.Table, s table.DialSweep) (*Study, error) {
	st := &Study{Base: base, Sweep: s, points: 1}
	d := base.Design()
	if len(s.Turns) == 0 {
		return nil, refuse("the sweep %q turns nothing; name a number and its values", s.Name)
	}
	for _, t := range s.Turns {
		x, err := dial.Find(d, t.Dial)
		if err != nil {
			return nil, err
		}
		for _, before := range st.Dials {
			if before == x {
				return nil, refuse("the sweep %q turns %s twice; take one of the two out", s.Name, x)
			}
		}
		spec, err := x.Spec(d)
		if err != nil {
			return nil, err
		}
		if len(t.Values) == 0 && t.Points < 2 {
			return nil, refuse("%s is to take %d values; give 2 or more", x, t.Points)
		}
		values := t.All()
		for _, v := range values {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				return nil, refuse("%s is to take a value that is no number; give numbers", x)
			}
		}
		st.Dials, st.Specs, st.values = append(st.Dials, x), append(st.Specs, spec), append(st.values, values)
		if st.points > MostPoints/len(values) && s.Sample == 0 {
			return nil, refuse("the sweep %q has more than %d points; give fewer values", s.Name, MostPoints)
		}
		st.points *= len(values)
	}
	if s.Sample > 0 {
		st.points = s.Sample
	}
	if st.points > MostPoints {
		return nil, refuse("the sweep %q has %d points; ask for at most %d", s.Name, st.points, MostPoints)
	}
	return st, st.check()
}

// check holds the readings, the effort and the orbits to what there is.
func (st *Study) check() error {
	s := st.Sweep
	if len(s.Readings) == 0 {
		return refuse("the sweep %q takes no reading; name one at least", s.Name)
	}
	known := map[string]bool{}
	for _, r := range reading.Readings() {
		known[r.Name] = true
	}
	for i, name := range s.Readings {
		if !known[name] {
			return &reading.NoReading{Name: name}
		}
		for _, before := range s.Readings[:i] {
			if before == name {
				return refuse("the sweep %q takes %s twice; take one of the two out", s.Name, name)
			}
		}
	}
	if !(s.Effort > 0) || math.IsInf(s.Effort, 0) {
		return refuse("the effort of the sweep %q is %g, but must be above 0", s.Name, s.Effort)
	}
	if s.Orbits != 0 {
		if len(s.Turns) > 1 || s.Sample > 0 {
			return refuse("orbits are followed along one number only; take the others out of the sweep %q", s.Name)
		}
		if greatest := orbit.Greatest(st.Base); s.Orbits < orbit.Least || s.Orbits > greatest {
			return &orbit.Limit{Asked: s.Orbits, Greatest: greatest}
		}
	}
	return nil
}

// Points is the number of points.
func (st *Study) Points() int { return st.points }

// Tasks is the number of pieces of work: one a point and, along a single dial,
// one more that finds what is marked on the axis.
func (st *Study) Tasks() int {
	if st.marked() {
		return st.points + 1
	}
	return st.points
}

func (st *Study) marked() bool { return len(st.Dials) == 1 && st.Sweep.Sample == 0 }

// At are the values of the dials at point i. Of a grid the last dial goes
// fastest.
func (st *Study) At(i int) []float64 {
	if st.Sweep.Sample > 0 {
		return st.filling(i)
	}
	at := make([]float64, len(st.values))
	for k := len(at) - 1; k >= 0; k-- {
		n := len(st.values[k])
		at[k] = st.values[k][i%n]
		i /= n
	}
	return at
}

// filling is point i of a sample that fills the box of the dials evenly: the
// additive recurrence of the d-dimensional plastic number, the root above 1 of
// x^(d+1) = x + 1 (M. Roberts, The unreasonable effectiveness of quasirandom
// sequences, 2018, from memory). A count is rounded.
func (st *Study) filling(i int) []float64 {
	d := len(st.Dials)
	phi := 2.0
	for range 64 { // a contraction: each step at least halves the error
		phi = math.Pow(1+phi, 1/float64(d+1))
	}
	at := make([]float64, d)
	step := 1.0
	for k := range at {
		step /= phi
		_, x := math.Modf(0.5 + float64(float64(i+1)*step))
		lo, hi := st.Sweep.Turns[k].Ends()
		at[k] = float64(lo*(1-x)) + float64(hi*x)
		if st.Specs[k].Unit == param.Count {
			at[k] = math.Round(at[k])
		}
	}
	return at
}

// Design is the design at values of the dials. The error is a sentence.
func (st *Study) Design(at []float64) (table.Design, error) {
	d := st.Base.Design()
	for k, x := range st.Dials {
		var err error
		if d, err = x.Turned(d, at[k]); err != nil {
			return table.Design{}, err
		}
	}
	return d, nil
}

// Table is the table at values of the dials.
func (st *Study) Table(at []float64) (*table.Table, error) {
	d, err := st.Design(at)
	if err != nil {
		return nil, err
	}
	return table.New(d)
}

// Unit is the unit of dial k as it is printed, "" for a pure number.
func (st *Study) Unit(k int) string {
	switch st.Specs[k].Unit {
	case param.Length:
		return st.Base.Design().Unit.String()
	case param.Angle:
		return "rad"
	}
	return ""
}

// Label is the name of dial k as it is printed: with its place only where the
// name alone would not tell.
func (st *Study) Label(k int) string { return Label(st.Base.Design(), st.Dials[k]) }

// Label is a dial in words: "eps", or "radius of disc 2", "start of coat 1".
func Label(d table.Design, x dial.Dial) string {
	name := x.Name
	if plain, is := plainNames[name]; is && (x.Part == dial.Coat || x.Part == dial.Bare) {
		name = plain
	}
	switch x.Part {
	case dial.Node:
		name = fmt.Sprintf("%s of node %d", name, x.Node+1)
	case dial.Coat:
		return fmt.Sprintf("%s of coat %d", name, x.Of+1)
	case dial.Bare:
		return name + " of the wall"
	}
	if len(d.Items) == 1 {
		return name
	}
	return fmt.Sprintf("%s of %s %d", name, strings.ReplaceAll(d.Items[x.Of].Shape.Kind(), "-", " "), x.Of+1)
}

// plainNames are words for names of coats that read badly alone.
var plainNames = map[string]string{"te": "polarisation", "from": "start", "to": "end", "at": "middle", "outside": "index outside"}

// Kit is what a study is carried out with; its rows do not depend on it.
type Kit struct {
	// Run makes the runner of measurements on a tracer with a seed.
	Run func(tr *sim.Tracer, seed uint64) measure.Runner
	// Spread and Watch are those of orbit.Search.
	Spread func(pieces int, do func(piece int) error) error
	Watch  func() error
}
