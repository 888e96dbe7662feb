package render

import (
	"math"
	"testing"

	"cavitywright/sim/figure"

	"pgregory.net/rapid"
)

func TestViewRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		size := math.Pow(10, rapid.Float64Range(-9, 6).Draw(t, "size"))
		e := Extent{X0: -size, Y0: 0, X1: 2 * size, Y1: rapid.Float64Range(0.1, 9).Draw(t, "tall") * size}
		look := Paper(1)
		v := Fit(e, NewBox(5, 6, 85, 60), look)
		x, y := rapid.Float64Range(-3, 3).Draw(t, "x")*size, rapid.Float64Range(-3, 3).Draw(t, "y")*size
		gx, gy := v.FromCanvas(v.ToCanvas(x, y))
		if math.Hypot(gx-x, gy-y) > 1e-9*size {
			t.Fatalf("(%g, %g) came back as (%g, %g)", x, y, gx, gy)
		}
		// A similarity: right is right, up is up, both to one scale.
		o, r, u := v.ToCanvas(0, 0), v.ToCanvas(size, 0), v.ToCanvas(0, size)
		if r.X <= o.X || r.Y != o.Y || u.Y >= o.Y || u.X != o.X || math.Abs((r.X-o.X)-(o.Y-u.Y)) > 1e-9 {
			t.Fatalf("axes go to %v, %v, %v", o, r, u)
		}
		// All of the extent shows, and one side of it fills the box.
		a, b := v.ToCanvas(e.X0, e.Y1), v.ToCanvas(e.X1, e.Y0)
		edge := look.Margin + look.Wall
		shown := Box{a, b}
		if !holds(v.Box.Inset(edge), shown) {
			t.Fatalf("%v shows at %v in %v", e, shown, v.Box)
		}
		if slackX, slackY := v.Box.W()-2*edge-shown.W(), v.Box.H()-2*edge-shown.H(); min(slackX, slackY) > 1e-6 {
			t.Fatalf("room is left on both sides: %g and %g", slackX, slackY)
		}
		about := Point{rapid.Float64Range(0, 90).Draw(t, "ax"), 20}
		z := v.Zoomed(3.5, about)
		bx, by := v.FromCanvas(about)
		if q := z.ToCanvas(bx, by); math.Hypot(q.X-about.X, q.Y-about.Y) > 1e-6 {
			t.Fatalf("zooming moved %v to %v", about, q)
		}
		if s := v.Shifted(3, -4).ToCanvas(x, y); math.Abs(s.X-v.ToCanvas(x, y).X-3) > 1e-6 {
			t.Fatalf("shifting by 3 led to %v", s)
		}
	})
}

// Rays that leave for good do not shrink the table.
func TestBoundsAreThoseOfTheWall(t *testing.T) {
	f := ring()
	f.Lines = append(f.Lines, figure.Line{Role: figure.Ray, X: []float64{0, 1e6}, Y: []float64{0, math.Inf(1)}})
	if e := Bounds(f); math.Abs(e.X0+2) > 1e-9 || math.Abs(e.X1-4.1) > 1e-9 {
		t.Errorf("bounds %v", e)
	}
	open := figure.Paths{Lines: []figure.Line{{Role: figure.Ray, X: []float64{0, 2}, Y: []float64{1, 1}}}}
	if e := Bounds(open); e != (Extent{0, 1, 2, 1}) {
		t.Errorf("bounds of a ray %v", e)
	}
}

// The scale bar is as long as it says.
func TestScaleBar(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		look := Paper(1)
		v := View{Box: NewBox(0, 0, 85, 60), Scale: math.Pow(10, rapid.Float64Range(-3, 3).Draw(t, "scale"))}
		var c record
		DrawScaleBar(&c, "mm", v, NewBox(0, 55, 85, 4), look)
		p := c.strokes[0].path.Points
		length := (p[1].X - p[0].X) / v.Scale
		got := parsed(t, c.texts[0].String[:len(c.texts[0].String)-3])
		if math.Abs(got/length-1) > 1e-9 {
			t.Fatalf("a bar of %g is labelled %q", length, c.texts[0].String)
		}
		if share := (p[1].X - p[0].X) / 85; share > 0.26 || share < 0.09 {
			t.Fatalf("the bar takes %g of the width", share)
		}
	})
}
