package shape

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r2"
	"pgregory.net/rapid"
)

// TestTypedIsKept: what is typed is what is read off afterwards.
func TestTypedIsKept(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := NewFreeform(drawNodes(t))
		if f.nodes.fault() != nil {
			t.Skip("no wall")
		}
		for i := range f.nodes {
			if b := math.Abs(f.nodes[i].Bulge); b > 0 && b < 1e-4 {
				t.Skip("nearly straight, and straight in a larger wall")
			}
			f = f.SetJoint(i, Corner) // so that nothing else gives way
		}
		// An arc flatter than a 1e-5th of the wall is a line.
		flat := f.nodes.size()
		i := rapid.IntRange(0, len(f.nodes)-1).Draw(t, "i")
		same := func(what string, got, want float64) {
			t.Helper()
			if d := math.Abs(got - want); d > 1e-9*(1+math.Abs(want)) && !(what == "the sagitta" && got == 0 && math.Abs(want) < 1e-5*flat) {
				t.Fatalf("%s is %.12g, typed %.12g, of %+v", what, got, want, f.nodes[i])
			}
		}
		l := rapid.Float64Range(0.2, 3).Draw(t, "length")
		if len(f.nodes) > 2 {
			same("the length", f.WithLength(i, l).SpanLength(i), l)
			d := rapid.Float64Range(-3.1, 3.1).Draw(t, "direction")
			g := f.WithDirection(i, d)
			same("the direction", g.Direction(i), d)
			same("the length after turning", g.SpanLength(i), f.SpanLength(i))
			a := rapid.Float64Range(0.3, 6).Draw(t, "angle")
			same("the angle", f.WithInteriorAngle(i, a).InteriorAngle(i), a)
		}
		c := r2.Norm(f.nodes.chord(i))
		switch f.nodes[i].Span {
		case Bowed:
			if f.nodes[i].Bulge == 0 {
				return
			}
			r := c * rapid.Float64Range(0.51, 3).Draw(t, "radius")
			along, _ := f.WithRadius(i, r).Axes(i)
			same("the radius", along, r)
			h := c * rapid.Float64Range(-0.9, 0.9).Draw(t, "sagitta")
			same("the sagitta", f.WithSagitta(i, h).Sagitta(i), h)
			p := r2.Add(f.nodes.middle(i), drawVec(t, "by", 0.2))
			same("the distance of a point it goes through", Freeform{nodes: f.Through(i, p).nodes}.nodes.traced().distance(p), 0)
		case Elliptic:
			if f.nodes[i].Bulge == 0 {
				return
			}
			a, b := c*rapid.Float64Range(0.8, 2).Draw(t, "a"), c*rapid.Float64Range(0.8, 2).Draw(t, "b")
			along, across := f.WithAxes(i, a, b, 0.4).Axes(i)
			same("the semi-axis along", along, a)
			same("the semi-axis across", across, b)
		}
	})
}
