package sim

import (
	"math"

	"gonum.org/v1/gonum/spatial/r2"
)

// grid finds the first of many round obstacles that a ray meets: squares of
// equal size over the table, each with the obstacles that reach into it, looked
// at in the order in which the ray passes through them.
type grid struct {
	origin r2.Vec
	side   float64
	perX   float64 // 1/side
	nx, ny int
	first  []int32 // by square, and one more: where its obstacles begin in posts
	posts  []disc  // an obstacle stands here once for each square that it reaches into
}

// gridMargin, relative to the table's size, is how much wider a square is taken
// when obstacles are put into it than when a ray walks through it: far beyond
// the rounding of the walk.
const gridMargin = 1e-9

// newGrid is the grid of the discs, about one a square.
func newGrid(box r2.Box, size float64, discs []disc) *grid {
	wide, high := box.Max.X-box.Min.X, box.Max.Y-box.Min.Y
	g := &grid{origin: box.Min, side: math.Sqrt(wide * high / float64(len(discs)))}
	// Rows and columns that just cover the box, as those of a lattice do.
	g.side = max(wide/math.Ceil(wide/g.side-0.01), high/math.Ceil(high/g.side-0.01))
	g.perX = 1 / g.side
	g.nx, g.ny = max(1, int(math.Ceil(wide/g.side-gridMargin))), max(1, int(math.Ceil(high/g.side-gridMargin)))
	in := make([][]int32, g.nx*g.ny)
	for k := range discs {
		d := &discs[k]
		reach := d.radius + gridMargin*size
		x0, x1 := g.column(d.cx-reach), g.column(d.cx+reach)
		y0, y1 := g.row(d.cy-reach), g.row(d.cy+reach)
		for y := y0; y <= y1; y++ {
			for x := x0; x <= x1; x++ {
				if g.gap(d, x, y) <= reach {
					in[y*g.nx+x] = append(in[y*g.nx+x], int32(k))
				}
			}
		}
	}
	g.first = make([]int32, 1, len(in)+1)
	for _, list := range in {
		for _, k := range list {
			g.posts = append(g.posts, discs[k])
		}
		g.first = append(g.first, int32(len(g.posts)))
	}
	return g
}

// column and row are where a coordinate lies, held to the grid.
func (g *grid) column(x float64) int { return min(max(int((x-g.origin.X)*g.perX), 0), g.nx-1) }
func (g *grid) row(y float64) int    { return min(max(int((y-g.origin.Y)*g.perX), 0), g.ny-1) }

// gap is the distance from the disc's centre to the square.
func (g *grid) gap(d *disc, x, y int) float64 {
	lo := r2.Vec{X: g.origin.X + g.side*float64(x), Y: g.origin.Y + g.side*float64(y)}
	dx := max(lo.X-d.cx, d.cx-lo.X-g.side, 0)
	dy := max(lo.Y-d.cy, d.cy-lo.Y-g.side, 0)
	return math.Hypot(dx, dy)
}

// shade looks for the first obstacle that the lane meets, and reports whether
// there is one.
func (g *grid) shade(l *lane) bool {
	px, py, dx, dy := l.last.Point.X, l.last.Point.Y, l.last.Dir.X, l.last.Dir.Y
	x, y := g.column(px), g.row(py)
	// The distances at which the ray passes into the next column and row, and
	// those between two of them.
	perX, perY := 1/math.Abs(dx), 1/math.Abs(dy)
	stepX, stepY := 1, 1
	gapX, gapY := g.origin.X+g.side*float64(x+1)-px, g.origin.Y+g.side*float64(y+1)-py
	if dx < 0 {
		stepX, gapX = -1, g.side-gapX
	}
	if dy < 0 {
		stepY, gapY = -1, g.side-gapY
	}
	nextX, nextY := gapX*perX, gapY*perY
	best, hit := math.Inf(1), uint64(0)
	l.still = 0
	for {
		at := y*g.nx + x
		for _, o := range g.posts[g.first[at]:g.first[at+1]] {
			qx, qy := px-o.cx, py-o.cy
			along, off := float64(dx*qx)+float64(dy*qy), float64(dy*qx)-float64(dx*qy)
			rest := (o.radius - off) * (o.radius + off)
			if rest < o.still || along > 0 {
				if rest > -o.still && along < 0 {
					l.still = 1
					return true
				}
				continue
			}
			if u := -along - math.Sqrt(rest); u < best && u > 0 && o.span != uint64(l.last.Piece) {
				best, hit = u, o.span
			}
		}
		out := min(nextX, nextY)
		if best <= out {
			break
		}
		if nextX < nextY {
			x, nextX = x+stepX, nextX+g.side*perX
		} else {
			y, nextY = y+stepY, nextY+g.side*perY
		}
		if uint(x) >= uint(g.nx) || uint(y) >= uint(g.ny) {
			break
		}
	}
	if math.IsInf(best, 1) {
		return false
	}
	l.met, l.u = found(round, hit), math.Float64bits(best)
	return true
}
