package pixel

import (
	"image"
	"image/color"
	"testing"

	"cavitywright/render"
)

// What reaches past the right end of a picture is cut there, wherever it
// begins: the coverage of a row comes in runs of 256 pixels.
func TestFillPastTheRightEnd(t *testing.T) {
	ink := color.RGBA{10, 20, 30, 255}
	const w = 300
	for left := range w - 1 {
		img := image.NewRGBA(image.Rect(0, 0, w, 8))
		c := New(img)
		var p render.Path
		p.MoveTo(float64(left)+0.5, 1)
		p.LineTo(w+30, 1)
		p.LineTo(w+60, 7)
		p.LineTo(float64(left)+0.75, 7) // not upright: a rectangle is painted otherwise
		p.Close()
		c.Fill(p, ink)
		if got := img.RGBAAt(w-1, 4); got != ink {
			t.Errorf("from %d on, the last pixel is %v", left, got)
		}
		if got := img.RGBAAt(w-1, 0); got.A != 0 {
			t.Errorf("from %d on, the last pixel above is %v", left, got)
		}
	}
}
