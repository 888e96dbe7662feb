package shape

import (
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Smoothed is the wall through the points on a periodic cubic spline over the
// chord length: tangent and curvature are continuous (Ahlberg, Nilson and
// Walsh, The Theory of Splines and Their Applications, 1967, ch. 2). Repeated
// neighbours count once; there must be three points or more.
func Smoothed(points []r2.Vec) Freeform {
	points = distinct(points)
	if len(points) < 3 {
		return NewPolygonal(points)
	}
	return NewFreeform(splined(points))
}

// splined are the nodes of the spline through three points or more, each apart
// from the next.
func splined(points []r2.Vec) nodes {
	n := len(points)
	step := make([]float64, n)
	for i := range step {
		step[i] = r2.Norm(r2.Sub(points[(i+1)%n], points[i]))
	}
	flow := make([]r2.Vec, n)
	sx, sy := make([]float64, n), make([]float64, n)
	for i, p := range points {
		sx[i], sy[i] = p.X, p.Y
	}
	c := newCyclic(step)
	sx, sy = c.slopes(sx), c.slopes(sy)
	for i := range flow {
		flow[i] = r2.Vec{X: sx[i], Y: sy[i]}
	}
	return flowing(points, flow, step)
}

// flowOn changes the handles of a wall that is fair all round, whose nodes were
// moved, as much as those of the spline through the nodes change: a spline
// stays the spline, and what was shaped by hand stays.
func (n nodes) flowOn(before nodes) {
	if len(n) < 3 || n.fault() != nil || before.fault() != nil {
		return
	}
	now, was := make([]r2.Vec, len(n)), make([]r2.Vec, len(n))
	for i := range n {
		if n[i].Joint != Fair || n[i].Span != Curved {
			return
		}
		now[i], was[i] = n[i].At, before[i].At
	}
	a, b := splined(was), splined(now)
	for i := range n {
		n[i].In = r2.Add(n[i].In, r2.Sub(b[i].In, a[i].In))
		n[i].Out = r2.Add(n[i].Out, r2.Sub(b[i].Out, a[i].Out))
	}
}

// flowing are the nodes of the cubic spline through the points with the given
// derivatives by its parameter, which grows by step[i] from point i to the next.
func flowing(points, flow []r2.Vec, step []float64) []Node {
	n := len(points)
	list := make([]Node, n)
	for i := range list {
		list[i] = Node{
			At: points[i], Joint: Fair, Span: Curved,
			In: r2.Scale(-step[(i+n-1)%n]/3, flow[i]), Out: r2.Scale(step[i]/3, flow[i]),
		}
	}
	return list
}

// distinct is the closed chain of points without those that lie on the one
// before, or are no numbers.
func distinct(points []r2.Vec) []r2.Vec {
	var out []r2.Vec
	least := 0.0
	for _, p := range points {
		if plane.Finite(p) {
			out = append(out, p)
		}
	}
	least = coincident * plane.Diagonal(plane.Around(out...))
	points, out = out, nil
	for _, p := range points {
		if len(out) == 0 || r2.Norm(r2.Sub(p, out[len(out)-1])) > least {
			out = append(out, p)
		}
	}
	for len(out) > 1 && r2.Norm(r2.Sub(out[0], out[len(out)-1])) <= least {
		out = out[:len(out)-1]
	}
	return out
}

// cyclic is the system of equations that a periodic cubic spline's derivatives
// d solve where its second derivative is continuous at every knot i, between
// steps h[i-1] and h[i]:
//
//	d[i-1]/h[i-1] + 2 (1/h[i-1] + 1/h[i]) d[i] + d[i+1]/h[i]
//	    = 3 (v[i]-v[i-1])/h[i-1]² + 3 (v[i+1]-v[i])/h[i]²
//
// It is tridiagonal but for its corners, which Sherman and Morrison's formula
// takes out (Golub and Van Loan, Matrix Computations, 2.1.4).
type cyclic struct {
	inv  []float64 // 1/h
	diag []float64
	fix  []float64 // the tridiagonal part's answer to the corner vector
	last float64   // second entry of the corner row
	over float64   // what the correction is divided by
}

// newCyclic takes three steps or more, each above 0.
func newCyclic(step []float64) *cyclic {
	n := len(step)
	c := &cyclic{inv: make([]float64, n), diag: make([]float64, n)}
	for i, h := range step {
		c.inv[i] = 1 / h
	}
	for i := range step {
		c.diag[i] = 2 * (c.inv[(i+n-1)%n] + c.inv[i])
	}
	corner, gamma := c.inv[n-1], -c.diag[0]
	c.diag[0] -= gamma
	c.diag[n-1] -= corner * corner / gamma
	u := make([]float64, n)
	u[0], u[n-1] = gamma, corner
	c.fix, c.last = c.thomas(u), corner/gamma
	c.over = 1 + c.fix[0] + c.last*c.fix[n-1]
	return c
}

// slopes are the derivatives at the knots of the spline through the values.
func (c *cyclic) slopes(v []float64) []float64 {
	n := len(v)
	rhs := make([]float64, n)
	for i := range v {
		before, after := c.inv[(i+n-1)%n], c.inv[i]
		rhs[i] = 3 * (before*before*(v[i]-v[(i+n-1)%n]) + after*after*(v[(i+1)%n]-v[i]))
	}
	d := c.thomas(rhs)
	k := (d[0] + c.last*d[n-1]) / c.over
	for i := range d {
		d[i] -= k * c.fix[i]
	}
	return d
}

// thomas solves the tridiagonal part, which is diagonally dominant.
func (c *cyclic) thomas(rhs []float64) []float64 {
	n := len(rhs)
	up, d := make([]float64, n), make([]float64, n)
	pivot := c.diag[0]
	d[0] = rhs[0] / pivot
	for i := 1; i < n; i++ {
		up[i-1] = c.inv[i-1] / pivot
		pivot = c.diag[i] - c.inv[i-1]*up[i-1]
		d[i] = (rhs[i] - c.inv[i-1]*d[i-1]) / pivot
	}
	for i := n - 2; i >= 0; i-- {
		d[i] -= up[i] * d[i+1]
	}
	return d
}
