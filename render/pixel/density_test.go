package pixel

import (
	"image"
	"math"
	"testing"

	"cavitywright/render"

	"pgregory.net/rapid"
)

// Every point within the grid is counted once, in its own pixel.
func TestDensityCounts(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		w, h := rapid.IntRange(0, 12).Draw(t, "w"), rapid.IntRange(0, 12).Draw(t, "h")
		var d Density
		d.Resize(w, h)
		want := map[[2]int]int{}
		coordinate := rapid.OneOf(rapid.Float64Range(-2, 14), rapid.SampledFrom([]float64{math.NaN(), math.Inf(1), -1e300, 0, 12}))
		for range rapid.IntRange(0, 60).Draw(t, "n") {
			x, y := coordinate.Draw(t, "x"), coordinate.Draw(t, "y")
			d.Add(x, y, rapid.IntRange(-2, 20).Draw(t, "hue"))
			if x >= 0 && y >= 0 && x < float64(w) && y < float64(h) {
				want[[2]int{int(x), int(y)}]++
			}
		}
		for y := -1; y <= h; y++ {
			for x := -1; x <= w; x++ {
				if got := d.Count(x, y); got != want[[2]int{x, y}] {
					t.Fatalf("(%d, %d) counts %d, want %d", x, y, got, want[[2]int{x, y}])
				}
			}
		}
	})
}

func TestShade(t *testing.T) {
	for _, look := range []render.Look{render.Light(1), render.Dark(1)} {
		var d Density
		d.Resize(40, 1)
		for n := range 39 {
			for range n {
				d.Add(float64(n), 0, -1)
			}
		}
		d.Add(39, 0, -1)
		d.Add(39, 0, 11)
		img := image.NewRGBA(image.Rect(0, 0, 40, 1))
		d.Shade(img, look)
		if img.RGBAAt(0, 0).A != 0 {
			t.Error("an empty cell is not clear")
		}
		last := uint8(0)
		for n := 1; n < 39; n++ {
			a := img.RGBAAt(n, 0).A
			if a < last || n < 5 && a == last {
				t.Errorf("%d hits have opacity %d after %d", n, a, last)
			}
			last = a
		}
		c := img.RGBAAt(39, 0)
		want := look.Orbits[3]
		for i, v := range [3]uint8{c.R, c.G, c.B} {
			if full := [3]uint8{want.R, want.G, want.B}[i]; math.Abs(float64(v)*255/float64(c.A)-float64(full)) > 2 {
				t.Errorf("the last hue is shown as %v, want %v", c, want)
			}
		}
	}
}

func TestResizeForgets(t *testing.T) {
	var d Density
	d.Resize(5, 5)
	d.Add(1, 1, 0)
	d.Resize(4, 4)
	for i := range 4 {
		for j := range 4 {
			if d.Count(i, j) != 0 {
				t.Fatal("an old point is still there")
			}
		}
	}
}
