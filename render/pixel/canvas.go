// Package pixel draws on the pixels of a pane, fast enough for every frame. One
// canvas unit is one pixel. Lines and discs are anti-aliased; all memory but
// the picture itself is kept from frame to frame.
//
// It exists because the path stroker of the export canvas takes seconds where
// a pane has milliseconds: many long lines that cross each other.
package pixel

import (
	"image"
	"image/color"
	"math"

	"cavitywright/render"
)

// Canvas is a render.Canvas over a picture. It is for one goroutine. Geometry
// is cut to the picture before it is drawn, so coordinates may be as large as
// floats go. The zero value draws nothing until it is reset onto a picture.
type Canvas struct {
	img    *image.RGBA
	bounds render.Box

	cover  coverage
	line   outline
	whole  render.Path // a polygon before it is cut
	faces  map[faceKey]*face
	stamps map[int]*stamp
	ready  [phases * phases][]wash // the stamp in use, in the colour in use
}

// New is a canvas over a picture.
func New(img *image.RGBA) *Canvas {
	c := new(Canvas)
	c.Reset(img)
	return c
}

// Reset turns the canvas to another picture, which must begin at (0, 0) and
// have rows without gaps, as image.NewRGBA makes them. What was prepared for
// the last picture, glyphs and stamps, is kept.
func (c *Canvas) Reset(img *image.RGBA) {
	size := img.Rect.Size()
	if img.Rect.Min != (image.Point{}) || img.Stride != 4*size.X {
		panic("pixel: the picture must begin at (0, 0) and have rows without gaps")
	}
	if c.img == nil || c.img.Stride != img.Stride {
		c.stamps = nil // they hold offsets that depend on the width
	}
	c.img = img
	c.bounds = render.NewBox(0, 0, float64(size.X), float64(size.Y))
}

// Clear paints the whole picture in one colour, whatever it showed before.
func (c *Canvas) Clear(col color.RGBA) {
	pix := c.img.Pix
	if len(pix) < 4 {
		return
	}
	pix[0], pix[1], pix[2], pix[3] = col.R, col.G, col.B, col.A
	for done := 4; done < len(pix); done *= 2 {
		copy(pix[done:], pix[:done])
	}
}

// flatness is the distance, in pixels, within which chords stand for a curve.
const flatness = 0.03

// Fill paints the inside of a path, even-odd.
func (c *Canvas) Fill(p render.Path, col color.RGBA) {
	if c.img == nil {
		return
	}
	p = render.ClipFill(p, c.bounds, flatness)
	area := pixelBounds(p.Points, c.img.Rect)
	if area.Empty() {
		return
	}
	if rectangle(p) {
		c.fillRect(p.Points[0], p.Points[2], col)
		return
	}
	c.cover.begin(area)
	p.Contours(flatness, func(points []render.Point, _ bool) { c.cover.add(points) })
	c.paint(evenOdd, col)
}

// paint lays a colour over the picture where the coverage says.
func (c *Canvas) paint(r rule, col color.RGBA) {
	src := newSource(col)
	c.cover.finish(r, func(y, x int, cover []uint16) {
		if x >= c.img.Rect.Max.X {
			return // the sums run past the area by what an edge at its right end adds
		}
		row := c.img.Pix[c.img.PixOffset(x, y):c.img.PixOffset(0, y+1)]
		for i, a := range cover {
			if a != 0 && 4*i < len(row) {
				src.over(row[4*i:][:4], uint32(a))
			}
		}
	})
}

// rectangle says whether a path is one upright rectangle, as Box.Path makes.
func rectangle(p render.Path) bool {
	if len(p.Points) != 4 || len(p.Ops) != 5 {
		return false
	}
	a, b, c, d := p.Points[0], p.Points[1], p.Points[2], p.Points[3]
	return a.Y == b.Y && b.X == c.X && c.Y == d.Y && d.X == a.X
}

// fillRect paints an upright rectangle by exact areas.
func (c *Canvas) fillRect(p, q render.Point, col color.RGBA) {
	x0, x1, y0, y1 := min(p.X, q.X), max(p.X, q.X), min(p.Y, q.Y), max(p.Y, q.Y)
	src := newSource(col)
	w, h := c.img.Rect.Dx(), c.img.Rect.Dy()
	for y := int(y0); y < min(int(math.Ceil(y1)), h); y++ {
		cy := min(y1, float64(y+1)) - max(y0, float64(y))
		row := c.img.Pix[c.img.Stride*y:][:4*w]
		for x := int(x0); x < min(int(math.Ceil(x1)), w); x++ {
			cx := min(x1, float64(x+1)) - max(x0, float64(x))
			src.over(row[4*x:][:4], uint32(256*cx*cy+0.5))
		}
	}
}

// pixelBounds is the smallest area of whole pixels around the points, cut to
// within.
func pixelBounds(points []render.Point, within image.Rectangle) image.Rectangle {
	if len(points) == 0 {
		return image.Rectangle{}
	}
	lo, hi := points[0], points[0]
	for _, q := range points {
		lo = render.Point{X: min(lo.X, q.X), Y: min(lo.Y, q.Y)}
		hi = render.Point{X: max(hi.X, q.X), Y: max(hi.Y, q.Y)}
	}
	clamp := func(v float64) int { return int(min(max(v, -1e6), 1e6)) }
	return image.Rect(clamp(math.Floor(lo.X)), clamp(math.Floor(lo.Y)),
		clamp(math.Ceil(hi.X)), clamp(math.Ceil(hi.Y))).Intersect(within)
}

// sized makes a mask cover an area, its memory reused and its content left as
// it may be.
func sized(m *image.Alpha, r image.Rectangle) *image.Alpha {
	n := r.Dx() * r.Dy()
	if cap(m.Pix) < n {
		m.Pix = make([]uint8, n)
	}
	m.Pix, m.Stride, m.Rect = m.Pix[:n], r.Dx(), r
	return m
}
