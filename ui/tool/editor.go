package tool

import (
	"math"
	"strings"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/ui/session"

	"gonum.org/v1/gonum/spatial/r2"
)

// Editor is the pointer over the table: it takes hold of handles and shapes,
// or draws a new wall.
type Editor struct {
	s     *session.Session
	held  grip
	from  r2.Vec           // where the hold began
	place plane.Similarity // of the item held, then
	chain chain
	trail []r2.Vec

	// Step is the grid's step, 0 for none: where new nodes snap to.
	Step float64
}

// grip is what the pointer holds.
type grip uint8

const (
	holdsNothing grip = iota
	holdsHandle
	holdsItem
	drawsNode
	drawsTrail
)

// NewEditor is the editor's pointer on the session.
func NewEditor(s *session.Session) *Editor { return &Editor{s: s} }

// Press takes hold of what lies within reach (a length) of p, or begins to
// draw.
func (e *Editor) Press(p r2.Vec, reach float64, k Keys) {
	switch e.s.Settings.Tool {
	case session.Chain:
		e.pressChain(p, reach, k)
		return
	case session.Stroke:
		e.held, e.trail = drawsTrail, []r2.Vec{p}
		return
	}
	e.from = p
	if h, ok := e.HandleAt(p, reach); ok {
		e.s.Select(h.Item, h.Index)
		e.held, e.from = holdsHandle, h.At
		e.s.Begin()
		return
	}
	if i := e.ItemAt(p, reach); i >= 0 {
		e.s.Select(i, -1)
		e.held, e.place = holdsItem, e.s.Table().Design().Items[i].Place
		e.s.Begin()
		return
	}
	e.s.Select(-1, -1)
}

// Drag follows the pointer to p; step is the grid's, 0 for none.
func (e *Editor) Drag(p r2.Vec, step float64, k Keys) {
	sel := e.s.Selection
	switch e.held {
	case holdsHandle:
		to := p
		if k.Has(Constrain) {
			to = constrained(e.from, p)
		} else {
			to = e.snapped(p, step, k)
		}
		_ = e.s.Amend(edit.Drag{Item: sel.Item, Handle: sel.Handle, To: to})
	case holdsItem:
		d := r2.Sub(p, e.from)
		if k.Has(Constrain) {
			d = alongAxis(d)
		}
		place := e.place
		place.Shift = r2.Add(place.Shift, d)
		if !k.Has(Constrain) {
			place.Shift = e.snapped(place.Shift, step, k)
		}
		_ = e.s.Amend(edit.Shift{Item: sel.Item, Place: place})
	case drawsNode:
		e.chain.pull(p)
		e.s.Touch()
	case drawsTrail:
		e.trail = append(e.trail, p)
		e.s.Touch()
	}
}

// alongAxis keeps the greater component of d.
func alongAxis(d r2.Vec) r2.Vec {
	if math.Abs(d.X) >= math.Abs(d.Y) {
		return r2.Vec{X: d.X}
	}
	return r2.Vec{Y: d.Y}
}

func (e *Editor) snapped(p r2.Vec, step float64, k Keys) r2.Vec {
	if step <= 0 || k.Has(Free) || e.s.Settings.Snap == session.SnapOff {
		return p
	}
	return session.Snapped(p, step)
}

// Release lets go. It may be called twice.
func (e *Editor) Release() error {
	held := e.held
	e.held = holdsNothing
	switch held {
	case holdsHandle, holdsItem:
		e.s.End()
	case drawsTrail:
		return e.closeTrail()
	}
	return nil
}

// Cancel lets go as if nothing had happened.
func (e *Editor) Cancel() {
	if e.held == holdsHandle || e.held == holdsItem {
		e.s.Cancel()
	}
	e.held, e.trail, e.chain = holdsNothing, nil, chain{}
	e.s.Touch()
}

// HandleAt is the topmost handle within reach of p. Handles of free walls that
// are not selected are not taken, but for their nodes.
func (e *Editor) HandleAt(p r2.Vec, reach float64) (session.Handle, bool) {
	best, found := session.Handle{}, false
	near := reach
	for _, h := range e.s.Handles() {
		if d := r2.Norm(r2.Sub(h.At, p)); d <= near {
			best, near, found = h, d, true
		}
	}
	return best, found
}

// ItemAt is the item whose wall lies within reach of p, or the obstacle that p
// lies in; -1 for none.
func (e *Editor) ItemAt(p r2.Vec, reach float64) int {
	t := e.s.Table()
	s, d := t.Nearest(p)
	if d <= reach || !t.Contains(p) && insideBox(t, s, p) {
		i, _ := t.Locate(s)
		return t.Pieces()[i].Item
	}
	return -1
}

// insideBox reports whether p lies in the box of the obstacle at s.
func insideBox(t *table.Table, s float64, p r2.Vec) bool {
	l := t.Loops()[t.LoopAt(s)]
	return l.Side == shape.Obstacle && l.Box.Contains(p)
}

// Double adds a node where a free wall was clicked twice.
func (e *Editor) Double(p r2.Vec, reach float64) {
	if e.s.Settings.Tool == session.Chain {
		_ = e.CloseChain()
		return
	}
	t := e.s.Table()
	s, d := t.Nearest(p)
	if d > reach {
		return
	}
	i, x := t.Locate(s)
	pc := t.Pieces()[i]
	f, ok := t.Design().Items[pc.Item].Shape.(shape.Freeform)
	if !ok {
		return
	}
	span, frac := spanAt(t, i, x)
	_ = e.s.Do(edit.Reshape{Item: pc.Item, Shape: f.InsertNode(span, frac), Name: "add a node"})
}

// Delete takes out the selected node of a free wall, or the selected item.
func (e *Editor) Delete() error {
	sel := e.s.Selection
	if sel.Item < 0 {
		return nil
	}
	it := e.s.Table().Design().Items[sel.Item]
	if f, ok := it.Shape.(shape.Freeform); ok && sel.Handle >= 0 {
		if h := f.Handles()[sel.Handle]; h.Role == shape.Anchor {
			return e.s.Do(edit.Reshape{Item: sel.Item, Shape: f.DeleteNode(h.Of), Name: "delete a node"})
		}
	}
	return e.s.Do(edit.Remove{Item: sel.Item})
}

// Hint is what a press at p would do.
func (e *Editor) Hint(p r2.Vec, reach float64) string {
	switch e.s.Settings.Tool {
	case session.Chain:
		return e.chain.hint(p, reach)
	case session.Stroke:
		return "Draw the wall in one stroke; it closes by itself when you let go."
	}
	if h, ok := e.HandleAt(p, reach); ok {
		it := e.s.Table().Design().Items[h.Item]
		return "Drag to change " + it.Shape.Handles()[h.Index].Name + ". Shift holds the direction, Ctrl passes the grid."
	}
	if i := e.ItemAt(p, reach); i >= 0 {
		if _, ok := e.s.Table().Design().Items[i].Shape.(shape.Freeform); ok {
			return "Drag to move the wall; click twice to add a node."
		}
		return "Drag to move the " + strings.ToLower(e.s.Table().Design().Items[i].Shape.(shape.Figure).Family().Title) + "."
	}
	return "Drag a handle to reshape the wall; wheel zooms, middle button or Space pans."
}
