package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Freed is a loop of a shape as a free wall.
type Freed struct {
	Wall Freeform
	Side Side
	// Exact reports whether every span is the shape's own curve, to rounding.
	// Error is the greatest distance found between the two otherwise (of
	// points on each from the other), in the unit of the shape.
	Exact bool
	Error float64
}

// Free are the loops of a shape as free walls, which s runs through as through
// the shape's. Lines, arcs of circles and ellipses and cubics are taken over;
// other curves are followed within tol (a length) by cubics that have their
// places, tangents and curvatures at the nodes. A tol below
// 1e-11 of the loop's size is taken as that. The error is a *Fault.
func Free(s Shape, tol float64) ([]Freed, error) {
	loops, err := s.Loops()
	if err != nil {
		return nil, err
	}
	out := make([]Freed, len(loops))
	for i, l := range loops {
		curves := l.Curves
		if l.Side == Obstacle {
			curves = backwards(curves)
		}
		c := converter{tol: math.Max(tol, leastTol*plane.Diagonal(boxOf(curves))), exact: true}
		for _, k := range curves {
			c.add(k)
		}
		c.joints()
		w := NewFreeform(c.nodes)
		if err := w.nodes.fault(); err != nil {
			return nil, err
		}
		out[i] = Freed{Wall: w, Side: l.Side, Exact: c.exact, Error: c.worst}
		if !c.exact {
			out[i].fair(c.seen, c.tol)
		}
	}
	return out, nil
}

// fair makes the joints of the cubics fair, if the places seen of the shape stay
// within tol of the wall.
func (w *Freed) fair(seen []r2.Vec, tol float64) {
	n := w.Wall.nodes.clone()
	for i := range n {
		if n[i].Joint == Smooth && n[i].Span == Curved && n.at(i-1).Span == Curved {
			n[i].Joint = Fair
		}
	}
	g := NewFreeform(n)
	if d := g.Deviation(seen); d <= tol {
		w.Wall, w.Error = g, math.Max(w.Error, d)
	}
}

// leastTol is the least tolerance of a fit, relative to the size of the wall:
// the rounding of the distances that are compared with it stays far below.
const leastTol = 1e-11

// backwards is the same loop run the other way from the same start.
func backwards(curves []curve.Curve) []curve.Curve {
	out := make([]curve.Curve, len(curves))
	for i, c := range curves {
		out[len(curves)-1-i] = c.Reversed()
	}
	return out
}

func boxOf(curves []curve.Curve) r2.Box {
	box := plane.Around()
	for _, c := range curves {
		box = plane.Join(box, curve.Bounds(c.Spans()))
	}
	return box
}

// converter collects the nodes of a loop.
type converter struct {
	nodes nodes
	tol   float64
	exact bool
	worst float64
	seen  []r2.Vec // places of the curves that are followed
	next  r2.Vec   // the In handle of the node to come
}

// add appends the spans of a curve.
func (c *converter) add(k curve.Curve) {
	if k, is := k.(curve.Cubic); is {
		c.cubic(k.P)
		return
	}
	spans := k.Spans()
	for i := range spans {
		s := &spans[i]
		switch s.Kind {
		case curve.Segment:
			c.push(Node{At: s.A, Span: Straight}, r2.Vec{})
		case curve.Circle, curve.Oval:
			parts := 1
			if s.Whole() {
				parts = 2
			}
			for j := range parts {
				at := s.A
				if j > 0 {
					at, _, _ = s.Jet(0.5 * (s.T0 + s.T1))
				}
				n := Node{At: at, Span: Bowed, Bulge: math.Tan(0.25 * (s.T1 - s.T0) / float64(parts))}
				if s.Kind == curve.Oval {
					n.Span, n.Ratio, n.Tilt = Elliptic, s.Minor/s.Radius, math.Atan2(s.Axis.Y, s.Axis.X)
				}
				c.push(n, r2.Vec{})
			}
		case curve.Bezier:
			c.cubic(controlsOf(s))
		default:
			c.exact = false
			c.fit(s, s.T0, s.T1, 0)
		}
	}
}

// controlsOf are the control points of a stretch of a cubic.
func controlsOf(s *curve.Span) [4]r2.Vec {
	_, d0, _ := s.Jet(s.T0)
	_, d1, _ := s.Jet(s.T1)
	w := (s.T1 - s.T0) / 3
	return [4]r2.Vec{s.A, r2.Add(s.A, r2.Scale(w, d0)), r2.Sub(s.B, r2.Scale(w, d1)), s.B}
}

func (c *converter) cubic(p [4]r2.Vec) {
	c.push(Node{At: p[0], Span: Curved, Out: r2.Sub(p[1], p[0])}, r2.Sub(p[2], p[3]))
}

// push appends a node; in is the handle with which its span arrives.
func (c *converter) push(n Node, in r2.Vec) {
	n.In, c.next = c.next, in
	c.nodes = append(c.nodes, n)
}

// joints closes the loop and says of each joint how smooth it is.
func (c *converter) joints() {
	n := c.nodes
	n[0].In = c.next
	size := n.size()
	for i := range n {
		n[i].clear()
		if n.kink(i) <= tangency {
			n[i].Joint = Smooth
			if n[i].Span == Curved && n.at(i-1).Span == Curved && n.isFair(i, size) {
				n[i].Joint = Fair
			}
		}
	}
}

// mostHalvings bounds the fit of a piece, whose error falls by 64 with each.
const mostHalvings = 12

// fit appends cubics along the stretch of a span between two values of its
// parameter.
func (c *converter) fit(s *curve.Span, from, to float64, depth int) {
	p, ok := hermiteCubic(s, from, to)
	d := math.Inf(1)
	if ok {
		d = apart(s, from, to, p)
	}
	if d <= c.tol || depth == mostHalvings {
		c.worst = math.Max(c.worst, d)
		for k := range fitSamples {
			at, _, _ := s.Jet(from + (to-from)*float64(k)/fitSamples)
			c.seen = append(c.seen, at)
		}
		c.cubic(p)
		return
	}
	mid := 0.5 * (from + to)
	c.fit(s, from, mid, depth+1)
	c.fit(s, mid, to, depth+1)
}

// hermiteCubic is the cubic with the places, tangents and curvatures of the
// span at two values of its parameter (C. de Boor, K. Höllig and M. Sabin,
// High accuracy geometric Hermite interpolation, Comput. Aided Geom. Design 4,
// 269, 1987). Near a zero of the curvature, where that is not well posed, it
// has the derivatives by the arclength instead. ok is false where neither is
// near the span.
func hermiteCubic(s *curve.Span, from, to float64) (p [4]r2.Vec, ok bool) {
	a, b := s.FrameAt(from), s.FrameAt(to)
	chord := r2.Sub(b.Point, a.Point)
	third := (s.S(to) - s.S(from)) / 3
	den := plane.Cross(a.Tangent, b.Tangent)
	ca, cb := plane.Cross(a.Tangent, chord), plane.Cross(chord, b.Tangent)
	out, in := third, third
	for range 30 { // steps of Newton's method
		f := 1.5*a.Curvature*out*out - ca + in*den
		g := 1.5*b.Curvature*in*in - cb + out*den
		fo, gi := 3*a.Curvature*out, 3*b.Curvature*in
		det := fo*gi - den*den
		do, di := (f*gi-g*den)/det, (fo*g-den*f)/det
		if math.IsNaN(do) || math.IsNaN(di) {
			break
		}
		out, in = out-do, in-di
		if math.Abs(do)+math.Abs(di) <= 1e-15*third {
			break
		}
	}
	if !(math.Abs(out-third) < 0.3*third && math.Abs(in-third) < 0.3*third) {
		out, in = third, third
	}
	return [4]r2.Vec{a.Point, r2.Add(a.Point, r2.Scale(out, a.Tangent)), r2.Sub(b.Point, r2.Scale(in, b.Tangent)), b.Point}, out > 0 && in > 0
}

// fitSamples is the number of places at which a fit and its span are compared.
const fitSamples = 24

// apart is the greatest distance found of the cubic from the span and back.
func apart(s *curve.Span, from, to float64, p [4]r2.Vec) float64 {
	cubic := curve.NewCubic(p)
	spans := cubic.Spans()
	own := *s
	own.T0, own.T1 = from, to
	worst := 0.0
	for k := 1; k < fitSamples; k++ {
		share := float64(k) / fitSamples
		t := from + (to-from)*share
		at, _, _ := s.Jet(t)
		best := math.Inf(1)
		for i := range spans {
			start := spans[i].T0 + (spans[i].T1-spans[i].T0)*0.5
			if spans[i].T0 <= share && share <= spans[i].T1 {
				start = share
			}
			q, _, _ := spans[i].Jet(start)
			best = math.Min(best, foot(place{&spans[i], start, q}, at))
		}
		worst = math.Max(worst, best)
		i := 0
		for i < len(spans)-1 && share > spans[i].T1 {
			i++
		}
		q, _, _ := spans[i].Jet(share)
		worst = math.Max(worst, foot(place{&own, t, at}, q))
	}
	return worst
}
