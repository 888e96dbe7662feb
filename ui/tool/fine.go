package tool

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/param"
	"cavitywright/table/shape"
	"cavitywright/ui/session"

	"gonum.org/v1/gonum/spatial/r2"
)

// A grip of a catalogue's shape changes a number, not a place. The grid would
// let it take a few values only, so the number itself goes in fine round steps
// and the hand hardly feels them.

// fineSteps is about how many steps a parameter's range has for the hand,
// as many as a pane has pixels across.
const fineSteps = 1000

// wideRange is the length of a range from which on it says nothing about the
// values in use; the steps follow the value then.
const wideRange = 64

// fineDrag pulls a grip of a catalogue's shape and rounds what it changes.
type fineDrag struct {
	item, handle int
	to           r2.Vec
}

// Title names the change.
func (c fineDrag) Title() string { return edit.Drag{}.Title() }

// Apply pulls the grip.
func (c fineDrag) Apply(t *table.Table) (*table.Table, error) {
	it := t.Design().Items[c.item]
	from := it.Shape.(shape.Figure)
	to := it.Shape.Moved(c.handle, it.Place.Back(c.to)).(shape.Figure)
	return edit.Reshape{Item: c.item, Shape: rounded(from, to), Name: c.Title()}.Apply(t)
}

// rounded is the figure with what differs from another rounded to fine steps;
// the figure itself where the rounded values do not go together.
func rounded(from, to shape.Figure) shape.Figure {
	k := to.Family()
	v := append(param.Values(nil), to.Values()...)
	for i, s := range k.Specs {
		if v[i] != from.Values()[i] {
			v[i] = s.Clamp(toStep(v[i], fineStep(s, v[i])))
		}
	}
	if k.Fits != nil && k.Fits(v) != nil {
		return to
	}
	f, err := shape.New(k.Name, v)
	if err != nil {
		return to
	}
	return f
}

// fineStep is the step of a parameter about a value, a round one of degrees
// for an angle; 0 for none.
func fineStep(s param.Spec, x float64) float64 {
	wide := s.Hi - s.Lo
	if wide > wideRange {
		wide = 2.5 * math.Abs(x)
	}
	switch {
	case s.Unit == param.Count || wide == 0:
		return 0
	case s.Unit == param.Angle:
		return session.GridStep(1, wide*180/math.Pi/fineSteps) * math.Pi / 180
	}
	return session.GridStep(1, wide/fineSteps)
}

// toStep is the multiple of a step nearest to x. A step below 1 is a whole
// part of 1, by which it is divided: 0.16 stays 0.16.
func toStep(x, step float64) float64 {
	if step == 0 {
		return x
	}
	if whole := math.Round(1 / step); step < 1 && math.Abs(whole*step-1) < 1e-9 {
		return math.Round(x/step) / whole
	}
	return math.Round(x/step) * step
}

// onGrip reports whether a handle of an item is one that changes a parameter.
func (e *Editor) onGrip(item, handle int) bool {
	if item < 0 || handle < 0 {
		return false
	}
	_, is := e.s.Table().Design().Items[item].Shape.(shape.Figure)
	return is
}
