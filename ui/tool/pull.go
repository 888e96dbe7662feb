package tool

import (
	"math"
	"slices"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// dragGroup moves all that is selected together; false where that is one thing.
func (e *Editor) dragGroup(p r2.Vec, step float64, k Keys) bool {
	g := e.Group()
	if g.Size() < 2 {
		return false
	}
	d := r2.Sub(p, e.from)
	if k.Has(Constrain) {
		d = alongAxis(d)
	} else {
		d = r2.Sub(e.snapped(r2.Add(e.from, d), step, k), e.from)
	}
	by := make([]r2.Vec, g.Size())
	for i := range by {
		by[i] = d
	}
	_ = e.s.Amend(atStart{e, g, by})
	return true
}

// atStart moves a group from where it was when the gesture began.
type atStart struct {
	e  *Editor
	g  Group
	by []r2.Vec
}

// Title names the change.
func (c atStart) Title() string { return "move what is selected" }

// Apply moves the group.
func (c atStart) Apply(t *table.Table) (*table.Table, error) {
	return c.e.shifted(t.Design(), c.g, c.by, c.Title()).Apply(t)
}

// dragBow bends an arc: the middle follows the pointer, with Ctrl the arc
// passes through it, with Shift its radius is a multiple of the grid's step.
// false where another handle is held, or no key.
func (e *Editor) dragBow(p r2.Vec, step float64, k Keys) bool {
	sel := e.s.Selection
	if sel.Item < 0 {
		return false
	}
	it := e.s.Table().Design().Items[sel.Item]
	f, ok := it.Shape.(shape.Freeform)
	if !ok || sel.Handle < 0 || f.Handles()[sel.Handle].Role != shape.Bow || !k.Has(Free|Constrain) {
		return false
	}
	span := f.Handles()[sel.Handle].Of
	g := f.Through(span, it.Place.Back(p))
	if k.Has(Constrain) && step > 0 && f.Nodes()[span].Span == shape.Bowed {
		g = f.Moved(sel.Handle, it.Place.Back(p)).(shape.Freeform)
		if r, _ := g.Axes(span); !math.IsInf(r, 0) {
			step /= it.Place.Scale
			g = g.WithRadius(span, math.Max(math.Round(r/step), 1)*step)
		}
	}
	_ = e.s.Amend(edit.Reshape{Item: sel.Item, Shape: g, Name: "bend an arc"})
	return true
}

// deleteNodes takes out all nodes of a group.
func (e *Editor) deleteNodes(f shape.Freeform, g Group) error {
	places := make([]r2.Vec, len(g.Nodes))
	for k, n := range g.Nodes {
		places[k] = f.Nodes()[n].At
	}
	for _, p := range places {
		// Of a symmetric wall the images have gone with an earlier one.
		if n := slices.IndexFunc(f.Nodes(), func(n shape.Node) bool { return n.At == p }); n >= 0 {
			f = f.DeleteNode(n)
		}
	}
	e.alone()
	return e.s.Do(edit.Reshape{Item: g.Item, Shape: f, Name: "delete nodes"})
}
