package pixel

import (
	"encoding/binary"
	"image"
	"image/color"
	"math"

	"cavitywright/render"
)

// Density counts points pixel by pixel, for a picture that fills while one
// looks: adding a point costs a few nanoseconds, and the picture is made of the
// counts once a frame. It is for one goroutine.
type Density struct {
	w, h  int
	cells []uint32 // colour index in the top byte, count below
}

// countMask is where a cell keeps its count, which stops at that number.
const countMask = 1<<24 - 1

// Resize sets the size in pixels and forgets all points. Sizes below 1 make an
// empty grid.
func (d *Density) Resize(w, h int) {
	d.w, d.h = max(w, 0), max(h, 0)
	n := d.w * d.h
	if cap(d.cells) < n {
		d.cells = make([]uint32, n)
		return
	}
	d.cells = d.cells[:n]
	clear(d.cells)
}

// Size is the size in pixels.
func (d *Density) Size() (w, h int) { return d.w, d.h }

// Clear forgets all points.
func (d *Density) Clear() { clear(d.cells) }

// Add counts a point at a place in pixels from the top left corner. hue is the
// index of its orbit's colour, negative for the sea; a cell shows the colour
// of the last point in it. A point beyond the grid, or nowhere, counts nothing.
func (d *Density) Add(x, y float64, hue int) {
	if !(x >= 0 && x < float64(d.w) && y >= 0 && y < float64(d.h)) {
		return
	}
	cell := &d.cells[int(y)*d.w+int(x)]
	n := *cell & countMask
	if n < countMask {
		n++
	}
	*cell = colourIndex(hue)<<24 | n
}

// Count is how often a pixel was hit.
func (d *Density) Count(x, y int) int {
	if uint(x) >= uint(d.w) || uint(y) >= uint(d.h) {
		return 0
	}
	return int(d.cells[y*d.w+x] & countMask)
}

// colourIndex is 0 for the sea and 1 to 8 for orbits.
func colourIndex(hue int) uint32 {
	if hue < 0 {
		return 0
	}
	return uint32(hue%orbits) + 1
}

const (
	orbits = 8
	shades = 16 // counts from 1 to 16 have a shade each, more have the last
)

// The opacity of a cell that was hit once, for the sea and for an orbit, and
// of one that was hit very often.
const (
	seaOnce   = 0.50
	orbitOnce = 0.85
	often     = 0.96
)

// Shade paints the counts: ink for the sea and the orbit's colour for an orbit,
// the more opaque the oftener a cell was hit, and nothing where it never was.
// dst must be of the grid's size; its old content is overwritten, so the plot
// below shows through once dst is laid over it.
func (d *Density) Shade(dst *image.RGBA, look render.Look) {
	if dst.Rect.Size() != (image.Point{X: d.w, Y: d.h}) || dst.Stride != 4*d.w {
		panic("pixel: the picture is not of the size of the grid")
	}
	ramp := newRamp(look)
	pix := dst.Pix[:4*len(d.cells)]
	for i, cell := range d.cells {
		n := min(cell&countMask, shades)
		binary.LittleEndian.PutUint32(pix[4*i:], ramp[(cell>>24&15)*(shades+1)+n])
	}
}

// newRamp is the pixel for each colour and count.
func newRamp(look render.Look) *[16 * (shades + 1)]uint32 {
	ramp := new([16 * (shades + 1)]uint32)
	for k := range orbits + 1 {
		once := orbitOnce
		if k == 0 {
			once = seaOnce
		}
		for n := 1; n <= shades; n++ {
			alpha := often * (1 - math.Pow(1-once/often, float64(n)))
			ramp[k*(shades+1)+n] = packed(render.Fade(look.Orbit(k-1), alpha))
		}
	}
	return ramp
}

func packed(c color.RGBA) uint32 {
	return uint32(c.R) | uint32(c.G)<<8 | uint32(c.B)<<16 | uint32(c.A)<<24
}
