package pixel

import (
	"image"
	"math"
	"math/rand/v2"
	"testing"

	"cavitywright/render"
)

// A pane of 800 by 400 pixels, as it is on a plain screen.
const benchW, benchH = 800, 400

// BenchmarkHairlines draws 2000 lines of 300 pixels: the rays of one frame.
// Aim: below 5 ms.
func BenchmarkHairlines(b *testing.B) {
	r := rand.New(rand.NewPCG(3, 4))
	paths := make([]render.Path, 2000)
	for i := range paths {
		x, y := 150+500*r.Float64(), 150+100*r.Float64()
		sin, cos := math.Sincos(2 * math.Pi * r.Float64())
		paths[i] = render.Segment(render.Point{X: x - 150*cos, Y: y - 150*sin}, render.Point{X: x + 150*cos, Y: y + 150*sin})
	}
	img, c := blank(benchW, benchH)
	b.ReportAllocs()
	for b.Loop() {
		for _, p := range paths {
			c.Stroke(p, render.Pen{Width: 1, Color: black})
		}
	}
	sink(b, img)
}

// BenchmarkDots paints a million dots of radius 0.7. Aim: below 30 ms.
func BenchmarkDots(b *testing.B) {
	r := rand.New(rand.NewPCG(3, 4))
	d := render.Dots{Radius: 0.7, Color: black}
	for range 1000000 {
		d.X, d.Y = append(d.X, benchW*r.Float64()), append(d.Y, benchH*r.Float64())
	}
	img, c := blank(benchW, benchH)
	b.ReportAllocs()
	for b.Loop() {
		c.Dots(d)
	}
	sink(b, img)
}

// BenchmarkDensity counts a million points.
func BenchmarkDensity(b *testing.B) {
	r := rand.New(rand.NewPCG(3, 4))
	var xs, ys []float64
	for range 1000000 {
		xs, ys = append(xs, benchW*r.Float64()), append(ys, benchH*r.Float64())
	}
	var d Density
	d.Resize(benchW, benchH)
	for b.Loop() {
		for i, x := range xs {
			d.Add(x, ys[i], -1)
		}
	}
	if d.Count(5, 5) == 0 {
		b.Fatal("nothing was counted")
	}
}

// BenchmarkShade makes the picture of a full grid. Aim: below 3 ms.
func BenchmarkShade(b *testing.B) {
	r := rand.New(rand.NewPCG(3, 4))
	var d Density
	d.Resize(benchW, benchH)
	for i := range 1000000 {
		d.Add(benchW*r.Float64(), benchH*r.Float64(), i%9-1)
	}
	img := image.NewRGBA(image.Rect(0, 0, benchW, benchH))
	look := render.Light(1)
	for b.Loop() {
		d.Shade(img, look)
	}
	sink(b, img)
}

// BenchmarkWideStrokes draws a wall of 192 coloured stretches.
func BenchmarkWideStrokes(b *testing.B) {
	img, c := blank(benchW, benchH)
	var paths []render.Path
	for i := range 192 {
		var p render.Path
		for k := range 5 {
			sin, cos := math.Sincos(2 * math.Pi * (float64(i) + float64(k)/4) / 192)
			if k == 0 {
				p.MoveTo(400+380*cos, 200+180*sin)
			} else {
				p.LineTo(400+380*cos, 200+180*sin)
			}
		}
		paths = append(paths, p)
	}
	for b.Loop() {
		for _, p := range paths {
			c.Stroke(p, render.Pen{Width: 5, Color: red})
		}
	}
	sink(b, img)
}

// BenchmarkFloor fills a table of 500 corners.
func BenchmarkFloor(b *testing.B) {
	img, c := blank(benchW, benchH)
	var p render.Path
	for i := range 500 {
		sin, cos := math.Sincos(2 * math.Pi * float64(i) / 500)
		if i == 0 {
			p.MoveTo(400+380*cos, 200+180*sin)
		} else {
			p.LineTo(400+380*cos, 200+180*sin)
		}
	}
	p.Close()
	for b.Loop() {
		c.Fill(p, red)
	}
	sink(b, img)
}

// sink uses the picture, so that no drawing can be left out.
func sink(b *testing.B, img *image.RGBA) {
	sum := 0
	for _, v := range img.Pix {
		sum += int(v)
	}
	if sum == 0 {
		b.Fatal("nothing was drawn")
	}
}
