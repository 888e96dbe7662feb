// Package table is the boundary model that everything shares: shapes and coats
// compiled to spans on one arclength. A Table is immutable; an edit makes a new
// one. The package knows no rays, no files and no windows.
//
// Conventions: y up; lengths in the design's unit; every loop runs with the
// inside of the table on its left, the outer wall counter-clockwise, obstacles
// clockwise; the arclength s runs through the outer wall from its start, then
// through each obstacle in order, over [0, L). Curvature is positive where the
// wall turns left (it focuses).
package table

import (
	"sort"

	"cavitywright/table/curve"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

// Design is what a person drew and chose: the content of a table file. It is a
// value; slices in it are never changed in place.
type Design struct {
	Name, Notes string
	Unit        Unit
	Bare        wall.Law // the law where no coat lies; nil means wall.Mirror
	Items       []Item
	Coats       []Coat
	Study       Study
}

// Item is a shape with its place and role in the table.
type Item struct {
	Shape shape.Shape
	Place plane.Similarity
	Role  Role
}

// Role says what an item is to the table.
type Role uint8

// The roles: at most one item is the Wall; as a Post a shape is an obstacle.
const (
	Wall Role = iota
	Post
)

// Coat is a law on a stretch of wall, from the fraction From to the fraction To
// of a side (in the sense of increasing s), anchored to the item and the side
// so that it keeps its place on them while they are dragged. Side AllSides is
// the whole item.
type Coat struct {
	Item, Side int
	From, To   float64
	Law        wall.Law
}

// AllSides as a coat's side means every side of the item.
const AllSides = -1

// Piece is a span on the table's arclength: it begins at S0. Side is the index
// of its curve in its item; Next and Prev are its neighbours in its loop.
// Corner reports whether the wall has a corner at the piece's start.
type Piece struct {
	curve.Span
	S0         float64
	Item, Side int
	Loop       int
	Next, Prev int
	Corner     bool
}

// Loop is one closed loop of the wall: its pieces are First to Last-1, its
// arclength runs over [S0, S1).
type Loop struct {
	Side        shape.Side
	Item        int
	First, Last int
	S0, S1      float64
	Box         r2.Box
	parts       []curve.Part
}

// Stretch is a coat on the table's arclength, over [S0, S1] on one piece.
type Stretch struct {
	Piece, Coat int
	S0, S1      float64
	Law         wall.Law
}

// Table is a compiled design.
type Table struct {
	design    Design
	pieces    []Piece
	loops     []Loop
	joints    []Joint
	stretches []Stretch
	length    float64
	area      float64
	box       r2.Box
}

// Design is what the table was made of; its slices must not be changed.
func (t *Table) Design() Design { return t.design }

// Pieces are the spans of the wall in the order of s; not to be changed.
func (t *Table) Pieces() []Piece { return t.pieces }

// Loops are the closed loops in the order of s; not to be changed.
func (t *Table) Loops() []Loop { return t.loops }

// Joints are the places where two sides meet, in the order of s.
func (t *Table) Joints() []Joint { return t.joints }

// Stretches are the coats, in the order of s; not to be changed.
func (t *Table) Stretches() []Stretch { return t.stretches }

// Length is the length of all loops, to 1e-12 of itself.
func (t *Table) Length() float64 { return t.length }

// Area is the area of the table, obstacles taken out, to 1e-12 of the wall's;
// zero for a table without an outer wall.
func (t *Table) Area() float64 { return t.area }

// Bounds is a box that holds the wall.
func (t *Table) Bounds() r2.Box { return t.box }

// Open reports whether the table has no outer wall.
func (t *Table) Open() bool { return len(t.loops) == 0 || t.loops[0].Side == shape.Obstacle }

// Law is the law of the bare wall.
func (t *Table) Law() wall.Law {
	if t.design.Bare == nil {
		return wall.Mirror{}
	}
	return t.design.Bare
}

// Wrap brings s into [0, L).
func (t *Table) Wrap(s float64) float64 {
	for s < 0 {
		s += t.length
	}
	for s >= t.length {
		s -= t.length
	}
	return s
}

// Locate is the piece at the arclength s in [0, L) and the length from its
// start.
func (t *Table) Locate(s float64) (piece int, local float64) {
	i := sort.Search(len(t.pieces), func(i int) bool { return t.pieces[i].S0 > s }) - 1
	if i < 0 {
		i = 0
	}
	return i, min(s-t.pieces[i].S0, t.pieces[i].Length)
}

// At is the frame of the wall at the arclength s in [0, L).
func (t *Table) At(s float64) curve.Frame {
	i, x := t.Locate(s)
	p := &t.pieces[i]
	return p.FrameAt(p.T(x))
}

// LoopAt is the index of the loop that holds s.
func (t *Table) LoopAt(s float64) int {
	i, _ := t.Locate(s)
	return t.pieces[i].Loop
}

// SideRange is the arclength of a side of an item: from its start to its end.
// ok is false where there is no such side.
func (t *Table) SideRange(item, side int) (s0, s1 float64, ok bool) {
	for i := range t.pieces {
		p := &t.pieces[i]
		if p.Item == item && p.Side == side {
			if !ok {
				s0, ok = p.S0, true
			}
			s1 = p.S0 + p.Length
		}
	}
	return s0, s1, ok
}

// SameWall reports whether two tables have the same shapes in the same places,
// the same coats and the same unit, told by what they share: what was measured
// on the one holds for the other. It may answer no where all was built anew.
func (t *Table) SameWall(o *Table) bool {
	a, b := t.Design(), o.Design()
	return t == o || a.Unit == b.Unit && a.Bare == b.Bare && shared(a.Items, b.Items) && shared(a.Coats, b.Coats)
}

// shared reports whether two slices are one, or both empty.
func shared[T any](a, b []T) bool {
	return len(a) == len(b) && (len(a) == 0 || &a[0] == &b[0])
}
