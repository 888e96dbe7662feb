package tool

import (
	"math"

	"cavitywright/table/edit"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Frame is what a whole shape is turned and scaled by: two grips at the
// right corners of the box of its wall, both about the middle of the box.
type Frame struct {
	Middle, Turn, Scale r2.Vec
}

// frameOut is how far outside the box the grips stand, in reaches.
const frameOut = 2.2

// Frame is the frame of the shape that is selected as a whole; ok is false
// where none is.
func (e *Editor) Frame(reach float64) (f Frame, ok bool) {
	sel := e.s.Selection
	if sel.Item < 0 || sel.Handle >= 0 || len(e.alsoItems) > 0 || sel.Item >= len(e.s.Table().Design().Items) {
		return f, false
	}
	b := itemBox(e.s.Table(), sel.Item)
	out := frameOut * reach
	f.Middle = plane.Lerp(b.Min, b.Max, 0.5)
	f.Turn = r2.Vec{X: b.Max.X + out, Y: b.Min.Y - out}
	f.Scale = r2.Vec{X: b.Max.X + out, Y: b.Max.Y + out}
	return f, true
}

// pressFrame takes hold of a grip of the frame.
func (e *Editor) pressFrame(p r2.Vec, reach float64) bool {
	f, ok := e.Frame(reach)
	if !ok {
		return false
	}
	switch {
	case r2.Norm(r2.Sub(p, f.Turn)) <= reach:
		e.held = holdsTurn
	case r2.Norm(r2.Sub(p, f.Scale)) <= reach:
		e.held = holdsScale
	default:
		return false
	}
	e.frame, e.from, e.place = f, p, e.s.Table().Design().Items[e.s.Selection.Item].Place
	e.begin()
	return true
}

// leastScale is the least factor that one pull of the frame scales by.
const leastScale = 1e-3

// dragFrame turns or scales the shape about the middle of its frame.
func (e *Editor) dragFrame(p r2.Vec, k Keys) {
	a, b := r2.Sub(e.from, e.frame.Middle), r2.Sub(p, e.frame.Middle)
	m := plane.Identity()
	if e.held == holdsTurn {
		m.Angle = plane.Angle(a, b)
		if k.Has(Constrain) {
			step := constrainDeg * math.Pi / 180
			m.Angle = math.Round(m.Angle/step) * step
		}
	} else if m.Scale = math.Max(r2.Norm(b)/r2.Norm(a), leastScale); k.Has(Constrain) {
		m.Scale = math.Max(math.Round(m.Scale*10)/10, 0.1)
	}
	place := e.place
	from := r2.Sub(place.Shift, e.frame.Middle)
	place.Shift = r2.Add(e.frame.Middle, r2.Scale(m.Scale, m.Turn(from)))
	place.Angle = math.Remainder(place.Angle+m.Angle, 2*math.Pi)
	place.Scale *= m.Scale
	_ = e.s.Amend(edit.Shift{Item: e.s.Selection.Item, Place: place})
}
