package shape

import (
	"math"
	"sort"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/spatial/r2"
)

// periodic is a cubic spline of period 1 through the points at its knots, which
// ascend in [0, 1), with the derivatives flow that make it twice continuously
// differentiable.
type periodic struct {
	knot     []float64
	at, flow []r2.Vec
}

// step is the length of the interval from knot k to the next.
func (p *periodic) step(k int) float64 {
	if k+1 < len(p.knot) {
		return p.knot[k+1] - p.knot[k]
	}
	return p.knot[0] + 1 - p.knot[k]
}

// find is the interval that holds u in [0, 1), and the fraction of it.
func (p *periodic) find(u float64) (k int, x float64) {
	k = sort.SearchFloat64s(p.knot, u)
	if k == len(p.knot) || p.knot[k] > u {
		k--
	}
	if k < 0 {
		k, u = len(p.knot)-1, u+1
	}
	return k, (u - p.knot[k]) / p.step(k)
}

// jet is the point at u with the first two derivatives.
func (p *periodic) jet(u float64) (at, d1, d2 r2.Vec) {
	k, x := p.find(u)
	h, j := p.step(k), (k+1)%len(p.knot)
	w := hermite(x)
	sum := func(w [4]float64, scale float64) r2.Vec {
		return r2.Scale(scale, r2.Add(
			r2.Add(r2.Scale(w[0], p.at[k]), r2.Scale(w[1], p.at[j])),
			r2.Add(r2.Scale(h*w[2], p.flow[k]), r2.Scale(h*w[3], p.flow[j]))))
	}
	return sum(w[0], 1), sum(w[1], 1/h), sum(w[2], 1/(h*h))
}

// hermite are the weights of the values and slopes at 0 and 1, in the order
// v(0), v(1), v'(0), v'(1), for the value and two derivatives at x.
func hermite(x float64) [3][4]float64 {
	return [3][4]float64{
		{1 - x*x*(3-2*x), x * x * (3 - 2*x), x * (1 - x) * (1 - x), -x * x * (1 - x)},
		{-6 * x * (1 - x), 6 * x * (1 - x), (1 - x) * (1 - 3*x), x * (3*x - 2)},
		{12*x - 6, 6 - 12*x, 6*x - 4, 6*x - 2},
	}
}

// fitted is the spline on the knots with the least weighted sum of squared
// distances at equal parameter. It fails where the samples leave it open.
func (c *samples) fitted(knot []float64) (*periodic, bool) {
	n := len(knot)
	p := &periodic{knot: knot, at: make([]r2.Vec, n), flow: make([]r2.Vec, n)}
	steps := make([]float64, n)
	for k := range steps {
		steps[k] = p.step(k)
	}
	slope := slopeMatrix(steps)
	a, b := mat.NewDense(len(c.at), n, nil), mat.NewDense(len(c.at), 2, nil)
	for j, q := range c.at {
		k, x := p.find(c.u[j])
		k1, w, row := (k+1)%n, hermite(x)[0], a.RawRowView(j)
		for m := range row {
			row[m] = c.weight[j] * steps[k] * (w[2]*slope[k*n+m] + w[3]*slope[k1*n+m])
		}
		row[k] += c.weight[j] * w[0]
		row[k1] += c.weight[j] * w[1]
		b.SetRow(j, []float64{c.weight[j] * q.X, c.weight[j] * q.Y})
	}
	var qr mat.QR
	var x mat.Dense
	qr.Factorize(a)
	if err := qr.SolveTo(&x, false, b); err != nil {
		return nil, false
	}
	for k := range p.at {
		p.at[k] = r2.Vec{X: x.At(k, 0), Y: x.At(k, 1)}
	}
	for k := range p.flow {
		for m, v := range p.at {
			p.flow[k] = r2.Add(p.flow[k], r2.Scale(slope[k*n+m], v))
		}
	}
	return p, true
}

// slopeMatrix takes the values at the knots to the slopes there, row by row.
func slopeMatrix(steps []float64) []float64 {
	n := len(steps)
	c := newCyclic(steps)
	m := make([]float64, n*n)
	unit := make([]float64, n)
	for k := range unit {
		unit[k] = 1
		for i, d := range c.slopes(unit) {
			m[i*n+k] = d
		}
		unit[k] = 0
	}
	return m
}

// project moves every sample's parameter to the foot of its perpendicular on
// the spline, by one step of Newton's method, and returns the mean fourth power
// of the distances: what is lowered so that the greatest falls.
func (c *samples) project(p *periodic) (fourth float64) {
	for j, q := range c.at {
		var d float64
		c.u[j], d = p.nearer(c.u[j], q)
		fourth += c.weight[j] * d * d * d * d
	}
	return fourth / float64(len(c.at))
}

// greatest is the greatest distance of a point of the stroke from the spline.
func (c *samples) greatest(p *periodic) float64 {
	worst := 0.0
	for i, q := range c.raw {
		u, best := c.u[c.home[i]], math.Inf(1)
		for range 3 {
			var d float64
			u, d = p.nearer(u, q)
			best = math.Min(best, d)
		}
		worst = math.Max(worst, best)
	}
	return worst
}

// nearer is the parameter after a step of Newton's method from u towards the
// foot of the perpendicular from q, held to a tenth of the mean interval, and
// the distance there.
func (p *periodic) nearer(u float64, q r2.Vec) (moved, dist float64) {
	reach := 0.1 / float64(len(p.knot))
	at, d1, d2 := p.jet(u)
	miss := r2.Sub(q, at)
	if bend := plane.Dot(d1, d1) - plane.Dot(miss, d2); bend > 0 {
		u += math.Min(math.Max(plane.Dot(miss, d1)/bend, -reach), reach)
		if u -= math.Floor(u); u >= 1 {
			u = 0
		}
		at, _, _ = p.jet(u)
	}
	return u, r2.Norm(r2.Sub(q, at))
}

// nodes are the nodes of the spline as cubics.
func (p *periodic) nodes() []Node {
	steps := make([]float64, len(p.knot))
	for k := range steps {
		steps[k] = p.step(k)
	}
	return flowing(p.at, p.flow, steps)
}
