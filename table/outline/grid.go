package outline

import (
	"math"
	"slices"

	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// MaskPoints is the greatest number of points of one polygon in a stream file
// for masks, the closing repeat of the first taken off (the format counts 8191
// with it; common practice).
const MaskPoints = 8190

// Masked are polygons without holes that together cover what a closed outline
// of Chords on a grid encloses: obstacles are reached by keyholes, slits of no
// width, and polygons of more than most points are cut along grid lines. Every
// corner is on the grid; an edge that is cut bends by at most half of it, which
// is the bent that comes back. Without an outer wall each obstacle is a polygon
// of its own.
func Masked(o *Outline, grid float64, most int) (polygons []Path, bent float64, err error) {
	m := masking{grid: grid, most: most}
	var walls, holes []ring
	for _, p := range o.Paths {
		r := m.onGrid(p.Points())
		switch {
		case len(r) < 3:
			return nil, 0, refuseAt(p.Start, "On a grid of %.3g nothing is left of the loop at (%.6g, %.6g); choose a finer grid.", grid, p.Start.X, p.Start.Y)
		case p.Side == shape.Outer:
			walls = append(walls, r)
		default:
			holes = append(holes, r)
		}
	}
	if len(walls) == 0 {
		for _, h := range holes {
			slices.Reverse(h)
			walls = append(walls, h)
		}
		holes = nil
	}
	for _, w := range walls {
		if err := m.take(area{w, holes}, 0); err != nil {
			return nil, 0, err
		}
	}
	for _, r := range m.done {
		p := Path{Side: shape.Outer}
		for i, q := range r {
			v := r2.Vec{X: float64(q.x) * grid, Y: float64(q.y) * grid}
			if i == 0 {
				p.Start = v
			} else {
				p.Steps = append(p.Steps, Step{Kind: Line, To: v})
			}
		}
		p.Steps = append(p.Steps, Step{Kind: Line, To: p.Start})
		polygons = append(polygons, p)
	}
	return polygons, m.bent * grid, nil
}

// dot is a point of the grid, ring a closed polygon of them, area a ring with
// holes.
type dot struct{ x, y int64 }
type ring []dot
type area struct {
	wall  ring
	holes []ring
}

type masking struct {
	grid float64
	most int
	done []ring
	bent float64 // in grid steps
}

func (m *masking) onGrid(points []r2.Vec) ring {
	r := make(ring, 0, len(points))
	for _, p := range points {
		d := dot{int64(math.Round(p.X / m.grid)), int64(math.Round(p.Y / m.grid))}
		if len(r) == 0 || r[len(r)-1] != d {
			r = append(r, d)
		}
	}
	for len(r) > 1 && r[0] == r[len(r)-1] {
		r = r[:len(r)-1]
	}
	return r
}

func (a *area) size() int {
	n := len(a.wall)
	for _, h := range a.holes {
		n += len(h) + 3
	}
	return n
}

// take cuts an area in two as long as it has too many points, and joins its
// holes to its wall.
func (m *masking) take(a area, depth int) error {
	if a.size() <= m.most {
		r, err := m.keyholed(a)
		if err == nil {
			m.done = append(m.done, r)
		}
		return err
	}
	if depth > 60 {
		return refuse("The outline has too many corners for the grid; choose a finer grid or a greater chord error.")
	}
	for _, half := range m.halves(a) {
		if err := m.take(half, depth+1); err != nil {
			return err
		}
	}
	return nil
}
