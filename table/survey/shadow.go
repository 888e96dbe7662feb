package survey

import (
	"cmp"
	"math"
	"slices"

	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// band is the rectangle from lo to hi along the line from the point from, and
// from it to high on its left.
type band struct {
	from, along  r2.Vec
	lo, hi, high float64
}

// on is x in the band's own coordinates.
func (b band) on(x r2.Vec) (along, up float64) {
	d := r2.Sub(x, b.from)
	return plane.Dot(b.along, d), plane.Cross(b.along, d)
}

// box is a box that holds the band.
func (b band) box() r2.Box {
	at := func(x, y float64) r2.Vec {
		return r2.Add(b.from, r2.Add(r2.Scale(x, b.along), r2.Scale(y, plane.Left(b.along))))
	}
	return plane.Around(at(b.lo, 0), at(b.hi, 0), at(b.lo, b.high), at(b.hi, b.high))
}

// shadowTol is the length, relative to the table's size, to which a shadow's
// ends and a band's edges are kept.
const shadowTol = 1e-10

// shadow is the length of the band over which there is wall between its two
// long edges: each part is halved until its ends bound what it covers.
func (n *net) shadow(b band) float64 {
	fine := shadowTol * n.size
	box := b.box()
	var covered []Stretch
	var take func(p curve.Part) bool
	take = func(p curve.Part) bool {
		px, py := b.on(p.P)
		vx, vy := b.on(p.V)
		qx, qy := b.on(p.Q)
		left, right := math.Min(px, qx), math.Max(px, qx)
		under, over := min(py, vy, qy), max(py, vy, qy)
		if over <= fine || under >= b.high-fine || max(right, vx) <= b.lo || min(left, vx) >= b.hi {
			return false
		}
		inside := under > fine && over < b.high-fine && vx >= left && vx <= right
		if inside || p.Size() < fine {
			covered = append(covered, Stretch{math.Max(left, b.lo), math.Min(right, b.hi)})
			return false
		}
		one, two := p.Halves()
		take(one)
		take(two)
		return false
	}
	n.any(0, func(x r2.Box) bool { return !plane.Apart(x, box, 0) }, take)
	slices.SortFunc(covered, func(x, y Stretch) int { return cmp.Compare(x.S0, y.S0) })
	sum := 0.0
	for _, s := range joined(covered) {
		sum += math.Max(0, s.S1-s.S0)
	}
	return sum
}
