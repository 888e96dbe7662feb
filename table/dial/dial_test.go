package dial_test

import (
	"errors"
	"math"
	"reflect"
	"testing"

	"cavitywright/table"
	"cavitywright/table/dial"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
	"pgregory.net/rapid"
)

// design has a limaçon, a free wall, a disc as a post, two coats and a bare
// law with parameters. It need not be a table.
func design(t testing.TB) table.Design {
	t.Helper()
	figure := func(name string, v ...float64) shape.Shape {
		f, err := shape.New(name, v)
		if err != nil {
			t.Fatal(err)
		}
		return f
	}
	free := shape.NewPolygonal([]r2.Vec{{X: 0, Y: 0}, {X: 1, Y: 0}, {X: 0, Y: 1}})
	turned := plane.Similarity{Shift: r2.Vec{X: 3, Y: -2}, Angle: 0.5, Scale: 2}
	return table.Design{
		Bare: wall.Dielectric{Index: 3.3, Outside: 1},
		Items: []table.Item{
			{Shape: figure("limacon", 1, 0.4), Place: plane.Identity()},
			{Shape: free, Place: turned, Role: table.Post},
			{Shape: figure("disc", 0.1), Place: plane.Identity(), Role: table.Post},
		},
		Coats: []table.Coat{
			{Item: 0, From: 0.1, To: 0.2, Law: wall.Opening{}},
			{Item: 0, From: 0.5, To: 0.7, Law: wall.Lossy{Reflectivity: 0.9}},
		},
	}
}

// TestTurn: every dial of the design takes a value, gives it back, and leaves
// all others as they were; the design it was made from does not change.
func TestTurn(t *testing.T) {
	d := design(t)
	all := dial.All(d)
	if len(all) != 2+4+6+4+1+4+2+3+3 {
		t.Fatalf("the design has %d dials", len(all))
	}
	rapid.Check(t, func(t *rapid.T) {
		which := rapid.SampledFrom(all).Draw(t, "dial")
		s, err := which.Spec(d)
		if err != nil {
			t.Fatal(err)
		}
		v := s.Clamp(rapid.Float64Range(math.Max(s.Lo, -50), math.Min(s.Hi, 50)).Draw(t, "value"))
		turned, err := which.Turned(d, v)
		if err != nil {
			t.Fatal(err)
		}
		for _, other := range all {
			if other.Part == dial.Node && which.Part == dial.Item && other.Of == which.Of {
				continue // the nodes go where the wall goes
			}
			got, err := other.Value(turned)
			if err != nil {
				t.Fatal(err)
			}
			want, _ := other.Value(d)
			if other == which {
				want = v
			}
			if math.Abs(got-want) > 1e-12*(1+math.Abs(want)) { // a node passes through the place and back
				t.Fatalf("after turning %s to %g, %s is %g, not %g", which, v, other, got, want)
			}
		}
	})
	if !reflect.DeepEqual(d, design(t)) {
		t.Error("the design was changed in place")
	}
}

// TestNames: a dial is found by what it writes, and by the parameter's name
// alone where one shape has it.
func TestNames(t *testing.T) {
	d := design(t)
	for _, x := range dial.All(d) {
		if got, err := dial.Find(d, x.String()); err != nil || got != x {
			t.Errorf("%s is found as %v, %v", x, got, err)
		}
	}
	if x, err := dial.Find(d, "eps"); err != nil || x.String() != "1.eps" {
		t.Errorf("eps is %v, %v", x, err)
	}
	for text, want := range map[string]string{
		"radius":    `There is no number called "radius" here: 2 shapes have one; write 1.radius for the first.`,
		"4.eps":     `There is no number called "4.eps" here: the table has 3 items.`,
		"1.width":   `There is no number called "1.width" here: the limacon has no such parameter.`,
		"2.node9.x": `There is no number called "2.node9.x" here: the item has no such node.`,
		"coat1.k":   `There is no number called "coat1.k" here: the coat's law has no such parameter.`,
		"coat7.to":  `There is no number called "coat7.to" here: the table has 2 coats.`,
		"bare.eps":  `There is no number called "bare.eps" here: the bare wall's law has no such parameter.`,
	} {
		_, err := dial.Find(d, text)
		if u := (*dial.Unknown)(nil); !errors.As(err, &u) || err.Error() != want {
			t.Errorf("%s: %v", text, err)
		}
	}
	x, _ := dial.Find(d, "1.eps")
	if _, err := x.Turned(d, 5); err == nil || !errors.As(err, new(*param.RangeError)) {
		t.Errorf("eps = 5 is refused with %v", err)
	}
}
