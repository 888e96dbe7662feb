package shape

import (
	"fmt"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Node is a node of a free wall and the span that leaves it.
type Node struct {
	At    r2.Vec
	Joint Joint
	// In and Out are the ends of the tangent handles, relative to At, of the
	// Curved spans that arrive and leave; null where the span is not Curved.
	In, Out r2.Vec
	Span    SpanKind
	// Bulge, of a Bowed span, is the tangent of a quarter of its sweep,
	// positive when it turns left. Of an Elliptic one it is that of the arc in
	// the plane in which its ellipse is a circle. 0 for other spans.
	Bulge float64
	// Ratio, of an Elliptic span, is the semi-axis across the direction Tilt
	// (radians from +x) to the one along it. Both are 0 for other spans.
	Ratio, Tilt float64
	// Fillet is the radius of the arc that rounds a Corner, 0 for none. The
	// node stays where the corner would be.
	Fillet float64
}

// Joint says how two spans of a free wall meet.
type Joint uint8

// The joints. At a Smooth one the tangent is continuous, at a Fair one the
// curvature too.
const (
	Corner Joint = iota
	Smooth
	Fair
)

// SpanKind says what a span of a free wall is.
type SpanKind uint8

// The kinds of span: a line, a circular arc, a cubic, an arc of an ellipse.
const (
	Straight SpanKind = iota
	Bowed
	Curved
	Elliptic
)

// End is an end of a span at a node.
type End uint8

// The ends: of the span that Arrives at the node, of the one that Leaves it.
const (
	Arrives End = iota
	Leaves
)

func (j Joint) String() string    { return jointNames[j] }
func (k SpanKind) String() string { return spanNames[k] }

var (
	jointNames = [...]string{"corner", "smooth", "fair"}
	spanNames  = [...]string{"straight", "bowed", "curved", "elliptic"}
)

// MarshalText is the name that files use.
func (j Joint) MarshalText() ([]byte, error) { return []byte(j.String()), nil }

// UnmarshalText takes the name that files use.
func (j *Joint) UnmarshalText(text []byte) error {
	for i, name := range jointNames {
		if name == string(text) {
			*j = Joint(i)
			return nil
		}
	}
	return fmt.Errorf("there is no joint %q; it is corner, smooth or fair", text)
}

// MarshalText is the name that files use.
func (k SpanKind) MarshalText() ([]byte, error) { return []byte(k.String()), nil }

// UnmarshalText takes the name that files use.
func (k *SpanKind) UnmarshalText(text []byte) error {
	for i, name := range spanNames {
		if name == string(text) {
			*k = SpanKind(i)
			return nil
		}
	}
	return fmt.Errorf("there is no span %q; it is straight, bowed, curved or elliptic", text)
}

// nodes is a closed chain. Indices are taken around the chain.
type nodes []Node

func (n nodes) clone() nodes { return append(nodes(nil), n...) }

func (n nodes) wrap(i int) int { return ((i % len(n)) + len(n)) % len(n) }

func (n nodes) at(i int) *Node { return &n[n.wrap(i)] }

// chord runs from the start to the end of span i.
func (n nodes) chord(i int) r2.Vec { return r2.Sub(n.at(i+1).At, n.at(i).At) }

// reversed is the same outline run backwards from the same first node.
func (n nodes) reversed() nodes {
	out := make(nodes, len(n))
	for i := range n {
		from, before := n.at(-i), n.at(-i-1)
		out[i] = Node{
			At: from.At, Joint: from.Joint, In: from.Out, Out: from.In, Fillet: from.Fillet,
			Span: before.Span, Ratio: before.Ratio, Tilt: before.Tilt,
		}
		if before.Bulge != 0 {
			out[i].Bulge = -before.Bulge
		}
	}
	return out
}

// fault is the first *Fault of the nodes, or nil.
func (n nodes) fault() error {
	bent := false
	box := plane.Around()
	for i := range n {
		k := &n[i]
		bent = bent || k.Span == Curved || k.round() && k.Bulge != 0
		box = plane.Join(box, plane.Around(k.At))
		if !k.finite() {
			return nodeFault(i, "node %d has a coordinate that is not a number; type it anew", i+1)
		}
	}
	switch {
	case len(n) < 2:
		return misfit("it has fewer than two nodes; draw at least two")
	case len(n) < 3 && !bent:
		return misfit("its two straight sides lie on each other; add a node, or bow one side")
	}
	least := coincident * plane.Diagonal(box)
	for i := range n {
		if j := n.wrap(i + 1); r2.Norm(n.chord(i)) <= least {
			return nodeFault(i, "node %d lies on node %d; delete one of them or move them apart", i+1, j+1)
		}
	}
	return nil
}

// coincident is the distance, relative to the box of the nodes, below which
// neighbours count as one: the direction between them would be rounding.
const coincident = 1e-9

func (k *Node) finite() bool {
	return plane.Finite(k.At) && plane.Finite(k.In) && plane.Finite(k.Out) &&
		plane.Finite(r2.Vec{X: k.Bulge, Y: k.Fillet}) && plane.Finite(r2.Vec{X: k.Ratio, Y: k.Tilt})
}

// round reports whether the span that leaves the node has a bulge.
func (k *Node) round() bool { return k.Span == Bowed || k.Span == Elliptic }

// tangent reports whether the tangent is continuous at the joint.
func (j Joint) tangent() bool { return j != Corner }
