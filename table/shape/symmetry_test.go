package shape

import (
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r2"
	"pgregory.net/rapid"
)

// drawSymmetry is a symmetry about the origin.
func drawSymmetry(t *rapid.T) Symmetry {
	s := Symmetry{Fold: rapid.IntRange(1, 5).Draw(t, "fold"), Mirror: rapid.Bool().Draw(t, "mirror")}
	if s.None() {
		s.Mirror = true
	}
	s.Axis = rapid.Float64Range(-3, 3).Draw(t, "axis")
	return s
}

// TestSymmetryIsKept: whatever is dragged, typed, split or deleted, every point
// of a symmetric wall has its images on it, and the joints are what they say.
func TestSymmetryIsKept(t *testing.T) {
	made, all := 0, 0
	rapid.Check(t, func(t *rapid.T) {
		s := drawSymmetry(t)
		all++
		f, err := NewFreeform(drawNodes(t)).WithSymmetry(s)
		if err != nil {
			t.Skip(err)
		}
		made++
		for range rapid.IntRange(0, 4).Draw(t, "edits") {
			n := len(f.nodes)
			i := rapid.IntRange(0, n-1).Draw(t, "i")
			g := f
			switch rapid.IntRange(0, 7).Draw(t, "edit") {
			case 0:
				g = f.InsertNode(i, rapid.Float64Range(0.1, 0.9).Draw(t, "t"))
			case 1:
				if n > 3*max(s.Fold, 1)*2 {
					g = f.DeleteNode(i)
				}
			case 2:
				g = f.SetSpan(i, SpanKind(rapid.IntRange(0, 3).Draw(t, "kind")))
			case 3:
				g = f.SetJoint(i, Joint(rapid.IntRange(0, 2).Draw(t, "joint")))
			case 4:
				g = f.SetFillet(i, 0.05)
			case 5:
				g = f.WithLength(i, f.SpanLength(i)*rapid.Float64Range(0.8, 1.2).Draw(t, "longer"))
			default:
				k := rapid.IntRange(0, len(f.Handles())-1).Draw(t, "handle")
				g = f.Moved(k, r2.Add(f.Handles()[k].At, drawVec(t, "by", 0.3))).(Freeform)
			}
			if g.nodes.fault() == nil {
				f = g
			}
		}
		if f.symmetry != s {
			t.Skip("edited away")
		}
		for k := range f.nodes {
			n := len(f.nodes)
			if r2.Norm(r2.Sub(f.nodes[(k+1)%n].At, f.nodes[(k+n-1)%n].At)) < 1e-9 {
				t.Skip("a node between two that coincide has no direction of its own, and such a wall is no table")
			}
		}
		points := pointsOf(f.nodes.curves(), 61)
		for _, m := range s.motions() {
			moved := make([]r2.Vec, len(points))
			for k, p := range points {
				moved[k] = m.point(p)
			}
			plain := Freeform{nodes: f.nodes.clone()}
			for k := range plain.nodes {
				plain.nodes[k].Fillet = 0
			}
			if d := plain.Deviation(moved); d > 1e-8 {
				t.Fatalf("%+v by %+v lies %g off the wall\n%+v", s, m, d, f.nodes)
			}
		}
		for i, k := range f.nodes {
			if k.Joint != Corner && f.nodes.kink(i) > 1e-9 {
				t.Fatalf("node %d is %s but turns by %g", i, k.Joint, f.nodes.kink(i))
			}
		}
	})
	if made < all/3 {
		t.Errorf("of %d walls only %d could be made symmetric", all, made)
	}
}

// TestMirrorKeepsTheLeft: of a wall that is not symmetric the part to the left
// of the mirror line stays, to the last bit.
func TestMirrorKeepsTheLeft(t *testing.T) {
	f := NewPolygonal([]r2.Vec{{X: -1, Y: -2}, {X: 3, Y: -1}, {X: 2, Y: 2}, {X: -2, Y: 1}})
	g, err := f.WithSymmetry(Symmetry{Mirror: true})
	if err != nil {
		t.Fatal(err)
	}
	area, _ := measured(loopsOf(t, g))
	// The part above y = 0: from (8/3, 0), (2, 2), (-2, 1) to (-5/3, 0).
	if want := 2 * 0.5 * ((8.0/3)*2 - 0 + 2*1 - (-2)*2 + (-2)*0 - (-5.0/3)*1); math.Abs(area-want) > 1e-12 {
		t.Errorf("area %g, want %g", area, want)
	}
	if len(g.nodes) != 6 {
		t.Errorf("%d nodes", len(g.nodes))
	}
	_, err = f.WithSymmetry(Symmetry{Mirror: true, Centre: r2.Vec{X: 9}})
	if err == nil || !strings.Contains(err.Error(), "not at one; move the centre or reshape the wall") {
		t.Errorf("a line that starts outside: %v", err)
	}
}

// TestSquareFromACorner: four-fold symmetry makes a square of a wall of which
// one sector is a square's.
func TestSquareFromACorner(t *testing.T) {
	f := NewPolygonal([]r2.Vec{{X: 1, Y: -1}, {X: 1, Y: 1}, {X: -0.7, Y: 1}, {X: -1, Y: -0.5}})
	g, err := f.WithSymmetry(Symmetry{Fold: 4})
	if err != nil {
		t.Fatal(err)
	}
	if area, length := measured(loopsOf(t, g)); math.Abs(area-4) > 1e-12 || math.Abs(length-8) > 1e-12 {
		t.Errorf("area %g, length %g", area, length)
	}
	h := g.MoveNode(0, r2.Vec{X: 1.2, Y: 0})
	if area, _ := measured(loopsOf(t, h)); math.Abs(area-4.8) > 1e-12 {
		t.Errorf("with a node pulled out by 0.2 the area is %g, want 4.8", area)
	}
}
