package outline

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r2"
)

// keyholed is the area as one ring: from the leftmost point of each hole, the
// farthest left first, a slit leads left to the edge it meets.
func (m *masking) keyholed(a area) (ring, error) {
	r := a.wall
	leftmost := func(h ring) int {
		at := 0
		for i, p := range h {
			if p.x < h[at].x || p.x == h[at].x && p.y < h[at].y {
				at = i
			}
		}
		return at
	}
	holes := slices.Clone(a.holes)
	slices.SortFunc(holes, func(p, q ring) int {
		return int(max(-1, min(1, p[leftmost(p)].x-q[leftmost(q)].x)))
	})
	for _, h := range holes {
		i := leftmost(h)
		p := h[i]
		edge, x := -1, math.Inf(-1)
		for k, b := range r {
			c := r[(k+1)%len(r)]
			if b.y == c.y || min(b.y, c.y) > p.y || max(b.y, c.y) < p.y {
				continue
			}
			at := float64(b.x) + float64(c.x-b.x)*float64(p.y-b.y)/float64(c.y-b.y)
			if at <= float64(p.x) && at > x {
				edge, x = k, at
			}
		}
		if edge < 0 {
			v := r2.Vec{X: float64(p.x) * m.grid, Y: float64(p.y) * m.grid}
			return nil, refuseAt(v, "On a grid of %.3g the obstacle at (%.6g, %.6g) lies on the wall; choose a finer grid.", m.grid, v.X, v.Y)
		}
		q := dot{int64(math.Round(x)), p.y}
		m.bent = math.Max(m.bent, math.Abs(x-math.Round(x)))
		joined := slices.Clone(r[:edge+1])
		joined = append(joined, q)
		joined = append(joined, h[i:]...)
		joined = append(joined, h[:i+1]...)
		joined = append(joined, q)
		r = append(joined, r[edge+1:]...)
	}
	return tidy(r), nil
}
