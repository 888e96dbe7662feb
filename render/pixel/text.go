package pixel

import (
	"image"
	"math"

	"cavitywright/render"
	"cavitywright/render/letter"

	"golang.org/x/image/font"
	"golang.org/x/image/math/fixed"
)

// Bounds of the type sizes that are drawn, in pixels: smaller is not legible,
// larger is no text of a figure.
const (
	leastType   = 2
	largestType = 1024
)

// Most faces and most glyphs of a face that are kept; beyond that the store
// starts anew. A window shows two sizes in two weights.
const (
	mostFaces  = 24
	mostGlyphs = 1024
)

// faceKey is a font at a size in 64ths of a pixel.
type faceKey struct {
	font letter.Font
	size fixed.Int26_6
}

// face is a font at one size with the glyphs drawn so far.
type face struct {
	face   font.Face
	glyphs map[glyphKey]glyph
}

// glyphKey is a sign at one of four offsets along the line, in quarters of a
// pixel, so that letters stand evenly.
type glyphKey struct {
	sign  rune
	phase uint8
}

// glyph is the coverage of a sign; its rectangle is relative to the pen.
type glyph struct{ mask *image.Alpha }

// Text sets a line of text. Its baseline is put on whole pixels.
func (c *Canvas) Text(t render.Text) {
	start := t.Start()
	reach := t.Width() + 2*t.Size
	if c.img == nil || !(t.Size >= leastType && t.Size <= largestType) || t.Color.A == 0 ||
		!c.bounds.Inset(-reach).Contains(start) {
		return
	}
	src := newSource(t.Color)
	for _, run := range letter.Runs(t.String, t.Weight) {
		f := c.face(run.Font, t.Size)
		x := 0.0
		for _, r := range run.String {
			c.sign(f, r, start, run.X*t.Size+x, t.Turn, &src)
			x += t.Size * letter.Width(string(r), t.Weight)
		}
	}
}

// sign draws one sign at a distance along a line of text that begins at start.
func (c *Canvas) sign(f *face, r rune, start render.Point, along float64, turn render.Turn, src *source) {
	if turn == render.Upward {
		g := f.glyph(r, -start.Y+along)
		at := int(math.Floor(-start.Y + along))
		c.stampUp(g, int(math.Round(start.X)), at, src)
		return
	}
	g := f.glyph(r, start.X+along)
	at := image.Pt(int(math.Floor(start.X+along)), int(math.Round(start.Y)))
	c.stampLevel(g, at, src)
}

// stampLevel lays a glyph over the picture with its pen at a pixel.
func (c *Canvas) stampLevel(g glyph, at image.Point, src *source) {
	r := g.mask.Rect.Add(at).Intersect(c.img.Rect)
	for y := r.Min.Y; y < r.Max.Y; y++ {
		row := g.mask.Pix[g.mask.PixOffset(r.Min.X-at.X, y-at.Y):][:r.Dx()]
		o := c.img.PixOffset(r.Min.X, y)
		for i, a := range row {
			if a != 0 {
				src.over(c.img.Pix[o+4*i:][:4], uint32(a)+uint32(a)>>7)
			}
		}
	}
}

// stampUp lays a glyph turned to read upward: what was to the right of the pen
// goes above it, what was below goes to its right.
func (c *Canvas) stampUp(g glyph, x0, up int, src *source) {
	m := g.mask
	for gy := m.Rect.Min.Y; gy < m.Rect.Max.Y; gy++ {
		for gx := m.Rect.Min.X; gx < m.Rect.Max.X; gx++ {
			a := m.Pix[m.PixOffset(gx, gy)]
			p := image.Pt(x0+gy, -(up+gx)-1)
			if a != 0 && p.In(c.img.Rect) {
				src.over(c.img.Pix[c.img.PixOffset(p.X, p.Y):][:4], uint32(a)+uint32(a)>>7)
			}
		}
	}
}

// face is the font at a size, made when it is first asked for.
func (c *Canvas) face(f letter.Font, size float64) *face {
	key := faceKey{f, fixed.Int26_6(math.Round(size * 64))}
	if have := c.faces[key]; have != nil {
		return have
	}
	if c.faces == nil || len(c.faces) >= mostFaces {
		c.faces = make(map[faceKey]*face)
	}
	made := &face{face: f.Face(float64(key.size) / 64)}
	c.faces[key] = made
	return made
}

// glyph is a sign as it looks with its pen at a position along the line.
func (f *face) glyph(r rune, position float64) glyph {
	key := glyphKey{r, uint8(math.Floor((position - math.Floor(position)) * 4))}
	if g, ok := f.glyphs[key]; ok {
		return g
	}
	if f.glyphs == nil || len(f.glyphs) >= mostGlyphs {
		f.glyphs = make(map[glyphKey]glyph)
	}
	g := glyph{mask: new(image.Alpha)}
	dot := fixed.Point26_6{X: fixed.Int26_6(key.phase)*16 + 8}
	if r, mask, from, _, ok := f.face.Glyph(dot, r); ok {
		sized(g.mask, r)
		for y := range r.Dy() {
			for x := range r.Dx() {
				_, _, _, a := mask.At(from.X+x, from.Y+y).RGBA()
				g.mask.Pix[y*g.mask.Stride+x] = uint8(a >> 8)
			}
		}
	}
	f.glyphs[key] = g
	return g
}
