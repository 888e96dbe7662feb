package tool

import (
	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/ui/session"
)

// strokeTolerance is how far, as a fraction of a stroke's size, the fitted wall
// may pass by it: about the tremor of a hand.
const strokeTolerance = 0.012

func (e *Editor) closeTrail() error {
	trail := e.trail
	e.trail = nil
	box := plane.Around(trail...)
	f, err := shape.Sketch(trail, strokeTolerance*plane.Diagonal(box))
	if err != nil {
		e.s.Touch()
		return err
	}
	return e.put(f)
}

// Drawn says what a wall that is drawn becomes.
type Drawn uint8

// What a drawn wall becomes: an obstacle where it lies wholly inside the wall
// that is there and else the wall, or always the one or the other.
const (
	ByPlace Drawn = iota
	AsWall
	AsObstacle
)

// put places a free wall as what it shall be. The pointer is the hand again.
func (e *Editor) put(f shape.Freeform) error {
	role := table.Wall
	if t := e.s.Table(); e.As == AsObstacle || e.As == ByPlace && !t.Open() && inside(t, f) {
		role = table.Post
	}
	err := e.s.Do(edit.Place{Item: table.Item{Shape: f, Role: role, Place: plane.Identity()}})
	if err != nil {
		return err
	}
	e.s.Settings.Tool = session.Hand
	items := e.s.Table().Design().Items
	at := len(items) - 1
	if role == table.Wall {
		at = 0
	}
	e.s.Select(at, -1)
	return nil
}

// inside reports whether every node of f lies inside the table.
func inside(t *table.Table, f shape.Freeform) bool {
	for _, n := range f.Nodes() {
		if !t.Contains(n.At) {
			return false
		}
	}
	return true
}
