package export

import (
	"bytes"
	"image/gif"
	"strings"
	"testing"

	"cavitywright/render"
	"cavitywright/sim/figure"
)

// A film has its frames in order, at its rate, on the paper of the look; the
// same figures give the same bytes.
func TestFilm(t *testing.T) {
	write := func() []byte {
		f, err := NewFilm(Options{WidthMM: 60, DPI: 100}, 10)
		if err != nil {
			t.Fatal(err)
		}
		for i := range 3 {
			square := figure.Paths{Unit: "mm", Lines: []figure.Line{{Role: figure.Wall, Closed: true, X: []float64{0, 1, 1, 0}, Y: []float64{0, 0, float64(i + 1), float64(i + 1)}, At: []float64{0, 0.25, 0.5, 0.75}}}}
			if err := f.Add(square); err != nil {
				t.Fatal(err)
			}
		}
		var b bytes.Buffer
		if err := f.Write(&b); err != nil {
			t.Fatal(err)
		}
		return b.Bytes()
	}
	first := write()
	if !bytes.Equal(first, write()) {
		t.Error("the same film twice gives other bytes")
	}
	g, err := gif.DecodeAll(bytes.NewReader(first))
	if err != nil {
		t.Fatal(err)
	}
	if len(g.Image) != 3 || g.Delay[0] != 10 || g.LoopCount != 0 {
		t.Errorf("%d frames, delay %v, loops %d; want 3 frames of 10 hundredths for ever", len(g.Image), g.Delay, g.LoopCount)
	}
	paper := render.Paper(1).Paper
	for i, img := range g.Image {
		// 60 mm by 36 mm at 100 dpi.
		if s := img.Rect.Size(); s.X != 236 || s.Y != 142 {
			t.Errorf("frame %d is of %v pixels, want 236 by 142", i, s)
		}
		r, gr, b, _ := img.At(1, 1).RGBA()
		if uint8(r>>8) != paper.R || uint8(gr>>8) != paper.G || uint8(b>>8) != paper.B {
			t.Errorf("the corner of frame %d is no paper: %v", i, img.At(1, 1))
		}
	}
	if bytes.Equal(g.Image[0].Pix, g.Image[2].Pix) {
		t.Error("two frames of other figures are alike")
	}
}

func TestFilmRefused(t *testing.T) {
	if n := len(filmPalette(render.Paper(1))); n > 256 {
		t.Errorf("the palette has %d colours; a GIF has 256", n)
	}
	if _, err := NewFilm(Options{}, 0); err == nil || !strings.Contains(err.Error(), "frames a second") {
		t.Errorf("a film that stands still: %v", err)
	}
	if _, err := NewFilm(Options{WidthMM: 1}, 10); err == nil {
		t.Error("a film of 1 mm is taken")
	}
	f, err := NewFilm(Options{}, 10)
	if err != nil {
		t.Fatal(err)
	}
	if err := f.Write(&bytes.Buffer{}); err == nil {
		t.Error("a film without a frame is written")
	}
}
