package outline

import (
	"math"
	"slices"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// halves are the areas on both sides of the grid line, upright or level across
// the longer way, that has half of the points on either side.
func (m *masking) halves(a area) []area {
	all := slices.Clone(a.wall)
	for _, h := range a.holes {
		all = append(all, h...)
	}
	lo, hi := all[0], all[0]
	for _, p := range all {
		lo, hi = dot{min(lo.x, p.x), min(lo.y, p.y)}, dot{max(hi.x, p.x), max(hi.y, p.y)}
	}
	level := hi.y-lo.y > hi.x-lo.x
	turn := func(r ring) ring {
		if !level {
			return r
		}
		out := make(ring, len(r)) // a quarter turn keeps the sense
		for i, p := range r {
			out[i] = dot{p.y, -p.x}
		}
		return out
	}
	back := func(r ring) ring {
		if !level {
			return r
		}
		out := make(ring, len(r))
		for i, p := range r {
			out[i] = dot{-p.y, p.x}
		}
		return out
	}
	rings := []ring{turn(a.wall)}
	for _, h := range a.holes {
		rings = append(rings, turn(h))
	}
	xs := make([]int64, 0, len(all))
	for _, r := range rings {
		for _, p := range r {
			xs = append(xs, p.x)
		}
	}
	slices.Sort(xs)
	cut := xs[len(xs)/2]
	if cut == xs[0] {
		cut++
	}
	var out []area
	for _, parts := range m.parted(rings, cut) {
		out = append(out, nested(parts, back)...)
	}
	return out
}

// parted are the rings left of the line x = cut and those right of it, which
// run along it where they cross it. A point on the line counts as right.
func (m *masking) parted(rings []ring, cut int64) [2][]ring {
	type knot struct {
		at         dot
		order      float64 // half a step left of the line, where no point is
		ring, edge int     // it lies on the edge that leaves this point
	}
	var knots []knot
	right := func(p dot) bool { return p.x >= cut }
	for i, r := range rings {
		for k, p := range r {
			q := r[(k+1)%len(r)]
			if right(p) == right(q) {
				continue
			}
			slope := float64(q.y-p.y) / float64(q.x-p.x)
			y := float64(p.y) + slope*float64(cut-p.x)
			knots = append(knots, knot{dot{cut, int64(math.Round(y))}, y - 0.5*slope, i, k})
			if p.x != cut && q.x != cut {
				m.bent = math.Max(m.bent, math.Abs(y-math.Round(y)))
			}
		}
	}
	slices.SortFunc(knots, func(a, b knot) int {
		switch {
		case a.order < b.order:
			return -1
		case a.order > b.order:
			return 1
		}
		return 0
	})
	on := map[[2]int]int{}
	for i, k := range knots {
		on[[2]int{k.ring, k.edge}] = i
	}
	var out [2][]ring
	for side := range 2 {
		used := make([]bool, len(knots))
		for start := range knots {
			k := knots[start]
			// It begins where the ring comes over to this side.
			if used[start] || right(rings[k.ring][(k.edge+1)%len(rings[k.ring])]) != (side == 1) {
				continue
			}
			var r ring
			for i := start; !used[i]; {
				used[i] = true
				k := knots[i]
				r = append(r, k.at)
				old := rings[k.ring]
				for j := (k.edge + 1) % len(old); ; j = (j + 1) % len(old) {
					r = append(r, old[j])
					if out, is := on[[2]int{k.ring, j}]; is {
						r = append(r, knots[out].at)
						i = out ^ 1 // along the line to its neighbour
						break
					}
				}
			}
			out[side] = append(out[side], r)
		}
		for i, r := range rings {
			if whole(on, i, len(r)) && right(r[0]) == (side == 1) {
				out[side] = append(out[side], r)
			}
		}
	}
	return out
}

// whole reports whether a ring is not cut.
func whole(on map[[2]int]int, ring, n int) bool {
	for k := range n {
		if _, is := on[[2]int{ring, k}]; is {
			return false
		}
	}
	return true
}

// nested are the rings as areas: those that run counter-clockwise are walls,
// each of the others a hole of the wall around it.
func nested(rings []ring, back func(ring) ring) []area {
	var areas []area
	var holes []ring
	for _, r := range rings {
		switch r = tidy(back(r)); {
		case len(r) < 3:
		case r.doubled() > 0:
			areas = append(areas, area{wall: r})
		case r.doubled() < 0:
			holes = append(holes, r)
		}
	}
	for _, h := range holes {
		for i := range areas {
			if areas[i].wall.holds(h) {
				areas[i].holes = append(areas[i].holes, h)
				break
			}
		}
	}
	return areas
}

// tidy is the ring without points that repeat the one before.
func tidy(r ring) ring {
	var out ring
	for _, p := range r {
		if len(out) == 0 || out[len(out)-1] != p {
			out = append(out, p)
		}
	}
	for len(out) > 1 && out[0] == out[len(out)-1] {
		out = out[:len(out)-1]
	}
	return out
}

// doubled is twice the signed area, in grid steps.
func (r ring) doubled() float64 {
	sum := 0.0
	for i, p := range r {
		q := r[(i+1)%len(r)]
		a, b := r2.Vec{X: float64(p.x - r[0].x), Y: float64(p.y - r[0].y)}, r2.Vec{X: float64(q.x - r[0].x), Y: float64(q.y - r[0].y)}
		sum += plane.Cross(a, b)
	}
	return sum
}

// holds reports whether a hole lies in the ring: most of its points, for some
// may lie on the line along which the ring was cut.
func (r ring) holds(hole ring) bool {
	in := 0
	for _, p := range hole {
		if r.around(p) {
			in++
		}
	}
	return 2*in > len(hole)
}

// around reports whether the ring goes around a point.
func (r ring) around(p dot) bool {
	in := false
	for i, a := range r {
		b := r[(i+1)%len(r)]
		if (a.y > p.y) != (b.y > p.y) && float64(p.x-a.x) < float64(b.x-a.x)*float64(p.y-a.y)/float64(b.y-a.y) {
			in = !in
		}
	}
	return in
}
