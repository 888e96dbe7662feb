package orbit

import (
	"math"
	"slices"

	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/spatial/r2"
)

// chain is a closed polygon with its corners on the wall, at the arclengths s,
// each on its loop. Its length as a function of s is stationary where every
// corner reflects: there it is an orbit (G. D. Birkhoff, Acta Math. 50, 359,
// 1927, from memory).
type chain struct {
	t    *table.Table
	s    []float64
	loop []int

	frame  []curve.Frame
	u      []r2.Vec  // unit vector from corner i to the next
	l      []float64 // length of that chord
	g      []float64 // derivative of the length by s[i]: p arriving less p leaving
	length float64
	trial  []float64
}

func newChain(t *table.Table, s []float64) *chain {
	n := len(s)
	c := &chain{t: t, s: append([]float64(nil), s...), loop: make([]int, n),
		frame: make([]curve.Frame, n), u: make([]r2.Vec, n), l: make([]float64, n), g: make([]float64, n), trial: make([]float64, n)}
	for i, x := range s {
		c.s[i] = t.Wrap(x)
		c.loop[i] = t.LoopAt(c.s[i])
	}
	return c
}

// wrap brings x into the loop's arclength.
func wrap(l *table.Loop, x float64) float64 {
	turn := l.S1 - l.S0
	if x < l.S0 || x >= l.S1 {
		x -= turn * math.Floor((x-l.S0)/turn)
		if x >= l.S1 || x < l.S0 {
			x = l.S0
		}
	}
	return x
}

// apart is the step in s from a to b the short way round the loop.
func apart(l *table.Loop, a, b float64) float64 {
	turn := l.S1 - l.S0
	return math.Remainder(b-a, turn)
}

// fill computes chords and gradient; false where two corners in turn coincide
// or the wall has no curvature.
func (c *chain) fill() bool {
	n := len(c.s)
	for i, x := range c.s {
		c.frame[i] = c.t.At(x)
		if math.IsInf(c.frame[i].Curvature, 0) || math.IsNaN(x) {
			return false
		}
	}
	c.length = 0
	for i := range n {
		d := r2.Sub(c.frame[(i+1)%n].Point, c.frame[i].Point)
		l := math.Sqrt(plane.Dot(d, d))
		if !(l > 0) {
			return false
		}
		c.u[i], c.l[i] = r2.Scale(1/l, d), l
		c.length += l
	}
	for i := range n {
		tan := c.frame[i].Tangent
		c.g[i] = plane.Dot(tan, c.u[(i+n-1)%n]) - plane.Dot(tan, c.u[i])
	}
	return true
}

// miss is the greatest miss of the law of reflection, in p.
func (c *chain) miss() float64 {
	worst := 0.0
	for _, g := range c.g {
		worst = math.Max(worst, math.Abs(g))
	}
	return worst
}

// leastChord, relative to the length of the wall, is the shortest chord of an
// orbit. A shorter one lies in a corner, where a ray that only seems to close
// misses by the length of the chord: that must be told from the rounding of
// its direction, 1e-15 over the chord.
const leastChord = 1e-6

// short is 1, or, with a chord shorter than a thousandth of the wall, how often
// it goes into that: the rounding of places (1e-16 of the wall) turns such a
// chord by so much more.
func (c *chain) short() float64 { return math.Max(1, 1e-3*c.t.Length()/slices.Min(c.l)) }

// cosines are those of the chords to the normal at corner i, both positive
// where the chords lie inside.
func (c *chain) cosines(i int) (in, out float64) {
	n := len(c.s)
	normal := c.frame[i].Normal()
	return -plane.Dot(normal, c.u[(i+n-1)%n]), plane.Dot(normal, c.u[i])
}

// hessian is the second derivative of the length: by the chord formula
// d2|x-y| = (cos^2/l - kappa cos) ds^2 at each end, cos cos'/l across.
func (c *chain) hessian() *mat.SymDense {
	n := len(c.s)
	h := mat.NewSymDense(n, nil)
	for i := range n {
		j := (i + 1) % n
		_, ci := c.cosines(i)
		cj, _ := c.cosines(j)
		ki, kj, l := c.frame[i].Curvature, c.frame[j].Curvature, c.l[i]
		h.SetSym(i, i, h.At(i, i)+ci*(ci/l-ki))
		h.SetSym(j, j, h.At(j, j)+cj*(cj/l-kj))
		h.SetSym(i, j, h.At(i, j)+ci*cj/l)
	}
	return h
}
