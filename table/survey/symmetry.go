package survey

import (
	"fmt"
	"math"
	"math/cmplx"

	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/spatial/r2"
)

// Symmetry is the group of rotations and reflections about Centre that map the
// wall onto itself, found from the wall: whether coats follow it is not looked
// at.
type Symmetry struct {
	Centre r2.Vec
	// Order is the number of rotations, the identity counted; 0 where every
	// rotation is one.
	Order int
	// Mirrors are the directions (radians in [0, pi)) of the mirror lines; none
	// are listed where every line through Centre is one.
	Mirrors []float64
	// Within is the distance to which the wall maps onto itself.
	Within float64
}

// Name is the group in Schoenflies' notation: C1 none, D1 one mirror line.
func (s Symmetry) Name() string {
	switch {
	case s.Order == 0:
		return "O(2)"
	case len(s.Mirrors) > 0:
		return fmt.Sprintf("D%d", s.Order)
	}
	return fmt.Sprintf("C%d", s.Order)
}

const (
	// symmetryTol is Within, relative to the table's size: a thousand times the
	// error of a point of the wall.
	symmetryTol = 1e-9
	// emptyMoment is the moment, relative to its bound, that counts as none: far
	// above the rounding of the sums, below that of a wall that misses its
	// symmetry by symmetryTol.
	emptyMoment = 1e-11
	// mostMoments bounds the order of rotation that is looked for, unless the
	// wall has more pieces.
	mostMoments = 96
	// nodes is the number of points of Gauss's rule a stretch of wall.
	nodes = 16
)

// symmetryOf looks at the moments of the wall about its centroid, the integrals
// of z^k ds and z^k |z|^2 ds, z = x + iy. A rotation by a full turn over n leaves them only where
// n divides k, and a mirror line at the angle theta makes arg = k theta, up to
// half turns: the first moment that is not zero leaves few candidates, and each
// is tried on the wall itself.
func symmetryOf(t *table.Table, n *net) Symmetry {
	at, weight := spread(t)
	s := Symmetry{Within: symmetryTol * n.size, Order: 1}
	sum := 0.0
	for i, z := range at {
		s.Centre = r2.Add(s.Centre, r2.Scale(weight[i], z))
		sum += weight[i]
	}
	s.Centre = r2.Scale(1/sum, s.Centre)
	for _, x := range []*float64{&s.Centre.X, &s.Centre.Y} {
		if math.Abs(*x) < 1e-3*s.Within {
			*x = 0 // rounding of a wall drawn about the origin
		}
	}
	if concentric(t, s) {
		s.Order = 0
		return s
	}
	k, angle := firstMoment(at, weight, s.Centre, max(mostMoments, 2*len(t.Pieces())))
	if k == 0 {
		return s
	}
	marks := marksOf(t)
	for order := k; order > 1; order-- {
		turn := plane.Similarity{Angle: 2 * math.Pi / float64(order), Scale: 1}
		if k%order == 0 && s.maps(n, marks, turn.Turn) {
			s.Order = order
			break
		}
	}
	for j := range k / s.Order {
		line := plane.Polar(angle/float64(k) + math.Pi*float64(j)/float64(k))
		mirrored := func(v r2.Vec) r2.Vec { return r2.Sub(r2.Scale(2*plane.Dot(v, line), line), v) }
		if s.maps(n, marks, mirrored) {
			s.setMirrors(math.Atan2(line.Y, line.X))
			break
		}
	}
	return s
}

// setMirrors fills the lines from one of them: they are half a turn over Order
// apart.
func (s *Symmetry) setMirrors(one float64) {
	step := math.Pi / float64(s.Order)
	first := math.Mod(math.Mod(one, step)+step, step)
	if step-first < 1e-9 {
		first = 0
	}
	if first < 1e-12 {
		first = 0 // rounding of a line along x
	}
	for j := range s.Order {
		s.Mirrors = append(s.Mirrors, first+step*float64(j))
	}
}

// maps reports whether f, about the centre, brings every mark of the wall to
// within the tolerance of the wall.
func (s *Symmetry) maps(n *net, marks []r2.Vec, f func(r2.Vec) r2.Vec) bool {
	for _, m := range marks {
		if !n.within(r2.Add(s.Centre, f(r2.Sub(m, s.Centre))), s.Within, 0.01*s.Within) {
			return false
		}
	}
	return true
}

// marksOf are points of the wall at which a symmetry is tried: on every piece,
// at places that no symmetry of the piece prefers.
func marksOf(t *table.Table) []r2.Vec {
	each := max(3, 240/len(t.Pieces()))
	var marks []r2.Vec
	for i := range t.Pieces() {
		for k := range each {
			marks = append(marks, placeAt(t, i, t.Pieces()[i].Length*(float64(k)+0.382)/float64(each)).At)
		}
	}
	return marks
}

// spread are points of the wall with weights that integrate over arclength.
func spread(t *table.Table) (at []r2.Vec, weight []float64) {
	x, w := make([]float64, nodes), make([]float64, nodes)
	quad.Legendre{}.FixedLocations(x, w, 0, 1)
	panels := max(1, 128/len(t.Pieces()))
	for i := range t.Pieces() {
		p := &t.Pieces()[i]
		h := p.Length / float64(panels)
		for k := range panels {
			for j := range x {
				at = append(at, placeAt(t, i, h*(float64(k)+x[j])).At)
				weight = append(weight, h*w[j])
			}
		}
	}
	return at, weight
}

// firstMoment is the least k from 1 to most whose moment is not zero, and its
// argument; 0 where all are.
func firstMoment(at []r2.Vec, weight []float64, centre r2.Vec, most int) (k int, angle float64) {
	z, power := make([]complex128, len(at)), make([]complex128, len(at))
	far := 0.0
	for i, p := range at {
		far = math.Max(far, distance(p, centre))
		z[i] = complex(p.X-centre.X, p.Y-centre.Y)
	}
	for i := range z {
		z[i] /= complex(far, 0)
		power[i] = complex(weight[i], 0)
	}
	for k = 1; k <= most; k++ {
		sum, far2, bound := 0i, 0i, 0.0
		for i := range z {
			power[i] *= z[i]
			square := real(z[i])*real(z[i]) + imag(z[i])*imag(z[i])
			sum += power[i]
			far2 += power[i] * complex(square, 0)
			bound += cmplx.Abs(power[i])
		}
		switch {
		case cmplx.Abs(far2) > emptyMoment*bound:
			return k, cmplx.Phase(far2)
		case k > 1 && cmplx.Abs(sum) > emptyMoment*bound: // by the centre's choice the first is zero
			return k, cmplx.Phase(sum)
		}
	}
	return 0, 0
}

// concentric reports whether the wall is full circles about the centre.
func concentric(t *table.Table, s Symmetry) bool {
	for i := range t.Pieces() {
		p := &t.Pieces()[i]
		round := p.Kind == curve.Circle || p.Kind == curve.Oval && p.Radius == p.Minor
		if !p.Whole() || !round || distance(p.Centre, s.Centre) > s.Within {
			return false
		}
	}
	return true
}
