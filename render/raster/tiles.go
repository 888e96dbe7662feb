package raster

import (
	"image"
	"math"

	"cavitywright/render"
)

// Tiles shows a picture over a box, each of its pixels a plain rectangle: a
// pixel of the page has the colour of the one that its middle lies in.
func (c *Canvas) Tiles(img *image.RGBA, box render.Box) {
	lo, hi := c.point(box.Min), c.point(box.Max)
	n := img.Rect.Size()
	for y := max(int(math.Ceil(lo.Y-0.5)), 0); y < c.img.Rect.Dy() && float64(y)+0.5 < hi.Y; y++ {
		row := min(int((float64(y)+0.5-lo.Y)/(hi.Y-lo.Y)*float64(n.Y)), n.Y-1)
		for x := max(int(math.Ceil(lo.X-0.5)), 0); x < c.img.Rect.Dx() && float64(x)+0.5 < hi.X; x++ {
			column := min(int((float64(x)+0.5-lo.X)/(hi.X-lo.X)*float64(n.X)), n.X-1)
			copy(c.img.Pix[c.img.PixOffset(x, y):][:4], img.Pix[img.PixOffset(column, row):][:4])
		}
	}
}
