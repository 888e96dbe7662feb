package tool

import (
	"fmt"
	"slices"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/wall"
)

// What the numbers of a coat, when they are typed, change.

// refusal is a command that is refused whatever the table.
type refusal struct{ why error }

// Refused is a command that is refused with an error: for numbers that were
// found out of range before there was a command.
func Refused(why error) edit.Command { return refusal{why} }

func (r refusal) Apply(*table.Table) (*table.Table, error) { return nil, r.why }
func (r refusal) Title() string                            { return "" }

// Placed is the command that puts the coat to another stretch of its loop.
func (r CoatRun) Placed(t *table.Table, from, width float64) edit.Command {
	if r.Loop < 0 {
		return refusal{fmt.Errorf("this coat lies on all sides; delete it and lay another to have ends that move")}
	}
	l := t.Loops()[r.Loop]
	if round := l.S1 - l.S0; !(width >= leastCoat*round) || width > round*(1+leastCoat) {
		u := t.Design().Unit
		return refusal{fmt.Errorf("the coat would be %.4g %s wide; its width must be more than 0 and at most %.6g %s, the length of its wall", width, u, round, u)}
	}
	return coating(t, replaced(t.Design().Coats, r.First, r.Last, lay(t, r.Loop, from, width, r.Law)), "slide a coat")
}

// WithStart lets the coat begin at s, and end where it ends.
func (r CoatRun) WithStart(t *table.Table, s float64) edit.Command {
	return r.Placed(t, s, r.way(t, r.From+r.Width-s))
}

// WithEnd lets the coat end at s, and begin where it begins.
func (r CoatRun) WithEnd(t *table.Table, s float64) edit.Command {
	return r.Placed(t, r.From, r.way(t, s-r.From))
}

// way is a length along the loop brought into (0, its length].
func (r CoatRun) way(t *table.Table, d float64) float64 {
	if r.Loop < 0 {
		return d
	}
	l := t.Loops()[r.Loop]
	if d = wrapped(d, l.S1-l.S0); d == 0 {
		return l.S1 - l.S0
	}
	return d
}

// WithWidth gives the coat another length about its middle.
func (r CoatRun) WithWidth(t *table.Table, width float64) edit.Command {
	return r.Placed(t, r.From+(r.Width-width)/2, width)
}

// End is the arclength of the end.
func (r CoatRun) End(t *table.Table) float64 { return onLoop(t, r.Loop, r.From+r.Width) }

// Sides are the places of the sides in their item that the coat begins and
// ends on, from 0.
func (r CoatRun) Sides(t *table.Table) (first, last int) {
	coats := t.Design().Coats
	return coats[r.First].Side, coats[r.Last].Side
}

// Fractions are the start as a fraction of the first side and the end as one of
// the last.
func (r CoatRun) Fractions(t *table.Table) (from, to float64) {
	coats := t.Design().Coats
	return coats[r.First].From, coats[r.Last].To
}

// WithFractions moves the start on the first side and the end on the last; a
// coat on one side, or on all, must end behind its start.
func (r CoatRun) WithFractions(t *table.Table, from, to float64) edit.Command {
	if r.First == r.Last && from >= to {
		return refusal{fmt.Errorf("the coat would run from %.4g to %.4g of its side; it must end behind its start", from, to)}
	}
	coats := slices.Clone(t.Design().Coats)
	coats[r.First].From, coats[r.Last].To = from, to
	if r.First < r.Last {
		if from >= 1 || to <= 0 {
			return refusal{fmt.Errorf("the coat would leave its side %d; drag its end over the joint instead", 1+coats[r.First].Side)}
		}
	}
	return coating(t, coats, "slide a coat")
}

// Relaid is the command that gives the coat another law.
func (r CoatRun) Relaid(t *table.Table, law wall.Law) edit.Command {
	coats := slices.Clone(t.Design().Coats)
	for i := r.First; i <= r.Last; i++ {
		coats[i].Law = law
	}
	return coating(t, coats, "change a coat")
}

// Barer is the command that gives the bare wall another law.
func Barer(t *table.Table, law wall.Law) edit.Command {
	return edit.Coating{Bare: law, Coats: t.Design().Coats, Name: "change the bare wall"}
}

// Medium is the refractive index that fills the table: that inside its
// dielectric walls. ok is false where no wall is dielectric.
func Medium(t *table.Table) (index float64, ok bool) {
	if d, is := t.Law().(wall.Dielectric); is {
		return d.Index, true
	}
	for _, c := range t.Design().Coats {
		if d, is := c.Law.(wall.Dielectric); is {
			return d.Index, true
		}
	}
	return 0, false
}

// Filled is the command that fills the table with a medium: the index inside
// all its dielectric walls.
func Filled(t *table.Table, index float64) edit.Command {
	fill := func(l wall.Law) wall.Law {
		if d, is := l.(wall.Dielectric); is {
			d.Index = index
			return d
		}
		return l
	}
	coats := slices.Clone(t.Design().Coats)
	for i := range coats {
		coats[i].Law = fill(coats[i].Law)
	}
	return edit.Coating{Bare: fill(t.Design().Bare), Coats: coats, Name: "change the medium"}
}
