package tool

import (
	"fmt"
	"math"
	"slices"

	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/ui/session"

	"gonum.org/v1/gonum/spatial/r2"
)

// chain is a wall that is being drawn node by node. A click sets a corner; a
// press and pull sets a smooth node with its handles. Arcs and ellipses take
// one more click: what they pass through.
type chain struct {
	nodes   []shape.Node
	hover   r2.Vec
	bending bool // the last span passes through the pointer
	closing bool // and it is the one that closes the wall
}

func (c *chain) pull(p r2.Vec) {
	n := &c.nodes[len(c.nodes)-1]
	out := r2.Sub(p, n.At)
	n.Joint, n.Out, n.In = shape.Smooth, out, r2.Scale(-1, out)
}

// ends are the nodes of the span that bends.
func (c *chain) ends() (a, b *shape.Node) {
	last := len(c.nodes) - 1
	if c.closing {
		return &c.nodes[last], &c.nodes[0]
	}
	return &c.nodes[last-1], &c.nodes[last]
}

// bend lets the last span pass through p: an arc of a circle, or half an
// ellipse with the chord as one of its axes.
func (c *chain) bend(p r2.Vec) {
	a, b := c.ends()
	if p == a.At || p == b.At {
		return
	}
	if a.Span == shape.Bowed {
		a.Bulge = shape.Bulge(a.At, p, b.At)
		return
	}
	chord := r2.Sub(b.At, a.At)
	half := 0.5 * r2.Norm(chord)
	off := plane.Dot(r2.Sub(p, a.At), plane.Left(plane.Unit(chord)))
	a.Tilt, a.Ratio = math.Atan2(chord.Y, chord.X), math.Max(math.Abs(off)/half, 1e-2)
	a.Bulge = -math.Copysign(1, off) // a left turn bows to the right
}

// bendTo gives the last span a radius (a length, at least half its chord); it
// bows to the side of the pointer.
func (c *chain) bendTo(radius float64) error {
	a, b := c.ends()
	half := 0.5 * r2.Norm(r2.Sub(b.At, a.At))
	if radius < half*(1-1e-12) {
		return fmt.Errorf("no arc of that radius reaches from one node to the other; give half their distance at least")
	}
	// The angle between the chord and the tangent is half the sweep.
	bulge := math.Tan(0.5 * math.Asin(math.Min(1, half/radius)))
	a.Bulge = math.Copysign(bulge, a.Bulge)
	return nil
}

func (e *Editor) chainHint(p r2.Vec, reach float64) string {
	c := &e.chain
	n := len(c.nodes)
	near := n >= 2 && e.onFirst(p, reach, 0)
	switch {
	case c.bending:
		return "Click where the arc shall pass; a typed radius fixes it."
	case n == 0:
		return "Click for a corner, press and pull for a smooth node."
	case near:
		return "Click to close the wall."
	case n >= 2:
		return "Click for the next node; click the first node, click twice or press Enter to close; Escape gives up."
	}
	return "Click for the next node."
}

// built are the nodes as those of a closed wall.
func (c *chain) built() []shape.Node {
	list := slices.Clone(c.nodes)
	n := len(list)
	curved := func(i int) bool { return list[i].Span == shape.Curved }
	for i := range list {
		j := (i + 1) % n
		a, b := &list[i], &list[j]
		none := r2.Vec{}
		if a.Span == shape.Straight && (a.Out != none || b.In != none) {
			a.Span = shape.Curved
			chord := r2.Sub(b.At, a.At)
			if a.Out == none {
				a.Out = r2.Scale(1.0/3, chord)
			}
			if b.In == none {
				b.In = r2.Scale(-1.0/3, chord)
			}
		}
	}
	// Where two spans through points meet, the curvature is continuous.
	for i := range list {
		if list[i].Joint == shape.Corner && curved(i) && curved((i+n-1)%n) {
			list[i].Joint = shape.Fair
		}
	}
	return list
}

// wall is the closed wall of the nodes set so far, with the images that the
// symmetry asks for.
func (e *Editor) wall(list []shape.Node, near float64) (shape.Freeform, error) {
	if !e.Symmetry.None() {
		f, ok := shape.Repeated(list, e.Symmetry, near)
		if !ok {
			return f, fmt.Errorf("the nodes and their images make no wall; set more of them, on one side of the mirror line")
		}
		return f, nil
	}
	for _, n := range list {
		if n.Span != shape.Curved || n.Out != (r2.Vec{}) || n.In != (r2.Vec{}) {
			return shape.NewFreeform(list), nil
		}
	}
	var points []r2.Vec
	for _, n := range list {
		points = append(points, n.At)
	}
	return shape.Smoothed(points), nil
}

// pressChain sets a node, or says where an arc passes.
func (e *Editor) pressChain(p r2.Vec, reach float64, k Keys) {
	c := &e.chain
	n := len(c.nodes)
	e.near = reach
	if c.bending {
		c.bend(e.snapped(p, e.Step, k))
		e.bent()
		return
	}
	if n >= 2 && e.onFirst(p, reach, k) {
		if !round(e.Next) {
			c.nodes[n-1].Span = e.Next
			_ = e.CloseChain()
			return
		}
		c.nodes[n-1].Span, c.bending, c.closing = e.Next, true, true
		e.s.Touch()
		return
	}
	if n > 0 && k.Has(Constrain) {
		p = constrained(c.nodes[n-1].At, p)
	} else {
		p = e.snapped(p, e.Step, k)
	}
	if n > 0 && r2.Norm(r2.Sub(c.nodes[n-1].At, p)) <= reach/4 {
		return // the second click of a double click
	}
	e.SetNode(p)
	if !c.bending {
		e.held = drawsNode
	}
}

// onFirst reports whether a press at p means the first node: it lies within
// reach, or on the point of the grid that p snaps to.
func (e *Editor) onFirst(p r2.Vec, reach float64, k Keys) bool {
	first := e.chain.nodes[0].At
	return r2.Norm(r2.Sub(first, p)) <= reach || r2.Norm(r2.Sub(first, e.snapped(p, e.Step, k))) <= reach/4
}

func round(k shape.SpanKind) bool { return k == shape.Bowed || k == shape.Elliptic }

// SetNode sets the next node of the wall that is being drawn, at p.
func (e *Editor) SetNode(p r2.Vec) {
	c := &e.chain
	if c.bending {
		e.bent()
	}
	if n := len(c.nodes); n > 0 {
		last := &c.nodes[n-1]
		if last.Span = e.Next; round(e.Next) {
			c.bending = true
		}
	}
	c.nodes = append(c.nodes, shape.Node{At: p})
	if c.bending {
		// Half a circle to the right until the pointer says otherwise.
		a, b := c.ends()
		a.Bulge, a.Ratio = 1, 0.5
		chord := r2.Sub(b.At, a.At)
		a.Tilt = math.Atan2(chord.Y, chord.X)
	}
	e.s.Touch()
}

// bent ends the bending of a span, and closes the wall where that was asked.
func (e *Editor) bent() {
	closing := e.chain.closing
	e.chain.bending, e.chain.closing = false, false
	if closing {
		_ = e.CloseChain()
		return
	}
	e.s.Touch()
}

// SetRadius fixes the arc that is being bent to a radius.
func (e *Editor) SetRadius(radius float64) error {
	if !e.chain.bending {
		return fmt.Errorf("there is no arc to give a radius; choose the arc, and click its end first")
	}
	if err := e.chain.bendTo(radius); err != nil {
		return err
	}
	e.bent()
	return nil
}

// Drawing tells how many nodes are set, where the last one is, where the
// pointer is, and whether an arc is being bent.
func (e *Editor) Drawing() (nodes int, last, hover r2.Vec, bending bool) {
	n := len(e.chain.nodes)
	if n > 0 {
		last = e.chain.nodes[n-1].At
	}
	return n, last, e.chain.hover, e.chain.bending
}

// CloseChain makes the nodes set so far a wall. Where they make none, they
// stay.
func (e *Editor) CloseChain() error {
	e.letGo()
	e.held = holdsNothing
	e.chain.bending, e.chain.closing = false, false
	if len(e.chain.nodes) == 0 {
		return nil
	}
	if len(e.chain.nodes) < 2 {
		return fmt.Errorf("a wall needs two nodes at least; click for more before closing it")
	}
	f, err := e.wall(e.chain.built(), e.near)
	if err != nil {
		return err
	}
	if err := e.put(joined(f)); err != nil {
		return err // the nodes stay, to be set right
	}
	e.chain = chain{}
	e.s.Touch()
	return nil
}

// Hover moves the end of the chain that is being drawn.
func (e *Editor) Hover(p r2.Vec) {
	e.pointer = p
	if e.s.Settings.Tool == session.Measure {
		e.measure.hover(e, p)
		return
	}
	if e.s.Settings.Tool != session.Chain || len(e.chain.nodes) == 0 {
		return
	}
	e.chain.hover = p
	if e.chain.bending {
		e.chain.bend(p)
	}
	e.s.Touch()
}

// straightOn is the turn (radians) up to which a span that was drawn goes on
// from the one before: what a typed radius or a snapped node leaves.
const straightOn = 1e-9

// joined is the wall with its corners that do not turn made tangent joints, so
// that they are kept; two lines in one direction are left as they are.
func joined(f shape.Freeform) shape.Freeform {
	n := f.Nodes()
	for i := range n {
		before := n[(i+len(n)-1)%len(n)]
		if n[i].Joint == shape.Corner && (n[i].Span != shape.Straight || before.Span != shape.Straight) &&
			math.Abs(f.InteriorAngle(i)-math.Pi) <= straightOn {
			f = f.SetJoint(i, shape.Smooth)
		}
	}
	return f
}

// draftSteps is the number of chords of a span that is being drawn.
const draftSteps = 24

// Draft are the lines of what is being drawn or measured, and its nodes.
func (e *Editor) Draft() (lines [][]r2.Vec, nodes []r2.Vec) {
	switch {
	case e.s.Settings.Tool == session.Measure:
		return e.measure.draft()
	case len(e.trail) > 0:
		return [][]r2.Vec{e.trail}, nil
	case e.held == drawsBox:
		a, b := e.from, e.pointer
		return [][]r2.Vec{{a, {X: b.X, Y: a.Y}, b, {X: a.X, Y: b.Y}, a}}, nil
	case len(e.chain.nodes) == 0:
		return nil, nil
	}
	draft := chain{nodes: slices.Clone(e.chain.nodes)}
	for _, n := range draft.nodes {
		nodes = append(nodes, n.At)
	}
	last := len(draft.nodes) - 1
	open := !e.chain.closing
	far := func(i int) bool { return r2.Norm(r2.Sub(e.chain.hover, draft.nodes[i].At)) > 0.25*e.near }
	if e.held == holdsNothing && !e.chain.bending && far(last) && (far(0) || last == 0) {
		if draft.nodes[last].Span = e.Next; round(e.Next) {
			draft.nodes[last].Span = shape.Straight // until its end is set
		}
		draft.nodes = append(draft.nodes, shape.Node{At: e.chain.hover})
	}
	list := draft.built()
	if len(list) < 2 {
		return nil, nodes
	}
	f, err := e.wall(list, e.near)
	if err != nil || len(f.Nodes()) != len(list) {
		open = false
	}
	if f.Nodes() == nil || !f.Sound() {
		f, open = shape.NewFreeform(list), true
	}
	for i := range f.Nodes() {
		if !open || i < len(f.Nodes())-1 || len(list) == 2 && i == 0 {
			lines = append(lines, f.SpanPath(i, draftSteps))
		}
	}
	return lines, nodes
}
