package shape

import (
	"math"
	"slices"

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
// the span's length (of a cubic's parameter, of an ellipse's eccentric angle). The outline does not change.
func (f Freeform) InsertNode(span int, t float64) Freeform {
	t = math.Min(math.Max(t, insertMargin), 1-insertMargin)
	n := f.nodes.clone()
	cuts := map[int][]float64{}
	for _, g := range f.group() {
		k, u := g.span(span), t
		if g.flip {
			u = 1 - t
		}
		if !slices.ContainsFunc(cuts[k], func(x float64) bool { return math.Abs(x-u) < insertMargin }) {
			cuts[k] = append(cuts[k], u)
		}
	}
	for k := len(n) - 1; k >= 0; k-- {
		slices.Sort(cuts[k])
		end := 1.0
		for j := len(cuts[k]) - 1; j >= 0; j-- { // the later cut first
			u := cuts[k][j]
			mid := n.split(k, u/end)
			n = slices.Insert(n, k+1, mid)
			end = u
		}
	}
	return f.settled(n, span, nil)
}

// split makes span i end at its fraction t, and returns the node there, from
// which the rest leaves. The outline does not change.
func (n nodes) split(span int, t float64) Node {
	a, b := n.at(span), n.at(span+1)
	chord := n.chord(span)
	mid := Node{Joint: Smooth, Span: a.Span, Ratio: a.Ratio, Tilt: a.Tilt}
	switch a.Span {
	case Straight:
		mid.Joint = Corner
		mid.At = r2.Add(a.At, r2.Scale(t, chord))
	case Bowed, Elliptic:
		var off r2.Vec
		off, a.Bulge, mid.Bulge = splitArc(a.toCircle(chord), a.Bulge, t)
		mid.At = r2.Add(a.At, a.toOval(off))
	case Curved:
		// De Casteljau's construction, relative to the node a.
		b0, b1, b2 := a.Out, r2.Add(chord, b.In), chord
		c0, c1, c2 := r2.Scale(t, b0), plane.Lerp(b0, b1, t), plane.Lerp(b1, b2, t)
		d0, d1 := plane.Lerp(c0, c1, t), plane.Lerp(c1, c2, t)
		flow := r2.Sub(d1, d0)
		mid.At = r2.Add(a.At, plane.Lerp(d0, d1, t))
		mid.In, mid.Out = r2.Scale(-t, flow), r2.Scale(1-t, flow)
		a.Out, b.In = c0, r2.Scale(1-t, b.In)
		switch {
		case flow == (r2.Vec{}):
			mid.Joint = Corner // a cusp
		case a.Joint == Fair && b.Joint == Fair:
			mid.Joint = Fair
		}
	}
	return mid
}

// splitArc is the point of an arc at the fraction t of its sweep, seen from its
// start, and the bulges of the two arcs that meet there.
func splitArc(chord r2.Vec, bulge, t float64) (at r2.Vec, first, second float64) {
	quarter := math.Atan(bulge)
	first, second = math.Tan(t*quarter), math.Tan((1-t)*quarter)
	if bulge == 0 {
		return r2.Scale(t, chord), 0, 0
	}
	// The angle between the two chords is that of half the other part.
	u := bend(second)
	share := math.Sin(2*t*quarter) / math.Sin(2*quarter)
	return turnedBack(r2.Scale(share, chord), u), first, second
}

// DeleteNode is f without node i. Of the two spans that met there two lines
// leave a line, lines and arcs the arc through the place of the node, and
// cubics a cubic; a node that was inserted goes without a trace.
func (f Freeform) DeleteNode(i int) Freeform {
	n := f.nodes.clone()
	var gone []int
	for _, g := range f.group() {
		if k := g.of(i); !slices.Contains(gone, k) {
			gone = append(gone, k)
		}
	}
	slices.Sort(gone)
	for k := len(gone) - 1; k >= 0; k-- {
		if len(n) > 2 {
			n.merge(gone[k])
		}
		n = slices.Delete(n, gone[k], gone[k]+1)
	}
	return f.settled(n, i, nil)
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
	case a.round() || k.round():
		// The chords to and from a point of an arc turn by half its sweep.
		if k.Span == Elliptic && a.Span != Elliptic {
			a.Ratio, a.Tilt = k.Ratio, k.Tilt
		}
		if a.Span == Elliptic || k.Span == Elliptic {
			a.Span = Elliptic
		} else {
			a.Span = Bowed
		}
		first, second := n.chord(i-1), n.chord(i)
		a.Bulge = math.Tan(0.5 * plane.Angle(a.toCircle(first), a.toCircle(second)))
	}
}

// flatOval is the ratio of the axes of an ellipse that takes a line's place.
const flatOval = 0.5

// SetSpan is f with span i of another kind: a new cubic keeps the ends, and the
// tangents and the middle of an arc; a new arc keeps the middle; half an
// ellipse with its long axis along it takes the place of a line.
func (f Freeform) SetSpan(i int, kind SpanKind) Freeform {
	n := f.nodes.clone()
	for _, g := range f.group() {
		n.setSpan(g.span(i), kind)
	}
	return f.settled(n, i, nil)
}

func (n nodes) setSpan(i int, kind SpanKind) {
	a, b := n.at(i), n.at(i+1)
	chord := n.chord(i)
	middle := plane.Lerp(a.At, b.At, 0.5)
	switch from := a.Span; {
	case from == kind:
		return
	case kind == Curved && a.round():
		a.Out, b.In = n.arcHandles(i)
	case kind == Curved:
		a.Out, b.In = r2.Scale(third, chord), r2.Scale(-third, chord)
	case from == Curved:
		middle = n.cubicMiddle(i)
	case a.round():
		middle = n.middle(i)
	}
	was := a.Span
	a.Span = kind
	switch {
	case kind == Elliptic && was == Straight:
		a.Ratio, a.Tilt, a.Bulge = flatOval, math.Atan2(chord.Y, chord.X), 1
	case kind == Elliptic:
		a.Ratio, a.Tilt = 1, math.Atan2(chord.Y, chord.X)
		a.Bulge = n.bulgeTo(i, middle)
	case kind == Bowed:
		a.Bulge = n.bulgeTo(i, middle)
	}
}

// SetJoint is f with another joint at node i. A joint that cannot be smooth,
// such as that of two lines at an angle, stays a Corner.
func (f Freeform) SetJoint(i int, joint Joint) Freeform {
	n := f.nodes.clone()
	for _, g := range f.group() {
		n.at(g.of(i)).Joint = joint
	}
	return f.settled(n, i, nil)
}

// MoveNode is f with node i at a place; its handles go with it.
func (f Freeform) MoveNode(i int, to r2.Vec) Freeform {
	return f.moved(map[int]r2.Vec{i: to}, i)
}

// MoveNodes is f with each node listed at its place.
func (f Freeform) MoveNodes(to map[int]r2.Vec) Freeform {
	lead := len(f.nodes)
	for i := range to {
		lead = min(lead, i)
	}
	return f.moved(to, lead)
}

// moved keeps a curve through points one: its handles go along as those of the
// spline do.
func (f Freeform) moved(to map[int]r2.Vec, lead int) Freeform {
	n := f.nodes.clone()
	group := f.group()
	for i, p := range to {
		mean, count := r2.Vec{}, 0.0
		for _, g := range group {
			if g.of(i) == n.wrap(i) {
				mean, count = r2.Add(mean, g.point(p)), count+1
			}
		}
		for _, g := range group {
			n.at(g.of(i)).At = g.point(r2.Scale(1/count, mean))
		}
	}
	n.flowOn(f.nodes)
	return f.settled(n, lead, nil)
}

// leastHandle is the length, as a share of its chord, at which a handle that
// must keep its direction is held; a free one falls into its node there.
const leastHandle = 1e-3

// SetHandle is f with the tangent handle at one end of a Curved span dragged to
// a place. At a Smooth or Fair node the other handle turns with it; beside a line or an
// arc, which give the direction, only its length changes.
func (f Freeform) SetHandle(i int, end End, to r2.Vec) Freeform {
	n := f.nodes.clone()
	span := i
	if end == Arrives {
		span = i - 1
	}
	if n.at(span).Span != Curved || !plane.Finite(to) {
		return f
	}
	for _, g := range f.group() {
		n.setHandle(g.of(i), g.end(end), g.point(to))
	}
	return f.settled(n, i, &grasp{n.wrap(i), end})
}

func (n nodes) setHandle(i int, end End, to r2.Vec) {
	k := n.at(i)
	own, partner, span, beside := &k.Out, &k.In, i, i-1
	if end == Arrives {
		own, partner, span, beside = &k.In, &k.Out, i-1, i
	}
	v := r2.Sub(to, k.At)
	least := leastHandle * r2.Norm(n.chord(span))
	if k.Joint == Corner && r2.Norm(v) < least {
		v = r2.Vec{}
	}
	if k.Joint.tangent() {
		d := firstNonNull(*own, v)
		if n.at(beside).Span != Curved {
			v = r2.Scale(math.Max(plane.Dot(v, d), least), d)
		} else if r2.Norm(v) < least {
			v = r2.Scale(least, firstNonNull(v, d))
		}
		*partner = r2.Scale(-r2.Norm(*partner), plane.Unit(v))
	}
	*own = v
}

// SetBulge is f with the bulge of the Bowed or Elliptic span i set, as far as the lines
// that it continues smoothly leave it free.
func (f Freeform) SetBulge(i int, bulge float64) Freeform {
	n := f.nodes.clone()
	if !n.at(i).round() {
		return f
	}
	for _, g := range f.group() {
		n.at(g.span(i)).Bulge = bulge
	}
	return f.settled(n, i, nil)
}
