package intake

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/outline"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

const (
	// exactly is the kink (radians) up to which a joint is smooth as it is: a
	// table counts it as smooth. nearly is that which the digits of a drawing
	// make of a smooth joint (0.1 degrees); such a joint is made smooth as long
	// as the wall moves by less than mostMoved of its size.
	exactly   = 1e-9
	nearly    = 0.1 * math.Pi / 180
	mostMoved = 1e-5
	// mostJoined is the number of edges up to which nearly smooth joints are
	// looked for.
	mostJoined = 1000
	// rounding is the difference, in sizes of the loop, within which the arcs
	// of one ellipse agree on it.
	rounding = 1e-6
	// isCircle is the difference of the axes, relative to the greater, up to
	// which an arc is that of a circle.
	isCircle = 1e-9
)

// axes are the principal semi-axes of an Oval edge as vectors, the second to
// the left of the first, and its sweep about them, positive to the left.
func (e *Edge) axes() (p, q r2.Vec, sweep float64) {
	t := 0.5 * math.Atan2(2*plane.Dot(e.U, e.V), plane.Dot(e.U, e.U)-plane.Dot(e.V, e.V))
	if math.Abs(r2.Norm(e.U)-r2.Norm(e.V)) <= isCircle*r2.Norm(e.U) && math.Abs(plane.Dot(e.U, e.V)) <= isCircle*plane.Dot(e.U, e.U) {
		t = 0 // a circle
	}
	sin, cos := math.Sincos(t)
	p = r2.Add(r2.Scale(cos, e.U), r2.Scale(sin, e.V))
	q = r2.Sub(r2.Scale(cos, e.V), r2.Scale(sin, e.U))
	if plane.Cross(p, q) < 0 {
		return p, r2.Scale(-1, q), -e.Sweep
	}
	return p, q, e.Sweep
}

// round reports whether an Oval edge is an arc of a circle.
func (e *Edge) round() bool {
	p, q, _ := e.axes()
	return math.Abs(r2.Norm(p)-r2.Norm(q)) <= isCircle*r2.Norm(p)
}

// whole is the loop as a disc or an ellipse where it is all of one.
func (l *Loop) whole() (table.Item, bool) {
	var it table.Item
	sum := 0.0
	p0, q0, _ := l.Edges[0].axes()
	size := r2.Norm(p0) + r2.Norm(q0)
	for i := range l.Edges {
		e := &l.Edges[i]
		p, q, sweep := e.axes()
		if e.Kind != outline.Oval || !near(e.Centre, l.Edges[0].Centre, rounding*size) ||
			math.Abs(r2.Norm(p)-r2.Norm(p0)) > rounding*size || math.Abs(r2.Norm(q)-r2.Norm(q0)) > rounding*size ||
			math.Abs(plane.Cross(plane.Unit(p), plane.Unit(p0)))*math.Abs(r2.Norm(p0)-r2.Norm(q0)) > rounding*size {
			return it, false
		}
		sum += sweep
	}
	if math.Abs(math.Abs(sum)-2*math.Pi) > rounding {
		return it, false
	}
	a, b := r2.Norm(p0), r2.Norm(q0)
	kind, values := "disc", param.Values{a}
	it.Place = plane.Similarity{Shift: l.Edges[0].Centre, Scale: 1}
	if !l.Edges[0].round() {
		kind, values = "ellipse", param.Values{a, b}
		it.Place.Angle = math.Atan2(p0.Y, p0.X)
	}
	f, err := shape.New(kind, values)
	it.Shape = f
	return it, err == nil
}

// split cuts an edge into n parts of equal parameter.
func (e Edge) split(n int) []Edge {
	parts := make([]Edge, 0, n)
	for ; n > 1; n-- {
		f := 1 / float64(n)
		first := e
		mid := e.at(f)
		first.B, e.A = mid, mid
		switch e.Kind {
		case outline.Oval:
			first.Sweep = e.Sweep * f
			e.From, e.Sweep = e.From+first.Sweep, e.Sweep-first.Sweep
		case outline.Cubic:
			c0, c1, c2 := plane.Lerp(first.A, first.C[0], f), plane.Lerp(first.C[0], first.C[1], f), plane.Lerp(first.C[1], e.B, f)
			d0, d1 := plane.Lerp(c0, c1, f), plane.Lerp(c1, c2, f)
			first.C, e.C = [2]r2.Vec{c0, d0}, [2]r2.Vec{d1, c2}
		}
		parts = append(parts, first)
	}
	return append(parts, e)
}

// parts are the edges as a free wall takes them: no arc wider than half a turn
// and a little, and two at least.
func (l *Loop) parts() []Edge {
	var out []Edge
	for _, e := range l.Edges {
		n := 1
		if e.Kind == outline.Oval {
			n = max(1, int(math.Ceil(math.Abs(e.Sweep)/(1.01*math.Pi))))
		}
		if len(l.Edges) == 1 {
			n = max(n, 2)
		}
		out = append(out, e.split(n)...)
	}
	return out
}

// nodes are the nodes of the loop, smooth where the kink is at most the given
// angle.
func (l *Loop) nodes(kink float64) []shape.Node {
	edges := l.parts()
	n := len(edges)
	list := make([]shape.Node, n)
	for i := range edges {
		e, node, next := &edges[i], &list[i], &list[(i+1)%n]
		node.At = e.A
		switch e.Kind {
		case outline.Cubic:
			node.Span = shape.Curved
			node.Out, next.In = r2.Sub(e.C[0], e.A), r2.Sub(e.C[1], e.B)
		case outline.Oval:
			p, q, sweep := e.axes()
			node.Span, node.Bulge = shape.Bowed, math.Tan(sweep/4)
			if !e.round() {
				node.Span, node.Ratio, node.Tilt = shape.Elliptic, r2.Norm(q)/r2.Norm(p), math.Atan2(p.Y, p.X)
			}
		}
		if kinkBetween(&edges[(i+n-1)%n], e) <= kink {
			node.Joint = shape.Smooth
		}
	}
	return list
}

// nearlySmooth reports whether a joint is smooth but for the digits of the
// drawing.
func (l *Loop) nearlySmooth() bool {
	edges := l.parts()
	for i := range edges {
		before := &edges[(i+len(edges)-1)%len(edges)]
		k := kinkBetween(before, &edges[i])
		if k > exactly && k <= nearly && (before.Kind != outline.Line || edges[i].Kind != outline.Line) {
			return true
		}
	}
	return false
}

func kinkBetween(a, b *Edge) float64 { return math.Abs(plane.Angle(a.arrives(), b.leaves())) }

// leaves and arrives are the directions of an edge at its ends.
func (e *Edge) leaves() r2.Vec {
	switch e.Kind {
	case outline.Oval:
		return e.flow(e.From)
	case outline.Cubic:
		return toward(e.A, e.C[0], e.C[1], e.B)
	}
	return r2.Sub(e.B, e.A)
}

func (e *Edge) arrives() r2.Vec {
	switch e.Kind {
	case outline.Oval:
		return e.flow(e.From + e.Sweep)
	case outline.Cubic:
		return r2.Scale(-1, toward(e.B, e.C[1], e.C[0], e.A))
	}
	return r2.Sub(e.B, e.A)
}

// flow is the direction of an arc at the angle t.
func (e *Edge) flow(t float64) r2.Vec {
	sin, cos := math.Sincos(t)
	return r2.Scale(math.Copysign(1, e.Sweep), r2.Sub(r2.Scale(cos, e.V), r2.Scale(sin, e.U)))
}

// toward is the direction from a to the first of the points that is not there.
func toward(a r2.Vec, points ...r2.Vec) r2.Vec {
	for _, p := range points {
		if p != a {
			return r2.Sub(p, a)
		}
	}
	return r2.Vec{X: 1}
}
