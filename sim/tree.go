package sim

import (
	"math"
	"sort"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// node is one box of the tree over the spans. A leaf has n > 0 spans, from
// order[first]; else its children are first and first+1.
type node struct {
	box      r2.Box
	first, n int32
}

const (
	// fewSpans is the number up to which looking at every span is faster than
	// a tree.
	fewSpans  = 12
	leafSpans = 3
	// boxMargin, relative to the table's size, widens every box beyond the
	// rounding of the box test.
	boxMargin = 1e-13
	treeDepth = 64
)

// grow builds the tree by halving the spans at the median of their centres.
func (tr *Tracer) grow() {
	if len(tr.spans) <= fewSpans {
		return
	}
	boxes := make([]r2.Box, len(tr.spans))
	tr.order = make([]int32, len(tr.spans))
	for i := range tr.spans {
		b := tr.spans[i].src.Bounds()
		m := boxMargin * tr.size
		b.Min.X, b.Min.Y, b.Max.X, b.Max.Y = b.Min.X-m, b.Min.Y-m, b.Max.X+m, b.Max.Y+m
		boxes[i], tr.order[i] = b, int32(i)
	}
	tr.tree = append(tr.tree, node{})
	tr.split(0, 0, len(tr.order), boxes)
}

func (tr *Tracer) split(at, lo, hi int, boxes []r2.Box) {
	box := plane.Around()
	for _, i := range tr.order[lo:hi] {
		box = plane.Join(box, boxes[i])
	}
	if hi-lo <= leafSpans {
		tr.tree[at] = node{box: box, first: int32(lo), n: int32(hi - lo)}
		return
	}
	part := tr.order[lo:hi]
	wide := box.Max.X-box.Min.X > box.Max.Y-box.Min.Y
	sort.Slice(part, func(i, j int) bool {
		a, b := boxes[part[i]], boxes[part[j]]
		if wide {
			return a.Min.X+a.Max.X < b.Min.X+b.Max.X
		}
		return a.Min.Y+a.Max.Y < b.Min.Y+b.Max.Y
	})
	kids := len(tr.tree)
	tr.tree = append(tr.tree, node{}, node{})
	tr.tree[at] = node{box: box, first: int32(kids)}
	mid := (lo + hi) / 2
	tr.split(kids, lo, mid, boxes)
	tr.split(kids+1, mid, hi, boxes)
}

// descend meets the spans whose boxes the ray enters before the nearest hit.
func (tr *Tracer) descend(r *ray, h *hit) {
	inv := r2.Vec{X: 1 / r.d.X, Y: 1 / r.d.Y}
	var stack [treeDepth]int32
	top := 1
	for top > 0 {
		top--
		n := &tr.tree[stack[top]]
		if enter(&n.box, r, inv) > h.u {
			continue
		}
		if n.n > 0 {
			for _, k := range tr.order[n.first : n.first+n.n] {
				tr.meet(int(k), r, h)
			}
			continue
		}
		near, far := n.first, n.first+1
		dn, df := enter(&tr.tree[near].box, r, inv), enter(&tr.tree[far].box, r, inv)
		if df < dn {
			near, far, dn, df = far, near, df, dn
		}
		if df <= h.u {
			stack[top] = far
			top++
		}
		if dn <= h.u {
			stack[top] = near
			top++
		}
	}
}

// enter is the distance at which the ray enters the box, 0 from inside, +Inf
// where it misses it.
func enter(b *r2.Box, r *ray, inv r2.Vec) float64 {
	lo, hi := 0.0, math.Inf(1)
	if r.d.X != 0 {
		a, c := (b.Min.X-r.p.X)*inv.X, (b.Max.X-r.p.X)*inv.X
		if a > c {
			a, c = c, a
		}
		lo, hi = max(lo, a), min(hi, c)
	} else if r.p.X < b.Min.X || r.p.X > b.Max.X {
		return math.Inf(1)
	}
	if r.d.Y != 0 {
		a, c := (b.Min.Y-r.p.Y)*inv.Y, (b.Max.Y-r.p.Y)*inv.Y
		if a > c {
			a, c = c, a
		}
		lo, hi = max(lo, a), min(hi, c)
	} else if r.p.Y < b.Min.Y || r.p.Y > b.Max.Y {
		return math.Inf(1)
	}
	if lo > hi {
		return math.Inf(1)
	}
	return lo
}
