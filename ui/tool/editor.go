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
	coats Coats

	// Step is the grid's step, 0 for none: where new nodes snap to. Next is the
	// kind of the next span that is drawn; Symmetry is what a wall keeps while
	// it is drawn, and afterwards. As is what it becomes.
	Step     float64
	Next     shape.SpanKind
	Symmetry shape.Symmetry
	As       Drawn

	pointer   r2.Vec            // where it is
	near      float64           // how far it reached at the last press
	gesture   int               // the session's, of what is held
	moved     bool              // since the press
	before    session.Selection // at the press
	also      []int             // handles that are selected beside the selection
	alsoItems []int             // items
	hit       session.Selection // what a press with Shift would add or take out
	frame     Frame             // that is held
	measure   measure
	clip      []table.Item // what was copied
	clipBox   r2.Box
}

// grip is what the pointer holds.
type grip uint8

const (
	holdsNothing grip = iota
	holdsHandle
	holdsItem
	drawsNode
	drawsTrail
	drawsBox
	holdsTurn
	holdsScale
)

// NewEditor is the editor's pointer on the session.
func NewEditor(s *session.Session) *Editor { return &Editor{s: s, coats: Coats{s: s}} }

// Coats is the part of the pointer that lays coats.
func (e *Editor) Coats() *Coats { return &e.coats }

// Press takes hold of what lies within reach (a length) of p, or begins to
// draw.
func (e *Editor) Press(p r2.Vec, reach float64, k Keys) {
	e.letGo()
	if e.pulls() {
		_ = e.Release() // a press on top of another: the first was let go unseen
	}
	switch e.s.Settings.Tool {
	case session.Chain:
		e.pressChain(p, reach, k)
		return
	case session.Stroke:
		e.held, e.trail = drawsTrail, []r2.Vec{p}
		return
	case session.Coats:
		e.coats.Press(p, reach, k)
		return
	}
	if e.s.Settings.Tool == session.Measure {
		e.measure.press(e, p, reach, k)
		return
	}
	e.from, e.pointer, e.near, e.moved, e.before = p, p, reach, false, e.s.Selection
	e.hit = session.Selection{Item: -1, Handle: -1}
	if e.pressFrame(p, reach) {
		return
	}
	if h, ok := e.HandleAt(p, reach); ok {
		e.take(h.Item, h.Index, k)
		e.held, e.from = holdsHandle, h.At
		e.begin()
		return
	}
	if i := e.ItemAt(p, reach); i >= 0 {
		e.take(i, -1, k)
		e.held, e.place = holdsItem, e.s.Table().Design().Items[i].Place
		e.begin()
		return
	}
	e.held = drawsBox
}

// take selects what was pressed, alone or with what is selected together with
// it. With Shift the release decides, or the drag.
func (e *Editor) take(item, handle int, k Keys) {
	if k.Has(Constrain) {
		e.hit = session.Selection{Item: item, Handle: handle}
		return
	}
	if !e.inGroup(item, handle) {
		e.alone()
		e.s.Select(item, handle)
	}
}

// Drag follows the pointer to p; step is the grid's, 0 for none.
func (e *Editor) Drag(p r2.Vec, step float64, k Keys) {
	e.coats.Drag(p, step, k)
	if e.s.Settings.Tool == session.Measure && !e.pulls() {
		e.measure.drag(e, p, k)
		return
	}
	e.pointer, e.moved = p, true
	e.heed()
	if e.hit.Item >= 0 && e.held != holdsNothing && !e.inGroup(e.hit.Item, e.hit.Handle) {
		e.alone() // a drag with Shift is one of what was pressed
		e.s.Select(e.hit.Item, e.hit.Handle)
	}
	sel := e.s.Selection
	if e.pulls() && sel.Item < 0 || e.held == holdsHandle && sel.Handle < 0 {
		return // what was held is gone
	}
	switch e.held {
	case drawsBox:
		e.s.Touch()
	case holdsTurn, holdsScale:
		e.dragFrame(p, k)
	case holdsHandle:
		if e.dragBow(p, step, k) || e.dragGroup(p, step, k) {
			return
		}
		to := p
		if k.Has(Constrain) {
			to = constrained(e.from, p)
		} else if e.onGrip(sel.Item, sel.Handle) {
			if e.snaps(step, k) {
				_ = e.s.Amend(fineDrag{sel.Item, sel.Handle, p})
				return
			}
		} else {
			to = e.snapped(p, step, k)
		}
		_ = e.s.Amend(edit.Drag{Item: sel.Item, Handle: sel.Handle, To: to})
	case holdsItem:
		if e.dragGroup(p, step, k) {
			return
		}
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
	if !e.snaps(step, k) {
		return p
	}
	return session.Snapped(p, step)
}

func (e *Editor) snaps(step float64, k Keys) bool {
	return step > 0 && !k.Has(Free) && e.s.Settings.Snap == session.SnapOn
}

// Release lets go. It may be called twice.
func (e *Editor) Release() error {
	e.coats.Release()
	if e.s.Settings.Tool == session.Measure && !e.pulls() {
		e.measure.release(e)
		return nil
	}
	e.heed()
	held := e.held
	e.held = holdsNothing
	switch held {
	case holdsHandle, holdsItem, holdsTurn, holdsScale:
		e.s.End()
		if !e.moved && e.hit.Item >= 0 {
			e.toggle(e.hit.Item, e.hit.Handle)
			e.s.Touch()
		}
	case drawsBox:
		if e.moved {
			e.boxed(e.from, e.pointer)
		} else {
			e.alone()
			e.s.Select(-1, -1)
		}
		e.s.Touch()
	case drawsTrail:
		return e.closeTrail()
	}
	return nil
}

// Cancel lets go as if nothing had happened.
func (e *Editor) Cancel() {
	e.coats.Cancel()
	e.heed()
	if e.pulls() {
		e.s.Cancel()
	}
	e.held, e.trail, e.chain, e.measure = holdsNothing, nil, chain{}, measure{}
	e.alone()
	e.s.Touch()
}

// begin opens the gesture of what was just taken hold of.
func (e *Editor) begin() {
	e.s.Begin()
	e.gesture = e.s.Gesture()
}

// heed lets go of what is held where its gesture is over: undo, a command or
// another document came between, and the table is not the one pressed on.
func (e *Editor) heed() {
	if e.pulls() && e.gesture != e.s.Gesture() {
		e.held = holdsNothing
	}
}

// letGo ends a pull whose release was not seen.
func (e *Editor) letGo() {
	e.coats.Release()
	if e.heed(); e.pulls() {
		e.s.End()
		e.held = holdsNothing
	}
}

// pulls reports whether a gesture that changes the table is under way.
func (e *Editor) pulls() bool {
	switch e.held {
	case holdsHandle, holdsItem, holdsTurn, holdsScale:
		return true
	}
	return false
}

// HandleAt is the topmost handle within reach of p. Handles of free walls that
// are not selected are not taken, but for their nodes.
func (e *Editor) HandleAt(p r2.Vec, reach float64) (session.Handle, bool) {
	if e.s.Settings.Tool == session.Coats {
		h, ok := e.coats.HandleAt(p, reach)
		return session.Handle{Item: -1, Index: -1, At: h.At}, ok
	}
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
	if e.s.Settings.Tool == session.Coats {
		_ = e.coats.Double(p, reach)
		return
	}
	t := e.s.Table()
	s, d := t.Nearest(p)
	if d > reach {
		return
	}
	i, _ := t.Locate(s)
	pc := t.Pieces()[i]
	f, ok := t.Design().Items[pc.Item].Shape.(shape.Freeform)
	if !ok {
		return
	}
	span, frac, ok := f.NearestSpan(t.Design().Items[pc.Item].Place.Back(t.At(s).Point))
	if ok {
		_ = e.s.Do(edit.Reshape{Item: pc.Item, Shape: f.InsertNode(span, frac), Name: "add a node"})
	}
}

// Delete takes out the selected node of a free wall, or the selected item.
func (e *Editor) Delete() error {
	if e.s.Settings.Tool == session.Coats {
		return e.coats.Delete()
	}
	sel := e.s.Selection
	if sel.Item < 0 {
		return nil
	}
	it := e.s.Table().Design().Items[sel.Item]
	if f, ok := it.Shape.(shape.Freeform); ok && sel.Handle >= 0 {
		if h := f.Handles()[sel.Handle]; h.Role == shape.Anchor {
			if g := e.Group(); g.Size() > 1 {
				return e.deleteNodes(f, g)
			}
			return e.s.Do(edit.Reshape{Item: sel.Item, Shape: f.DeleteNode(h.Of), Name: "delete a node"})
		}
	}
	return e.s.Do(edit.Remove{Item: sel.Item})
}

// Hint is what a press at p would do.
func (e *Editor) Hint(p r2.Vec, reach float64) string {
	switch e.s.Settings.Tool {
	case session.Chain:
		return e.chainHint(p, reach)
	case session.Stroke:
		return "Draw the wall in one stroke; it closes by itself when you let go."
	case session.Coats:
		return e.coats.Hint(p, reach)
	case session.Measure:
		return e.measure.text(e, p, reach)
	}
	if f, ok := e.Frame(reach); ok {
		if r2.Norm(r2.Sub(p, f.Turn)) <= reach {
			return "Drag to turn the shape about its middle. Shift turns by 15°."
		}
		if r2.Norm(r2.Sub(p, f.Scale)) <= reach {
			return "Drag to scale the shape about its middle. Shift scales by tenths."
		}
	}
	if h, ok := e.HandleAt(p, reach); ok {
		it := e.s.Table().Design().Items[h.Item]
		if it.Shape.Handles()[h.Index].Role == shape.Bow {
			return "Drag to bend the arc. Ctrl takes it through the pointer, Shift keeps its radius on the grid."
		}
		if e.node(h.Item, h.Index) >= 0 {
			return "Drag to move " + it.Shape.Handles()[h.Index].Name + ". Shift holds the direction, a click with Shift selects it beside others."
		}
		say := "Drag to change " + it.Shape.Handles()[h.Index].Name + ". Shift holds the direction"
		switch {
		case e.s.Settings.Snap == session.SnapOff:
			return say + "."
		case e.onGrip(h.Item, h.Index):
			return say + ", Ctrl takes any value."
		}
		return say + ", Ctrl passes the grid."
	}
	if i := e.ItemAt(p, reach); i >= 0 {
		if _, ok := e.s.Table().Design().Items[i].Shape.(shape.Freeform); ok {
			return "Drag to move the wall; click twice to add a node."
		}
		return "Drag to move the " + strings.ToLower(e.s.Table().Design().Items[i].Shape.(shape.Figure).Family().Title) + "."
	}
	return "Drag a handle to reshape the wall, or pull a box around what to select; wheel zooms, middle button or Space pans."
}
