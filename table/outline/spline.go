package outline

import (
	"math"
	"slices"
	"sort"

	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/spatial/r2"
)

// spline is a cubic spline with continuous curvature over [0, 1], given by its
// points and derivatives at the knots: 0 to 1, both named; of a closed one the
// last is the first again.
type spline struct {
	knot     []float64
	at, flow []r2.Vec
	closed   bool
}

// spaced are the knots of k intervals: even in the length where no spline is
// known, else in equal shares of its length and of the root of its curvature.
func spaced(s *spline, k int) []float64 {
	knot := make([]float64, k+1)
	for i := range knot {
		knot[i] = float64(i) / float64(k)
	}
	if s == nil {
		return knot
	}
	n := 16 * (len(s.knot) - 1)
	weight := make([]float64, n+1)
	root := make([]float64, n+1)
	total := 0.0
	for i := range root {
		_, d1, d2 := s.jet(float64(i) / float64(n))
		v2 := plane.Dot(d1, d1)
		root[i] = math.Sqrt(math.Abs(plane.Cross(d1, d2)) / math.Sqrt(v2+1e-300)) // of curvature times speed
		total += root[i] / float64(n+1)
	}
	for i := 1; i <= n; i++ {
		weight[i] = weight[i-1] + (1 + (root[i]+root[i-1])/(2*total+1e-300))
	}
	for i, j := 1, 0; i < k; i++ {
		want := weight[n] * float64(i) / float64(k)
		for weight[j+1] < want {
			j++
		}
		knot[i] = (float64(j) + (want-weight[j])/(weight[j+1]-weight[j])) / float64(n)
	}
	return knot
}

// find is the interval that holds u in [0, 1], and the fraction of it.
func (s *spline) find(u float64) (int, float64) {
	k := min(max(sort.SearchFloat64s(s.knot, u)-1, 0), len(s.knot)-2)
	return k, (u - s.knot[k]) / (s.knot[k+1] - s.knot[k])
}

// jet is the point at u with two derivatives.
func (s *spline) jet(u float64) (p, d1, d2 r2.Vec) {
	k, x := s.find(u)
	h := s.knot[k+1] - s.knot[k]
	a, b := s.at[k], r2.Add(s.at[k], r2.Scale(h/3, s.flow[k]))
	c, d := r2.Sub(s.at[k+1], r2.Scale(h/3, s.flow[k+1])), s.at[k+1]
	q := [4]r2.Vec{a, b, c, d}
	bent := func(i int) r2.Vec { return r2.Add(r2.Sub(q[i+2], q[i+1]), r2.Sub(q[i], q[i+1])) }
	d2 = r2.Scale(6/(h*h), plane.Lerp(bent(0), bent(1), x))
	return bezier(q, x), r2.Scale(1/h, flow(q, x)), d2
}

// foot moves u by steps of Newton's method towards the foot of the
// perpendicular from q, and returns the distance there.
func (s *spline) foot(u float64, q r2.Vec, steps int) (float64, float64) {
	reach := 0.2 / float64(len(s.knot))
	best, at := math.Inf(1), u
	for range steps + 1 {
		p, d1, d2 := s.jet(u)
		miss := r2.Sub(q, p)
		if d := r2.Norm(miss); d < best {
			best, at = d, u
		}
		bend := plane.Dot(d1, d1) - plane.Dot(miss, d2)
		if bend <= 0 {
			break
		}
		u += math.Min(math.Max(plane.Dot(miss, d1)/bend, -reach), reach)
		if s.closed {
			u -= math.Floor(u)
		}
		u = math.Min(math.Max(u, 0), 1)
	}
	return at, best
}

// fitted is the spline on the knots along the points, some rounds of least
// squares, and the greatest distance of a point; nil where the points leave it
// open. Ends of an open row are kept.
func fitted(row []r2.Vec, u0, knot []float64, closed bool) (*spline, float64) {
	u := slices.Clone(u0)
	var best *spline
	least := math.Inf(1)
	for range rounds {
		s := solved(row, u, knot, closed)
		if s == nil {
			break
		}
		worst := 0.0
		for i, q := range row {
			var d float64
			u[i], d = s.foot(u[i], q, 1)
			worst = math.Max(worst, d)
		}
		if worst < least {
			best, least = s, worst
		}
	}
	return best, least
}

// stiffness weighs the second differences of the control points, against a
// point's share: enough to decide an interval without points, too little to
// be felt in one that has them.
const stiffness = 1e-9

// solved is the spline of least squares at given parameters.
func solved(row []r2.Vec, u, knot []float64, closed bool) *spline {
	b := newBasis(knot, closed)
	n := b.size
	centre := r2.Vec{}
	for _, p := range row {
		centre = r2.Add(centre, r2.Scale(1/float64(len(row)), p))
	}
	normal, rhs := mat.NewSymDense(n, nil), mat.NewDense(n, 2, nil)
	put := func(i, j int, v float64) {
		if i <= j {
			normal.SetSym(i, j, normal.At(i, j)+v)
		}
	}
	for r, p := range row {
		k, w := b.weights(u[r])
		q := r2.Sub(p, centre)
		for i := range 4 {
			ci := b.index(k + i)
			rhs.Set(ci, 0, rhs.At(ci, 0)+w[i]*q.X)
			rhs.Set(ci, 1, rhs.At(ci, 1)+w[i]*q.Y)
			for j := range 4 {
				put(ci, b.index(k+j), w[i]*w[j])
			}
		}
	}
	bent := [3]float64{1, -2, 1}
	soft := stiffness * float64(len(row)) / float64(n)
	for c := range n {
		if !closed && c+2 >= n {
			break
		}
		for i := range 3 {
			for j := range 3 {
				put(b.index(c+i), b.index(c+j), soft*bent[i]*bent[j])
			}
		}
	}
	if !closed {
		fix(normal, rhs, 0, r2.Sub(row[0], centre))
		fix(normal, rhs, n-1, r2.Sub(row[len(row)-1], centre))
	}
	var chol mat.Cholesky
	var x mat.Dense
	if !chol.Factorize(normal) || chol.SolveTo(&x, rhs) != nil {
		return nil
	}
	return b.spline(func(i int) r2.Vec {
		return r2.Add(centre, r2.Vec{X: x.At(b.index(i), 0), Y: x.At(b.index(i), 1)})
	})
}

// fix holds unknown c to a value.
func fix(normal *mat.SymDense, rhs *mat.Dense, c int, v r2.Vec) {
	n := normal.SymmetricDim()
	for i := range n {
		if i != c {
			w := normal.At(i, c)
			rhs.Set(i, 0, rhs.At(i, 0)-w*v.X)
			rhs.Set(i, 1, rhs.At(i, 1)-w*v.Y)
			normal.SetSym(i, c, 0)
		}
	}
	normal.SetSym(c, c, 1)
	rhs.Set(c, 0, v.X)
	rhs.Set(c, 1, v.Y)
}

// laid is the spline as nodes, with the distance of every point of the row.
func (s *spline) laid(row []r2.Vec, closed bool) laid {
	l := laid{miss: make([]float64, len(row))}
	var u float64
	for i, v := range shares(row, closed) {
		// From its share of the length, and from where the point before was.
		a, da := s.foot(v, row[i], 8)
		b, db := s.foot(u, row[i], 8)
		if da <= db {
			u, l.miss[i] = a, da
		} else {
			u, l.miss[i] = b, db
		}
	}
	for k := range len(s.knot) - 1 {
		h := s.knot[k+1] - s.knot[k]
		n := shape.Node{At: s.at[k], Joint: shape.Smooth, Span: shape.Curved, Out: r2.Scale(h/3, s.flow[k])}
		if k == 0 && !closed {
			n.Joint = shape.Corner
		} else {
			before := s.knot[1+(k+len(s.knot)-2)%(len(s.knot)-1)] - s.knot[(k+len(s.knot)-2)%(len(s.knot)-1)]
			n.In = r2.Scale(-before/3, s.flow[k])
		}
		l.nodes = append(l.nodes, n)
	}
	last := len(s.knot) - 1
	l.in = r2.Scale(-(s.knot[last]-s.knot[last-1])/3, s.flow[last])
	return l
}
