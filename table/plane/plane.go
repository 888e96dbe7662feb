// Package plane holds what gonum's spatial/r2 lacks for walls: products that
// are never fused, the left normal, similarity transforms and boxes of points.
// Points and vectors are r2.Vec, y up.
package plane

import (
	"math"

	"gonum.org/v1/gonum/spatial/r2"
)

// Dot is a·b. The products are rounded before the sum, so that the value is
// the same on machines that fuse multiply and add.
func Dot(a, b r2.Vec) float64 { return float64(a.X*b.X) + float64(a.Y*b.Y) }

// Cross is the z component of a × b, rounded as Dot. It is positive when b
// points to the left of a.
func Cross(a, b r2.Vec) float64 { return float64(a.X*b.Y) - float64(a.Y*b.X) }

// Left is v turned a quarter turn to the left.
func Left(v r2.Vec) r2.Vec { return r2.Vec{X: -v.Y, Y: v.X} }

// Unit is v scaled to length 1. v must not be the null vector.
func Unit(v r2.Vec) r2.Vec {
	n := 1 / math.Sqrt(Dot(v, v))
	return r2.Vec{X: v.X * n, Y: v.Y * n}
}

// Polar is the unit vector at the angle (radians) from +x.
func Polar(angle float64) r2.Vec {
	s, c := math.Sincos(angle)
	return r2.Vec{X: c, Y: s}
}

// Angle is the signed angle from a to b in (-pi, pi], positive to the left.
func Angle(a, b r2.Vec) float64 { return math.Atan2(Cross(a, b), Dot(a, b)) }

// Lerp is the point at the fraction f from a to b; exactly b at f = 1.
func Lerp(a, b r2.Vec, f float64) r2.Vec {
	return r2.Vec{X: a.X*(1-f) + b.X*f, Y: a.Y*(1-f) + b.Y*f}
}

// Finite reports whether both coordinates are numbers.
func Finite(v r2.Vec) bool {
	return !math.IsNaN(v.X) && !math.IsInf(v.X, 0) && !math.IsNaN(v.Y) && !math.IsInf(v.Y, 0)
}

// Similarity is a scaling by Scale (> 0), then a rotation by Angle (radians,
// counter-clockwise), then a shift.
type Similarity struct {
	Shift r2.Vec
	Angle float64
	Scale float64
}

// Identity leaves every point where it is.
func Identity() Similarity { return Similarity{Scale: 1} }

// Apply is the image of the point p.
func (m Similarity) Apply(p r2.Vec) r2.Vec { return r2.Add(m.Shift, r2.Scale(m.Scale, m.Turn(p))) }

// Turn rotates the direction v without scaling it.
func (m Similarity) Turn(v r2.Vec) r2.Vec {
	if m.Angle == 0 {
		return v
	}
	s, c := math.Sincos(m.Angle)
	return r2.Vec{X: float64(c*v.X) - float64(s*v.Y), Y: float64(s*v.X) + float64(c*v.Y)}
}

// Back is the point whose image is p.
func (m Similarity) Back(p r2.Vec) r2.Vec {
	inv := Similarity{Angle: -m.Angle, Scale: 1}
	return r2.Scale(1/m.Scale, inv.Turn(r2.Sub(p, m.Shift)))
}

// Around is the smallest box that holds all the points; the empty box of no
// points has Min > Max, and joins with any other.
func Around(points ...r2.Vec) r2.Box {
	b := r2.Box{Min: r2.Vec{X: math.Inf(1), Y: math.Inf(1)}, Max: r2.Vec{X: math.Inf(-1), Y: math.Inf(-1)}}
	for _, p := range points {
		b.Min.X, b.Min.Y = math.Min(b.Min.X, p.X), math.Min(b.Min.Y, p.Y)
		b.Max.X, b.Max.Y = math.Max(b.Max.X, p.X), math.Max(b.Max.Y, p.Y)
	}
	return b
}

// Join is the smallest box that holds both boxes.
func Join(a, b r2.Box) r2.Box {
	return r2.Box{
		Min: r2.Vec{X: math.Min(a.Min.X, b.Min.X), Y: math.Min(a.Min.Y, b.Min.Y)},
		Max: r2.Vec{X: math.Max(a.Max.X, b.Max.X), Y: math.Max(a.Max.Y, b.Max.Y)},
	}
}

// Apart reports whether the boxes have no point in common when each is grown
// by gap on all sides.
func Apart(a, b r2.Box, gap float64) bool {
	return a.Min.X-gap > b.Max.X+gap || b.Min.X-gap > a.Max.X+gap ||
		a.Min.Y-gap > b.Max.Y+gap || b.Min.Y-gap > a.Max.Y+gap
}

// Diagonal is the length of the box's diagonal.
func Diagonal(b r2.Box) float64 { return math.Hypot(b.Max.X-b.Min.X, b.Max.Y-b.Min.Y) }
