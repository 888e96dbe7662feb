package raster

import (
	"image"
	"image/color"
	"math"
	"math/rand/v2"
	"testing"
	"time"

	"cavitywright/render"
	"cavitywright/render/pixel"
	"cavitywright/sim/figure"
)

// scene draws one of everything onto a canvas of 60 by 40 units.
func scene(c render.Canvas) {
	ink, red := color.RGBA{20, 20, 20, 255}, color.RGBA{200, 40, 30, 255}
	c.Fill(render.NewBox(0, 0, 60, 40).Path(), color.RGBA{255, 255, 255, 255})
	ring := render.Disc(render.Point{X: 20, Y: 20}, 12)
	hole := render.Disc(render.Point{X: 22, Y: 20}, 6)
	ring.Ops, ring.Points = append(ring.Ops, hole.Ops...), append(ring.Points, hole.Points...)
	c.Fill(ring, color.RGBA{180, 200, 240, 255})
	c.Fill(render.NewBox(30, 5, 20, 10).Path(), render.Fade(red, 0.3))
	c.Stroke(render.Disc(render.Point{X: 20, Y: 20}, 12), render.Pen{Width: 1, Color: red})
	c.Stroke(render.Segment(render.Point{X: 5, Y: 35}, render.Point{X: 55, Y: 30}), render.Pen{Width: 0.15, Color: ink})
	c.Stroke(render.Segment(render.Point{X: 35, Y: 38}, render.Point{X: 58, Y: 12}), render.Pen{Width: 0.8, Color: ink, Dash: []float64{3, 2}, Cap: render.Butt})
	var zig render.Path
	zig.MoveTo(32, 20)
	for i := range 9 {
		zig.LineTo(34+2.5*float64(i), 20+6*float64(i%2))
	}
	c.Stroke(zig, render.Pen{Width: 0.6, Color: ink})
	c.Dots(render.Dots{X: []float64{40, 44, 48}, Y: []float64{10, 10, 10}, Radius: 0.3, Color: ink})
	c.Text(render.Text{At: render.Point{X: 30, Y: 4}, Size: 3, String: "s = −1.5 mm", Color: ink})
	c.Text(render.Text{At: render.Point{X: 4, Y: 30}, Size: 3, String: "p = sin χ", Turn: render.Upward, Color: ink})
}

// scaled is a canvas in millimetres over one in pixels.
type scaled struct {
	c *pixel.Canvas
	k float64
}

func (s scaled) path(p render.Path) render.Path {
	q := render.Path{Ops: p.Ops}
	for _, v := range p.Points {
		q.Points = append(q.Points, render.Point{X: v.X * s.k, Y: v.Y * s.k})
	}
	return q
}
func (s scaled) Fill(p render.Path, c color.RGBA) { s.c.Fill(s.path(p), c) }
func (s scaled) Stroke(p render.Path, pen render.Pen) {
	pen.Width *= s.k
	var dash []float64
	for _, d := range pen.Dash {
		dash = append(dash, d*s.k)
	}
	pen.Dash = dash
	s.c.Stroke(s.path(p), pen)
}
func (s scaled) Text(t render.Text) {
	t.At = render.Point{X: t.At.X * s.k, Y: t.At.Y * s.k}
	t.Size *= s.k
	s.c.Text(t)
}
func (s scaled) Dots(d render.Dots) {
	var x, y []float64
	for i := range d.X {
		x, y = append(x, d.X[i]*s.k), append(y, d.Y[i]*s.k)
	}
	s.c.Dots(render.Dots{X: x, Y: y, Radius: d.Radius * s.k, Color: d.Color})
}

// The canvas for export and the live one, two implementations, agree: nearly
// everywhere to a few steps, and nowhere by more than an edge pixel's worth.
func TestRasterAgreesWithPixel(t *testing.T) {
	const dpi = 254 // 10 pixels to the millimetre
	page := New(60, 40, dpi)
	scene(page)
	live := image.NewRGBA(page.Image().Rect)
	scene(scaled{pixel.New(live), 10})
	differ, sum := 0, 0
	for i, a := range page.Image().Pix {
		d := int(a) - int(live.Pix[i])
		d = max(d, -d)
		sum += d
		if d > 40 {
			differ++
		}
		if d > 140 {
			t.Fatalf("pixel (%d, %d) differs by %d", i/4%600, i/4/600, d)
		}
	}
	if n := len(live.Pix); differ > n/2000 || float64(sum)/float64(n) > 0.25 {
		t.Errorf("%d of %d values differ by more than 40, mean %.3f", differ, n, float64(sum)/float64(n))
	}
}

func TestPageSize(t *testing.T) {
	if w, h := PixelSize(85, 60, 300); w != 1004 || h != 709 {
		t.Errorf("85 mm by 60 mm at 300 dpi is %d by %d", w, h)
	}
	if s := New(0.001, 0.001, 10).Image().Rect.Size(); s != (image.Point{X: 1, Y: 1}) {
		t.Errorf("a page of nothing is %v", s)
	}
}

// A ray of a thousand crossing segments must not take the stroker's quadratic
// time, and a million dots on a large page less than a second.
func TestManyCrossingsAreQuick(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 9))
	c := New(170, 127, 600)
	var p render.Path
	for i := range 1000 {
		x, y := 170*r.Float64(), 127*r.Float64()
		if i == 0 {
			p.MoveTo(x, y)
		} else {
			p.LineTo(x, y)
		}
	}
	began := time.Now()
	c.Stroke(p, render.Pen{Width: 0.18, Color: color.RGBA{0, 0, 200, 255}})
	if d := time.Since(began); d > 8*time.Second {
		t.Errorf("1000 segments took %v", d)
	}
}

func BenchmarkMillionDots(b *testing.B) {
	r := rand.New(rand.NewPCG(1, 9))
	d := render.Dots{Radius: 0.05, Color: color.RGBA{0, 0, 0, 255}}
	for range 1000000 {
		d.X, d.Y = append(d.X, 169*r.Float64()), append(d.Y, 127*r.Float64())
	}
	c := New(169.3, 127, 600) // 4000 by 3000
	for b.Loop() {
		c.Dots(d)
	}
	inked := 0
	for i := 3; i < len(c.Image().Pix); i += 4 {
		inked += int(c.Image().Pix[i])
	}
	if inked == 0 {
		b.Fatal("nothing was drawn")
	}
}

// Numbers as bad as they get do no harm.
func TestPageBearsAnything(t *testing.T) {
	c := New(20, 10, 100)
	nan, inf := math.NaN(), math.Inf(1)
	for _, v := range []float64{nan, inf, -inf, 1e308, -1e30, 5} {
		for _, u := range []float64{nan, inf, 1e300, 5, -5} {
			p := render.Segment(render.Point{X: v, Y: u}, render.Point{X: u, Y: v})
			p.LineTo(3, 3)
			p.CubicTo(render.Point{X: v, Y: 1}, render.Point{X: 1, Y: u}, render.Point{X: 2, Y: 2})
			c.Fill(p, color.RGBA{9, 9, 9, 255})
			c.Stroke(p, render.Pen{Width: 0.5, Color: color.RGBA{9, 9, 9, 255}})
			c.Stroke(p, render.Pen{Width: 0.5, Color: color.RGBA{9, 9, 9, 255}, Dash: []float64{v, u}})
			c.Dots(render.Dots{X: []float64{v}, Y: []float64{u}, Radius: 1, Color: color.RGBA{9, 9, 9, 255}})
			c.Text(render.Text{At: render.Point{X: v, Y: u}, Size: u, String: "s"})
		}
	}
	render.Draw(c, figure.Dots{}, render.NewBox(0, 0, 20, 10), render.Paper(1))
}
