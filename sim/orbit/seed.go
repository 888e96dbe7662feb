package orbit

import "math"

const (
	// seedMiss is the miss in p of the law of reflection with which a seed is
	// given up: those that lead to an orbit begin within a cell of it.
	seedMiss = 0.25
	// stride, relative to the length of the wall, bounds Newton's steps.
	stride = 0.05
)

// knownPlace, relative to the length of the wall, is how near a seed lies to an
// orbit of the book to be left alone. Two orbits nearer to each other than that
// are found only if the first seed of each is nearer still.
const knownPlace = 1e-4

const (
	// reach is how many cells from its node a state is looked for; it covers
	// the cell's corners with a margin for what is not linear.
	reach = 1.6
	// nearMarginal is the ratio of the two singular values of the equation
	// below which only the better determined part of the solution is asked to
	// lie within reach, and what of the other part does not is left out: near
	// a marginal family one part is all but free.
	nearMarginal = 0.05
)

// meeting is the linear equation A (x, y) = b for the displacement, in cells,
// with which the two ends meet.
type meeting struct{ a11, a12, a21, a22, b1, b2 float64 }

// solve answers the displacement; ok is false where it lies out of reach.
func (m *meeting) solve() (x, y float64, ok bool) {
	p := m.a11*m.a11 + m.a21*m.a21
	q := m.a11*m.a12 + m.a21*m.a22
	r := m.a12*m.a12 + m.a22*m.a22
	angle := 0.5 * math.Atan2(2*q, p-r) // of the greater singular direction
	sin, cos := math.Sincos(angle)
	along := func(c, s float64) (part, square float64) {
		u, v := m.a11*c+m.a12*s, m.a21*c+m.a22*s
		square = u*u + v*v
		return (u*m.b1 + v*m.b2) / square, square
	}
	great, square1 := along(cos, sin)
	if !(math.Abs(great) <= reach) {
		return 0, 0, false
	}
	small, square2 := along(-sin, cos)
	if !(math.Abs(small) <= reach) {
		if square2 > nearMarginal*nearMarginal*square1 {
			return 0, 0, false
		}
		small = 0
	}
	return great*cos - small*sin, great*sin + small*cos, true
}
