// Package survey reads a wall: how large it is, how it bends, where a tool does
// not reach, how smooth, convex and symmetric it is, and what of the theory of
// billiards may be relied on. Everything follows from the table alone, by pure
// functions. It draws nothing and knows no units but the table's.
//
// Lengths are in the table's unit, curvatures per that unit, angles in radians.
// A curvature is positive where the wall focuses.
package survey

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Report is what is known of a wall.
type Report struct {
	Perimeter float64
	Area      float64 // NaN without an outer wall
	MeanChord float64 // pi A / L; NaN without an outer wall
	Bend      Bend
	Tool      Tool
	Corners   []Corner
	Jumps     []Jump
	Convexity Convexity
	Class     Class
	Flatness  Flatness
	Symmetry  Symmetry
	table     *table.Table
}

// Place is a point of the wall.
type Place struct {
	S  float64
	At r2.Vec
}

// Stretch is the wall from S0 to S1. S0 > S1 where it runs over the start of
// its loop.
type Stretch struct{ S0, S1 float64 }

// Corner is a place where the tangent jumps; Angle is inside the table, in
// (0, 2 pi], 2 pi at a cusp that points inwards.
type Corner struct {
	Place
	Angle float64
}

// Jump is a place where the tangent is continuous and the curvature is not.
type Jump struct {
	Place
	Before, After float64
}

// Of is the report on a table for a round tool of the given radius, in the
// table's unit; 0 for none.
func Of(t *table.Table, tool float64) *Report {
	r := &Report{
		Perimeter: t.Length(), Area: math.NaN(), MeanChord: math.NaN(),
		Bend: bendOf(t), Class: classOf(t), Convexity: convexityOf(t), table: t,
	}
	if !t.Open() {
		r.Area = t.Area()
		r.MeanChord = math.Pi * t.Area() / t.Length()
	}
	for _, j := range t.Joints() {
		at := Place{j.S, j.At}
		switch j.Continuity {
		case table.Corner:
			r.Corners = append(r.Corners, Corner{at, j.InteriorAngle()})
		case table.Tangent:
			p := &t.Pieces()[j.Piece]
			q := &t.Pieces()[p.Prev]
			r.Jumps = append(r.Jumps, Jump{at, curvature(q, q.Length), curvature(p, 0)})
		}
	}
	n := newNet(t)
	r.Flatness = flatnessOf(t, n)
	r.Symmetry = symmetryOf(t, n)
	if tool > 0 {
		r.Tool = toolOf(t, n, tool)
	}
	return r
}

// sizeOf is the diagonal of the table's box, to which tolerances are relative.
func sizeOf(t *table.Table) float64 { return plane.Diagonal(t.Bounds()) }

// placeAt is the place at the length x from the start of piece i.
func placeAt(t *table.Table, i int, x float64) Place {
	p := &t.Pieces()[i]
	return Place{t.Wrap(p.S0 + x), p.FrameAt(p.T(x)).Point}
}
