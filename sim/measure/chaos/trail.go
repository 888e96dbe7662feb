package chaos

import (
	"math"

	"cavitywright/sim"
)

// vector is a tangent vector carried along an orbit off mirrors: a ray
// infinitely near it. Its length is taken across the ray, as
//
//	(ds cos chi / l)^2 + (dp / cos chi)^2
//
// with the table's mean chord l: shift and turn of the beam. On a circle it
// grows at most as the path, however near to grazing the orbit is. The vector
// is not needed by its direction, but by its growth.
type vector struct {
	unit   float64 // l, in the table's unit
	ds, dp float64
	log    float64 // of what was taken out of the vector
}

func newVector(tr *sim.Tracer) vector { return vector{unit: sim.MeanChord(tr.Table())} }

// Bounds within which a vector is left as it is: one bounce multiplies it by
// some 1e14 at most (two grazing cosines of 1e-7), and 1e300 is the largest
// square.
const (
	vectorHigh = 1e100
	vectorLow  = 1e-100
)

// open starts at an orbit's opening bounce with a vector of length 1, half of
// it shift and half turn.
func (v *vector) open(b *sim.Bounce) {
	cos := cosine(b.P)
	v.ds, v.dp, v.log = math.Sqrt2/2*v.unit/cos, math.Sqrt2/2*cos, 0
}

// step carries the vector over one step of the orbit.
func (v *vector) step(j sim.Jacobian) {
	v.ds, v.dp = j.Apply(v.ds, v.dp)
	if m := math.Max(math.Abs(v.ds)/v.unit, math.Abs(v.dp)); m > vectorHigh || m < vectorLow {
		v.log += math.Log(m)
		v.ds, v.dp = v.ds/m, v.dp/m
	}
}

// growth is the logarithm of the vector's length at the bounce b, which the
// orbit stands at.
func (v *vector) growth(b *sim.Bounce) float64 {
	cos := cosine(b.P)
	return v.log + math.Log(math.Hypot(v.ds*cos/v.unit, v.dp/cos))
}

func cosine(p float64) float64 { return math.Sqrt((1 - p) * (1 + p)) }

// beam is two tangent vectors, one of shift and one of turn, each of length 1
// at first. What the longest of all vectors of length 1 has grown to is told by
// both: no direction is left out by chance, and a map of it has no false
// creases.
type beam struct {
	unit float64
	a, b [2]float64 // ds, dp
	log  float64
}

func newBeam(tr *sim.Tracer) beam { return beam{unit: sim.MeanChord(tr.Table())} }

func (m *beam) open(b *sim.Bounce) {
	cos := cosine(b.P)
	m.a, m.b, m.log = [2]float64{m.unit / cos, 0}, [2]float64{0, cos}, 0
}

func (m *beam) step(j sim.Jacobian) {
	m.a[0], m.a[1] = j.Apply(m.a[0], m.a[1])
	m.b[0], m.b[1] = j.Apply(m.b[0], m.b[1])
	if x := math.Abs(m.a[1]) + math.Abs(m.b[1]); x > vectorHigh {
		m.log += math.Log(x)
		m.a[0], m.a[1], m.b[0], m.b[1] = m.a[0]/x, m.a[1]/x, m.b[0]/x, m.b[1]/x
	}
}

// growth is the logarithm of the greatest length: the larger singular value of
// the product of the steps, whose determinant is 1.
func (m *beam) growth(b *sim.Bounce) float64 {
	cos := cosine(b.P)
	c := cos / m.unit
	f := float64(m.a[0]*m.a[0])*c*c + float64(m.b[0]*m.b[0])*c*c +
		float64(m.a[1]*m.a[1])/(cos*cos) + float64(m.b[1]*m.b[1])/(cos*cos)
	q := 0.0 // twice the determinant by the sum of squares
	if m.log == 0 {
		q = math.Min(2/f, 1)
	}
	return m.log + math.Log(f*(1+math.Sqrt(1-q*q))/2)/2
}
