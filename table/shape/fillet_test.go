package shape

import (
	"math"
	"strings"
	"testing"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
	"pgregory.net/rapid"
)

// filleted is a wall of three nodes whose corner at node 1 lies between spans
// of the given kinds.
func filleted(a, b SpanKind, radius float64) Freeform {
	return NewFreeform([]Node{
		{At: r2.Vec{X: -2}, Span: a, Bulge: 0.2, Ratio: 0.7, Tilt: 0.3, Out: r2.Vec{X: 1, Y: -0.4}},
		{At: r2.Vec{X: 2}, Span: b, Bulge: -0.15, Ratio: 1.4, Tilt: 0.1, In: r2.Vec{X: -1, Y: 0.2}, Out: r2.Vec{X: -0.2, Y: 1}, Fillet: radius},
		{At: r2.Vec{X: 0, Y: 3}, In: r2.Vec{X: 1, Y: 0.1}},
	})
}

// TestFilletTouchesBothSpans: between any two kinds of span the fillet is an arc
// of the radius asked for, and tangent to both.
func TestFilletTouchesBothSpans(t *testing.T) {
	for a := Straight; a <= Elliptic; a++ {
		for b := Straight; b <= Elliptic; b++ {
			for _, r := range []float64{1e-3, 0.1, 0.4} {
				f := filleted(a, b, r)
				c := loopsOf(t, f)[0].Curves
				if len(c) != 4 {
					t.Fatalf("%s, %s: %d sides", a, b, len(c))
				}
				if of, fillet := f.Span(1); of != 1 || !fillet {
					t.Errorf("side 1 is %d, %v", of, fillet)
				}
				if of, fillet := f.Span(2); of != 1 || fillet {
					t.Errorf("side 2 is %d, %v", of, fillet)
				}
				in, arc, out := c[0], c[1], c[2]
				end, from, to, start := in.At(in.Length()), arc.At(0), arc.At(arc.Length()), out.At(0)
				for _, j := range [][2]struct{ p, d r2.Vec }{
					{{end.Point, end.Tangent}, {from.Point, from.Tangent}}, {{to.Point, to.Tangent}, {start.Point, start.Tangent}},
				} {
					if d := r2.Norm(r2.Sub(j[0].p, j[1].p)); d > 1e-13 {
						t.Errorf("%s, %s, radius %g: a gap of %g", a, b, r, d)
					}
					if d := math.Abs(plane.Angle(j[0].d, j[1].d)); d > 1e-10 {
						t.Errorf("%s, %s, radius %g: a kink of %g", a, b, r, d)
					}
				}
				if d := math.Abs(1/from.Curvature - r); d > 1e-9*r {
					t.Errorf("%s, %s: the radius is %g off %g", a, b, d, r)
				}
			}
		}
	}
}

// TestFilletOfARectangle: area and length of a rectangle with rounded corners
// are known, also where the fillets use up its sides: it is a stadium then, and
// a disc.
func TestFilletOfARectangle(t *testing.T) {
	for _, c := range []struct {
		w, h, r float64
		sides   int
	}{{4, 3, 0.5, 8}, {4, 2, 1, 6}, {2, 2, 1, 4}} {
		f := NewPolygonal([]r2.Vec{{}, {X: c.w}, {X: c.w, Y: c.h}, {Y: c.h}})
		for i := range 4 {
			f = f.SetFillet(i, c.r)
		}
		loops := loopsOf(t, f)
		area, length := measured(loops)
		if want := c.w*c.h - (4-math.Pi)*c.r*c.r; math.Abs(area-want) > 1e-13*want {
			t.Errorf("%v: area %.17g, want %.17g", c, area, want)
		}
		if want := 2*(c.w+c.h) - (8-2*math.Pi)*c.r; math.Abs(length-want) > 1e-13*want {
			t.Errorf("%v: length %.17g, want %.17g", c, length, want)
		}
		if n := len(loops[0].Curves); n != c.sides {
			t.Errorf("%v: %d sides", c, n)
		}
		for i := range 4 {
			if g := f.GreatestFillet(i); i == 0 && math.Abs(g-math.Min(c.h-c.r, c.w-c.r)) > 1e-6 {
				t.Errorf("%v: the greatest fillet is %g", c, g)
			}
		}
	}
}

func TestFilletThatDoesNotFit(t *testing.T) {
	f := NewPolygonal([]r2.Vec{{}, {X: 4}, {X: 4, Y: 3}, {Y: 3}}).SetFillet(1, 2).SetFillet(2, 1.5)
	_, err := f.Loops()
	if err == nil || !strings.Contains(err.Error(), "does not fit between its neighbours; give it a smaller radius") {
		t.Errorf("two fillets of 2 and 1.5 on a side of 3: %v", err)
	}
	if g := f.SetJoint(1, Smooth); g.nodes[1].Fillet != 2 || g.nodes[1].Joint != Corner {
		t.Errorf("two lines at an angle are no smooth joint: %+v", g.nodes[1])
	}
}

// TestFilletFollows: while a node is dragged its fillet keeps its radius, and
// the wall is smooth there.
func TestFilletFollows(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := NewFreeform(drawNodes(t))
		i := rapid.IntRange(0, len(f.nodes)-1).Draw(t, "node")
		f = f.SetJoint(i, Corner).SetFillet(i, rapid.Float64Range(0.01, 0.3).Draw(t, "radius"))
		g := f.Moved(i, r2.Add(f.nodes[i].At, drawVec(t, "by", 0.3))).(Freeform)
		loops, err := g.Loops()
		if err != nil || sense(g.nodes.curves()) < 0 {
			t.Skip(err)
		}
		for k, c := range loops[0].Curves {
			of, fillet := g.Span(k)
			if !fillet {
				continue
			}
			if of != i {
				t.Fatalf("a fillet at node %d", of)
			}
			before, after := loops[0].Curves[(k+len(loops[0].Curves)-1)%len(loops[0].Curves)], loops[0].Curves[(k+1)%len(loops[0].Curves)]
			a, b := c.At(0), c.At(c.Length())
			// The ends are rounded, which turns the chord of a short arc.
			most := 1e-9 + 1e-13/math.Abs(g.nodes[i].Fillet*plane.Angle(a.Tangent, b.Tangent))
			if d := math.Abs(plane.Angle(before.At(before.Length()).Tangent, a.Tangent)); d > most {
				t.Fatalf("a kink of %g before the fillet", d)
			}
			if d := math.Abs(plane.Angle(b.Tangent, after.At(0).Tangent)); d > most {
				t.Fatalf("a kink of %g after the fillet", d)
			}
			// An arc that turns by less than 8e-3 is the cubic of its ends,
			// tangents and middle; its curvature varies by about the square. The places of the ends
			// are rounded, and a small turn makes that large.
			turn := plane.Angle(a.Tangent, b.Tangent)
			if d := math.Abs(math.Abs(a.Curvature)*g.nodes[i].Fillet - 1); d > 1e-9+4*turn*turn+1e-13/(g.nodes[i].Fillet*turn*turn) {
				t.Fatalf("the radius %g is off by %g of itself, over a turn of %g between %s and %s", g.nodes[i].Fillet, d, turn, g.nodes.at(i-1).Span, g.nodes[i].Span)
			}
		}
	})
}
