package render

import (
	"image/color"
	"math"
	"testing"

	"cavitywright/sim/figure"

	"pgregory.net/rapid"
)

// Every figure, with numbers as bad as they get, is drawn without a panic, on
// a box of any size.
func TestDrawBearsAnything(t *testing.T) {
	odd := rapid.SampledFrom([]float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, -1, 1, 1e-300, 1e300, -1e308, 3, 10})
	axis := rapid.Custom(func(t *rapid.T) figure.Axis {
		return figure.Axis{Label: "a", Lo: odd.Draw(t, "lo"), Hi: odd.Draw(t, "hi"), Scale: figure.Scale(rapid.IntRange(0, 1).Draw(t, "scale")),
			Marks: []figure.Mark{{At: odd.Draw(t, "at"), Kind: figure.MarkKind(rapid.IntRange(0, 2).Draw(t, "kind")), Name: "m"}}}
	})
	rapid.Check(t, func(t *rapid.T) {
		xs, ys := rapid.SliceOfN(odd, 0, 9).Draw(t, "x"), rapid.SliceOfN(odd, 0, 9).Draw(t, "y")
		hue := rapid.IntRange(-3, 20).Draw(t, "hue")
		box := NewBox(0, 0, rapid.Float64Range(0, 900).Draw(t, "w"), rapid.Float64Range(0, 900).Draw(t, "h"))
		look := rapid.SampledFrom([]Look{Paper(1), Light(1)}).Draw(t, "look")
		var lines []figure.Line
		for role := figure.Wall; role <= figure.Floor; role++ {
			lines = append(lines, figure.Line{Role: role, Hue: hue, Closed: hue%2 == 0, X: xs, Y: ys, At: ys})
		}
		for _, f := range []figure.Figure{
			figure.Dots{X: axis.Draw(t, "X"), Y: axis.Draw(t, "Y"), Strip: true, StripLo: odd.Draw(t, "s0"), StripHi: odd.Draw(t, "s1"),
				Sets: []figure.DotSet{{Hue: hue, X: xs, Y: ys}}},
			figure.Paths{Lines: lines, Labels: []figure.Label{{X: odd.Draw(t, "lx"), Y: odd.Draw(t, "ly"), Text: "3 mm"}}},
			figure.Sheet{Title: "T", Rows: []figure.SheetRow{{Height: 1, Blocks: []figure.Block{{Heading: "B", Width: 1, Show: figure.Paths{Lines: lines}}}}}},
			figure.Series{X: axis.Draw(t, "X"), Y: axis.Draw(t, "Y"), Curves: []figure.Curve{{Hue: hue, X: xs, Y: ys, Err: xs, Name: "c"}}},
			figure.Scalars{Rows: []figure.Scalar{{Value: odd.Draw(t, "v"), StdErr: odd.Draw(t, "e")}}},
		} {
			var c record
			Draw(&c, f, box, look)
			for _, d := range c.dots {
				for i := range d.X {
					if !box.Inset(-1).Contains(Point{d.X[i], d.Y[i]}) {
						t.Fatalf("a dot at (%g, %g) outside %v", d.X[i], d.Y[i], box)
					}
				}
			}
			Height(f, box.W(), look)
		}
	})
}

func TestDotsAreDrawnSetBySet(t *testing.T) {
	f, look := scatter(), Paper(1)
	f.Sets[0].X[0] = 99 // beyond the axis
	var c record
	Draw(&c, f, NewBox(0, 0, 85, 60), look)
	if len(c.dots) != len(f.Sets) {
		t.Fatalf("%d sets were drawn of %d", len(c.dots), len(f.Sets))
	}
	p := LayoutDots(f, NewBox(0, 0, 85, 60), look)
	for i, d := range c.dots {
		if d.Color != look.Orbit(f.Sets[i].Hue) {
			t.Errorf("set %d has colour %v", i, d.Color)
		}
		want := len(f.Sets[i].X)
		if i == 0 {
			want--
		}
		if len(d.X) != want || d.X[want-1] != p.ToX(f.Sets[i].X[len(f.Sets[i].X)-1]) {
			t.Errorf("set %d: %d dots, want %d where the layout says", i, len(d.X), want)
		}
	}
}

func TestDotsShrinkWithTheirNumber(t *testing.T) {
	look := Paper(1)
	p := LayoutDots(scatter(), NewBox(0, 0, 85, 60), look)
	last := math.Inf(1)
	for n := 1; n < 1e7; n *= 7 {
		r := DotRadius(figure.Dots{Sets: []figure.DotSet{{X: make([]float64, n)}}}, p, look)
		if r > last || r < leastDot*look.Dot || r > largestDot*look.Dot {
			t.Fatalf("%d dots have radius %g after %g", n, r, last)
		}
		last = r
	}
}

// The strip under the s axis has, at each s, the very colour that the wall has
// there, whichever way the axis runs.
func TestStripMatchesTheWall(t *testing.T) {
	for _, reversed := range []bool{false, true} {
		f, look := scatter(), Paper(1)
		if reversed {
			f.X.Lo, f.X.Hi = f.X.Hi, f.X.Lo
		}
		box := NewBox(0, 0, 85, 60)
		var c record
		Draw(&c, f, box, look)
		p := LayoutDots(f, box, look)
		n := 0
		for _, d := range c.fills {
			b := Box{d.path.Points[0], d.path.Points[2]}
			if b.Min.Y < p.Strip.Min.Y-1e-9 || b.Max.Y > p.Strip.Max.Y+1e-9 {
				continue
			}
			n++
			mid := b.Min.X + p.Strip.W()/512
			if want := look.Hue(p.FromX(mid) / 10); apart(lab(want), lab(d.color)) > 0.02 {
				t.Fatalf("at x = %g the strip is %v, the wall %v", mid, d.color, want)
			}
		}
		if n < 200 {
			t.Fatalf("the strip has %d slices", n)
		}
	}
}

// The coloured band lies outside the disc and reaches its wall; the ink is on
// the wall itself; between them they leave no direction out.
func TestWallBand(t *testing.T) {
	look, box := Paper(1), NewBox(0, 0, 85, 85)
	f := ring()
	v := LayoutPaths(f, box, look)
	center, radius := v.ToCanvas(1, 2), 3*v.Scale
	var c record
	Draw(&c, f, box, look)
	covered := map[int]color.RGBA{}
	inked := false
	for _, d := range c.strokes {
		onWall := d.pen.Width == look.Wall
		for i, q := range d.path.Points {
			r := math.Hypot(q.X-center.X, q.Y-center.Y)
			// Chords of 4 degrees lie this far inside their circle.
			sag := radius * 1.03 * (1 - math.Cos(math.Pi/90))
			if onWall && math.Abs(r-look.Wall/2-radius) > sag {
				t.Fatalf("band runs at %g from the centre, wall at %g", r, radius)
			}
			if onWall && i > 0 {
				a := math.Atan2(center.Y-q.Y, q.X-center.X) / (2 * math.Pi) * 90
				covered[(int(math.Floor(a))+90)%90] = d.color
			}
		}
		if d.color == look.Ink && len(d.path.Points) == 90 {
			inked = true
		}
	}
	if !inked {
		t.Error("the wall has no line of ink")
	}
	if len(covered) != 90 {
		t.Errorf("the band covers %d of 90 stretches", len(covered))
	}
	for k, col := range covered {
		if d := apart(lab(col), lab(look.Hue((float64(k)+0.5)/90))); d > 0.03 {
			t.Errorf("stretch %d of 90 is off its hue by %.3f", k, d)
		}
	}
}

// A post's loop runs clockwise, its outside is the disc, and there the band is.
func TestBandOfAPostLiesInside(t *testing.T) {
	l := figure.Line{Closed: true}
	for i := range 80 {
		a := -2 * math.Pi * float64(i) / 80
		l.X, l.Y, l.At = append(l.X, math.Cos(a)), append(l.Y, math.Sin(a)), append(l.At, float64(i)/80)
	}
	v := View{Box: NewBox(-100, -100, 200, 200), Scale: 50}
	for _, q := range outward(wallPoints(l, v), 2, true) {
		if r := math.Hypot(q.X, q.Y); math.Abs(r-48) > 0.1 {
			t.Fatalf("band at %g, want 48", r)
		}
	}
}

func TestOrderOfADrawing(t *testing.T) {
	look := Paper(1)
	var c record
	Draw(&c, ring(), NewBox(0, 0, 85, 85), look)
	if c.fills[0].color != look.Paper || c.fills[1].color != look.Floor {
		t.Error("paper and floor do not come first")
	}
	last := c.fills[len(c.fills)-1]
	if last.color != look.Orbits[1] {
		t.Error("the ball is not over the rest")
	}
}

func TestLegendAvoidsCurves(t *testing.T) {
	f := decay()
	p := LayoutSeries(f, NewBox(0, 0, 85, 60), Paper(1))
	b := quietCorner(f, p, 20, 6, Paper(1))
	for _, curve := range f.Curves {
		if l := lengthIn(b, curve, p); l > 0 {
			t.Errorf("the legend at %v lies on %g of %s", b, l, curve.Name)
		}
	}
}

func TestWrapKeepsUnits(t *testing.T) {
	text := []string{"a perimeter of 10.283 mm and 20 000 bounces"}
	for width := 10.0; width < 60; width++ {
		for _, row := range wrap(text, width, 2) {
			if row == "mm" || len(row) > 2 && row[:2] == "mm" || len(row) > 3 && row[:3] == "000" {
				t.Fatalf("width %g: a row begins %q", width, row)
			}
		}
	}
}
