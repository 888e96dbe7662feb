package shape

import (
	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Freeform is a wall drawn freely: a closed chain of nodes, joined by lines,
// arcs and cubics, corners rounded where they have a fillet. It is one Outer
// loop; without fillets side i of it is the span that leaves node i, with them
// Span tells. s starts at node 0, or behind its fillet.
type Freeform struct {
	nodes    nodes
	symmetry Symmetry
}

// NewFreeform is the wall through the nodes, which are held to what their
// joints promise and turned to run counter-clockwise, from the same first node.
// What cannot be built is reported by Loops.
func NewFreeform(list []Node) Freeform {
	n := settled(list)
	if n.fault() == nil && sense(n.curves()) < 0 {
		n = settled(n.reversed())
	}
	return Freeform{nodes: n}
}

// NewPolygonal is the wall of straight sides through the points.
func NewPolygonal(points []r2.Vec) Freeform {
	list := make(nodes, len(points))
	for i, p := range points {
		list[i].At = p
	}
	return NewFreeform(list)
}

// Kind is "freeform".
func (f Freeform) Kind() string { return "freeform" }

// Nodes are the nodes in their order; they must not be changed.
func (f Freeform) Nodes() []Node { return f.nodes }

// Sound reports whether the nodes make a chain, whatever it encloses.
func (f Freeform) Sound() bool { return f.nodes.fault() == nil }

// Loops is the one loop of the wall. The error is a *Fault. Where a drag has
// turned the nodes clockwise, the loop runs against their order.
func (f Freeform) Loops() ([]Loop, error) {
	if err := f.nodes.fault(); err != nil {
		return nil, err
	}
	n := f.nodes
	switch sense(n.curves()) {
	case 0:
		return nil, misfit("it encloses no area; move its nodes apart")
	case -1:
		n = n.reversed()
	}
	n, _, err := n.rounded()
	if err != nil {
		return nil, err
	}
	return ring(n.curves()...), nil
}

// Span is the span that side k of the wall is, or, where fillet, the node whose
// corner it rounds: spans and fillets are counted together along the wall, from
// the start of span 0.
func (f Freeform) Span(k int) (of int, fillet bool) {
	_, sides, err := f.nodes.rounded()
	if err != nil || k < 0 || k >= len(sides) {
		return k, false
	}
	return sides[k].node, sides[k].fillet
}

// noArea is the enclosed area, relative to the square of the wall's size, that
// counts as none: far above the rounding of the sum, below any wall.
const noArea = 1e-12

// curves are the spans from node 0 on.
func (n nodes) curves() []curve.Curve {
	c := make([]curve.Curve, len(n))
	for i := range n {
		c[i] = n.curve(i)
	}
	return c
}

// curve is the span from node i.
func (n nodes) curve(i int) curve.Curve {
	switch a, b := n.at(i), n.at(i+1); a.Span {
	case Bowed:
		return curve.ArcThrough(a.At, b.At, a.Bulge)
	case Elliptic:
		return ovalThrough(a, b.At)
	case Curved:
		return curve.NewCubic(n.controls(i))
	default:
		return curve.NewLine(a.At, b.At)
	}
}

// controls are the control points of the Curved span i.
func (n nodes) controls(i int) [4]r2.Vec {
	a, b := n.at(i), n.at(i+1)
	return [4]r2.Vec{a.At, r2.Add(a.At, a.Out), r2.Add(b.At, b.In), b.At}
}

// sense is +1 where the curves run counter-clockwise, by the area that they
// enclose, -1 where clockwise, 0 where that counts as none.
func sense(curves []curve.Curve) int {
	area, box := 0.0, plane.Around()
	origin := curves[0].Spans()[0].A
	for _, c := range curves {
		spans := c.Spans()
		for i := range spans {
			area += spans[i].Swept(origin)
		}
		box = plane.Join(box, curve.Bounds(spans))
	}
	size := plane.Diagonal(box)
	switch least := noArea * size * size; {
	case area > least:
		return 1
	case area < -least:
		return -1
	}
	return 0
}
