package orbit

import (
	"fmt"
	"slices"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/plane"
)

// hues is the number of colours of orbits.
const hues = 8

// Lines are orbits as closed lines of a drawing, each with a colour of its
// number.
func Lines(orbits []*Orbit) []figure.Line {
	all := make([]figure.Line, len(orbits))
	for i, o := range orbits {
		l := figure.Line{Role: figure.Ray, Hue: i % hues, Closed: true}
		for _, b := range o.Bounces {
			l.X, l.Y = append(l.X, b.Point.X), append(l.Y, b.Point.Y)
		}
		all[i] = l
	}
	return all
}

// Drawing is the table with orbits. program is the name and version that the
// caption ends with.
func Drawing(t *table.Table, orbits []*Orbit, program string) figure.Paths {
	const fineChords = 2e-5 // of the table's size: micrometres on a page
	size := plane.Diagonal(t.Bounds())
	f := figure.Paths{Unit: t.Design().Unit.String(), Lines: measure.Outline(t, fineChords*size)}
	f.Lines = append(f.Lines, Lines(orbits)...)
	f.Caption = []string{measure.Head(t) + described(orbits, t.Design().Unit.String()), measure.Foot(t, program)}
	return f
}

// described says what is drawn: each orbit where they are few.
func described(orbits []*Orbit, unit string) string {
	const few = 4
	if len(orbits) > few {
		least, most := orbits[0].Period(), orbits[0].Period()
		for _, o := range orbits {
			least, most = min(least, o.Period()), max(most, o.Period())
		}
		return fmt.Sprintf("%d periodic orbits of %d to %d bounces.", len(orbits), least, most)
	}
	text := "Periodic orbits:"
	for i, o := range orbits {
		end := ";"
		if i == len(orbits)-1 {
			end = "."
		}
		text += fmt.Sprintf(" %d bounces, length %.8g %s, trace %.6g, %s%s", o.Period(), o.Length, unit, o.Trace(), o.Sort(), end)
	}
	return text
}

// Sort is the kind of the orbit in words, a family as such.
func (o *Orbit) Sort() string {
	if o.Family != nil {
		return "marginal family"
	}
	return o.Kind().String()
}

// Spot is the mark of the orbit's kind on a portrait.
func (o *Orbit) Spot() figure.SpotKind {
	switch o.Kind() {
	case Elliptic:
		return figure.Ring
	case Hyperbolic:
		return figure.Cross
	case InverseHyperbolic:
		return figure.CrossRing
	}
	return figure.Bar
}

// Spots are the marks of orbits on a portrait's axes, at each bounce, of the
// orbit run backwards too; each orbit with a colour of its number, or all as the
// sea where hue is negative.
func Spots(t *table.Table, orbits []*Orbit, hue int) (all []figure.Spot) {
	on := measure.NewSection(t)
	for i, o := range orbits {
		s := figure.Spot{Kind: o.Spot(), Hue: hue}
		if hue >= 0 {
			s.Hue = (hue + i) % hues
		}
		for _, b := range o.Bounces {
			s.X, s.Y = on.At(b.S, b.P)
			all = append(all, s)
			if o.TwoSenses {
				s.X, s.Y = on.At(b.S, -b.P)
				all = append(all, s)
			}
		}
	}
	return all
}

// Firsts are the first orbits of each class of copies by symmetry.
func (l *List) Firsts() (all []*Orbit) {
	class := 0
	for i := range l.Orbits {
		if o := &l.Orbits[i]; o.Class > class {
			class = o.Class
			all = append(all, o)
		}
	}
	return all
}

// traceShown is the trace up to which branches are drawn: the stable band, and
// as much again on either side.
const traceShown = 6

// Figure is the trace of each branch against the number that moves. The stable band lies between the lines; a mark stands at each change.
func (f *Followed) Figure(n Number, caption []string) figure.Series {
	s := figure.Series{
		X:       figure.Axis{Label: n.Name, Unit: n.Unit, Lo: f.From, Hi: f.To},
		Y:       figure.Axis{Label: "trace of one period", Lo: -traceShown, Hi: traceShown, Marks: []figure.Mark{{At: 2, Kind: figure.Event}, {At: -2, Kind: figure.Event}}},
		Caption: caption,
	}
	var places []float64
	for _, c := range f.Changes() {
		if k := len(places); k == 0 || c.V-places[k-1] > LocatedTo*(f.To-f.From) {
			places = append(places, c.V)
			s.X.Marks = append(s.X.Marks, figure.Mark{At: c.V, Kind: figure.Event, Name: c.Short})
		}
	}
	for i := range f.Branches {
		b := &f.Branches[i]
		trace, _ := b.Series()
		s.Curves = append(s.Curves, figure.Curve{Name: fmt.Sprintf("%d: %d bounces", i+1, b.Period), Hue: b.Period % hues, X: slices.Clone(b.V), Y: trace})
	}
	return s
}
