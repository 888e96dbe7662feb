package shape

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// What a person types of a free wall, and reads off it: lengths, directions
// and angles of spans and nodes, exactly. Angles are in radians.

// SpanLength is the length of span i as it is drawn, fillets not counted.
func (f Freeform) SpanLength(i int) float64 {
	if f.nodes.fault() != nil {
		return r2.Norm(f.nodes.chord(i))
	}
	return f.nodes.curves()[f.nodes.wrap(i)].Length()
}

// Direction is that of the chord of span i, in (-pi, pi].
func (f Freeform) Direction(i int) float64 {
	c := f.nodes.chord(i)
	return math.Atan2(c.Y, c.X)
}

// Sweep is the angle by which the arc i turns, positive to the left; of an
// ellipse's the one of its eccentric angle.
func (f Freeform) Sweep(i int) float64 { return 4 * math.Atan(f.nodes.at(i).Bulge) }

// Sagitta is the height of the arc i over the middle of its chord, positive
// where it turns left.
func (f Freeform) Sagitta(i int) float64 {
	return 0.5 * f.nodes.at(i).Bulge * r2.Norm(f.nodes.at(i).toCircle(f.nodes.chord(i)))
}

// InteriorAngle is the angle of the table at node i, in (0, 2 pi); pi where
// the tangent is continuous.
func (f Freeform) InteriorAngle(i int) float64 {
	return math.Pi - plane.Angle(f.nodes.arriving(i-1), f.nodes.leaving(i))
}

// WithLength is f with span i stretched about its start to the length l (above
// 0); its end node moves.
func (f Freeform) WithLength(i int, l float64) Freeform {
	return f.spun(i, plane.Similarity{Scale: l / f.SpanLength(i)})
}

// WithDirection is f with span i turned about its start so that its chord has
// the direction; its end node moves.
func (f Freeform) WithDirection(i int, direction float64) Freeform {
	return f.spun(i, plane.Similarity{Scale: 1, Angle: direction - f.Direction(i)})
}

// WithInteriorAngle is f with the span that leaves node i turned about it until
// the table has the angle there.
func (f Freeform) WithInteriorAngle(i int, angle float64) Freeform {
	return f.spun(i, plane.Similarity{Scale: 1, Angle: f.InteriorAngle(i) - angle})
}

// spun is f with span i turned and stretched about its start.
func (f Freeform) spun(i int, m plane.Similarity) Freeform {
	n := f.nodes.clone()
	vector := func(v r2.Vec) r2.Vec { return r2.Scale(m.Scale, m.Turn(v)) }
	to := r2.Add(n.at(i).At, vector(n.chord(i)))
	for _, g := range f.group() {
		k := g.span(i)
		a, b := n.at(k), n.at(k+1)
		if m.Angle != 0 && g.flip {
			inverse := plane.Similarity{Scale: 1, Angle: -m.Angle}
			a.Out, b.In = r2.Scale(m.Scale, inverse.Turn(a.Out)), r2.Scale(m.Scale, inverse.Turn(b.In))
			a.Tilt -= m.Angle
		} else {
			a.Out, b.In = vector(a.Out), vector(b.In)
			a.Tilt += m.Angle
		}
	}
	return Freeform{nodes: n, symmetry: f.symmetry}.moved(map[int]r2.Vec{i + 1: to}, i+1)
}

// WithRadius is f with the circular arc i of the radius r; the larger part of
// the circle stays the larger. It is at least half the chord.
func (f Freeform) WithRadius(i int, r float64) Freeform {
	now := f.nodes.at(i).Bulge
	half := math.Asin(math.Min(1, r2.Norm(f.nodes.chord(i))/(2*r)))
	if math.Abs(now) > 1 {
		half = math.Pi - half
	}
	return f.SetBulge(i, math.Copysign(math.Tan(half/2), now))
}

// WithSagitta is f with the arc i of the given height over its chord.
func (f Freeform) WithSagitta(i int, h float64) Freeform {
	return f.SetBulge(i, 2*h/r2.Norm(f.nodes.at(i).toCircle(f.nodes.chord(i))))
}

// Through is f with the arc i through the point p: the chords to and from a
// point of an arc turn by half its sweep.
func (f Freeform) Through(i int, p r2.Vec) Freeform {
	a, b := f.nodes.at(i), f.nodes.at(i+1)
	if p == a.At || p == b.At || !plane.Finite(p) {
		return f
	}
	return f.SetBulge(i, math.Tan(0.5*plane.Angle(a.toCircle(r2.Sub(p, a.At)), a.toCircle(r2.Sub(b.At, p)))))
}

// Axes are the semi-axes of the Elliptic span i, along its tilt and across it;
// of a Bowed one both are its radius. They are infinite for a span that does
// not bend.
func (f Freeform) Axes(i int) (along, across float64) {
	a := f.nodes.at(i)
	along = 0.5 * r2.Norm(a.toCircle(f.nodes.chord(i))) / math.Abs(bend(a.Bulge).Y)
	if a.Span == Elliptic {
		return along, along * a.Ratio
	}
	return along, along
}

// WithAxes is f with the Elliptic span i on an ellipse of the given semi-axes
// and tilt, as far as its chord fits into it.
func (f Freeform) WithAxes(i int, along, across, tilt float64) Freeform {
	n := f.nodes.clone()
	if n.at(i).Span != Elliptic || !(along > 0) || !(across > 0) {
		return f
	}
	large, sign := math.Abs(n.at(i).Bulge) > 1, n.at(i).Bulge
	for _, g := range f.group() {
		a := n.at(g.span(i))
		a.Ratio, a.Tilt = across/along, g.tilt(tilt)
		half := math.Asin(math.Min(1, r2.Norm(a.toCircle(n.chord(g.span(i))))/(2*along)))
		if large {
			half = math.Pi - half
		}
		a.Bulge = math.Copysign(math.Tan(half/2), sign)
	}
	return f.settled(n, i, nil)
}

// SetFillet is f with the corner at node i rounded by an arc of the radius; 0
// takes it away. Whether it fits is reported by Loops.
func (f Freeform) SetFillet(i int, radius float64) Freeform {
	n := f.nodes.clone()
	for _, g := range f.group() {
		n.at(g.of(i)).Fillet = math.Max(radius, 0)
	}
	return f.settled(n, i, nil)
}

// GreatestFillet is the greatest radius, to 1e-9 of the wall's size, with which
// the fillet at node i fits between its neighbours as they are; 0 where the
// node is no corner.
func (f Freeform) GreatestFillet(i int) float64 {
	i = f.nodes.wrap(i)
	size := f.nodes.size()
	if f.nodes[i].Joint != Corner || f.nodes.fault() != nil || f.nodes.kink(i) <= tangency {
		return 0
	}
	spans := f.nodes.curves()
	n := f.nodes.clone()
	fits := func(r float64) bool {
		for _, g := range f.group() {
			n[g.of(i)].Fillet = r
		}
		_, fault := n.fillets(spans)
		return fault < 0
	}
	lo, hi := 0.0, size
	for hi-lo > 1e-9*size {
		if mid := 0.5 * (lo + hi); fits(mid) {
			lo = mid
		} else {
			hi = mid
		}
	}
	return lo
}
