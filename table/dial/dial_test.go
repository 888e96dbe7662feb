package dial_test

import (
	"errors"
	"math"
	"reflect"
	"strings"
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
	if len(all) != 2+4+6+3+4+1+4+3+4+3 {
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
			if other.Part == dial.Coat && which.Part == dial.Coat && other.Of == which.Of && (other.Name == "at" || which.Name == "at") && other != which {
				continue // the middle is that of the two ends: TestSlide
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
		"radius":         `There is no number called "radius" here: 2 shapes have one; write 1.radius for the first.`,
		"4.eps":          `There is no number called "4.eps" here: the table has 3 items.`,
		"1.width":        `There is no number called "1.width" here: the limacon has no such parameter.`,
		"1.node1.fillet": `There is no number called "1.node1.fillet" here: the item has no such node.`,
		"coat3.at":       `There is no number called "coat3.at" here: the table has 2 coats.`,
		"2.node9.x":      `There is no number called "2.node9.x" here: the item has no such node.`,
		"coat1.k":        `There is no number called "coat1.k" here: the coat's law has no such parameter.`,
		"coat7.to":       `There is no number called "coat7.to" here: the table has 2 coats.`,
		"bare.eps":       `There is no number called "bare.eps" here: the bare wall's law has no such parameter.`,
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

// TestSlide: the middle of a coat slides it along the whole of its side and no
// farther, at the width that it has.
func TestSlide(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		d := design(t)
		from := rapid.Float64Range(0, 0.99).Draw(rt, "from")
		to := rapid.Float64Range(from+0.001, 1).Draw(rt, "to")
		d.Coats[0].From, d.Coats[0].To = from, to
		at, err := dial.Find(d, "coat1.at")
		if err != nil {
			rt.Fatal(err)
		}
		s, _ := at.Spec(d)
		if now, _ := at.Value(d); s.Check(now) != nil {
			rt.Fatalf("the coat lies at %g, outside its range from %g to %g", now, s.Lo, s.Hi)
		}
		v := rapid.OneOf(rapid.Float64Range(s.Lo, s.Hi), rapid.Just(s.Lo), rapid.Just(s.Hi)).Draw(rt, "at")
		slid, err := at.Turned(d, v)
		if err != nil {
			rt.Fatal(err)
		}
		c := slid.Coats[0]
		got, _ := at.Value(slid)
		if c.From < 0 || c.To > 1 || math.Abs(c.To-c.From-(to-from)) > 1e-15 || math.Abs(got-v) > 1e-15 || d.Coats[0].From != from {
			rt.Fatalf("at %g it runs from %g to %g, of a width %g", v, c.From, c.To, to-from)
		}
		if _, err := at.Turned(d, s.Hi+1e-9); !errors.As(err, new(*param.RangeError)) {
			rt.Fatalf("beyond the side: %v", err)
		}
	})
}

// TestFillet: a corner is rounded by the radius that the table then has, and a
// node that is no corner has no such number.
func TestFillet(t *testing.T) {
	d := design(t)
	d.Items, d.Coats = d.Items[1:2:2], nil
	d.Items[0].Role, d.Bare, d.Unit = table.Wall, nil, table.Millimetre
	x, err := dial.Find(d, "1.node1.fillet")
	if err != nil {
		t.Fatal(err)
	}
	// Of a right corner an arc of radius r cuts away (1 - pi/4) r².
	const r = 0.25
	rounded, err := x.Turned(d, r)
	if err != nil {
		t.Fatal(err)
	}
	area := func(d table.Design) float64 {
		tab, err := table.New(d)
		if err != nil {
			t.Fatal(err)
		}
		return tab.Area()
	}
	if cut := area(d) - area(rounded); math.Abs(cut-(1-math.Pi/4)*r*r) > 1e-12 {
		t.Errorf("the corner loses %g", cut)
	}
	if _, err := x.Turned(d, -1); !errors.As(err, new(*param.RangeError)) {
		t.Errorf("a negative radius: %v", err)
	}
	big, err := x.Turned(d, 50)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := table.New(big); err == nil {
		t.Error("a radius that does not fit makes a table")
	}
	free := d.Items[0].Shape.(shape.Freeform)
	d.Items[0].Shape = free.SetSpan(0, shape.Curved).SetSpan(2, shape.Curved).SetJoint(0, shape.Smooth)
	if _, err := dial.Find(d, "1.node1.fillet"); err == nil || !strings.Contains(err.Error(), "no corner") {
		t.Errorf("of a smooth node: %v", err)
	}
}
