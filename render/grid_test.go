package render

import (
	"image/color"
	"math"
	"slices"
	"strings"
	"testing"

	"cavitywright/sim/figure"

	"pgregory.net/rapid"
)

// waves is a map of n by m cells with one blank cell.
func waves(n, m int) figure.Grid {
	f := figure.Grid{
		X: figure.Axis{Label: "s", Unit: "mm", Lo: 0, Hi: 6}, Y: figure.Axis{Label: "p = sin χ", Lo: -1, Hi: 1},
		Value: figure.Axis{Label: "stretching", Unit: "1/bounce", Lo: 0, Hi: 1}, Columns: n, Rows: m,
		Strip: true, StripHi: 6, Caption: []string{"Waves."},
	}
	for k := range n * m {
		f.Values = append(f.Values, 0.5+0.5*math.Sin(float64(k)))
	}
	f.Values[1] = math.NaN()
	return f
}

// The scales of colour keep what they promise: inside sRGB, neighbours equally
// far apart, lightness steady, and the least value near the paper.
func TestRamps(t *testing.T) {
	for name, p := range map[string]rampPath{"light": onLight, "dark": onDark} {
		for i := range 101 {
			l, c, hue := p.at(float64(i) / 100)
			r, g, b := oklch(l, c, hue)
			if min(r, g, b) < -1e-3 || max(r, g, b) > 1+1e-3 {
				t.Errorf("%s: at %d %% the colour lies outside sRGB: %.4f %.4f %.4f", name, i, r, g, b)
			}
		}
		ramp := p.ramp()
		var steps []float64
		const stride = 8 // the rounding of channels is as large as one step
		for i := stride; i < len(ramp); i += stride {
			a, b := lab(ramp[i-stride]), lab(ramp[i])
			steps = append(steps, apart(a, b))
			if (b[0]-a[0])*(p.l1-p.l0) <= 0 {
				t.Errorf("%s: the lightness turns at step %d", name, i)
			}
		}
		if lo, hi := slices.Min(steps), slices.Max(steps); hi > 1.25*lo {
			t.Errorf("%s: neighbours are between %.4f and %.4f apart", name, lo, hi)
		}
	}
	for name, l := range looks {
		r := NewRamp(l)
		if least, most := apart(lab(r[0]), lab(l.Paper)), apart(lab(r[len(r)-1]), lab(l.Paper)); least > 0.15 || most < 0.5 {
			t.Errorf("%s: the ends of the scale are %.2f and %.2f from the paper", name, least, most)
		}
		if r.At(math.NaN()) != r[0] || r.At(-3) != r[0] || r.At(7) != r[len(r)-1] {
			t.Errorf("%s: the scale is not held to its ends", name)
		}
	}
}

// Grey print and dichromacy: with lightness alone, quarters of the scale stay
// well apart.
func TestRampInGrey(t *testing.T) {
	for _, r := range []*Ramp{&rampOnLight, &rampOnDark} {
		for q := range 4 {
			a, b := lab(r.At(float64(q)/4)), lab(r.At(float64(q+1)/4))
			if d := math.Abs(a[0] - b[0]); d < 0.08 {
				t.Errorf("the quarter from %d/4 spans a lightness of %.3f only", q, d)
			}
		}
	}
}

// A map is drawn cell for cell in the colour of its value, and says what the
// colours mean.
func TestGridIsDrawn(t *testing.T) {
	const n, m = 12, 7
	f, look := waves(n, m), Paper(1)
	box := NewBox(0, 0, 85, 80)
	var c record
	Draw(&c, f, box, look)
	g := LayoutGrid(f, box, look)
	ramp := NewRamp(look)
	if g.Bar.Empty() || overlap(g.Bar, g.Frame) || !holds(box, g.Bar) || !holds(box, g.Frame) {
		t.Fatalf("the bar lies at %v, the frame at %v", g.Bar, g.Frame)
	}
	for k := range n * m {
		at := Point{g.Frame.Min.X + g.Frame.W()*(float64(k%n)+0.3)/n, g.Frame.Max.Y - g.Frame.H()*(float64(k/n)+0.3)/m}
		var got color.RGBA
		for _, d := range c.fills { // what was painted last counts
			if b := boundsOf(d.path); b.Contains(at) {
				got = d.color
			}
		}
		want := ramp.At(f.Values[k])
		if math.IsNaN(f.Values[k]) {
			want = look.Paper
		}
		if got != want {
			t.Fatalf("cell %d of value %g is %v, want %v", k, f.Values[k], got, want)
		}
	}
	texts := ""
	for _, x := range c.texts {
		texts += x.String + "\n"
		if !holds(box, textBox(x)) {
			t.Errorf("%q leaves the page", x.String)
		}
	}
	for _, want := range []string{"stretching (1/bounce)", "s (mm)", "p = sin χ", "Waves."} {
		if !strings.Contains(texts, want) {
			t.Errorf("%q is not written", want)
		}
	}
}

func boundsOf(p Path) Box {
	b := Box{p.Points[0], p.Points[0]}
	for _, q := range p.Points {
		b = Box{Point{min(b.Min.X, q.X), min(b.Min.Y, q.Y)}, Point{max(b.Max.X, q.X), max(b.Max.Y, q.Y)}}
	}
	return b
}

// On a logarithmic scale a value that is not positive is blank, and the place
// of a value is that of its logarithm.
func TestValueScale(t *testing.T) {
	at := ValueScale(figure.Axis{Lo: 0.01, Hi: 100, Scale: figure.Log})
	if x := at(1); math.Abs(x-0.5) > 1e-12 || !math.IsNaN(at(0)) || !math.IsNaN(at(-1)) {
		t.Errorf("1 lies at %g, 0 at %g", x, at(0))
	}
	if x := ValueScale(figure.Axis{Lo: 2, Hi: 4})(3); x != 0.5 {
		t.Errorf("3 lies at %g", x)
	}
}

// Any map, whatever its numbers, is drawn without a panic and within its box.
func TestGridBearsAnything(t *testing.T) {
	odd := rapid.SampledFrom([]float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, -1, 1, 1e-300, 1e300, 3})
	rapid.Check(t, func(t *rapid.T) {
		f := waves(rapid.IntRange(1, 9).Draw(t, "n"), rapid.IntRange(2, 9).Draw(t, "m"))
		f.Value = figure.Axis{Lo: odd.Draw(t, "lo"), Hi: odd.Draw(t, "hi"), Scale: figure.Scale(rapid.IntRange(0, 1).Draw(t, "scale"))}
		for i := range f.Values {
			f.Values[i] = odd.Draw(t, "v")
		}
		f.Values = f.Values[:rapid.IntRange(0, len(f.Values)).Draw(t, "len")]
		box := NewBox(0, 0, rapid.Float64Range(0, 900).Draw(t, "w"), rapid.Float64Range(0, 900).Draw(t, "h"))
		var c record
		Draw(&c, f, box, Light(1))
		Height(f, box.W(), Light(1))
	})
}
