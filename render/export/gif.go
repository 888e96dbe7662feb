package export

import (
	"errors"
	"fmt"
	"image"
	"image/color"
	"image/gif"
	"io"
	"math"

	"cavitywright/render"
	"cavitywright/render/raster"
	"cavitywright/sim/figure"
)

// Film gathers figures that are shown one after the other, as an animated GIF
// (CompuServe, version 89a). It is for one goroutine.
type Film struct {
	o       Options
	delay   int // hundredths of a second
	all     gif.GIF
	palette color.Palette
	near    map[color.RGBA]uint8
}

const (
	// The page of a film: its size in pixels is that of a slide.
	filmWidthMM  = 200
	filmHeightMM = 120
	filmDPI      = 110
	// mostFilmPixels bounds the pixels of all frames together: they are held in
	// memory, a byte each.
	mostFilmPixels = 600e6
	// Bounds of the frames a second; viewers show GIFs no faster than that.
	leastRate, mostRate = 0.5, 50
)

// NewFilm is an empty film of so many frames a second. The page is 200 mm by
// 120 mm at 110 dpi where the options do not say otherwise; nothing is carried
// inside. The error is a *BadSize, or says that the rate is out of range.
func NewFilm(o Options, rate float64) (*Film, error) {
	if o.WidthMM == 0 {
		o.WidthMM = filmWidthMM
	}
	if o.HeightMM == 0 {
		o.HeightMM = o.WidthMM * filmHeightMM / filmWidthMM
	}
	if o.DPI == 0 {
		o.DPI = filmDPI
	}
	o, err := o.filled(figure.Sheet{})
	if err != nil {
		return nil, err
	}
	if !(rate >= leastRate && rate <= mostRate) {
		return nil, fmt.Errorf("a film shows %g to %d frames a second, not %g; choose another rate", leastRate, mostRate, rate)
	}
	f := &Film{o: o, delay: max(2, int(math.Round(100/rate))), palette: filmPalette(o.Look), near: map[color.RGBA]uint8{}}
	return f, nil
}

// Add draws a figure as the next frame. The error says that the film has become
// too long.
func (f *Film) Add(fig figure.Figure) error {
	w, h := raster.PixelSize(f.o.WidthMM, f.o.HeightMM, f.o.DPI)
	if float64(w)*float64(h)*float64(len(f.all.Image)+1) > mostFilmPixels {
		return fmt.Errorf("%d frames of %d by %d pixels are all that a film holds; ask for fewer frames or a smaller page", len(f.all.Image), w, h)
	}
	c := raster.New(f.o.WidthMM, f.o.HeightMM, f.o.DPI)
	c.Fill(f.o.box().Inset(-1).Path(), f.o.Look.Paper) // the last row of pixels may reach past the page
	render.Draw(c, fig, f.o.box(), f.o.Look)
	f.all.Image = append(f.all.Image, f.indexed(c.Image()))
	f.all.Delay = append(f.all.Delay, f.delay)
	return nil
}

// Write writes the film, which starts again at its end.
func (f *Film) Write(w io.Writer) error {
	if len(f.all.Image) == 0 {
		return errors.New("the film has no frame yet; add one first")
	}
	// It rests at the end for a second before it starts anew.
	f.all.Delay[len(f.all.Delay)-1] = max(f.delay, 100)
	if err := gif.EncodeAll(w, &f.all); err != nil {
		return fmt.Errorf("write GIF: %w", err)
	}
	return nil
}

// indexed is a picture in the colours of the film, each pixel in the nearest.
func (f *Film) indexed(img *image.RGBA) *image.Paletted {
	out := image.NewPaletted(img.Rect, f.palette)
	for y := range img.Rect.Dy() {
		row := img.Pix[y*img.Stride:][:4*img.Rect.Dx()]
		to := out.Pix[y*out.Stride:]
		for x := range img.Rect.Dx() {
			c := color.RGBA{row[4*x], row[4*x+1], row[4*x+2], row[4*x+3]}
			i, known := f.near[c]
			if !known {
				i = uint8(f.palette.Index(c))
				f.near[c] = i
			}
			to[x] = i
		}
	}
	return out
}

// Shares of a film's 256 colours.
const (
	greySteps   = 47 // from paper to ink
	floorSteps  = 8  // from floor to ink
	orbitSteps  = 6  // of each of 8 orbits, to paper
	accentSteps = 5
	wheelSteps  = 74 // around the wall
	wheelMixes  = 2
)

// filmPalette is the colours of a look, with what lies between each and the
// paper, since edges are smooth.
func filmPalette(l render.Look) color.Palette {
	var p color.Palette
	mix := func(a, b color.RGBA, n int) {
		for i := range n {
			k := float64(i) / float64(max(n-1, 1))
			at := func(x, y uint8) uint8 { return uint8(float64(x)*(1-k) + float64(y)*k + 0.5) }
			p = append(p, color.RGBA{at(a.R, b.R), at(a.G, b.G), at(a.B, b.B), 255})
		}
	}
	mix(l.Paper, l.Ink, greySteps)
	mix(l.Floor, l.Ink, floorSteps)
	for _, o := range l.Orbits {
		mix(o, l.Paper, orbitSteps+1)
		p = p[:len(p)-1] // the paper is there
	}
	mix(l.Accent, l.Paper, accentSteps)
	for i := range wheelSteps {
		hue := l.Hue(float64(i) / wheelSteps)
		mix(hue, l.Paper, wheelMixes+1)
		p = p[:len(p)-1]
	}
	return p
}
