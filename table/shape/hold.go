package shape

import (
	"fmt"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// hold is a handle of a free wall with what it moves.
type hold struct {
	Handle
	end End // of a Tangent
}

// holds are the nodes in order, then, span by span, its two tangent handles or
// the middle of its arc. Names count from 1, as a person does.
func (n nodes) holds() []hold {
	h := make([]hold, 0, 3*len(n))
	for i := range n {
		h = append(h, hold{Handle: Handle{At: n[i].At, Role: Anchor, Name: fmt.Sprintf("node %d", i+1), Of: i}})
	}
	for i := range n {
		j := n.wrap(i + 1)
		switch n[i].Span {
		case Curved:
			p := n.controls(i)
			h = append(h,
				hold{Handle{At: p[1], Role: Tangent, Name: fmt.Sprintf("handle %d out", i+1), Of: i}, Leaves},
				hold{Handle{At: p[2], Role: Tangent, Name: fmt.Sprintf("handle %d in", j+1), Of: j}, Arrives})
		case Bowed, Elliptic:
			h = append(h, hold{Handle: Handle{At: n.middle(i), Role: Bow, Name: fmt.Sprintf("bow %d", i+1), Of: i}})
		}
	}
	return h
}

// Handles are the nodes, the tangent handles of the Curved spans and the
// middles of the Bowed and the Elliptic ones. Of is the index of the node, or of the span for a
// Bow.
func (f Freeform) Handles() []Handle {
	holds := f.nodes.holds()
	out := make([]Handle, len(holds))
	for i, h := range holds {
		out[i] = h.Handle
	}
	return out
}

// Moved is the wall after handle i was dragged to a place. A node dragged onto
// its neighbour stays where it was, and so does all where the place is no
// number.
func (f Freeform) Moved(i int, to r2.Vec) Shape {
	h := f.nodes.holds()[i]
	if !plane.Finite(to) || to == h.At {
		return f
	}
	var g Freeform
	switch h.Role {
	case Anchor:
		g = f.MoveNode(h.Of, to)
	case Tangent:
		g = f.SetHandle(h.Of, h.end, to)
	default:
		g = f.SetBulge(h.Of, f.nodes.bulgeTo(h.Of, to))
	}
	if g.nodes.fault() != nil && f.nodes.fault() == nil {
		return f
	}
	return g
}
