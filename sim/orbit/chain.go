package orbit

import (
	"math"
	"slices"

	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// chain is a closed polygon with its corners on the wall, each on its loop. Its
// length as a function of their arclengths is stationary where every corner
// reflects: there it is an orbit (G. D. Birkhoff, Acta Math. 50, 359, 1927, from
// memory).
//
// A corner is held as its piece and that piece's private parameter: a step in
// the arclength is then taken to first order, which is all that Newton's method
// asks, and no arclength need be inverted on the way. s is brought up to date by
// settle.
type chain struct {
	t    *table.Table
	s    []float64
	at   []corner
	loop []int

	frame  []curve.Frame
	speed  []float64 // |dr/dt| by the private parameter
	u      []r2.Vec  // unit vector from corner i to the next
	l      []float64 // length of that chord
	g      []float64 // derivative of the length by s[i]: p arriving less p leaving
	length float64
	trial  []float64
	rows   []float64 // scratch of solve
}

// corner is a place on the wall.
type corner struct {
	piece int
	t     float64
}

func newChain(t *table.Table, s []float64) *chain {
	c := blankChain(t, len(s))
	for i, x := range s {
		c.put(i, t.Wrap(x))
	}
	return c
}

// seedChain is a chain near the places s, each within its loop.
func seedChain(t *table.Table, s []float64, of chart) *chain {
	c := blankChain(t, len(s))
	for i, x := range s {
		c.rough(i, x, of)
	}
	return c
}

func blankChain(t *table.Table, n int) *chain {
	f := make([]float64, 5*n)
	return &chain{t: t, s: f[:n:n], speed: f[n : 2*n : 2*n], l: f[2*n : 3*n : 3*n], g: f[3*n : 4*n : 4*n], trial: f[4*n:],
		at: make([]corner, n), loop: make([]int, n), frame: make([]curve.Frame, n), u: make([]r2.Vec, n)}
}

// put places corner i at the arclength s in [0, L).
func (c *chain) put(i int, s float64) {
	piece, local := c.t.Locate(s)
	p := &c.t.Pieces()[piece]
	c.s[i], c.at[i], c.loop[i] = s, corner{piece, p.T(local)}, p.Loop
}

// rough places corner i near the arclength s in [0, L), by the chart.
func (c *chain) rough(i int, s float64, of chart) {
	piece, local := c.t.Locate(s)
	p := &c.t.Pieces()[piece]
	at := chartSteps * local / p.Length
	k := min(int(at), chartSteps-1)
	row := of[piece*(chartSteps+1):]
	c.s[i], c.at[i], c.loop[i] = s, corner{piece, row[k] + (at-float64(k))*(row[k+1]-row[k])}, p.Loop
}

// chart is the private parameter of each piece at equal steps of its arclength:
// enough to start Newton's method from, at a tenth of the cost.
type chart []float64

// chartSteps leaves a miss of some 1e-4 of a piece's length.
const chartSteps = 32

func chartOf(t *table.Table) chart {
	var all chart
	for i := range t.Pieces() {
		p := &t.Pieces()[i]
		for k := range chartSteps + 1 {
			all = append(all, p.T(p.Length*float64(k)/chartSteps))
		}
	}
	return all
}

// shift moves corner i along its loop by ds, to first order.
func (c *chain) shift(i int, ds float64) {
	a := &c.at[i]
	p := &c.t.Pieces()[a.piece]
	if t := a.t + p.Sense()*ds/c.speed[i]; (t-p.T0)*(p.T1-t) > 0 {
		a.t = t
		return
	}
	c.put(i, wrap(&c.t.Loops()[c.loop[i]], p.S0+p.S(a.t)+ds))
}

// settle brings the arclengths up to date.
func (c *chain) settle() {
	for i, a := range c.at {
		p := &c.t.Pieces()[a.piece]
		c.s[i] = wrap(&c.t.Loops()[c.loop[i]], p.S0+p.S(a.t))
	}
}

// look fills the frame of corner i; false where the wall has no curvature.
func (c *chain) look(i int) bool {
	a := c.at[i]
	p := &c.t.Pieces()[a.piece]
	switch p.Kind {
	case curve.Segment:
		c.frame[i], c.speed[i] = p.FrameAt(a.t), 1
	case curve.Circle:
		c.frame[i], c.speed[i] = p.FrameAt(a.t), p.Radius
	default:
		at, d1, d2 := p.Jet(a.t)
		v := math.Sqrt(plane.Dot(d1, d1))
		if !(v > 0) {
			return false
		}
		sense := p.Sense()
		c.frame[i] = curve.Frame{Point: at, Tangent: r2.Scale(sense/v, d1), Curvature: sense * plane.Cross(d1, d2) / (v * v * v)}
		c.speed[i] = v
	}
	return !math.IsInf(c.frame[i].Curvature, 0) && !math.IsNaN(a.t)
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
	for i := range c.at {
		if !c.look(i) {
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
// d2|x-y| = (cos^2/l - kappa cos) ds^2 at each end, cos cos'/l across. put is
// called with what adds to an entry (i, j), for one of (i, j) and (j, i).
func (c *chain) hessian(put func(i, j int, v float64)) {
	n := len(c.s)
	for i := range n {
		j := (i + 1) % n
		_, ci := c.cosines(i)
		cj, _ := c.cosines(j)
		ki, kj, l := c.frame[i].Curvature, c.frame[j].Curvature, c.l[i]
		put(i, i, ci*(ci/l-ki))
		put(j, j, cj*(cj/l-kj))
		put(i, j, ci*cj/l)
	}
}
