package table

import (
	"math"
	"sort"

	"cavitywright/table/curve"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

const (
	// sliverSide is the least length of a side, relative to the loop's size:
	// below it a corner's neighbourhood, which the tracer does not decide
	// (1e-12), would be a noticeable part of the side.
	sliverSide = 1e-7
	// sliverAngle is the least interior angle of a corner (radians, 0.03 deg):
	// a ray in a thinner one bounces thousands of times before it comes out.
	sliverAngle = 5e-4
	// touching is the distance, relative to the table's size, at which two
	// stretches of wall count as one place.
	touching = 1e-9
)

func (t *Table) checkSlivers() *Fault {
	for _, l := range t.loops {
		size := plane.Diagonal(l.Box)
		if size == 0 {
			return t.design.fault(Sliver, l.Item, "The %s has no size; draw it larger.", t.design.itemName(l.Item))
		}
		for i := l.First; i < l.Last; {
			p := &t.pieces[i]
			length, j := 0.0, i
			for ; j < l.Last && t.pieces[j].Side == p.Side; j++ {
				length += t.pieces[j].Length
			}
			if length < sliverSide*size {
				return t.design.faultAt(Sliver, l.Item, p.A, "Side %d of the %s is a sliver, only %.3g %s long, at %s; delete one of its ends or move them apart.",
					p.Side+1, t.design.itemName(l.Item), length, t.design.Unit, t.design.place(p.A))
			}
			i = j
		}
	}
	return nil
}

func (t *Table) checkCorners() *Fault {
	for _, j := range t.joints {
		if j.InteriorAngle() < sliverAngle {
			p := &t.pieces[j.Piece]
			return t.design.faultAt(Sliver, p.Item, j.At, "The corner of the %s at %s closes to a sliver of %.2g degrees; open it.",
				t.design.itemName(p.Item), t.design.place(j.At), j.InteriorAngle()*180/math.Pi)
		}
	}
	return nil
}

// checkCrossings looks for two stretches of wall that meet anywhere but at a
// joint. Pairs of pieces whose boxes overlap are halved until their triangles
// are apart or as small as touching: a pair that is left crosses or touches.
func (t *Table) checkCrossings() *Fault {
	gap := touching * plane.Diagonal(t.box)
	order := make([]int, len(t.pieces))
	boxes := make([]r2.Box, len(t.pieces))
	for i := range t.pieces {
		order[i], boxes[i] = i, t.pieces[i].Bounds()
	}
	sort.Slice(order, func(a, b int) bool { return boxes[order[a]].Min.X < boxes[order[b]].Min.X })
	for k, i := range order {
		for _, j := range order[k+1:] {
			if boxes[j].Min.X > boxes[i].Max.X+2*gap {
				break
			}
			if plane.Apart(boxes[i], boxes[j], gap) || t.twoDiscsApart(i, j) {
				continue
			}
			if at, met := t.meet(i, j, gap); met {
				return t.crossing(i, j, at)
			}
		}
	}
	return nil
}

// twoDiscsApart clears two full circles by their centres.
func (t *Table) twoDiscsApart(i, j int) bool {
	p, q := &t.pieces[i], &t.pieces[j]
	if p.Kind != curve.Circle || q.Kind != curve.Circle || !p.Whole() || !q.Whole() {
		return false
	}
	d := r2.Norm(r2.Sub(p.Centre, q.Centre))
	return d > (p.Radius+q.Radius)*(1+touching)
}

// meet is a place where the pieces meet other than at a joint they share.
func (t *Table) meet(i, j int, gap float64) (r2.Vec, bool) {
	p, q := &t.pieces[i], &t.pieces[j]
	m := meeting{gap: gap, budget: meetBudget}
	if p.Next == j {
		m.shared = append(m.shared, p.B)
	}
	if q.Next == i {
		m.shared = append(m.shared, q.B)
	}
	for _, a := range p.Parts() {
		for _, b := range q.Parts() {
			if m.find(a, b) {
				return m.at, true
			}
		}
	}
	return r2.Vec{}, false
}

// meetBudget is the number of pairs of triangles looked at for one pair of
// pieces; curves that stay as near as that to each other over a length count
// as touching. A transversal crossing takes about a hundred, a cusp some
// thousands.
const meetBudget = 60000

type meeting struct {
	gap    float64
	budget int
	shared []r2.Vec
	at     r2.Vec
}

func (m *meeting) find(a, b curve.Part) bool {
	if a.Apart(b) {
		return false
	}
	m.budget--
	sa, sb := a.Size(), b.Size()
	if sa < m.gap && sb < m.gap || m.budget < 0 {
		m.at = plane.Lerp(a.P, b.Q, 0.5)
		for _, v := range m.shared {
			if r2.Norm(r2.Sub(m.at, v)) < 64*m.gap {
				return false
			}
		}
		return true
	}
	if m.onlyShared(a, b) {
		return false
	}
	if sa >= sb {
		l, r := a.Halves()
		return m.find(l, b) || m.find(r, b)
	}
	l, r := b.Halves()
	return m.find(a, l) || m.find(a, r)
}

// onlyShared clears two parts that start from a shared joint when both are
// straight, or when their triangles meet nowhere else: the directions to the
// other two corners of one triangle all lie strictly on one side of those of
// the other.
func (m *meeting) onlyShared(a, b curve.Part) bool {
	for _, v := range m.shared {
		a1, a2, ok := away(a, v)
		if !ok {
			continue
		}
		b1, b2, ok := away(b, v)
		if !ok {
			continue
		}
		if left(a1, a2, b1, b2) || left(b1, b2, a1, a2) {
			return true
		}
	}
	return false
}

// away are the directions from the joint v, an end of the part, to the part's
// apex and other end.
func away(p curve.Part, v r2.Vec) (d1, d2 r2.Vec, ok bool) {
	switch v {
	case p.P:
		return r2.Sub(p.V, v), r2.Sub(p.Q, v), true
	case p.Q:
		return r2.Sub(p.V, v), r2.Sub(p.P, v), true
	}
	return d1, d2, false
}

// left reports whether a line through the joint parts the wedge of a1 and a2
// from the wedge of b1 and b2: for one of a's edges, a lies on its one side
// and b strictly on the other.
func left(a1, a2, b1, b2 r2.Vec) bool {
	for _, e := range [2][2]r2.Vec{{a1, a2}, {a2, a1}} {
		own := plane.Cross(e[0], e[1])
		x, y := plane.Cross(e[0], b1), plane.Cross(e[0], b2)
		// b strictly on the other side, or opposite to the edge.
		if own >= 0 && x < 0 && y < 0 || own <= 0 && x > 0 && y > 0 {
			return true
		}
	}
	return false
}

func (t *Table) crossing(i, j int, at r2.Vec) *Fault {
	p, q := &t.pieces[i], &t.pieces[j]
	d := t.design
	if p.Loop == q.Loop {
		return d.faultAt(SelfCross, p.Item, at, "The %s crosses itself at %s; drag the nodes there apart, or undo.", d.wallName(p.Item), d.place(at))
	}
	if p.Item == q.Item {
		return d.faultAt(Overlap, p.Item, at, "Two loops of the %s meet at %s; make them smaller or move them apart.", d.itemName(p.Item), d.place(at))
	}
	f := d.faultAt(Overlap, q.Item, at, "The %s and the %s meet at %s; move one of them away.", d.itemName(p.Item), d.itemName(q.Item), d.place(at))
	f.Other = p.Item
	return f
}

// checkNesting holds every obstacle inside the wall and outside the others.
// After checkCrossings one point of each loop decides.
func (t *Table) checkNesting() *Fault {
	row := t.obstaclesAcross()
	for i := range t.loops {
		l := &t.loops[i]
		if l.Side == shape.Outer {
			continue
		}
		at := t.pieces[l.First].A
		if !t.Open() && !t.loops[0].around(at) {
			return t.design.faultAt(Outside, l.Item, at, "The obstacle (%s) at %s lies outside the wall; move it in, or take it out.", t.design.itemName(l.Item), t.design.place(at))
		}
		if row.around(at, l) {
			return t.design.faultAt(Nested, l.Item, at, "The obstacle (%s) at %s lies within another obstacle; take one of them out.", t.design.itemName(l.Item), t.design.place(at))
		}
	}
	return nil
}

// across are obstacles from left to right, so that those that may go around a
// place are few of them.
type across struct {
	loops  []*Loop // by the left edges of their boxes
	widest float64
}

func (t *Table) obstaclesAcross() across {
	var a across
	for i := range t.loops {
		if l := &t.loops[i]; l.Side == shape.Obstacle {
			a.loops = append(a.loops, l)
			a.widest = math.Max(a.widest, l.Box.Max.X-l.Box.Min.X)
		}
	}
	sort.SliceStable(a.loops, func(i, j int) bool { return a.loops[i].Box.Min.X < a.loops[j].Box.Min.X })
	return a
}

// around reports whether one of the obstacles, but not the loop own, goes
// around x.
func (a across) around(x r2.Vec, own *Loop) bool {
	end := sort.Search(len(a.loops), func(i int) bool { return a.loops[i].Box.Min.X > x.X })
	for i := end - 1; i >= 0; i-- {
		// The margin is that of the subtraction's rounding.
		if a.loops[i].Box.Min.X < x.X-2*a.widest {
			break
		}
		if a.loops[i] != own && a.loops[i].around(x) {
			return true
		}
	}
	return false
}

// around reports whether the loop goes around x (winding number not zero).
func (l *Loop) around(x r2.Vec) bool {
	if x.X < l.Box.Min.X || x.X > l.Box.Max.X || x.Y < l.Box.Min.Y || x.Y > l.Box.Max.Y {
		return false
	}
	sum := 0.0
	for i := range l.parts {
		sum += l.parts[i].Subtended(x)
	}
	return math.Abs(sum) > math.Pi
}

// Contains reports whether x lies inside the table: within the outer wall, if
// there is one, and in no obstacle. On the wall itself either may be answered.
func (t *Table) Contains(x r2.Vec) bool {
	for i := range t.loops {
		l := &t.loops[i]
		if l.around(x) != (l.Side == shape.Outer) {
			return false
		}
	}
	return len(t.loops) > 0
}

// mostOrbits and mostBounces bound a study to what can be run and written.
const (
	mostOrbits  = 1_000_000
	mostBounces = 1_000_000_000
)

// checkLaunches holds the study to numbers in range. Whether a launch inside
// the table starts within it is decided when it is run: an edit of the wall
// may pass over it.
func (t *Table) checkLaunches() *Fault {
	if n := t.design.Study.Bounces; n < 0 || n > mostBounces {
		return t.design.fault(BadLaunch, -1, "The study asks for %d bounces an orbit; ask for 0 to %d.", n, mostBounces)
	}
	for i, l := range t.design.Study.Launches {
		for _, v := range []float64{l.S, l.P, l.Point.X, l.Point.Y, l.Angle, l.Spread, l.Region.S0, l.Region.S1, l.Region.P0, l.Region.P1} {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				return t.design.fault(BadLaunch, -1, "Launch %d has a value that is not a number; launch it anew.", i+1)
			}
		}
		if g := l.Region; g.S0 < 0 || g.S0 > 1 || g.S1 < 0 || g.S1 > 1 || math.Abs(g.P0) > 1 || math.Abs(g.P1) > 1 {
			return t.design.fault(BadLaunch, -1, "Launch %d covers s/L from %v to %v and p from %v to %v; s/L must lie in [0, 1] and p in [-1, 1].", i+1, g.S0, g.S1, g.P0, g.P1)
		}
		if l.Count > mostOrbits {
			return t.design.fault(BadLaunch, -1, "Launch %d has %d orbits; at most %d can be launched at once.", i+1, l.Count, mostOrbits)
		}
		if l.S < 0 || l.S >= 1 || math.Abs(l.P) >= 1 || l.Count < 0 {
			return t.design.fault(BadLaunch, -1, "Launch %d starts at s/L = %v, p = %v; s/L must lie in [0, 1) and p between -1 and 1.", i+1, l.S, l.P)
		}
	}
	return nil
}
