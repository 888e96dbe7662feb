package shape

import (
	"cavitywright/table/curve"

	"gonum.org/v1/gonum/spatial/r2"
)

// ovalThrough is the arc of an ellipse that leaves the Elliptic node a for b:
// the circular arc in the plane in which the ellipse is a circle, taken back.
// Both ends are met to the rounding of that.
func ovalThrough(a *Node, b r2.Vec) curve.Curve {
	back := func(v r2.Vec) r2.Vec { return r2.Add(a.At, a.toOval(v)) }
	switch c := curve.ArcThrough(r2.Vec{}, a.toCircle(r2.Sub(b, a.At)), a.Bulge).(type) {
	case curve.Arc:
		return curve.NewOval(curve.Arc{
			Centre: back(c.Centre), Major: c.Major, Minor: c.Major * a.Ratio,
			Tilt: a.Tilt, From: c.From, Sweep: c.Sweep,
		})
	case curve.Cubic: // a flat arc
		return curve.NewCubic([4]r2.Vec{a.At, back(c.P[1]), back(c.P[2]), b})
	}
	return curve.NewLine(a.At, b)
}
