package tool

import (
	"fmt"
	"slices"

	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/edit"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/ui/session"

	"gonum.org/v1/gonum/spatial/r2"
)

// chain is a wall that is being drawn node by node. A click sets a corner; a
// press and pull sets a smooth node with its handles.
type chain struct {
	nodes []shape.Node
	hover r2.Vec
}

func (c *chain) pull(p r2.Vec) {
	n := &c.nodes[len(c.nodes)-1]
	out := r2.Sub(p, n.At)
	n.Joint, n.Out, n.In = shape.Smooth, out, r2.Scale(-1, out)
}

func (c *chain) hint(p r2.Vec, reach float64) string {
	switch n := len(c.nodes); {
	case n == 0:
		return "Click for a corner, press and pull for a smooth node."
	case n >= 2 && r2.Norm(r2.Sub(c.nodes[0].At, p)) <= reach:
		return "Click to close the wall."
	case n >= 2:
		return "Click for the next node; click the first node, click twice or press Enter to close; Escape gives up."
	}
	return "Click for the next node."
}

func (e *Editor) pressChain(p r2.Vec, reach float64, k Keys) {
	n := len(e.chain.nodes)
	if n >= 2 && r2.Norm(r2.Sub(e.chain.nodes[0].At, p)) <= reach {
		_ = e.CloseChain()
		return
	}
	if n > 0 && k.Has(Constrain) {
		p = constrained(e.chain.nodes[n-1].At, p)
	} else {
		p = e.snapped(p, e.Step, k)
	}
	if n > 0 && r2.Norm(r2.Sub(e.chain.nodes[n-1].At, p)) <= reach/4 {
		return // the second click of a double click
	}
	e.chain.nodes = append(e.chain.nodes, shape.Node{At: p})
	e.held = drawsNode
	e.s.Touch()
}

// Hover moves the end of the chain that is being drawn.
func (e *Editor) Hover(p r2.Vec) {
	if e.s.Settings.Tool == session.Chain && len(e.chain.nodes) > 0 {
		e.chain.hover = p
		e.s.Touch()
	}
}

// Draft are the points of the wall that is being drawn, and its nodes.
func (e *Editor) Draft() (line, nodes []r2.Vec) {
	if len(e.trail) > 0 {
		return e.trail, nil
	}
	for i, n := range e.chain.nodes {
		nodes = append(nodes, n.At)
		if i > 0 {
			line = append(line, between(e.chain.nodes[i-1], n)...)
		}
	}
	if k := len(e.chain.nodes); k > 0 && e.held == holdsNothing {
		line = append(line, between(e.chain.nodes[k-1], shape.Node{At: e.chain.hover})...)
	}
	return line, nodes
}

// between are points along the span from a to b, for the eye.
func between(a, b shape.Node) []r2.Vec {
	p := [4]r2.Vec{a.At, r2.Add(a.At, a.Out), r2.Add(b.At, b.In), b.At}
	pts := make([]r2.Vec, 17)
	for i := range pts {
		t := float64(i) / 16
		q0, q1, q2 := plane.Lerp(p[0], p[1], t), plane.Lerp(p[1], p[2], t), plane.Lerp(p[2], p[3], t)
		pts[i] = plane.Lerp(plane.Lerp(q0, q1, t), plane.Lerp(q1, q2, t), t)
	}
	return pts
}

// CloseChain makes the nodes set so far a wall. Where they make none, they
// stay.
func (e *Editor) CloseChain() error {
	nodes := slices.Clone(e.chain.nodes)
	e.held = holdsNothing
	if len(nodes) == 0 {
		return nil
	}
	if len(nodes) < 2 {
		return fmt.Errorf("a wall needs two nodes at least; click for more before closing it")
	}
	for i := range nodes {
		a, b := &nodes[i], &nodes[(i+1)%len(nodes)]
		if a.Out != (r2.Vec{}) || b.In != (r2.Vec{}) {
			a.Span = shape.Curved
			chord := r2.Sub(b.At, a.At)
			if a.Out == (r2.Vec{}) {
				a.Out = r2.Scale(1.0/3, chord)
			}
			if b.In == (r2.Vec{}) {
				b.In = r2.Scale(-1.0/3, chord)
			}
		}
	}
	if err := e.put(shape.NewFreeform(nodes)); err != nil {
		return err // the nodes stay, to be set right
	}
	e.chain = chain{}
	return nil
}

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

// put places a free wall: as an obstacle where it lies wholly inside the wall
// that is there, else as the wall. The pointer is the hand again.
func (e *Editor) put(f shape.Freeform) error {
	role := table.Wall
	if t := e.s.Table(); !t.Open() && inside(t, f) {
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

// spanAt is the span of a free wall that piece i belongs to, and the fraction
// of the span's parameter at the length x of the piece. An obstacle runs
// against the sense in which its nodes are stored.
func spanAt(t *table.Table, i int, x float64) (span int, frac float64) {
	p := t.Pieces()[i]
	s0, s1, _ := t.SideRange(p.Item, p.Side)
	frac = (p.S0 + x - s0) / (s1 - s0)
	if p.Kind == curve.Bezier {
		frac = p.T(x)
	}
	if t.Design().Items[p.Item].Role == table.Post {
		frac = 1 - frac
	}
	return p.Side, frac
}
