package render

import (
	"math"
	"testing"

	"cavitywright/sim/figure"

	"pgregory.net/rapid"
)

// lobed is a far field with one lobe along +x and one half as high upwards.
func lobed() figure.Polar {
	c := figure.Curve{Name: "TM (E out of plane)"}
	for i := range 360 {
		a := (float64(i) + 0.5) * math.Pi / 180
		c.X = append(c.X, a)
		c.Y = append(c.Y, math.Exp(-math.Pow(math.Remainder(a, 2*math.Pi)/0.2, 2))+0.5*math.Exp(-math.Pow((a-math.Pi/2)/0.2, 2)))
		c.Err = append(c.Err, 0.02)
	}
	return figure.Polar{Radius: figure.Axis{Label: "intensity / peak", Hi: 1}, Curves: []figure.Curve{c, c}, Caption: []string{"What was computed, 20 000 rays."}}
}

// TestPolarPlaces: a direction is drawn counter-clockwise from +x, a value as a
// distance from the centre; the greatest value stands at the rim and the curve
// stays in the box.
func TestPolarPlaces(t *testing.T) {
	f, look, box := lobed(), Paper(1), NewBox(0, 0, 85, 110)
	p := LayoutPolar(f, box, look)
	if q := p.At(0, 1); math.Abs(q.X-p.Centre.X-p.Radius) > 1e-9 || math.Abs(q.Y-p.Centre.Y) > 1e-9 {
		t.Errorf("the value 1 along +x stands at %v from %v", q, p.Centre)
	}
	if q := p.At(math.Pi/2, 0.5); math.Abs(q.Y-p.Centre.Y+p.Radius/2) > 1e-9 {
		t.Errorf("half the value upwards stands at %v from %v", q, p.Centre)
	}
	if p.Radius < 30 || !box.Contains(p.At(0.7, 1)) {
		t.Errorf("the disc has the radius %g", p.Radius)
	}
	var c record
	Draw(&c, f, box, look)
	said := map[string]bool{}
	for i, a := range c.texts {
		said[a.String] = true
		if !holds(box, textBox(a)) {
			t.Errorf("%q stands outside the page", a.String)
		}
		for _, b := range c.texts[:i] {
			if overlap(textBox(a), textBox(b)) {
				t.Errorf("%q and %q overlap", a.String, b.String)
			}
		}
	}
	for _, word := range []string{"0°", "90°", "330°", "intensity / peak", "TM (E out of plane)", "What was computed, 20 000 rays."} {
		if !said[word] {
			t.Errorf("the figure does not say %q", word)
		}
	}
}

// TestPolarBearsAnything draws far fields of bad numbers on boxes of any size.
func TestPolarBearsAnything(t *testing.T) {
	odd := rapid.SampledFrom([]float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, -1, 1, 1e-300, 1e300, 3})
	rapid.Check(t, func(t *rapid.T) {
		xs, ys := rapid.SliceOfN(odd, 0, 9).Draw(t, "x"), rapid.SliceOfN(odd, 0, 9).Draw(t, "y")
		f := figure.Polar{Radius: figure.Axis{Label: "a", Lo: odd.Draw(t, "lo"), Hi: odd.Draw(t, "hi")}, Curves: []figure.Curve{{Name: "c", X: xs, Y: ys, Err: xs}}}
		box := NewBox(0, 0, rapid.Float64Range(0, 900).Draw(t, "w"), rapid.Float64Range(0, 900).Draw(t, "h"))
		Draw(&record{}, f, box, Light(1))
		Height(f, box.W(), Light(1))
	})
}

// TestSteps: a histogram is level over its classes, which meet half way.
func TestSteps(t *testing.T) {
	s := stepped(figure.Curve{X: []float64{1, 2, 3}, Y: []float64{5, 7, 6}, Err: []float64{1, 2, 3}})
	want := []float64{0.5, 1.5, 1.5, 2.5, 2.5, 3.5}
	for i, x := range want {
		if s.X[i] != x || s.Y[i] != []float64{5, 7, 6}[i/2] || s.Err[i] != float64(i/2+1) {
			t.Fatalf("the steps are %v, %v ± %v", s.X, s.Y, s.Err)
		}
	}
	if one := stepped(figure.Curve{X: []float64{1}, Y: []float64{5}}); len(one.X) != 1 {
		t.Errorf("a histogram of one class has the corners %v", one.X)
	}
}

// TestForms: guides are thin and unmarked and take no dash from the measured
// curves; points stand alone with bars.
func TestForms(t *testing.T) {
	look := Paper(1)
	x, y := []float64{0, 1, 2}, []float64{1, 2, 3}
	curves := []figure.Curve{{X: x, Y: y, Form: figure.Guide}, {X: x, Y: y}, {X: x, Y: y, Err: []float64{1, 1, 1}, Form: figure.Points, Hue: 2}}
	if got := places(curves); got[1] != 0 || got[2] != 1 {
		t.Errorf("the places are %v", got)
	}
	var c record
	Draw(&c, figure.Series{X: figure.Axis{Hi: 2}, Y: figure.Axis{Hi: 4}, Curves: curves}, NewBox(0, 0, 85, 60), look)
	if len(c.dots) != 2 {
		t.Errorf("%d curves have their points marked, want 2", len(c.dots))
	}
	bars, guides := 0, 0
	for _, s := range c.strokes {
		if s.pen.Width == look.Line && s.pen.Dash == nil && s.color == look.Orbit(2) {
			bars++
		}
		if s.pen.Width == look.Line && s.pen.Dash != nil {
			guides++
		}
	}
	if bars != 3 || guides != 1 {
		t.Errorf("there are %d bars and %d guides, want 3 and 1", bars, guides)
	}
}
