package outline

import (
	"math"
	"sort"

	"gonum.org/v1/gonum/spatial/r2"
)

// basis are the cubic B-splines on knots from 0 to 1: of an open spline with
// fourfold knots at the ends, so that it starts at its first control point and
// ends at its last; of a closed one continued by the period 1 (de Boor, A
// Practical Guide to Splines, 1978, ch. IX and X).
type basis struct {
	knot   []float64 // with three more at either end
	size   int       // of the list of control points
	closed bool
}

func newBasis(knot []float64, closed bool) *basis {
	n := len(knot) - 1
	b := &basis{size: n + 3, closed: closed}
	if closed {
		b.size = n
	}
	for i := -3; i <= n+3; i++ {
		switch {
		case i >= 0 && i <= n:
			b.knot = append(b.knot, knot[i])
		case closed:
			k := ((i % n) + n) % n
			b.knot = append(b.knot, knot[k]+math.Floor(float64(i)/float64(n)))
		case i < 0:
			b.knot = append(b.knot, 0)
		default:
			b.knot = append(b.knot, 1)
		}
	}
	return b
}

// index is that of a control point counted past the end of a closed list.
func (b *basis) index(i int) int { return i % b.size }

// weights are those of the control points k to k+3 at u in [0, 1].
func (b *basis) weights(u float64) (k int, w [4]float64) {
	n := len(b.knot) - 7
	k = min(max(sort.SearchFloat64s(b.knot[3:4+n], u)-1, 0), n-1)
	i := k + 3
	w[0] = 1
	var left, right [4]float64
	for j := 1; j <= 3; j++ {
		left[j], right[j] = u-b.knot[i+1-j], b.knot[i+j]-u
		saved := 0.0
		for r := range j {
			t := w[r] / (right[r+1] + left[j-r])
			w[r] = saved + right[r+1]*t
			saved = left[j-r] * t
		}
		w[j] = saved
	}
	return k, w
}

// spline is the one with the control points.
func (b *basis) spline(control func(i int) r2.Vec) *spline {
	n := len(b.knot) - 7
	s := &spline{knot: b.knot[3 : 4+n], at: make([]r2.Vec, n+1), flow: make([]r2.Vec, n+1), closed: b.closed}
	for k := range n + 1 {
		if b.closed && k == n {
			s.at[k], s.flow[k] = s.at[0], s.flow[0]
			break
		}
		j, w := b.weights(s.knot[k])
		for i := range 4 {
			s.at[k] = r2.Add(s.at[k], r2.Scale(w[i], control(j+i)))
		}
		s.flow[k] = b.flow(j, s.knot[k], control)
	}
	return s
}

// flow is the derivative in interval k at u: a quadratic spline of the
// differences of the control points.
func (b *basis) flow(k int, u float64, control func(i int) r2.Vec) r2.Vec {
	var d [3]r2.Vec
	for i := range d {
		width := b.knot[k+i+4] - b.knot[k+i+1]
		d[i] = r2.Scale(3/width, r2.Sub(control(k+i+1), control(k+i)))
	}
	// de Boor's recursion of degree 2 on knots k+1 to k+6 of the list.
	t := b.knot
	mix := func(a, c r2.Vec, lo, hi float64) r2.Vec {
		f := (u - lo) / (hi - lo)
		return r2.Add(r2.Scale(1-f, a), r2.Scale(f, c))
	}
	e0, e1 := mix(d[0], d[1], t[k+2], t[k+4]), mix(d[1], d[2], t[k+3], t[k+5])
	return mix(e0, e1, t[k+3], t[k+4])
}
