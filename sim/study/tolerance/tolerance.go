// Package tolerance makes copies of a wall as a workshop would make them, and
// takes readings of each: how they are distributed, how many copies keep to a
// limit, and which error the scatter comes from.
//
// A copy depends on the design, the plan, the seed and its number alone. All
// copies are measured with the seed of the study. An error of size is not traced:
// rays know no length, so a reading of a copy that is larger by the factor k is
// that of the copy at the drawn size times k to the power of its dimension. What
// is traced is the copy at the drawn size, with the other errors scaled along.
//
// It starts no goroutine, makes no chance of its own and knows no files.
package tolerance

import (
	"fmt"
	"math"
	"math/rand/v2"

	"cavitywright/sim/measure/reading"
	"cavitywright/sim/study"
	"cavitywright/table"
	"cavitywright/table/dial"
	"cavitywright/table/param"
	"cavitywright/table/wall"
)

// Tolerance is a plan made ready on a design.
type Tolerance struct {
	Base  *table.Table // as it was drawn
	Plan  table.Tolerance
	flaws []flaw
}

// flaw is a flaw with the dials that it turns.
type flaw struct {
	table.Flaw
	dials []dial.Dial
}

// Kit is what copies are made and measured with; Chance is a source of random
// numbers for each stream.
type Kit struct {
	study.Kit
	Chance func(stream uint64) rand.Source
}

// Refusal is why a plan cannot be carried out, in a sentence.
type Refusal struct{ Text string }

func (e *Refusal) Error() string { return e.Text }

func refuse(format string, args ...any) error { return &Refusal{fmt.Sprintf(format, args...)} }

// MostCopies bounds the copies of a plan.
const MostCopies = 100_000

// New makes a plan ready. The error is a *Refusal, a *dial.Unknown or a
// *reading.NoReading.
func New(base *table.Table, plan table.Tolerance) (*Tolerance, error) {
	t := &Tolerance{Base: base, Plan: plan}
	if len(plan.Flaws) == 0 {
		return nil, refuse("the tolerance %q has no error in it; name one at least", plan.Name)
	}
	for i, f := range plan.Flaws {
		ready, err := t.ready(f)
		if err != nil {
			return nil, err
		}
		for _, before := range t.flaws[:i] {
			if before.Kind == f.Kind && (f.Kind != table.DialFlaw || before.dials[0] == ready.dials[0]) {
				return nil, refuse("the tolerance %q has %s twice; take one of the two out", plan.Name, t.words(ready))
			}
		}
		t.flaws = append(t.flaws, ready)
	}
	return t, t.check()
}

// ready finds the dials of a flaw, and refuses numbers that make no sense.
func (t *Tolerance) ready(f table.Flaw) (flaw, error) {
	out := flaw{Flaw: f}
	d := t.Base.Design()
	finite := !math.IsNaN(f.Mean+f.Width+f.Length) && !math.IsInf(f.Mean, 0) && !math.IsInf(f.Width, 0) && !math.IsInf(f.Length, 0)
	if !finite || f.Width < 0 {
		return out, refuse("the width of an error is %g; give a number, 0 or more", f.Width)
	}
	switch f.Kind {
	case table.DialFlaw:
		x, err := dial.Find(d, f.Dial)
		if err != nil {
			return out, err
		}
		if s, _ := x.Spec(d); s.Unit == param.Count {
			return out, refuse("%s is a count, which a workshop does not miss; name another number", x)
		}
		out.dials = []dial.Dial{x}
	case table.IndexFlaw:
		if out.dials = indices(d); len(out.dials) == 0 {
			return out, refuse("the refractive index cannot be off, because no wall has one; lay a dielectric coat, or take the error out")
		}
	case table.RoughFlaw:
		if !(f.Length > 0) {
			return out, refuse("the correlation length of the roughness is %g; give a length above 0", f.Length)
		}
		if least := t.Base.Length() / mostWaves; f.Length < least {
			return out, refuse("the correlation length of the roughness is %g %s, but on a wall of this length no less than %.3g %s can be made; give more", f.Length, d.Unit, least, d.Unit)
		}
	case table.ToolFlaw:
		if !(f.Mean > 0) {
			return out, refuse("the radius of the tool is %g %s; give its mean, a length above 0", f.Mean, d.Unit)
		}
	case table.SizeFlaw:
		if f.Width+math.Abs(f.Mean) > mostSize {
			return out, refuse("the size is off by %g, but an error of size is relative and at most %g", f.Width+math.Abs(f.Mean), mostSize)
		}
	}
	return out, nil
}

// mostSize bounds the relative error of size, so that no copy is turned inside
// out.
const mostSize = 0.2

// indices are the dials of the refractive indices of a design.
func indices(d table.Design) (all []dial.Dial) {
	for _, x := range dial.All(d) {
		if x.Name != "index" || x.Part != dial.Coat && x.Part != dial.Bare {
			continue
		}
		l := d.Bare
		if x.Part == dial.Coat {
			l = d.Coats[x.Of].Law
		}
		if _, is := l.(wall.Dielectric); is {
			all = append(all, x)
		}
	}
	return all
}

// check holds readings, limits and numbers to what there is.
func (t *Tolerance) check() error {
	p := t.Plan
	switch {
	case len(p.Readings) == 0:
		return refuse("the tolerance %q takes no reading; name one at least", p.Name)
	case p.Copies < 2 || p.Copies > MostCopies:
		return refuse("%d copies were asked for; ask for 2 to %d", p.Copies, MostCopies)
	case !(p.Effort > 0) || math.IsInf(p.Effort, 0):
		return refuse("the effort is %g, but must be above 0", p.Effort)
	case !(p.Wavelength >= 0) || math.IsInf(p.Wavelength, 0):
		return refuse("the wavelength is %g, but must be a length", p.Wavelength)
	}
	taken := map[string]bool{}
	for _, name := range p.Readings {
		if taken[name] {
			return refuse("the tolerance %q takes %s twice; take one of the two out", p.Name, name)
		}
		taken[name] = true
	}
	// What the design has as drawn, its copies have.
	if _, err := reading.Wanted(t.Base, p.Readings); err != nil {
		return err
	}
	for _, l := range p.Limits {
		if !taken[l.Reading] {
			return refuse("there is a limit on %s, which is not taken; add it to the readings", l.Reading)
		}
		if math.IsNaN(l.Lo) || math.IsNaN(l.Hi) || l.Lo > l.Hi {
			return refuse("the limit on %s keeps nothing; give the lower end first", l.Reading)
		}
	}
	return nil
}

// Flaws is the number of errors.
func (t *Tolerance) Flaws() int { return len(t.flaws) }

// Name is error i in words: "size", "eps", "offset".
func (t *Tolerance) Name(i int) string { return t.words(t.flaws[i]) }

func (t *Tolerance) words(f flaw) string {
	switch f.Kind {
	case table.DialFlaw:
		return study.Label(t.Base.Design(), f.dials[0])
	case table.OffsetFlaw:
		return "offset"
	case table.ToolFlaw:
		return "tool radius"
	case table.RoughFlaw:
		return "roughness"
	case table.IndexFlaw:
		return "index"
	}
	return "size"
}

// unit is that of an error's number, "" for a pure one.
func (t *Tolerance) unit(f flaw) string {
	switch f.Kind {
	case table.OffsetFlaw, table.ToolFlaw, table.RoughFlaw:
		return " " + t.Base.Design().Unit.String()
	case table.DialFlaw:
		switch s, _ := f.dials[0].Spec(t.Base.Design()); s.Unit {
		case param.Length:
			return " " + t.Base.Design().Unit.String()
		case param.Angle:
			return " rad"
		}
	}
	return ""
}

// Words are error i with its distribution: "offset, normal, 0 ± 0.01 mm".
func (t *Tolerance) Words(i int) string {
	f := t.flaws[i]
	u := t.unit(f)
	if f.Kind == table.RoughFlaw {
		return fmt.Sprintf("roughness of rms %.4g%s, correlation length %.4g%s", f.Width, u, f.Length, u)
	}
	law := "standard deviation"
	if f.Law == table.Uniform {
		law = "half width, evenly,"
	}
	text := fmt.Sprintf("%s with the %s %.4g%s", t.words(f), law, f.Width, u)
	if f.Kind == table.SizeFlaw {
		text = fmt.Sprintf("size with the %s %.4g %%", law, 100*f.Width)
	}
	switch {
	case f.Kind == table.SizeFlaw && f.Mean != 0:
		text += fmt.Sprintf(" about %+.4g %%", 100*f.Mean)
	case f.Mean != 0:
		text += fmt.Sprintf(" about %.4g%s", f.Mean, u)
	}
	return text
}
