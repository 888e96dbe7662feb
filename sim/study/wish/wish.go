// Package wish seeks a wall: dials of a design are turned within ranges, every
// wall tried is held to what is demanded of it, and the readings wished for are
// measured with the same seed on each (common random numbers). What it answers is
// always a wall that was compiled, surveyed and measured.
//
// The search is gonum's: the simplex of Nelder and Mead, begun anew from the best
// with a smaller simplex where noise ends it, or CMA-ES before that. It depends on
// the design, the plan and the seed alone.
//
// It makes no chance of its own and knows no files.
package wish

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"cavitywright/sim/measure/reading"
	"cavitywright/sim/study"
	"cavitywright/sim/study/tolerance"
	"cavitywright/table"
	"cavitywright/table/dial"
	"cavitywright/table/param"
)

// Wish is a plan made ready on a design.
type Wish struct {
	Base  *table.Table // as it was drawn
	Plan  table.Wish
	Dials []dial.Dial
	Specs []param.Spec // of the dials

	goals []goal // those of the wish, then those against it
	least group  // the symmetry demanded
	under *tolerance.Tolerance
}

// Refusal is why a plan cannot be carried out, in a sentence.
type Refusal struct{ Text string }

func (e *Refusal) Error() string { return e.Text }

func refuse(format string, args ...any) error { return &Refusal{fmt.Sprintf(format, args...)} }

const (
	// MostTries bounds the walls of a search.
	MostTries = 1_000_000
	// mostFree is the number of dials up to which a search makes sense.
	mostFree = 64
)

// New makes a plan ready. The error is a *Refusal, a *tolerance.Refusal, a
// *dial.Unknown or a *reading.NoReading.
func New(base *table.Table, plan table.Wish) (*Wish, error) {
	w := &Wish{Base: base, Plan: plan}
	if err := w.free(); err != nil {
		return nil, err
	}
	for _, g := range slices.Concat(plan.Goals, plan.Against) {
		ready, err := goalOf(g)
		if err != nil {
			return nil, err
		}
		w.goals = append(w.goals, ready)
	}
	switch {
	case len(plan.Goals) == 0:
		return nil, refuse("the wish %q wants nothing; name a reading", plan.Name)
	case plan.Tries < 1 || plan.Tries > MostTries:
		return nil, refuse("%d walls are to be tried; ask for 1 to %d", plan.Tries, MostTries)
	case !(plan.Effort > 0) || math.IsInf(plan.Effort, 0):
		return nil, refuse("the effort is %g, but must be above 0", plan.Effort)
	}
	if err := w.demand(); err != nil {
		return nil, err
	}
	return w, w.robust()
}

// free finds the dials.
func (w *Wish) free() error {
	d := w.Base.Design()
	if n := len(w.Plan.Free); n == 0 || n > mostFree {
		return refuse("%d numbers are free; name 1 to %d", n, mostFree)
	}
	for _, f := range w.Plan.Free {
		x, err := dial.Find(d, f.Dial)
		if err != nil {
			return err
		}
		s, err := x.Spec(d)
		if err != nil {
			return err
		}
		switch {
		case slices.Contains(w.Dials, x):
			return refuse("%s is free twice; take one of the two out", x)
		case math.IsNaN(f.Lo) || math.IsNaN(f.Hi) || math.IsInf(f.Lo, 0) || math.IsInf(f.Hi, 0) || f.Lo >= f.Hi:
			return refuse("%s is free from %g to %g; give the lower end first", x, f.Lo, f.Hi)
		case s.Check(f.Lo) != nil:
			return s.Check(f.Lo)
		case s.Check(f.Hi) != nil:
			return s.Check(f.Hi)
		}
		w.Dials, w.Specs = append(w.Dials, x), append(w.Specs, s)
	}
	return nil
}

// robust makes the tolerance ready whose copies count.
func (w *Wish) robust() error {
	if w.Plan.Under == "" {
		return nil
	}
	for _, t := range w.Base.Design().Study.Tolerances {
		if t.Name != w.Plan.Under {
			continue
		}
		if w.Plan.Copies < 1 {
			return refuse("the wish %q is under a tolerance with no copies; give their number", w.Plan.Name)
		}
		// What is read of the copies is what is wished for; the limits of the
		// tolerance are not asked here.
		t.Readings, t.Limits, t.Copies, t.Effort = []string{"perimeter"}, nil, max(2, w.Plan.Copies), w.Plan.Effort
		var err error
		w.under, err = tolerance.New(w.Base, t)
		return err
	}
	return refuse("the table has no tolerance called %q; add it, or leave it out of the wish", w.Plan.Under)
}

// Fronted reports whether there are two wishes with a front between them.
func (w *Wish) Fronted() bool { return len(w.Plan.Against) > 0 }

// Label is dial k in words.
func (w *Wish) Label(k int) string { return study.Label(w.Base.Design(), w.Dials[k]) }

// unit is that of dial k behind its number.
func (w *Wish) unit(k int) string {
	switch w.Specs[k].Unit {
	case param.Length:
		return " " + w.Base.Design().Unit.String()
	case param.Angle:
		return " rad"
	}
	return ""
}

// Place is values of the dials in words.
func (w *Wish) Place(at []float64) string {
	var words []string
	for k, v := range at {
		words = append(words, fmt.Sprintf("%s = %.6g%s", w.Label(k), v, w.unit(k)))
	}
	return strings.Join(words, ", ")
}

// goal is a goal with what it is of: a reading, or a number of an orbit.
type goal struct {
	table.Goal
	orbit orbitNumber // none where period is 0
}

func goalOf(g table.Goal) (goal, error) {
	out := goal{Goal: g}
	if !(g.Weight > 0) || math.IsInf(g.Weight, 0) || math.IsNaN(g.Value) || math.IsInf(g.Value, 0) {
		return out, refuse("the goal %s has the weight %g and the value %g; give numbers, the weight above 0", g.Reading, g.Weight, g.Value)
	}
	if strings.HasPrefix(g.Reading, orbitPrefix) {
		var err error
		out.orbit, err = orbitOf(g.Reading)
		return out, err
	}
	for _, r := range reading.Readings() {
		if r.Name == g.Reading {
			return out, nil
		}
	}
	return out, &reading.NoReading{Name: g.Reading}
}

// Words are a goal in words.
func (g goal) Words() string {
	switch g.Aim {
	case table.Minimise:
		return "the least " + g.Reading
	case table.Hold:
		return fmt.Sprintf("%s at %g", g.Reading, g.Value)
	}
	return "the greatest " + g.Reading
}

// Words are the wishes in a sentence without its end.
func (w *Wish) Words() string {
	var parts [2][]string
	for i, g := range w.goals {
		text := g.Words()
		if g.Weight != 1 {
			text += fmt.Sprintf(" (weight %g)", g.Weight)
		}
		k := 0
		if i >= len(w.Plan.Goals) {
			k = 1
		}
		parts[k] = append(parts[k], text)
	}
	text := strings.Join(parts[0], " and ")
	if w.Fronted() {
		text += ", against " + strings.Join(parts[1], " and ")
	}
	return text
}

// cost is what a value of the goal adds to what is made small.
func (g goal) cost(v float64) float64 {
	switch g.Aim {
	case table.Maximise:
		return -g.Weight * v
	case table.Minimise:
		return g.Weight * v
	}
	return g.Weight * math.Abs(v-g.Value)
}
