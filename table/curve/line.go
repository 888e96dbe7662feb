package curve

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Line is the straight segment from A to B.
type Line struct {
	A, B r2.Vec
	chain
}

// NewLine is the segment from a to b.
func NewLine(a, b r2.Vec) Line {
	d := r2.Sub(b, a)
	l := math.Hypot(d.X, d.Y)
	return Line{A: a, B: b, chain: chain{{Kind: Segment, A: a, B: b, T1: l, Length: l}}}
}

// Placed is the segment after m.
func (l Line) Placed(m plane.Similarity) Curve { return NewLine(m.Apply(l.A), m.Apply(l.B)) }

// Reversed is the segment from B to A.
func (l Line) Reversed() Curve { return NewLine(l.B, l.A) }
