package render

import (
	"math"
	"testing"

	"cavitywright/sim/figure"

	"pgregory.net/rapid"
)

func TestPlotRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := scatter()
		f.X.Lo, f.X.Hi = ends(t)
		if rapid.Bool().Draw(t, "reversed") {
			f.X.Lo, f.X.Hi = f.X.Hi, f.X.Lo
		}
		f.Y = figure.Axis{Lo: 1e-6, Hi: 100, Scale: figure.Log}
		w := rapid.Float64Range(60, 2000).Draw(t, "w")
		for _, look := range []Look{Paper(1), Dark(1.5)} {
			p := LayoutDots(f, NewBox(10, 20, w, w*0.6), look)
			u := rapid.Float64Range(0, 1).Draw(t, "u")
			x := f.X.Lo + u*(f.X.Hi-f.X.Lo)
			y := 1e-6 * math.Pow(1e8, u)
			if got := p.FromX(p.ToX(x)); math.Abs(got-x) > 1e-9*(math.Abs(f.X.Lo)+math.Abs(f.X.Hi)) {
				t.Fatalf("x %g came back as %g", x, got)
			}
			if got := p.FromY(p.ToY(y)); math.Abs(got/y-1) > 1e-9 {
				t.Fatalf("y %g came back as %g", y, got)
			}
			if a, b := p.ToX(f.X.Lo), p.ToX(f.X.Hi); math.Abs(a-p.Frame.Min.X) > 1e-6 || math.Abs(b-p.Frame.Max.X) > 1e-6 {
				t.Fatalf("axis ends at %g and %g, frame %v", a, b, p.Frame)
			}
			if a, b := p.ToY(1e-6), p.ToY(100); math.Abs(a-p.Frame.Max.Y) > 1e-6 || math.Abs(b-p.Frame.Min.Y) > 1e-6 {
				t.Fatalf("y does not point up: ends at %g and %g, frame %v", a, b, p.Frame)
			}
		}
	})
}

// On a pane the plot area is whole pixels, so that a live picture fits it.
func TestFrameIsWholePixels(t *testing.T) {
	for w := 64.0; w < 1200; w += 37 {
		p := LayoutDots(scatter(), NewBox(0, 0, w, w/2+3), Light(1))
		for _, v := range []float64{p.Frame.Min.X, p.Frame.Min.Y, p.Frame.Max.X, p.Frame.Max.Y, p.Strip.Min.Y, p.Strip.Max.Y} {
			if v != math.Trunc(v) {
				t.Fatalf("width %g: frame %v strip %v", w, p.Frame, p.Strip)
			}
		}
	}
}

// Whatever the size, the parts lie in the box, from the top: frame, strip.
func TestPlotStaysInItsBox(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		look := rapid.SampledFrom([]Look{Paper(1), Light(1), Dark(2)}).Draw(t, "look")
		w := rapid.Float64Range(12, 120).Draw(t, "w") * look.Text
		box := NewBox(3, 5, w, rapid.Float64Range(12, 60).Draw(t, "h")*look.Text)
		p := LayoutDots(scatter(), box, look)
		if p.Frame.Empty() || !holds(box, p.Frame) || !holds(box, p.Strip) {
			t.Fatalf("box %v frame %v strip %v", box, p.Frame, p.Strip)
		}
		if p.Strip.Min.Y < p.Frame.Max.Y || p.Strip.Min.X != p.Frame.Min.X || p.Strip.Max.X != p.Frame.Max.X {
			t.Fatalf("strip %v is not under frame %v", p.Strip, p.Frame)
		}
	})
}

// Nothing written is cut off at the box, and no two texts run into each other.
func TestTextIsClear(t *testing.T) {
	all := figures()
	rapid.Check(t, func(t *rapid.T) {
		look := rapid.SampledFrom([]Look{Paper(1), Light(1), Dark(2)}).Draw(t, "look")
		name := rapid.SampledFrom([]string{"dots", "series", "paths", "scalars", "no dots", "no series"}).Draw(t, "figure")
		f := all[name]
		if d, ok := f.(figure.Dots); ok && name == "dots" {
			d.X.Lo, d.X.Hi = ends(t)
			f = d
		}
		w := rapid.Float64Range(28, 120).Draw(t, "w") * look.Text
		h := Height(f, w, look) * rapid.Float64Range(1, 1.5).Draw(t, "h")
		box := NewBox(0, 0, w, h)
		var c record
		Draw(&c, f, box, look)
		for i, a := range c.texts {
			if !holds(box, textBox(a)) {
				t.Fatalf("%q at %v leaves the box %v", a.String, textBox(a), box)
			}
			for _, b := range c.texts[:i] {
				if overlap(textBox(a), textBox(b)) {
					t.Fatalf("%q at %v runs into %q at %v", a.String, textBox(a), b.String, textBox(b))
				}
			}
		}
	})
}

func TestTitlesHaveUnits(t *testing.T) {
	var c record
	Draw(&c, scatter(), NewBox(0, 0, 85, 60), Paper(1))
	seen := map[string]bool{}
	for _, text := range c.texts {
		seen[text.String] = true
	}
	for _, want := range []string{"s (mm)", "p = sin χ", "−1.0", "0.0", "10", "1/n", "−1/n", "wall", "post"} {
		if !seen[want] {
			t.Errorf("%q is not written; there is %v", want, seen)
		}
	}
}
