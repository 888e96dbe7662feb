package render

import (
	"image/color"
	"math"
	"testing"
)

var looks = map[string]Look{"paper": Paper(1), "light": Light(1), "dark": Dark(1)}

// linear decodes a channel of sRGB (IEC 61966-2-1).
func linear(v uint8) float64 {
	c := float64(v) / 255
	if c <= 0.04045 {
		return c / 12.92
	}
	return math.Pow((c+0.055)/1.055, 2.4)
}

// contrast is the contrast ratio of WCAG 2.2 (relative luminance, 1.4.3).
func contrast(a, b color.RGBA) float64 {
	lum := func(c color.RGBA) float64 {
		return 0.2126*linear(c.R) + 0.7152*linear(c.G) + 0.0722*linear(c.B)
	}
	la, lb := lum(a), lum(b)
	return (max(la, lb) + 0.05) / (min(la, lb) + 0.05)
}

// oklab is the colour in OKLab from linear sRGB (Ottosson 2020, the forward
// matrices, which the code that is tested does not use).
func oklab(r, g, b float64) [3]float64 {
	l := math.Cbrt(0.4122214708*r + 0.5363325363*g + 0.0514459929*b)
	m := math.Cbrt(0.2119034982*r + 0.6806995451*g + 0.1073969566*b)
	s := math.Cbrt(0.0883024619*r + 0.2817188376*g + 0.6299787005*b)
	return [3]float64{
		0.2104542553*l + 0.7936177850*m - 0.0040720468*s,
		1.9779984951*l - 2.4285922050*m + 0.4505937099*s,
		0.0259040371*l + 0.7827717662*m - 0.8086757660*s,
	}
}

func lab(c color.RGBA) [3]float64 { return oklab(linear(c.R), linear(c.G), linear(c.B)) }

func apart(a, b [3]float64) float64 {
	return math.Sqrt((a[0]-b[0])*(a[0]-b[0]) + (a[1]-b[1])*(a[1]-b[1]) + (a[2]-b[2])*(a[2]-b[2]))
}

// Black on white is 21:1, and #767676 on white is just above 4.5:1: well-known
// values of WCAG, from memory.
func TestContrastFormula(t *testing.T) {
	if c := contrast(hex(0), hex(0xFFFFFF)); math.Abs(c-21) > 1e-9 {
		t.Errorf("black on white %g", c)
	}
	if c := contrast(hex(0x767676), hex(0xFFFFFF)); c < 4.5 || c > 4.6 {
		t.Errorf("grey on white %g", c)
	}
}

func TestContrast(t *testing.T) {
	for name, l := range looks {
		for _, ground := range []color.RGBA{l.Paper, l.Floor} {
			for i, c := range l.Orbits {
				if k := contrast(c, ground); k < 3 {
					t.Errorf("%s: orbit %d has contrast %.2f", name, i, k)
				}
			}
			if k := contrast(l.Accent, ground); k < 3 {
				t.Errorf("%s: accent has contrast %.2f", name, k)
			}
			if k := min(contrast(l.Ink, ground), contrast(l.Sea, ground)); k < 7 {
				t.Errorf("%s: ink has contrast %.2f", name, k)
			}
		}
	}
}

func TestNeighboursDifferInGrey(t *testing.T) {
	for name, l := range looks {
		for i, c := range l.Orbits {
			next := l.Orbits[(i+1)%len(l.Orbits)]
			if d := math.Abs(lab(c)[0] - lab(next)[0]); d < 0.10 {
				t.Errorf("%s: orbits %d and %d differ in lightness by %.3f", name, i, i+1, d)
			}
		}
	}
}

// Colours as a dichromat sees them: Machado, Oliveira and Fernandes 2009,
// severity 1, matrices on linear sRGB, from memory of their table.
var sights = map[string][9]float64{
	"full":   {1, 0, 0, 0, 1, 0, 0, 0, 1},
	"protan": {0.152286, 1.052583, -0.204868, 0.114503, 0.786281, 0.099216, -0.003882, -0.048116, 1.051998},
	"deutan": {0.367322, 0.860646, -0.227968, 0.280085, 0.672501, 0.047413, -0.011820, 0.042940, 0.968881},
	"tritan": {1.255528, -0.076749, -0.178779, -0.078411, 0.930809, 0.147602, 0.004733, 0.691367, 0.303900},
}

func TestOrbitsAreToldApartByAllEyes(t *testing.T) {
	for name, l := range looks {
		all := append(l.Orbits[:], l.Accent, l.Ink)
		for sight, m := range sights {
			var seen [][3]float64
			for _, c := range all {
				in := [3]float64{linear(c.R), linear(c.G), linear(c.B)}
				var out [3]float64
				for i := range out {
					out[i] = min(max(m[3*i]*in[0]+m[3*i+1]*in[1]+m[3*i+2]*in[2], 0), 1)
				}
				seen = append(seen, oklab(out[0], out[1], out[2]))
			}
			for i := range seen {
				for j := range i {
					// 0.05 is two to three times a difference just noticed
					// between patches side by side (common practice).
					if d := apart(seen[i], seen[j]); d < 0.05 {
						t.Errorf("%s, %s sight: colours %d and %d are %.3f apart", name, sight, j, i, d)
					}
				}
			}
		}
	}
}

func TestWheelIsEven(t *testing.T) {
	for name, l := range looks {
		first := lab(l.Wheel[0])
		chroma := math.Hypot(first[1], first[2])
		for i, c := range l.Wheel {
			v, next := lab(c), lab(l.Wheel[(i+1)%len(l.Wheel)])
			if math.Abs(v[0]-first[0]) > 0.004 || math.Abs(math.Hypot(v[1], v[2])-chroma) > 0.006 {
				t.Fatalf("%s: step %d has lightness %.4f and chroma %.4f, step 0 %.4f and %.4f",
					name, i, v[0], math.Hypot(v[1], v[2]), first[0], chroma)
			}
			if d := apart(v, next); d > 0.008 {
				t.Fatalf("%s: steps %d and %d are %.4f apart", name, i, i+1, d)
			}
		}
		// Opposite places of the wall look opposite.
		if d := apart(lab(l.Hue(0)), lab(l.Hue(0.5))); d < 1.9*chroma {
			t.Errorf("%s: opposite hues are %.3f apart", name, d)
		}
	}
}

func TestHueIsCyclic(t *testing.T) {
	l := Paper(1)
	for i := range 16 { // sixteenths are exact, and so are they a turn on
		f := float64(i) / 16
		if l.Hue(f) != l.Hue(f+1) || l.Hue(f) != l.Hue(f-3) {
			t.Errorf("hue of %g differs a turn on", f)
		}
	}
	if l.Hue(math.NaN()) != l.Hue(0) || l.Hue(math.Inf(1)) != l.Hue(0) || l.Hue(-1e-300) != l.Hue(0) {
		t.Error("hue of no number is not that of 0")
	}
}

// Journals want type of 7 to 8 points in a column 85 mm wide, and lines no
// thinner than a quarter of a point (common practice).
func TestPaperIsLegible(t *testing.T) {
	l, pt := Paper(1), 25.4/72
	if l.Small < 7*pt-1e-9 || l.Text > 9*pt || l.Hair < 0.25*pt {
		t.Errorf("type %.1f and %.1f pt, lines from %.2f pt", l.Small/pt, l.Text/pt, l.Hair/pt)
	}
	if m := Paper(10); math.Abs(m.Text-10*l.Text) > 1e-9 || math.Abs(m.Wall-10*l.Wall) > 1e-9 {
		t.Error("sizes do not follow the unit")
	}
}
