package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

const (
	// filletSteps is the number of equal steps in which the radius grows from
	// none, so that the arc that is found is the one in the corner; newtonSteps
	// bounds those of Newton's method at each.
	filletSteps, newtonSteps = 8, 12
	// met is the distance, relative to the wall's size, at which the two
	// offset curves count as meeting.
	met = 2e-16
	// noSpan is the length, relative to the wall's size, of what two fillets
	// leave of a span below which nothing is left; a table takes no side
	// shorter than 1e-7 of its size.
	noSpan = 2e-7
)

// fillet is the arc that rounds a corner: it takes the length back from the end
// of the span before it, and on from the start of the one after.
type fillet struct {
	back, on float64
	bulge    float64
}

// filletAt is the arc of radius r that touches both spans at node i: its centre
// is where their offsets by r to the inner side of the corner meet, found from
// the corner on by Newton's method while the radius grows. Of two lines it is
// exact, of lines and arcs to the rounding. ok is false where there is none
// within the two spans.
func filletAt(in, out curve.Curve, r, size float64) (f fillet, ok bool) {
	li, lo := in.Length(), out.Length()
	turn := plane.Angle(in.At(li).Tangent, out.At(0).Tangent)
	if math.Abs(turn) <= tangency {
		return f, true
	}
	side := math.Copysign(1, turn)
	step := math.Tan(0.5*math.Abs(turn)) * r / filletSteps
	for k := 1; k <= filletSteps; k++ {
		rk := r * float64(k) / filletSteps
		f.back, f.on = f.back+step, f.on+step
		was := f
		for n := 0; ; n++ {
			if !(f.back <= li*(1+noSpan)) || !(f.on <= lo*(1+noSpan)) || n == newtonSteps {
				return f, false
			}
			a, b := in.At(math.Max(li-f.back, 0)), out.At(math.Min(f.on, lo))
			miss := r2.Sub(r2.Add(b.Point, r2.Scale(side*rk, b.Normal())), r2.Add(a.Point, r2.Scale(side*rk, a.Normal())))
			// The offset runs at 1 - r kappa of the wall's pace.
			pa, pb := 1-side*rk*a.Curvature, 1-side*rk*b.Curvature
			den := plane.Cross(a.Tangent, b.Tangent)
			if pa <= 0 || pb <= 0 || den*side <= 0 {
				return f, false
			}
			if r2.Norm(miss) <= met*size {
				break
			}
			db := plane.Cross(miss, b.Tangent) / (-pa * den)
			do := plane.Cross(a.Tangent, miss) / (-pb * den)
			next := fillet{back: f.back + db, on: f.on + do}
			if next == f || n > 2 && r2.Norm(miss) <= 32*met*size {
				break // as near as the rounding allows
			}
			f = next
		}
		if f.back <= 0 || f.on <= 0 {
			return f, false
		}
		step = math.Max(0, 0.5*(f.back-was.back+f.on-was.on)) + step
	}
	a, b := in.At(math.Max(li-f.back, 0)), out.At(math.Min(f.on, lo))
	f.bulge = math.Tan(0.25 * plane.Angle(a.Tangent, b.Tangent))
	return f, f.bulge*side > 0
}

// fillets are the arcs at the nodes; fault is the node where one does not fit,
// -1 where all do.
func (n nodes) fillets(spans []curve.Curve) (list []fillet, fault int) {
	list = make([]fillet, len(n))
	size := n.size()
	for i := range n {
		if n[i].Fillet <= 0 {
			continue
		}
		f, ok := filletAt(spans[n.wrap(i-1)], spans[i], n[i].Fillet, size)
		if !ok {
			return list, i
		}
		list[i] = f
	}
	for i := range n {
		if left := spans[i].Length() - list[i].on - list[n.wrap(i+1)].back; left < -noSpan*size {
			if n[i].Fillet <= 0 {
				i = n.wrap(i + 1)
			}
			return list, i
		}
	}
	return list, -1
}

// side says what a side of the wall is: the span that leaves a node, or the
// fillet at it.
type side struct {
	node   int
	fillet bool
}

// rounded is the chain with each filleted corner as two nodes and an arc, from
// the start of span 0 on, and what each of its spans is. The error is a *Fault.
func (n nodes) rounded() (nodes, []side, error) {
	plain := true
	for i := range n {
		plain = plain && n[i].Fillet <= 0
	}
	if plain {
		sides := make([]side, len(n))
		for i := range sides {
			sides[i].node = i
		}
		return n, sides, nil
	}
	spans := n.curves()
	list, fault := n.fillets(spans)
	if fault >= 0 {
		return nil, nil, nodeFault(fault, "the fillet at node %d does not fit between its neighbours; give it a smaller radius", fault+1)
	}
	size := n.size()
	parts, left := make([][2]Node, len(n)), make([]bool, len(n))
	for i := range n {
		from, to := list[i].on, spans[i].Length()-list[n.wrap(i+1)].back
		parts[i] = n.cut(i, n.share(i, spans[i], from), n.share(i, spans[i], to))
		left[i] = to-from > noSpan*size
	}
	var out nodes
	var sides []side
	for i := range n {
		start, j := parts[i][0], n.wrap(i+1)
		if start.Joint = n[i].Joint; list[i].bulge != 0 {
			start.Joint = Smooth
		} else {
			start.In = parts[n.wrap(i-1)][1].In
		}
		if left[i] {
			out, sides = append(out, start), append(sides, side{node: i})
		}
		if list[j].bulge != 0 {
			arc := parts[i][1]
			arc.Joint, arc.Span, arc.Bulge = Smooth, Bowed, list[j].bulge
			out, sides = append(out, arc), append(sides, side{node: j, fillet: true})
		}
	}
	return out, sides, nil
}

// share is the fraction of span i, which is c, at the arclength s: of its
// length, of an ellipse's eccentric angle, of a cubic's parameter.
func (n nodes) share(i int, c curve.Curve, s float64) float64 {
	length := c.Length()
	switch {
	case s <= 0:
		return 0
	case s >= length:
		return 1
	}
	switch a := n.at(i); a.Span {
	case Straight, Bowed:
		return s / length
	case Elliptic:
		if a.Bulge == 0 {
			return s / length
		}
		if _, flat := c.(curve.Cubic); !flat {
			break // its parameter is the eccentric angle
		}
		// A chord of a circle makes half the angle of its arc with the tangent.
		ahead := turnedBack(a.toCircle(n.chord(i)), bend(a.Bulge))
		return 2 * plane.Angle(ahead, a.toCircle(r2.Sub(c.At(s).Point, a.At))) / (4 * math.Atan(a.Bulge))
	}
	spans := c.Spans()
	first, last := spans[0].T0, spans[len(spans)-1].T1
	for k := range spans {
		if s <= spans[k].Length || k == len(spans)-1 {
			return (spans[k].T(s) - first) / (last - first)
		}
		s -= spans[k].Length
	}
	return 1
}

// cut is the part of span i between two of its fractions, as the node at its
// start and one at its end.
func (n nodes) cut(i int, from, to float64) [2]Node {
	a, b := *n.at(i), *n.at(i + 1)
	pair := nodes{
		{At: a.At, Out: a.Out, Span: a.Span, Bulge: a.Bulge, Ratio: a.Ratio, Tilt: a.Tilt},
		{At: b.At, In: b.In},
	}
	if to < 1 {
		pair = append(pair[:1], pair.split(0, to))
	}
	if from > 0 {
		mid := pair.split(0, from/to)
		pair[0] = mid
	}
	pair[0].In, pair[1].Out = r2.Vec{}, r2.Vec{}
	pair[1].Span, pair[1].Bulge, pair[1].Ratio, pair[1].Tilt = Straight, 0, 0, 0
	return [2]Node{pair[0], pair[1]}
}
