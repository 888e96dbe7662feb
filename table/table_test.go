package table

import (
	"math"
	"strings"
	"testing"

	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

func item(t *testing.T, role Role, x, y float64, kind string, v ...float64) Item {
	t.Helper()
	f, err := shape.New(kind, param.Values(v))
	if err != nil {
		t.Fatal(err)
	}
	return Item{Shape: f, Role: role, Place: plane.Similarity{Shift: r2.Vec{X: x, Y: y}, Scale: 1}}
}

func TestDiscInDisc(t *testing.T) {
	tab, err := New(Design{Unit: Millimetre, Items: []Item{item(t, Wall, 0, 0, "disc", 2), item(t, Post, 0.5, 0, "disc", 0.5)}})
	if err != nil {
		t.Fatal(err)
	}
	if d := math.Abs(tab.Length() - 5*math.Pi); d > 1e-12 {
		t.Errorf("length off by %g", d)
	}
	if d := math.Abs(tab.Area() - 3.75*math.Pi); d > 1e-12 {
		t.Errorf("area off by %g", d)
	}
	for _, c := range []struct {
		p  r2.Vec
		in bool
	}{{r2.Vec{X: 0.1}, false}, {r2.Vec{X: -0.1}, true}, {r2.Vec{X: 1.99}, true}, {r2.Vec{X: 2.01}, false}, {r2.Vec{X: 0.6}, false}} {
		if tab.Contains(c.p) != c.in {
			t.Errorf("Contains(%v) = %v", c.p, !c.in)
		}
	}
	f := tab.At(4 * math.Pi)
	if f.Curvature != -2 {
		t.Errorf("the obstacle's curvature is %g", f.Curvature)
	}
	n := f.Normal()
	if !tab.Contains(r2.Add(f.Point, r2.Scale(0.01, n))) {
		t.Error("the obstacle's normal does not point into the table")
	}
}

func TestFaults(t *testing.T) {
	for _, c := range []struct {
		kind  FaultKind
		says  string
		items []Item
	}{
		{Empty, "Nothing is drawn", nil},
		{TwoWalls, "two outer walls", []Item{item(t, Wall, 0, 0, "disc", 2), item(t, Wall, 0, 0, "disc", 1)}},
		{Overlap, "meet at", []Item{item(t, Wall, 0, 0, "disc", 2), item(t, Post, 1.8, 0, "disc", 0.5)}},
		{Outside, "outside the wall", []Item{item(t, Wall, 0, 0, "disc", 2), item(t, Post, 5, 0, "disc", 0.5)}},
		{Nested, "within another", []Item{item(t, Wall, 0, 0, "disc", 4), item(t, Post, 0, 0, "disc", 2), item(t, Post, 0, 0, "disc", 0.5)}},
	} {
		_, err := New(Design{Unit: Millimetre, Items: c.items})
		f, ok := err.(*Fault)
		if !ok || f.Kind != c.kind || !strings.Contains(f.Error(), c.says) {
			t.Errorf("%q: got %v", c.says, err)
		}
	}
	if _, err := New(Design{Unit: "furlong", Items: []Item{item(t, Wall, 0, 0, "disc", 1)}}); err == nil {
		t.Error("an unknown unit is taken")
	}
}

// TestNearestAcrossTheSeam: a point on a wall is found at its own place, also
// just before the start of a loop that is one piece.
func TestNearestAcrossTheSeam(t *testing.T) {
	for _, c := range []struct {
		kind   string
		values []float64
	}{{"disc", []float64{1}}, {"ellipse", []float64{2, 1}}, {"limacon", []float64{1, 0.4}}, {"stadium", []float64{1, 1}}} {
		f, err := shape.New(c.kind, c.values)
		if err != nil {
			t.Fatal(err)
		}
		tab, err := New(Design{Unit: Millimetre, Items: []Item{{Shape: f, Place: plane.Identity()}}})
		if err != nil {
			t.Fatal(err)
		}
		for k := range 500 {
			want := tab.Length() * (float64(k) + 0.37) / 500
			s, d := tab.Nearest(tab.At(want).Point)
			if off := math.Abs(s - want); math.Min(off, tab.Length()-off) > 1e-6*tab.Length() || d > 1e-6*tab.Length() {
				t.Errorf("%s: the point at s = %g is found at %g, %g away", c.kind, want, s, d)
			}
		}
	}
}
