package shape

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

const (
	// maxBulge is the greatest bulge of an arc: 356 degrees of a circle. Beyond
	// it the gap between the ends is a sliver.
	maxBulge = 60
	// flattest is the radius of an arc, in sizes of the wall, above which it is
	// straight: a point of it, seen from its centre, is rounded to 1e-11 of the
	// wall.
	flattest = 1e5
)

// holdBulge is the bulge nearest to b that span i can have.
func (n nodes) holdBulge(i int, b float64) float64 {
	if math.Abs(b)*4*flattest*n.size() < r2.Norm(n.at(i).toCircle(n.chord(i))) {
		return 0
	}
	return math.Min(math.Max(b, -maxBulge), maxBulge)
}

// size is the diagonal of the box of the nodes.
func (n nodes) size() float64 {
	box := plane.Around()
	for i := range n {
		box = plane.Join(box, plane.Around(n[i].At))
	}
	return plane.Diagonal(box)
}

// toCircle takes a vector to the plane in which the arc that leaves the node is
// one of a circle: an ellipse is stretched across its tilt. toOval takes it
// back.
func (k *Node) toCircle(v r2.Vec) r2.Vec {
	if k.Span != Elliptic {
		return v
	}
	v = turnedBack(v, plane.Polar(k.Tilt))
	v.Y /= k.Ratio
	return v
}

func (k *Node) toOval(v r2.Vec) r2.Vec {
	if k.Span != Elliptic {
		return v
	}
	v.Y *= k.Ratio
	return turned(v, plane.Polar(k.Tilt))
}

// bend is the unit vector at the angle of half the sweep of an arc of the given
// bulge, as cosine and sine: twice the angle whose tangent is the bulge.
func bend(bulge float64) r2.Vec {
	d := 1 + bulge*bulge
	return r2.Vec{X: (1 - bulge) * (1 + bulge) / d, Y: 2 * bulge / d}
}

// turned is v turned by the angle of the unit vector u, or back by it.
func turned(v, u r2.Vec) r2.Vec {
	return r2.Vec{X: float64(v.X*u.X) - float64(v.Y*u.Y), Y: float64(v.X*u.Y) + float64(v.Y*u.X)}
}

func turnedBack(v, u r2.Vec) r2.Vec { return turned(v, r2.Vec{X: u.X, Y: -u.Y}) }

// leaving is the unit tangent at the start of span i.
func (n nodes) leaving(i int) r2.Vec {
	a, chord := n.at(i), n.chord(i)
	switch a.Span {
	case Bowed:
		return turnedBack(plane.Unit(chord), bend(a.Bulge))
	case Elliptic:
		return plane.Unit(a.toOval(turnedBack(plane.Unit(a.toCircle(chord)), bend(a.Bulge))))
	case Curved:
		return firstNonNull(a.Out, r2.Add(chord, n.at(i+1).In), chord)
	}
	return plane.Unit(chord)
}

// arriving is the unit tangent at the end of span i.
func (n nodes) arriving(i int) r2.Vec {
	a, chord := n.at(i), n.chord(i)
	switch a.Span {
	case Bowed:
		return turned(plane.Unit(chord), bend(a.Bulge))
	case Elliptic:
		return plane.Unit(a.toOval(turned(plane.Unit(a.toCircle(chord)), bend(a.Bulge))))
	case Curved:
		return firstNonNull(r2.Scale(-1, n.at(i+1).In), r2.Sub(chord, a.Out), chord)
	}
	return plane.Unit(chord)
}

func firstNonNull(vs ...r2.Vec) r2.Vec {
	for _, v := range vs {
		if v != (r2.Vec{}) {
			return plane.Unit(v)
		}
	}
	return r2.Vec{X: 1}
}

// kink is the angle (radians, at least 0) by which the tangent jumps at node i.
func (n nodes) kink(i int) float64 {
	return math.Abs(plane.Angle(n.arriving(i-1), n.leaving(i)))
}

// bulgeLeaving is the bulge with which the arc i leaves in the direction d,
// bulgeArriving the one with which it arrives in it. They are infinite where d
// points straight back.
func (n nodes) bulgeLeaving(i int, d r2.Vec) float64 {
	a := n.at(i)
	return math.Tan(0.5 * plane.Angle(a.toCircle(d), a.toCircle(n.chord(i))))
}

func (n nodes) bulgeArriving(i int, d r2.Vec) float64 {
	a := n.at(i)
	return math.Tan(0.5 * plane.Angle(a.toCircle(n.chord(i)), a.toCircle(d)))
}

// middle is the point of the arc i half way along it; of an ellipse's, half way
// along its eccentric angle.
func (n nodes) middle(i int) r2.Vec {
	a := n.at(i)
	chord := a.toCircle(n.chord(i))
	// A left turn bows to the right of its chord, by bulge times half of it.
	return r2.Add(a.At, a.toOval(r2.Sub(r2.Scale(0.5, chord), r2.Scale(0.5*a.Bulge, plane.Left(chord)))))
}

// bulgeTo is the bulge with which the arc i comes nearest to p with its middle.
func (n nodes) bulgeTo(i int, p r2.Vec) float64 {
	chord := n.at(i).toCircle(n.chord(i))
	d := n.at(i).toCircle(r2.Sub(p, plane.Lerp(n.at(i).At, n.at(i+1).At, 0.5)))
	return n.holdBulge(i, -2*plane.Dot(d, plane.Left(chord))/plane.Dot(chord, chord))
}

// cubicMiddle is the point of the Curved span i at the middle of its parameter.
func (n nodes) cubicMiddle(i int) r2.Vec {
	p := n.controls(i)
	return r2.Scale(0.125, r2.Add(r2.Add(p[0], p[3]), r2.Scale(3, r2.Add(p[1], p[2]))))
}

// arcHandles are the handles of the cubic that has the ends, the end tangents
// and the middle of the arc i: their length is 4/3 tan(sweep/4) of the radius
// (common practice).
func (n nodes) arcHandles(i int) (out, in r2.Vec) {
	a := n.at(i)
	chord := a.toCircle(n.chord(i))
	// radius = half the chord / sin(sweep/2), and sin(sweep/2) = 2b/(1+b²).
	length := r2.Norm(chord) * (1 + a.Bulge*a.Bulge) / 3
	u, b := plane.Unit(chord), bend(a.Bulge)
	return a.toOval(r2.Scale(length, turnedBack(u, b))), a.toOval(r2.Scale(-length, turned(u, b)))
}
