package survey

import (
	"math"
	"sort"

	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// net holds the parts of a wall in a tree of boxes, to answer questions of
// distance with proof: a part lies in its triangle, and is halved until that
// decides.
type net struct {
	parts []curve.Part
	tree  []knot
	size  float64
}

// knot is a box of the tree over parts lo to hi-1; its halves are the knots
// after it and at other, 0 for a leaf.
type knot struct {
	box           r2.Box
	lo, hi, other int
}

const leafParts = 4

func newNet(t *table.Table) *net {
	n := &net{size: sizeOf(t)}
	for i := range t.Pieces() {
		n.parts = append(n.parts, t.Pieces()[i].Parts()...)
	}
	n.grow(0, len(n.parts))
	return n
}

func (n *net) grow(lo, hi int) {
	k := len(n.tree)
	box := plane.Around()
	for _, p := range n.parts[lo:hi] {
		box = plane.Join(box, p.Box())
	}
	n.tree = append(n.tree, knot{box: box, lo: lo, hi: hi})
	if hi-lo <= leafParts {
		return
	}
	wide := box.Max.X-box.Min.X > box.Max.Y-box.Min.Y
	sub := n.parts[lo:hi]
	sort.SliceStable(sub, func(i, j int) bool {
		if wide {
			return sub[i].P.X < sub[j].P.X
		}
		return sub[i].P.Y < sub[j].P.Y
	})
	mid := (lo + hi) / 2
	n.grow(lo, mid)
	n.tree[k].other = len(n.tree)
	n.grow(mid, hi)
}

// any reports whether a part in a box that near accepts is accepted by take.
func (n *net) any(k int, near func(r2.Box) bool, take func(curve.Part) bool) bool {
	t := &n.tree[k]
	if !near(t.box) {
		return false
	}
	if t.other == 0 {
		for _, p := range n.parts[t.lo:t.hi] {
			if take(p) {
				return true
			}
		}
		return false
	}
	return n.any(k+1, near, take) || n.any(t.other, near, take)
}

// within reports whether a point of the wall lies nearer to x than r, to the
// resolution fine of the distance.
func (n *net) within(x r2.Vec, r, fine float64) bool {
	near := func(b r2.Box) bool { return boxDistance(b, x) < r }
	var take func(p curve.Part) bool
	take = func(p curve.Part) bool {
		// The triangle hugs the wall, so that a wall that only just keeps its
		// distance is told from one that does not in few halvings.
		if !near(p.Box()) || triangleDistance(p, x) >= r {
			return false
		}
		if distance(p.P, x) < r || distance(p.Q, x) < r {
			return true
		}
		if p.Size() < fine {
			return false // within fine of an end, which is not near enough
		}
		a, b := p.Halves()
		return take(a) || take(b)
	}
	return n.any(0, near, take)
}

// clear reports whether the straight line from a to b, but for its ends, meets
// no wall.
func (n *net) clear(a, b r2.Vec) bool {
	d := r2.Scale(endShare, r2.Sub(b, a))
	line := curve.NewLine(r2.Add(a, d), r2.Sub(b, d))
	ray := line.Spans()[0].Parts()[0]
	box := ray.Box()
	near := func(b r2.Box) bool { return !plane.Apart(b, box, 0) }
	var take func(p curve.Part) bool
	take = func(p curve.Part) bool {
		if p.Apart(ray) {
			return false
		}
		if p.Size() < 1e-9*n.size {
			return true
		}
		a, b := p.Halves()
		return take(a) || take(b)
	}
	return !n.any(0, near, take)
}

// endShare is the part of a line at each of its ends that may touch the wall.
const endShare = 1e-6

func distance(a, b r2.Vec) float64 { return math.Hypot(a.X-b.X, a.Y-b.Y) }

// boxDistance is the distance from x to the box, 0 inside.
func boxDistance(b r2.Box, x r2.Vec) float64 {
	return math.Hypot(math.Max(0, math.Max(b.Min.X-x.X, x.X-b.Max.X)), math.Max(0, math.Max(b.Min.Y-x.Y, x.Y-b.Max.Y)))
}

// triangleDistance is the distance from x to the triangle of the part.
func triangleDistance(p curve.Part, x r2.Vec) float64 {
	v := [3]r2.Vec{p.P, p.V, p.Q}
	least, left, right := math.Inf(1), 0, 0
	for i := range v {
		a, side := v[i], r2.Sub(v[(i+1)%3], v[i])
		d := r2.Sub(x, a)
		if plane.Cross(side, d) > 0 {
			left++
		} else {
			right++
		}
		f := 0.0
		if n2 := plane.Dot(side, side); n2 > 0 {
			f = math.Min(math.Max(plane.Dot(side, d)/n2, 0), 1)
		}
		least = math.Min(least, distance(x, r2.Add(a, r2.Scale(f, side))))
	}
	if left == 3 || right == 3 {
		return 0
	}
	return least
}
