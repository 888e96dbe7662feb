package shape

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// The edits of a free wall. Each yields a new one; an index is that of a node
// of f, or of the span that leaves it, and must be in range. What the edit
// leaves impossible is reported by Loops.

// insertMargin is the least share of a span that a new node leaves on either
// side of it: less would make a sliver.
const insertMargin = 1e-4

// InsertNode is f with a node after node span, at the fraction t in (0, 1) of
// the span's length (of a cubic's parameter). The outline does not change.
func (f Freeform) InsertNode(span int, t float64) Freeform {
	t = math.Min(math.Max(t, insertMargin), 1-insertMargin)
	n := f.nodes.clone()
	a, b := n.at(span), n.at(span+1)
	chord := n.chord(span)
	mid := Node{Joint: Smooth, Span: a.Span}
	switch a.Span {
	case Straight:
		mid.Joint = Corner
		mid.At = r2.Add(a.At, r2.Scale(t, chord))
	case Bowed:
		mid.At, a.Bulge, mid.Bulge = splitArc(a.At, chord, a.Bulge, t)
	case Curved:
		// De Casteljau's construction, relative to the node a.
		b0, b1, b2 := a.Out, r2.Add(chord, b.In), chord
		c0, c1, c2 := r2.Scale(t, b0), plane.Lerp(b0, b1, t), plane.Lerp(b1, b2, t)
		d0, d1 := plane.Lerp(c0, c1, t), plane.Lerp(c1, c2, t)
		flow := r2.Sub(d1, d0)
		mid.At = r2.Add(a.At, plane.Lerp(d0, d1, t))
		mid.In, mid.Out = r2.Scale(-t, flow), r2.Scale(1-t, flow)
		a.Out, b.In = c0, r2.Scale(1-t, b.In)
		if flow == (r2.Vec{}) {
			mid.Joint = Corner // a cusp
		}
	}
	at := n.wrap(span) + 1
	n = append(n[:at], append(nodes{mid}, n[at:]...)...)
	return Freeform{nodes: settled(n)}
}

// splitArc is the point of an arc from a at the fraction t of its sweep, and
// the bulges of the two arcs that meet there.
func splitArc(a, chord r2.Vec, bulge, t float64) (at r2.Vec, first, second float64) {
	quarter := math.Atan(bulge)
	first, second = math.Tan(t*quarter), math.Tan((1-t)*quarter)
	if bulge == 0 {
		return r2.Add(a, r2.Scale(t, chord)), 0, 0
	}
	// The angle between the two chords is that of half the other part.
	u := bend(second)
	share := math.Sin(2*t*quarter) / math.Sin(2*quarter)
	return r2.Add(a, turnedBack(r2.Scale(share, chord), u)), first, second
}

// DeleteNode is f without node i. Of the two spans that met there two lines
// leave a line, lines and arcs the arc through the place of the node, and
// cubics a cubic; a node that was inserted goes without a trace.
func (f Freeform) DeleteNode(i int) Freeform {
	n := f.nodes.clone()
	i = n.wrap(i)
	if len(n) > 2 {
		n.merge(i)
	}
	return Freeform{nodes: settled(append(n[:i:i], n[i+1:]...))}
}

// merge prepares the span that arrives at node i to go on to the next node.
func (n nodes) merge(i int) {
	a, k, b := n.at(i-1), n.at(i), n.at(i+1)
	switch {
	case a.Span == Curved && k.Span == Curved:
		if in, out := r2.Norm(k.In), r2.Norm(k.Out); in > 0 && out > 0 {
			t := in / (in + out)
			a.Out, b.In = r2.Scale(1/t, a.Out), r2.Scale(1/(1-t), b.In)
		}
	case a.Span == Curved || k.Span == Curved:
		length := third * r2.Norm(r2.Sub(b.At, a.At))
		a.Out, b.In = r2.Scale(length, n.leaving(i-1)), r2.Scale(-length, n.arriving(i))
		a.Span = Curved
	case a.Span == Bowed || k.Span == Bowed:
		// The chords to and from a point of an arc turn by half its sweep.
		a.Bulge = math.Tan(0.5 * plane.Angle(n.chord(i-1), n.chord(i)))
		a.Span = Bowed
	}
}

// SetSpan is f with span i of another kind: a new cubic keeps the ends, and the
// tangents and the middle of an arc; a new arc keeps the middle.
func (f Freeform) SetSpan(i int, kind SpanKind) Freeform {
	n := f.nodes.clone()
	a, b := n.at(i), n.at(i+1)
	switch from := a.Span; {
	case from == kind:
		return f
	case kind == Curved && from == Bowed:
		a.Out, b.In = n.arcHandles(i)
	case kind == Curved:
		a.Out, b.In = r2.Scale(third, n.chord(i)), r2.Scale(-third, n.chord(i))
	case kind == Bowed && from == Curved:
		a.Bulge = n.bulgeTo(i, n.cubicMiddle(i))
	}
	a.Span = kind
	return Freeform{nodes: settledFrom(n, i)}
}

// SetJoint is f with another joint at node i. A joint that cannot be smooth,
// such as that of two lines at an angle, stays a Corner.
func (f Freeform) SetJoint(i int, joint Joint) Freeform {
	n := f.nodes.clone()
	n.at(i).Joint = joint
	return Freeform{nodes: settledFrom(n, i)}
}

// MoveNode is f with node i at a place; its handles go with it.
func (f Freeform) MoveNode(i int, to r2.Vec) Freeform {
	n := f.nodes.clone()
	n.at(i).At = to
	return Freeform{nodes: settledFrom(n, i)}
}

// leastHandle is the length, as a share of its chord, at which a handle that
// must keep its direction is held; a free one falls into its node there.
const leastHandle = 1e-3

// SetHandle is f with the tangent handle at one end of a Curved span dragged to
// a place. At a Smooth node the other handle turns with it; beside a line or an
// arc, which give the direction, only its length changes.
func (f Freeform) SetHandle(i int, end End, to r2.Vec) Freeform {
	n := f.nodes.clone()
	k := n.at(i)
	own, partner, span, beside := &k.Out, &k.In, i, i-1
	if end == Arrives {
		own, partner, span, beside = &k.In, &k.Out, i-1, i
	}
	if n.at(span).Span != Curved || !plane.Finite(to) {
		return f
	}
	v := r2.Sub(to, k.At)
	least := leastHandle * r2.Norm(n.chord(span))
	if k.Joint == Corner && r2.Norm(v) < least {
		v = r2.Vec{}
	}
	if k.Joint == Smooth {
		d := firstNonNull(*own, v)
		if n.at(beside).Span != Curved {
			v = r2.Scale(math.Max(plane.Dot(v, d), least), d)
		} else if r2.Norm(v) < least {
			v = r2.Scale(least, firstNonNull(v, d))
		}
		*partner = r2.Scale(-r2.Norm(*partner), plane.Unit(v))
	}
	*own = v
	return Freeform{nodes: settledFrom(n, i)}
}

// SetBulge is f with the bulge of the Bowed span i set, as far as the lines
// that it continues smoothly leave it free.
func (f Freeform) SetBulge(i int, bulge float64) Freeform {
	n := f.nodes.clone()
	if n.at(i).Span != Bowed {
		return f
	}
	n.at(i).Bulge = bulge
	return Freeform{nodes: settledFrom(n, i)}
}
