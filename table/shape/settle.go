package shape

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

const (
	// tangency is the kink (radians) up to which a Smooth joint with an arc or
	// a line is left alone: ten times below what a table calls smooth (1e-9),
	// far above the rounding of a tangent taken from the nodes.
	tangency = 1e-10
	// aligned is the angle (radians) up to which a tangent handle is left
	// alone; setting it anew stays well below, so that settling twice changes
	// nothing.
	aligned = 1e-14
	// noHandle is the length, as a share of its span, up to which a handle
	// counts as null: a cubic takes the direction of a shorter one from its
	// other control points within 1e-9 of its parameter.
	noHandle = 1e-6
	// third is the share of its chord that a new handle takes: with both
	// handles a third, a straight cubic runs at constant speed.
	third = 1.0 / 3
)

// settled holds the nodes to what their joints promise, and is idempotent: at
// a Smooth joint the tangent is continuous. A handle beside a line or an arc
// takes its direction, two handles take their common one; an arc that can turn
// takes the bulge that continues a line or another arc. A joint that cannot be
// smooth becomes a Corner. What is not in use (handles of spans that are not
// Curved, the bulge of those not Bowed) is cleared. Nodes with a fault are
// returned as they are. At a Fair joint the curvature is made continuous by the
// handles about it; where they cannot it becomes Smooth.
func settled(list nodes) nodes { return settledFrom(list, 0) }

// settledFrom settles with the bulge of span lead kept, where the arcs in a
// row leave a choice.
func settledFrom(list nodes, lead int) nodes { return settledHolding(list, lead, nil) }

// settledHolding is settledFrom with a handle that stays, if it can.
func settledHolding(list nodes, lead int, held *grasp) nodes {
	n := list.clone()
	if n.fault() != nil {
		return n
	}
	for i := range n {
		n[i].clear()
		n[i].Bulge = n.holdBulge(i, n[i].Bulge)
		least := noHandle * (r2.Norm(n.chord(i)) + r2.Norm(n[i].Out) + r2.Norm(n.at(i+1).In))
		for _, h := range [2]*r2.Vec{&n[i].Out, &n.at(i + 1).In} {
			if n[i].Span != Curved || r2.Norm(*h) <= least {
				*h = r2.Vec{}
			}
		}
	}
	n.settleArcs(lead)
	n.settleLines()
	for i := range n {
		n.settleHandles(i)
	}
	n.settleCurvature(held)
	for i := range n {
		if n[i].Joint != Corner {
			n[i].Fillet = 0
		}
	}
	return n
}

// leastRatio and its inverse bound the axes of an ellipse to each other: beyond
// them its ends are spikes.
const leastRatio = 0.01

// clear takes out what the span does not use, and holds the rest to its range.
func (k *Node) clear() {
	if !k.round() {
		k.Bulge = 0
	}
	if k.Span != Elliptic {
		k.Ratio, k.Tilt = 0, 0
		return
	}
	if k.Ratio == 0 {
		k.Ratio = 1
	}
	k.Ratio = math.Min(math.Max(math.Abs(k.Ratio), leastRatio), 1/leastRatio)
}

// settleArcs treats each row of arcs that are joined smoothly.
func (n nodes) settleArcs(lead int) {
	for i := range n {
		if n[i].round() && !n.rowGoesOn(i) {
			k := 1
			for n.at(i+k).round() && n.rowGoesOn(i+k) {
				k++
			}
			n.settleRow(i, k, lead)
		}
	}
	for i := range n {
		if !n.rowGoesOn(i) {
			return
		}
	}
	n.settleRing(lead)
}

// rowGoesOn reports whether the arc that leaves node i continues another.
func (n nodes) rowGoesOn(i int) bool {
	return n.at(i).Joint.tangent() && n.at(i).round() && n.at(i-1).round()
}

// settleRow gives the k arcs from span i on their bulges. A smooth joint with a
// line at either end of the row decides them; else the lead does.
func (n nodes) settleRow(i, k, lead int) {
	tied := n.at(i).Joint.tangent() && n.at(i-1).Span == Straight
	tiedEnd := n.at(i+k).Joint.tangent() && n.at(i+k).Span == Straight
	kept := true
	for j := i; j <= i+k; j++ {
		inside := j > i && j < i+k
		if (inside || j == i && tied || j == i+k && tiedEnd) && n.kink(j) > tangency {
			kept = false
		}
	}
	if kept {
		return
	}
	switch from := n.wrap(lead - i); {
	case tied:
		n.bendOn(i, k)
	case tiedEnd:
		n.bendBack(i+k-1, k)
	case from < k:
		n.bendOn(i+from+1, k-from-1)
		n.bendBack(i+from-1, from)
	default:
		n.bendOn(i+1, k-1)
	}
	if tied && tiedEnd && n.kink(i+k) > tangency {
		n.at(i + k).Joint = Corner
	}
}

// settleRing is settleRow where every span is an arc and every joint smooth:
// the joint at the lead gives way.
func (n nodes) settleRing(lead int) {
	worst := 0.0
	for i := range n {
		worst = math.Max(worst, n.kink(i))
	}
	if worst <= tangency {
		return
	}
	n.bendOn(lead+1, len(n)-1)
	if n.kink(lead) > tangency {
		n.at(lead).Joint = Corner
	}
}

// bendOn makes k arcs from span i on continue what arrives, bendBack makes k
// arcs from span i backwards arrive as the next leaves. A joint at which that
// takes nearly a circle, or an arc nearly flat, becomes a Corner.
func (n nodes) bendOn(i, k int) {
	for j := i; j < i+k; j++ {
		n.bendTo(j, j, n.bulgeLeaving(j, n.arriving(j-1)))
	}
}

func (n nodes) bendBack(i, k int) {
	for j := i; j > i-k; j-- {
		n.bendTo(j, j+1, n.bulgeArriving(j, n.leaving(j+1)))
	}
}

func (n nodes) bendTo(span, joint int, bulge float64) {
	if math.Abs(bulge) <= maxBulge {
		n.at(span).Bulge = n.holdBulge(span, bulge)
	}
	if n.kink(joint) > tangency {
		n.at(joint).Joint = Corner
	}
}

// settleLines makes a joint of two lines that are not in one direction a
// Corner.
func (n nodes) settleLines() {
	for i := range n {
		if n[i].Joint.tangent() && n[i].Span == Straight && n.at(i-1).Span == Straight && n.kink(i) > tangency {
			n[i].Joint = Corner
		}
	}
}

// settleHandles aligns the handles of a Smooth node.
func (n nodes) settleHandles(i int) {
	k := &n[i]
	if !k.Joint.tangent() {
		return
	}
	in, out := n.at(i-1).Span == Curved, k.Span == Curved
	back, on := third*r2.Norm(n.chord(i-1)), third*r2.Norm(n.chord(i))
	switch {
	case in && out:
		d := n.common(i)
		k.In, k.Out = along(k.In, r2.Scale(-1, d), back), along(k.Out, d, on)
	case in:
		k.In = along(k.In, r2.Scale(-1, n.leaving(i)), back)
	case out:
		k.Out = along(k.Out, n.arriving(i-1), on)
	}
}

// common is the direction that the two handles of node i share, half way
// between theirs; from neighbour to neighbour where there are none.
func (n nodes) common(i int) r2.Vec {
	k := n.at(i)
	in, out := r2.Scale(-1, k.In), k.Out
	switch none := (r2.Vec{}); {
	case in == none && out == none:
		if len(n) == 2 {
			return plane.Left(plane.Unit(r2.Scale(-1, n.chord(i))))
		}
		return plane.Unit(firstNonNull(r2.Sub(n.at(i+1).At, n.at(i-1).At), n.chord(i)))
	case in == none:
		return plane.Unit(out)
	case out == none:
		return plane.Unit(in)
	}
	u, w := plane.Unit(in), plane.Unit(out)
	if sum := r2.Add(u, w); !pointsAlong(in, w) && plane.Dot(sum, sum) > tangency {
		return plane.Unit(sum)
	}
	return w
}

// along is the handle v in the direction d, with its own length or, where it
// has none, the given one.
func along(v, d r2.Vec, length float64) r2.Vec {
	if v == (r2.Vec{}) {
		return r2.Scale(length, d)
	}
	if pointsAlong(v, d) {
		return v
	}
	return r2.Scale(r2.Norm(v), d)
}

func pointsAlong(v, d r2.Vec) bool {
	return plane.Dot(v, d) > 0 && math.Abs(plane.Cross(v, d)) <= aligned*r2.Norm(v)
}
