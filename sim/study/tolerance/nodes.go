package tolerance

import (
	"math"

	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// nodes are those of the moved loop on splines with steps no greater than step,
// and the greatest distance found, half way between two nodes, of the splines
// from what they follow.
func (m *moving) nodes(runs []tract, step float64) (list []shape.Node, miss float64, err error) {
	if err := m.tooBent(step); err != nil {
		return nil, 0, err
	}
	if runs[0].closed {
		return m.ring(&runs[0], step)
	}
	var in r2.Vec
	for i := range runs {
		r := &runs[i]
		n := max(4, int(math.Ceil((r.x1-r.x0)/step)))
		h := (r.x1 - r.x0) / float64(n)
		points := make([]r2.Vec, n+1)
		for k := range points {
			points[k] = m.at(r, r.x0+float64(k)*h)
		}
		points[0], points[n] = r.ends[0], r.ends[1]
		flow := clamped(points, h, m.slope(r, 0, h), m.slope(r, 1, h))
		for k := range n {
			node := shape.Node{At: points[k], Joint: shape.Fair, Span: shape.Curved, In: r2.Scale(-h/3, flow[k]), Out: r2.Scale(h/3, flow[k])}
			if k == 0 {
				node.Joint, node.In = shape.Smooth, in
				if r.corner[0] {
					node.Joint = shape.Corner
				}
			}
			list = append(list, node)
			miss = math.Max(miss, m.missed(r, r.x0+(float64(k)+0.5)*h, points[k], points[k+1], r2.Scale(h/8, r2.Sub(flow[k], flow[k+1]))))
		}
		in = r2.Scale(-h/3, flow[n])
	}
	list[0].In = in
	return list, miss, nil
}

// ring is nodes for a loop that is smooth all round.
func (m *moving) ring(r *tract, step float64) (list []shape.Node, miss float64, err error) {
	n := int(math.Ceil(r.x1 / step))
	points := make([]r2.Vec, n)
	for k := range points {
		points[k] = m.at(r, r.x1*float64(k)/float64(n))
	}
	list = shape.Smoothed(points).Nodes()
	if len(list) != n {
		return nil, 0, refuse("The moved wall of a loop has nodes that lie on each other; make the error smaller.")
	}
	// NewFreeform may have turned the loop: walk it as the points do.
	forwards := list[1].At == points[1]
	for k := range n {
		a, b := list[k], list[(k+1)%n]
		out, in := a.Out, b.In
		if !forwards {
			a, b = list[(n-k)%n], list[n-k-1]
			out, in = a.In, b.Out
		}
		miss = math.Max(miss, m.missed(r, r.x1*(float64(k)+0.5)/float64(n), a.At, b.At, r2.Scale(3.0/8, r2.Add(out, in))))
	}
	return list, miss, nil
}

// missed is the distance across the wall of the middle of a cubic from the wall
// that it follows: the middle of its chord and the bow of its handles.
func (m *moving) missed(r *tract, x float64, a, b, bow r2.Vec) float64 {
	middle := r2.Add(plane.Lerp(a, b, 0.5), bow)
	return math.Abs(plane.Cross(plane.Unit(r2.Sub(b, a)), r2.Sub(m.at(r, x), middle)))
}

// slope is the derivative of the moved wall by x at an end of a tract, by a
// difference of third order on a small part of a step.
func (m *moving) slope(r *tract, end int, step float64) r2.Vec {
	d := 1e-3 * step
	x := r.x0
	if end == 1 {
		x, d = r.x1, -d
	}
	var sum r2.Vec
	for k, w := range [4]float64{-11.0 / 6, 3, -1.5, 1.0 / 3} {
		sum = r2.Add(sum, r2.Scale(w/d, m.at(r, x+float64(k)*d)))
	}
	return sum
}

// clamped are the derivatives at the knots of the cubic spline through points a
// step h apart, with given derivatives at its ends (C. de Boor, A Practical
// Guide to Splines, 1978, ch. IV): d[i-1] + 4 d[i] + d[i+1] = 3 (v[i+1] -
// v[i-1]) / h, solved by elimination.
func clamped(v []r2.Vec, h float64, first, last r2.Vec) []r2.Vec {
	n := len(v) - 1
	d := make([]r2.Vec, n+1)
	d[0], d[n] = first, last
	factor := make([]float64, n+1)
	for i := 1; i < n; i++ {
		right := r2.Scale(3/h, r2.Sub(v[i+1], v[i-1]))
		if i == n-1 {
			right = r2.Sub(right, last)
		}
		below := 4 - factor[i-1]
		factor[i] = 1 / below
		d[i] = r2.Scale(1/below, r2.Sub(right, d[i-1]))
	}
	for i := n - 2; i > 0; i-- {
		d[i] = r2.Sub(d[i], r2.Scale(factor[i], d[i+1]))
	}
	return d
}
