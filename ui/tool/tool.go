// Package tool turns what a pointer does into commands on the session, in
// table units. It is a set of small state machines without widgets: a pane
// says where the pointer is, how far it reaches and which keys are held.
package tool

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Keys are the modifier keys that are held.
type Keys uint8

// The modifiers: Constrain (Shift) keeps angles to 15 degrees and shapes to
// their axis; Free (Ctrl or Cmd) lets a drag pass by the grid.
const (
	Constrain Keys = 1 << iota
	Free
)

// Has reports whether the key is held.
func (k Keys) Has(one Keys) bool { return k&one != 0 }

// constrainDeg is the step of constrained directions.
const constrainDeg = 15

// constrained is to, turned about from onto the nearest constrained direction.
func constrained(from, to r2.Vec) r2.Vec {
	d := r2.Sub(to, from)
	step := constrainDeg * math.Pi / 180
	angle := math.Round(math.Atan2(d.Y, d.X)/step) * step
	u := plane.Polar(angle)
	return r2.Add(from, r2.Scale(plane.Dot(d, u), u))
}
