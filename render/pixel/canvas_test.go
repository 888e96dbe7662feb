package pixel

import (
	"image"
	"image/color"
	"math"
	"testing"
	"time"

	"cavitywright/render"

	"pgregory.net/rapid"
)

var (
	white = color.RGBA{255, 255, 255, 255}
	black = color.RGBA{0, 0, 0, 255}
	red   = color.RGBA{200, 30, 0, 255}
)

func blank(w, h int) (*image.RGBA, *Canvas) {
	img := image.NewRGBA(image.Rect(0, 0, w, h))
	c := New(img)
	c.Clear(white)
	return img, c
}

// inked is the area, in pixels, that black covers on white.
func inkedArea(img *image.RGBA) float64 {
	sum := 0.0
	for i := 0; i < len(img.Pix); i += 4 {
		sum += 1 - float64(img.Pix[i])/255
	}
	return sum
}

func segment(a, b render.Point) render.Path { return render.Segment(a, b) }

func point(t *rapid.T, lo, hi float64) render.Point {
	return render.Point{X: rapid.Float64Range(lo, hi).Draw(t, "x"), Y: rapid.Float64Range(lo, hi).Draw(t, "y")}
}

// A line covers its length times its width, in any direction and at any width.
func TestLineArea(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		img, c := blank(100, 100)
		a, b := point(t, 10, 90), point(t, 10, 90)
		w := rapid.Float64Range(0.5, 6).Draw(t, "w")
		length := math.Hypot(a.X-b.X, a.Y-b.Y)
		c.Stroke(segment(a, b), render.Pen{Width: w, Color: black, Cap: render.Butt})
		want := length * w
		// Each pixel is rounded to one of 256 steps; hairlines have skewed ends.
		if got := inkedArea(img); math.Abs(got-want) > 0.015*want+w*w*0.6+0.2 {
			t.Fatalf("a line %g long and %g wide covers %g, want %g", length, w, got, want)
		}
	})
}

// The ink of a line has its centre of mass on the line.
func TestLineIsWhereItShouldBe(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		img, c := blank(100, 100)
		a, b := point(t, 10, 90), point(t, 10, 90)
		length := math.Hypot(a.X-b.X, a.Y-b.Y)
		if length < 5 {
			t.Skip("too short to have a direction in pixels")
		}
		w := rapid.SampledFrom([]float64{1, 1.5, 2.2, 3, 7}).Draw(t, "w")
		c.Stroke(segment(a, b), render.Pen{Width: w, Color: black, Cap: render.Butt})
		nx, ny := (b.Y-a.Y)/length, -(b.X-a.X)/length
		sum, off, far := 0.0, 0.0, 0.0
		for y := range 100 {
			for x := range 100 {
				ink := 1 - float64(img.Pix[img.PixOffset(x, y)])/255
				d := (float64(x)+0.5-a.X)*nx + (float64(y)+0.5-a.Y)*ny
				sum += ink
				off += ink * d
				if ink > 0.02 {
					far = max(far, math.Abs(d))
				}
			}
		}
		// The middle of a pixel stands for the ink in it, which moves the
		// centre by up to an eighth of a pixel at each of two edges.
		if math.Abs(off/sum) > 0.25/w+0.02 || far > w/2+1.5 {
			t.Fatalf("%v to %v, width %g: centre %g off, ink up to %g off", a, b, w, off/sum, far)
		}
	})
}

// A bent line's outline never cancels itself: each of its points is inked.
func TestWidePolylineHasNoHoles(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		img, c := blank(100, 100)
		pts := make([]render.Point, rapid.IntRange(2, 7).Draw(t, "n"))
		var p render.Path
		for i := range pts {
			pts[i] = point(t, 10, 90)
			if i == 0 {
				p.MoveTo(pts[i].X, pts[i].Y)
			} else {
				p.LineTo(pts[i].X, pts[i].Y)
			}
		}
		if rapid.Bool().Draw(t, "closed") {
			p.Close()
			pts = append(pts, pts[0])
		}
		c.Stroke(p, render.Pen{Width: 6, Color: black})
		for i := 1; i < len(pts); i++ {
			for k := range 101 {
				u := float64(k) / 100
				x, y := pts[i-1].X+u*(pts[i].X-pts[i-1].X), pts[i-1].Y+u*(pts[i].Y-pts[i-1].Y)
				if img.Pix[img.PixOffset(int(x), int(y))] > 2 {
					t.Fatalf("a hole at (%g, %g)", x, y)
				}
			}
		}
	})
}

func TestRoundEndsAndJoins(t *testing.T) {
	img, c := blank(60, 60)
	p := segment(render.Point{X: 20, Y: 30}, render.Point{X: 40, Y: 30})
	c.Stroke(p, render.Pen{Width: 10, Color: black})
	want := 20*10 + math.Pi*25
	if got := inkedArea(img); math.Abs(got-want) > 1.5 {
		t.Errorf("round ends: area %g, want %g", got, want)
	}
	img, c = blank(60, 60)
	var dot render.Path
	dot.MoveTo(30, 30)
	dot.LineTo(30, 30)
	c.Stroke(dot, render.Pen{Width: 10, Color: black})
	if got := inkedArea(img); math.Abs(got-math.Pi*25) > 1.5 {
		t.Errorf("a line without length: area %g, want a disc of %g", got, math.Pi*25)
	}
	img, c = blank(60, 60)
	c.Stroke(render.Disc(render.Point{X: 30, Y: 30}, 20), render.Pen{Width: 4, Color: black})
	if got, want := inkedArea(img), math.Pi*(22*22-18*18); math.Abs(got/want-1) > 0.01 {
		t.Errorf("a ring: area %g, want %g", got, want)
	}
}

func TestDashes(t *testing.T) {
	for _, w := range []float64{1, 4} {
		img, c := blank(120, 20)
		c.Stroke(segment(render.Point{X: 10, Y: 10}, render.Point{X: 110, Y: 10}),
			render.Pen{Width: w, Color: black, Dash: []float64{6, 4}, Cap: render.Butt})
		if got := inkedArea(img); math.Abs(got-60*w) > 1 {
			t.Errorf("width %g: area %g, want %g", w, got, 60*w)
		}
	}
}

func TestFillIsEvenOdd(t *testing.T) {
	p := render.NewBox(10.25, 10.5, 60, 40).Path()
	q := render.NewBox(20, 20, 10.5, 10).Path() // the same sense as the outer one
	r := render.Disc(render.Point{X: 55, Y: 30}, 10)
	for _, s := range []render.Path{q, r} {
		p.Ops, p.Points = append(p.Ops, s.Ops...), append(p.Points, s.Points...)
	}
	img, c := blank(80, 60)
	c.Fill(p, black)
	if got, want := inkedArea(img), 60*40-105-100*math.Pi; math.Abs(got-want) > 2 {
		t.Errorf("area %g, want %g", got, want)
	}
	img, c = blank(80, 60)
	c.Fill(render.NewBox(10.25, 10.5, 60.5, 40.25).Path(), black)
	if got, want := inkedArea(img), 60.5*40.25; math.Abs(got-want) > 0.6 {
		t.Errorf("box: area %g, want %g", got, want)
	}
}

func TestDotsHaveTheirArea(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		img, c := blank(60, 60)
		r := rapid.Float64Range(0.4, 12).Draw(t, "r")
		q := point(t, 20, 40)
		c.Dots(render.Dots{X: []float64{q.X}, Y: []float64{q.Y}, Radius: r, Color: black})
		// The radius is rounded to a sixteenth, and coverage down.
		want := math.Pi * r * r
		if got := inkedArea(img); math.Abs(got-want) > 2*math.Pi*r/30+0.03*want+0.02 {
			t.Fatalf("radius %g covers %g, want %g", r, got, want)
		}
	})
}

// A disc half beyond an edge paints its other half, and nothing elsewhere.
func TestDotsAtTheEdge(t *testing.T) {
	for _, q := range [][2]float64{{0, 20}, {40, 20}, {20, 0}, {20, 40}} {
		img, c := blank(40, 40)
		c.Dots(render.Dots{X: []float64{q[0]}, Y: []float64{q[1]}, Radius: 3, Color: black})
		if got, want := inkedArea(img), math.Pi*9/2; math.Abs(got-want) > 1.2 {
			t.Errorf("at %v: area %g, want %g", q, got, want)
		}
	}
}

// Whatever is drawn, opaque stays opaque, and no channel exceeds its alpha.
func TestColoursStayValid(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		img := image.NewRGBA(image.Rect(0, 0, 8, 8))
		c := New(img)
		opaque := rapid.Bool().Draw(t, "opaque")
		if opaque {
			c.Clear(color.RGBA{rapid.Uint8().Draw(t, "R"), 255, 7, 255})
		}
		for range rapid.IntRange(1, 20).Draw(t, "n") {
			alpha := rapid.Uint8().Draw(t, "alpha")
			col := color.RGBA{alpha, rapid.Uint8Range(0, alpha).Draw(t, "g"), 0, alpha}
			switch rapid.IntRange(0, 2).Draw(t, "what") {
			case 0:
				c.Fill(render.NewBox(point(t, -2, 5).X, 0.3, 5, 5).Path(), col)
			case 1:
				c.Stroke(segment(point(t, -3, 11), point(t, -3, 11)), render.Pen{Width: 1.3, Color: col})
			default:
				c.Dots(render.Dots{X: []float64{point(t, 0, 8).X}, Y: []float64{4}, Radius: 2, Color: col})
			}
		}
		for i := 0; i < len(img.Pix); i += 4 {
			p := img.Pix[i : i+4]
			if opaque && p[3] != 255 || max(p[0], p[1], p[2]) > p[3] {
				t.Fatalf("pixel %v", p)
			}
		}
	})
}

// Every coverage and every opacity, exhaustively: no lane runs over, and the
// mix is the rounded one to within a step.
func TestOver(t *testing.T) {
	for alpha := 0; alpha < 256; alpha++ {
		src := newSource(color.RGBA{uint8(alpha), uint8(alpha / 2), 0, uint8(alpha)})
		for a := uint32(0); a <= 256; a++ {
			for _, d := range []uint8{0, 1, 127, 254, 255} {
				pix := []uint8{d, 0, d, 255}
				src.over(pix, a)
				k := float64(a) / 256
				want := float64(alpha)*k + float64(d)*(1-float64(alpha)/255*k)
				if math.Abs(float64(pix[0])-want) > 1.5 || pix[3] != 255 || pix[1] > uint8(alpha/2)+1 {
					t.Fatalf("alpha %d coverage %d over %d: %v, want %.1f", alpha, a, d, pix, want)
				}
			}
		}
	}
}

// Numbers as bad as they get neither panic nor take long.
func TestCanvasBearsAnything(t *testing.T) {
	odd := rapid.SampledFrom([]float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, -0.5, 1, 20.3, 1e-300, 1e6, -1e9, 1e30, 1e308, -1e308, 39.999999, 40})
	rapid.Check(t, func(t *rapid.T) {
		_, c := blank(40, 30)
		at := func() render.Point { return render.Point{X: odd.Draw(t, "x"), Y: odd.Draw(t, "y")} }
		var p render.Path
		p.MoveTo(at().X, at().Y)
		for range rapid.IntRange(0, 5).Draw(t, "n") {
			switch rapid.IntRange(0, 2).Draw(t, "op") {
			case 0:
				p.LineTo(at().X, at().Y)
			case 1:
				p.CubicTo(at(), at(), at())
			default:
				p.Close()
				p.MoveTo(at().X, at().Y)
			}
		}
		pen := render.Pen{Width: odd.Draw(t, "w"), Color: red, Cap: render.Cap(rapid.IntRange(0, 1).Draw(t, "cap"))}
		if rapid.Bool().Draw(t, "dashed") {
			pen.Dash = []float64{odd.Draw(t, "on"), odd.Draw(t, "off")}
		}
		began := time.Now()
		c.Fill(p, red)
		c.Stroke(p, pen)
		c.Dots(render.Dots{X: []float64{at().X}, Y: []float64{at().Y}, Radius: odd.Draw(t, "r"), Color: red})
		c.Text(render.Text{At: at(), Size: odd.Draw(t, "size"), String: "s = 1", Color: black, Turn: render.Turn(rapid.IntRange(0, 1).Draw(t, "turn"))})
		if d := time.Since(began); d > 2*time.Second {
			t.Fatalf("took %v", d)
		}
	})
}

// A line that is cut at the edge looks inside as it would on a larger picture.
func TestClippingChangesNothingInside(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a, b := point(t, -300, 400), point(t, -300, 400)
		w := rapid.SampledFrom([]float64{1, 2, 5}).Draw(t, "w")
		big, c := blank(300, 300)
		shift := func(p render.Point) render.Point { return render.Point{X: p.X + 100, Y: p.Y + 100} }
		c.Stroke(segment(shift(a), shift(b)), render.Pen{Width: w, Color: black})
		small, c := blank(100, 100)
		c.Stroke(segment(a, b), render.Pen{Width: w, Color: black})
		for y := range 100 {
			for x := range 100 {
				p, q := small.Pix[small.PixOffset(x, y)], big.Pix[big.PixOffset(x+100, y+100)]
				if d := int(p) - int(q); d > 6 || d < -6 {
					t.Fatalf("(%d, %d): %d alone, %d within more", x, y, p, q)
				}
			}
		}
	})
}

func TestText(t *testing.T) {
	img, c := blank(200, 40)
	text := render.Text{At: render.Point{X: 100, Y: 20}, Size: 20, String: "−1.5 mm χ", H: render.Center, V: render.Middle, Color: black}
	c.Text(text)
	level := inkedArea(img)
	lo, hi := 200, 0
	for x := range 200 {
		for y := range 40 {
			if img.Pix[img.PixOffset(x, y)] < 128 {
				lo, hi = min(lo, x), max(hi, x)
			}
		}
	}
	if w := float64(hi - lo); math.Abs(w-text.Width()) > 4 || math.Abs(float64(lo+hi)/2-100) > 2 {
		t.Errorf("text from %d to %d, %g wide, want %g about 100", lo, hi, w, text.Width())
	}
	img, c = blank(40, 200)
	text.At, text.Turn = render.Point{X: 20, Y: 100}, render.Upward
	c.Text(text)
	if up := inkedArea(img); math.Abs(up/level-1) > 0.05 {
		t.Errorf("turned text has ink %g, level %g", up, level)
	}
}

func TestResetRefusesSubImages(t *testing.T) {
	defer func() {
		if recover() == nil {
			t.Error("a picture with gaps between its rows was taken")
		}
	}()
	New(image.NewRGBA(image.Rect(0, 0, 9, 9)).SubImage(image.Rect(0, 0, 5, 5)).(*image.RGBA))
}
