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

	"golang.org/x/image/vector"
)

// Canvas is a render.Canvas over a picture. It is for one goroutine. Geometry
// is cut to the picture before it is drawn, so coordinates may be as large as
// floats go. The zero value draws nothing until it is reset onto a picture.
type Canvas struct {
	img    *image.RGBA
	bounds render.Box

	raster vector.Rasterizer
	part   image.Alpha // coverage of one contour
	cover  image.Alpha // coverage of a whole path
	line   outline
	faces  map[faceKey]*face
	stamps map[int]*stamp
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
const flatness = 0.1

// Fill paints the inside of a path, even-odd over its contours. Each contour
// is taken by itself with the rule that what it winds around is inside, and
// the contours are then combined: where it crosses itself, a contour counts as
// one area.
func (c *Canvas) Fill(p render.Path, col color.RGBA) {
	if c.img == nil {
		return
	}
	p = render.ClipFill(p, c.bounds, flatness)
	all := pixelBounds(p.Points, c.img.Rect)
	if all.Empty() {
		return
	}
	if simple := rectangle(p); simple {
		c.fillRect(p.Points[0], p.Points[2], col)
		return
	}
	clear(sized(&c.cover, all).Pix)
	p.Contours(flatness, func(points []render.Point, _ bool) {
		r := pixelBounds(points, all)
		if r.Empty() {
			return
		}
		c.begin(r)
		c.contour(points, r.Min)
		c.end(&c.part, r)
		combine(&c.cover, &c.part)
	})
	c.paint(&c.cover, col)
}

// begin readies the rasteriser for an area of the picture.
func (c *Canvas) begin(r image.Rectangle) { c.raster.Reset(r.Dx(), r.Dy()) }

// contour adds a closed polygon to the rasteriser.
func (c *Canvas) contour(points []render.Point, origin image.Point) {
	dx, dy := float64(origin.X), float64(origin.Y)
	for i, q := range points {
		x, y := float32(q.X-dx), float32(q.Y-dy)
		if i == 0 {
			c.raster.MoveTo(x, y)
		} else {
			c.raster.LineTo(x, y)
		}
	}
	c.raster.ClosePath()
}

// end writes the coverage of what was added to a mask over the area.
func (c *Canvas) end(mask *image.Alpha, r image.Rectangle) {
	sized(mask, r)
	c.raster.DrawOp = 1 // draw.Src: the mask's old content does not matter
	c.raster.Draw(mask, r, image.Opaque, image.Point{})
}

// combine puts the coverage of one more contour over a mask, even-odd: inside
// is what one of the two covers and the other does not.
func combine(all, part *image.Alpha) {
	for y := part.Rect.Min.Y; y < part.Rect.Max.Y; y++ {
		from := part.Pix[part.PixOffset(part.Rect.Min.X, y):][:part.Rect.Dx()]
		to := all.Pix[all.PixOffset(part.Rect.Min.X, y):][:len(from)]
		for i, a := range from {
			switch b := to[i]; {
			case a == 0:
			case b == 0:
				to[i] = a
			default:
				a, b := uint32(a), uint32(b)
				to[i] = uint8(a + b - (2*a*b+127)/255)
			}
		}
	}
}

// paint lays a colour over the picture through a mask.
func (c *Canvas) paint(mask *image.Alpha, col color.RGBA) {
	src := newSource(col)
	r := mask.Rect.Intersect(c.img.Rect)
	for y := r.Min.Y; y < r.Max.Y; y++ {
		row := mask.Pix[mask.PixOffset(r.Min.X, y):][:r.Dx()]
		o := c.img.PixOffset(r.Min.X, y)
		for i, a := range row {
			if a != 0 {
				src.over(c.img.Pix[o+4*i:][:4], uint32(a)+uint32(a)>>7)
			}
		}
	}
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
