package sim

import (
	"math"
)

// turned is the angle (radians) from the start of the round span s to the
// direction (x, y) from its centre, a unit vector, along the span: in
// [0, 2 pi), and 0 where the direction lies before the start by rounding.
func (s *span) turned(x, y float64) float64 {
	a := angle(float64(x*s.startX)+float64(y*s.startY), float64(x*s.sideX)+float64(y*s.sideY))
	if a > s.width && a-s.width > 2*math.Pi-a {
		return 0
	}
	return a
}

// sectors is the number of steps of a sine from 0 to 1 at which angles are
// tabled.
const sectors = 64

var sector [2 * sectors]struct{ sin, cos, angle float64 }

// octant turns the angle of an octant's mirror image into that of the octant:
// bit 0 is set where the sine is negative, bit 1 where the cosine is, bit 2
// where the sine is the greater.
var octant = [8]struct{ base, sign float64 }{
	{0, 1}, {2 * math.Pi, -1}, {math.Pi, -1}, {math.Pi, 1},
	{math.Pi / 2, -1}, {3 * math.Pi / 2, 1}, {math.Pi / 2, 1}, {3 * math.Pi / 2, -1},
}

func init() {
	for i := range sectors + 1 {
		s := &sector[i]
		s.sin = float64(i) / sectors
		s.cos, s.angle = math.Sqrt((1-s.sin)*(1+s.sin)), math.Asin(s.sin)
	}
}

// angle is the angle (radians, in [0, 2 pi]) of the unit vector (cos, sin), to
// some 2e-16: the table's nearest angle, and from there the arcsine's series,
// of which three terms leave 1e-16 of 1/128.
func angle(cos, sin float64) float64 {
	c, s := math.Float64bits(cos)&^signBit, math.Float64bits(sin)&^signBit
	lo, hi := math.Float64frombits(min(c, s)), math.Float64frombits(max(c, s))
	t := &sector[int(lo*sectors+0.5)&127]
	x := float64(lo*t.cos) - float64(hi*t.sin)
	x2 := x * x
	o := octant[math.Float64bits(sin)>>63|math.Float64bits(cos)>>63<<1|(c-s)>>63<<2]
	series := 1.0/6 + float64(x2*(3.0/40+float64(x2*(15.0/336))))
	return o.base + float64(o.sign*(t.angle+(x+float64(x*x2*series))))
}
