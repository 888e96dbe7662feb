package edit

import (
	"math"
	"testing"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

// coatedAt tells, for places along the wall, which have an opening.
func coatedAt(t *table.Table, at []r2.Vec) []bool {
	out := make([]bool, len(at))
	for i, p := range at {
		s, _ := t.Nearest(p)
		for _, x := range t.Stretches() {
			if _, is := x.Law.(wall.Opening); is && x.S0 <= s && s <= x.S1 {
				out[i] = true
			}
		}
	}
	return out
}

// along are places along the wall, none near an end of a coat at a multiple of
// a tenth.
func along(t *table.Table) []r2.Vec {
	var at []r2.Vec
	for i := range 67 {
		at = append(at, t.At(t.Length()*(float64(i)+0.3)/67).Point)
	}
	return at
}

// TestCoatsStayWhereTheyAre: a node more, one less, or another kind of shape
// leaves every coat on the same stretch of wall.
func TestCoatsStayWhereTheyAre(t *testing.T) {
	f := shape.NewFreeform([]shape.Node{
		{At: r2.Vec{X: -2, Y: -1}}, {At: r2.Vec{X: 2, Y: -1}, Span: shape.Bowed, Bulge: 0.4},
		{At: r2.Vec{X: 2, Y: 1}, Span: shape.Curved, Out: r2.Vec{X: -0.5, Y: 0.75}}, {At: r2.Vec{X: -2, Y: 1}, In: r2.Vec{X: 0.5, Y: 0.5}},
	})
	coats := []table.Coat{
		{Item: 0, Side: 0, From: 0.1, To: 0.3, Law: wall.Opening{}}, {Item: 0, Side: 1, From: 0, To: 1, Law: wall.Opening{}},
		{Item: 0, Side: 3, From: 0.6, To: 1, Law: wall.Opening{}},
	}
	for _, role := range []table.Role{table.Wall, table.Post} {
		first, err := table.New(table.Design{Unit: table.Millimetre, Study: table.DefaultStudy(), Coats: coats,
			Items: []table.Item{{Shape: f, Role: role, Place: plane.Similarity{Shift: r2.Vec{X: 3}, Angle: 0.4, Scale: 2}}}})
		if err != nil {
			t.Fatal(err)
		}
		at := along(first)
		want := coatedAt(first, at)
		for _, g := range []shape.Freeform{f.InsertNode(0, 0.2), f.InsertNode(1, 0.5), f.InsertNode(3, 0.7), f.InsertNode(0, 0.5).InsertNode(3, 0.4)} {
			next, err := Reshape{Item: 0, Shape: g, Name: "add a node"}.Apply(first)
			if err != nil {
				t.Fatal(err)
			}
			for i, c := range coatedAt(next, at) {
				if c != want[i] {
					t.Errorf("as %v, with a node more, the place %v is coated: %v", role, at[i], c)
				}
			}
		}
		// A fillet far from a coat moves none; what it rounds is not compared.
		next, err := Reshape{Item: 0, Shape: f.SetFillet(2, 0.1), Name: "fillet"}.Apply(first)
		if err != nil {
			t.Fatal(err)
		}
		corner := first.Design().Items[0].Place.Apply(f.Nodes()[2].At)
		for i, c := range coatedAt(next, at) {
			if c != want[i] && r2.Norm(r2.Sub(at[i], corner)) > 0.5 {
				t.Errorf("as %v, with a fillet, the place %v is coated: %v", role, at[i], c)
			}
		}
	}
}

// TestConvertKeepsTheTable: every shape of the catalogue turned into free walls
// makes a table of the same area, length and number of loops, with its coats
// where they were.
func TestConvertKeepsTheTable(t *testing.T) {
	for _, k := range shape.Catalogue() {
		f, err := shape.New(k.Name, param.Defaults(k.Specs))
		if err != nil {
			t.Fatal(err)
		}
		first, err := table.New(table.Design{Unit: table.Millimetre, Study: table.DefaultStudy(),
			Items: []table.Item{{Shape: f, Place: plane.Similarity{Shift: r2.Vec{X: 1}, Angle: 1, Scale: 3}}},
			Coats: []table.Coat{{Item: 0, Side: 0, From: 0.1, To: 0.4, Law: wall.Opening{}}}})
		if err != nil {
			t.Fatal(err)
		}
		size := plane.Diagonal(first.Bounds())
		next, err := Convert{Item: 0, Within: 1e-7 * size}.Apply(first)
		if err != nil {
			t.Errorf("%s: %v", k.Name, err)
			continue
		}
		if len(next.Loops()) != len(first.Loops()) {
			t.Errorf("%s: %d loops, was %d", k.Name, len(next.Loops()), len(first.Loops()))
		}
		if d := math.Abs(next.Length()/first.Length() - 1); d > 1e-6 {
			t.Errorf("%s: the length changes by %g of itself", k.Name, d)
		}
		if d := math.Abs(next.Area() - first.Area()); d > 1e-6*size*size {
			t.Errorf("%s: the area changes by %g", k.Name, d)
		}
		at := along(first)
		want := coatedAt(first, at)
		for i, c := range coatedAt(next, at) {
			if c != want[i] {
				t.Errorf("%s: the place %v is coated: %v", k.Name, at[i], c)
			}
		}
		list, err := Converted(first, Convert{Item: 0, Within: 1e-7 * size})
		if err != nil || list[0].Error > 1e-7*size {
			t.Errorf("%s: %g off, %v", k.Name, list[0].Error, err)
		}
	}
	if _, err := (Convert{Item: 0, Within: 0}).Apply(begun(t)); err == nil {
		t.Error("a distance of 0 is taken")
	}
}
