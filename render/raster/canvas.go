// Package raster draws a page as pixels, for export as a picture: the canvas
// unit is one millimetre. Paths go through the gg library, which joins and caps
// well; text and dots go through the glyphs and stamps of the live canvas.
package raster

import (
	"image"
	"image/color"
	"math"

	"cavitywright/render"
	"cavitywright/render/pixel"

	"github.com/fogleman/gg"
)

// Canvas is a render.Canvas over the pixels of a page. It is for one goroutine.
type Canvas struct {
	ctx    *gg.Context
	marks  *pixel.Canvas
	img    *image.RGBA
	scale  float64 // pixels per millimetre
	bounds render.Box
}

// New is a transparent page of a size in millimetres at dpi pixels per inch.
// The picture has at least one pixel; its size is the caller's to bound.
func New(widthMM, heightMM, dpi float64) *Canvas {
	w, h := PixelSize(widthMM, heightMM, dpi)
	img := image.NewRGBA(image.Rect(0, 0, w, h))
	c := &Canvas{ctx: gg.NewContextForRGBA(img), marks: pixel.New(img), img: img, scale: dpi / mmPerInch}
	c.bounds = render.NewBox(0, 0, float64(w), float64(h))
	c.ctx.SetFillRule(gg.FillRuleEvenOdd)
	c.ctx.SetLineJoinRound()
	return c
}

const mmPerInch = 25.4

// PixelSize is the size in pixels of a page in millimetres.
func PixelSize(widthMM, heightMM, dpi float64) (w, h int) {
	px := func(mm float64) int { return int(min(max(math.Round(mm*dpi/mmPerInch), 1), math.MaxInt32)) }
	return px(widthMM), px(heightMM)
}

// Image is the picture; the canvas goes on drawing into it.
func (c *Canvas) Image() *image.RGBA { return c.img }

// flatness is the distance, in pixels, within which chords stand for a curve.
const flatness = 0.05

// Fill paints the inside of a path, even-odd.
func (c *Canvas) Fill(p render.Path, col color.RGBA) {
	c.ctx.SetColor(col)
	c.trace(render.ClipFill(c.scaled(p), c.bounds.Inset(-1), flatness))
	c.ctx.Fill()
}

// stretch is how many segments of a path are stroked at once. The stroker's
// time grows with the square of the segments that meet in a row of pixels, so
// a long ray is stroked in stretches whose round ends overlap.
const stretch = 6

// Stroke draws along a path.
func (c *Canvas) Stroke(p render.Path, pen render.Pen) {
	width := pen.Width * c.scale
	if !(width > 0) {
		return
	}
	c.ctx.SetColor(pen.Color)
	c.ctx.SetLineWidth(width)
	c.ctx.SetLineCapRound()
	if pen.Cap == render.Butt {
		c.ctx.SetLineCapButt()
	}
	// Dashed here and not by gg, so that a line cut into stretches keeps
	// its rhythm.
	p = render.ClipStroke(c.scaled(p), c.bounds.Inset(-width-1), flatness)
	if pen.Dash != nil {
		dash := make([]float64, len(pen.Dash))
		for i, d := range pen.Dash {
			dash[i] = d * c.scale
		}
		p = p.Dashed(dash)
	}
	p.Contours(flatness, c.strokeLine)
}

// strokeLine strokes one polyline, in stretches where it is long.
func (c *Canvas) strokeLine(points []render.Point, closed bool) {
	if closed && len(points) <= stretch {
		for _, q := range points {
			c.ctx.LineTo(q.X, q.Y)
		}
		c.ctx.ClosePath()
		c.ctx.Stroke()
		return
	}
	if closed {
		points = append(points, points[0])
	}
	for from := 0; from < max(len(points)-1, 1); from += stretch {
		for _, q := range points[from:min(from+stretch+1, len(points))] {
			c.ctx.LineTo(q.X, q.Y)
		}
		c.ctx.Stroke()
	}
}

// Text sets a line of text.
func (c *Canvas) Text(t render.Text) {
	t.At = c.point(t.At)
	t.Size *= c.scale
	c.marks.Text(t)
}

// Dots paints discs.
func (c *Canvas) Dots(d render.Dots) {
	n := min(len(d.X), len(d.Y))
	x, y := make([]float64, n), make([]float64, n)
	for i := range n {
		x[i], y[i] = d.X[i]*c.scale, d.Y[i]*c.scale
	}
	c.marks.Dots(render.Dots{X: x, Y: y, Radius: d.Radius * c.scale, Color: d.Color})
}

func (c *Canvas) point(q render.Point) render.Point {
	return render.Point{X: q.X * c.scale, Y: q.Y * c.scale}
}

// scaled is the path in pixels.
func (c *Canvas) scaled(p render.Path) render.Path {
	out := render.Path{Ops: p.Ops, Points: make([]render.Point, len(p.Points))}
	for i, q := range p.Points {
		out.Points[i] = c.point(q)
	}
	return out
}

// trace gives a path of chords to gg.
func (c *Canvas) trace(p render.Path) {
	p.Contours(flatness, func(points []render.Point, _ bool) {
		c.ctx.NewSubPath()
		for _, q := range points {
			c.ctx.LineTo(q.X, q.Y)
		}
		c.ctx.ClosePath()
	})
}
