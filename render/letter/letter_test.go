package letter

import (
	"math"
	"strings"
	"testing"

	"golang.org/x/image/font"
	"pgregory.net/rapid"
)

// signs is every sign that the figures use.
const signs = "0123456789−+-.,;:()±×·=<>≤≥°χκλμµπφθεp sin mm ⁻⁰¹²³⁴⁵⁶⁷⁸⁹éç"

// Runs lose nothing, overlap nowhere and are as wide as the string.
func TestRunsMakeUpTheString(t *testing.T) {
	any := rapid.StringOf(rapid.OneOf(rapid.SampledFrom([]rune(signs)), rapid.Rune()))
	rapid.Check(t, func(t *rapid.T) {
		s := any.Draw(t, "s")
		w := Weight(rapid.IntRange(0, 1).Draw(t, "weight"))
		var all strings.Builder
		x := 0.0
		for _, r := range Runs(s, w) {
			all.WriteString(r.String)
			if math.Abs(r.X-x) > 1e-9 || r.Font.Weight() != w {
				t.Fatalf("a run begins at %g, the one before ends at %g", r.X, x)
			}
			x += r.W
		}
		if all.String() != s || math.Abs(x-Width(s, w)) > 1e-9 {
			t.Fatalf("%q became %q, %g wide, not %g", s, all.String(), x, Width(s, w))
		}
	})
}

// Widths are those of the faces that canvases draw with.
func TestWidthIsThatOfTheFace(t *testing.T) {
	for _, w := range []Weight{Regular, Bold} {
		for _, r := range Runs("s = −1.5 mm, p = sin χ ≤ 1", w) {
			face := r.Font.Face(200)
			got := float64(font.MeasureString(face, r.String)) / 64 / 200
			// A face rounds each advance to a 64th of a pixel.
			if tol := float64(len(r.String)) / 64 / 200; math.Abs(got-r.W) > tol {
				t.Errorf("%q is %g em wide, its face says %g", r.String, r.W, got)
			}
		}
	}
}

func TestEverySignHasAGlyph(t *testing.T) {
	for _, w := range []Weight{Regular, Bold} {
		for _, r := range signs {
			run := Runs(string(r), w)[0]
			if _, _, ok := run.Font.Face(20).GlyphBounds(r); !ok {
				t.Errorf("weight %d: no glyph for %q", w, r)
			}
			p := parsed()[run.Font]
			if g, err := p.GlyphIndex(nil, r); err != nil || g == 0 {
				t.Errorf("weight %d: %q is in no font", w, r)
			}
		}
	}
}

// Columns of numbers align: all figures have one width, and the minus is as
// wide as they, to a fiftieth of the type size.
func TestFiguresAreTabular(t *testing.T) {
	for _, w := range []Weight{Regular, Bold} {
		for _, r := range "123456789−" {
			if d := math.Abs(Width(string(r), w) - Width("0", w)); d > 0.02 {
				t.Errorf("weight %d: %q differs from 0 by %g em", w, r, d)
			}
		}
	}
}
