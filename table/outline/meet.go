package outline

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// meetChords is the number of chords of a stretch in which a crossing is
// looked for; the crossing itself is found on the formulas.
const meetChords = 96

// meeting is where the stretch before a corner and the one after it cross, as
// fractions of both: the crossing nearest to the corner.
func meeting(before, after *stretch) (f, g float64, ok bool) {
	chords := func(s *stretch) []r2.Vec {
		n := meetChords
		if s.kind == Line {
			n = 1
		}
		p := make([]r2.Vec, n+1)
		for k := range p {
			p[k], _ = s.at(float64(k) / float64(n))
		}
		return p
	}
	a, b := chords(before), chords(after)
	for i := len(a) - 2; i >= 0; i-- {
		for j := 0; j < len(b)-1; j++ {
			x, y, met := cross(a[i], a[i+1], b[j], b[j+1])
			if !met {
				continue
			}
			f = (float64(i) + x) / float64(len(a)-1)
			g = (float64(j) + y) / float64(len(b)-1)
			return newton(before, after, f, g)
		}
	}
	return 0, 0, false
}

// newton brings a crossing of chords onto the curves.
func newton(a, b *stretch, f, g float64) (float64, float64, bool) {
	for range 12 {
		p, dp := a.at(f)
		q, dq := b.at(g)
		miss := r2.Sub(q, p)
		den := plane.Cross(dp, dq)
		if den == 0 {
			return f, g, false
		}
		df, dg := plane.Cross(miss, dq)/den, plane.Cross(miss, dp)/den
		f, g = f+df, g+dg
		if math.Abs(df) < 1e-15 && math.Abs(dg) < 1e-15 {
			break
		}
	}
	return f, g, f > 0 && f < 1 && g > 0 && g < 1
}

// cross is where the segments ab and cd cross, as fractions of both.
func cross(a, b, c, d r2.Vec) (x, y float64, met bool) {
	ab, cd, ac := r2.Sub(b, a), r2.Sub(d, c), r2.Sub(c, a)
	den := plane.Cross(ab, cd)
	if den == 0 {
		return 0, 0, false
	}
	x, y = plane.Cross(ac, cd)/den, plane.Cross(ac, ab)/den
	return x, y, x >= 0 && x <= 1 && y >= 0 && y <= 1
}

// apartChords is the number of chords of a stretch in which the moved wall is
// searched for crossings.
const apartChords = 48

// stillApart refuses a bias after which the wall crosses itself, loops meet, or
// a loop has turned inside out.
func stillApart(t *table.Table, chains []chain, bias float64) error {
	u := t.Design().Unit
	loops := make([][]r2.Vec, len(chains))
	for i, c := range chains {
		for k := range c.list {
			n := apartChords
			if c.list[k].kind == Line {
				n = 1
			}
			for j := range n {
				p, _ := c.list[k].at(float64(j) / float64(n))
				loops[i] = append(loops[i], p)
			}
		}
	}
	switch at, met := Crossing(loops); met {
	case Untold:
		return refuse("The wall has too many long sides side by side for a bias; take it without one.")
	case Met:
		return refuseAt(at, "With a bias of %.4g %s the wall meets itself at (%.6g, %.6g) %s; choose a smaller bias.", bias, u, at.X, at.Y, u)
	}
	for i, c := range chains {
		if area := swept(loops[i]); (area > 0) != (c.side == shape.Outer) {
			at := loops[i][0]
			return refuseAt(at, "A bias of %.4g %s leaves nothing of the loop at (%.6g, %.6g) %s; choose a smaller bias.", bias, u, at.X, at.Y, u)
		}
	}
	return nil
}

// swept is the signed area of a closed polygon.
func swept(p []r2.Vec) float64 {
	sum := 0.0
	for i := range p {
		a, b := r2.Sub(p[i], p[0]), r2.Sub(p[(i+1)%len(p)], p[0])
		sum += 0.5 * plane.Cross(a, b)
	}
	return sum
}

// Meeting says what is known of edges that might cross.
type Meeting uint8

// The meetings: no two edges cross; two do; there were too many long edges
// side by side to tell.
const (
	Apart Meeting = iota
	Met
	Untold
)

// pairBudget is the number of pairs of edges that are compared: some seconds of
// work, a thousand times what outlines take that do not run to and fro.
const pairBudget = 30_000_000

// Crossing is a place at which two edges of closed polygons cross, each at a
// point inside it. Edges are looked up in a grid of about as many cells, so
// that the work grows little faster than their number.
func Crossing(loops [][]r2.Vec) (r2.Vec, Meeting) {
	g := newCells(loops)
	budget := pairBudget
	for _, l := range loops {
		for i, a := range l {
			if at, met := g.add(edge{a, l[(i+1)%len(l)]}, &budget); met != Apart {
				return at, met
			}
		}
	}
	return r2.Vec{}, Apart
}

type edge struct{ a, b r2.Vec }

// cells is a grid in which every edge is entered where it passes.
type cells struct {
	n          int
	min        r2.Vec
	wide, high float64
	in         [][]edge
}

func newCells(loops [][]r2.Vec) *cells {
	box, count := plane.Around(), 0
	for _, l := range loops {
		count += len(l)
		box = plane.Join(box, plane.Around(l...))
	}
	n := max(1, min(int(math.Sqrt(float64(count))), 2048))
	return &cells{n: n, min: box.Min, wide: (box.Max.X - box.Min.X) / float64(n), high: (box.Max.Y - box.Min.Y) / float64(n), in: make([][]edge, n*n)}
}

func (g *cells) index(v, lo, step float64) int {
	if !(step > 0) {
		return 0
	}
	return max(0, min(int((v-lo)/step), g.n-1))
}

// add compares an edge with those of the cells it passes, and enters it.
func (g *cells) add(e edge, budget *int) (r2.Vec, Meeting) {
	j0, j1 := g.index(math.Min(e.a.Y, e.b.Y), g.min.Y, g.high), g.index(math.Max(e.a.Y, e.b.Y), g.min.Y, g.high)
	for j := j0; j <= j1; j++ {
		x0, x1 := math.Min(e.a.X, e.b.X), math.Max(e.a.X, e.b.X)
		if j1 > j0 { // the part of the edge in this row
			y0, y1 := g.min.Y+float64(j)*g.high, g.min.Y+float64(j+1)*g.high
			f0, f1 := (y0-e.a.Y)/(e.b.Y-e.a.Y), (y1-e.a.Y)/(e.b.Y-e.a.Y)
			f0, f1 = math.Max(0, math.Min(f0, f1)), math.Min(1, math.Max(f0, f1))
			p, q := plane.Lerp(e.a, e.b, f0).X, plane.Lerp(e.a, e.b, f1).X
			x0, x1 = math.Min(p, q)-1e-9*g.wide, math.Max(p, q)+1e-9*g.wide
		}
		for k := g.index(x0, g.min.X, g.wide); k <= g.index(x1, g.min.X, g.wide); k++ {
			here := &g.in[j*g.n+k]
			for _, o := range *here {
				if at, met := crossed(e.a, e.b, o.a, o.b); met {
					return at, Met
				}
			}
			if *budget -= len(*here); *budget < 0 {
				return e.a, Untold
			}
			*here = append(*here, e)
		}
	}
	return r2.Vec{}, Apart
}

// crossed is where two segments cross at a point inside both.
func crossed(a, b, c, d r2.Vec) (r2.Vec, bool) {
	ab, cd := r2.Sub(b, a), r2.Sub(d, c)
	if plane.Cross(ab, r2.Sub(c, a))*plane.Cross(ab, r2.Sub(d, a)) >= 0 ||
		plane.Cross(cd, r2.Sub(a, c))*plane.Cross(cd, r2.Sub(b, c)) >= 0 {
		return r2.Vec{}, false
	}
	return plane.Lerp(a, b, plane.Cross(r2.Sub(c, a), cd)/plane.Cross(ab, cd)), true
}
