package pixel

import (
	"math"

	"cavitywright/render"
)

// Discs up to this radius, in pixels, are stamped from a prepared pattern;
// larger ones are filled as paths.
const largestStamp = 8

// phases is how many positions of a disc's centre within a pixel are told
// apart along each axis.
const phases = 8

// fineness is how many prepared radii there are to a pixel.
const fineness = 16

// stamp is a disc of one radius for each position of its centre within a
// pixel.
type stamp struct {
	margin int // how many pixels the disc reaches beyond that of its centre
	at     [phases * phases][]inked
}

// inked is one pixel that a disc covers: its place relative to the pixel of
// the centre, in pixels and in bytes, and its coverage up to 256.
type inked struct {
	offset int32
	dx, dy int16
	cover  uint32
}

// Dots paints discs. Their radius is rounded to a sixteenth of a pixel and
// their centres to an eighth.
func (c *Canvas) Dots(d render.Dots) {
	if c.img == nil || !(d.Radius > 0) || d.Color.A == 0 || len(c.img.Pix) == 0 {
		return
	}
	n := min(len(d.X), len(d.Y))
	if d.Radius > largestStamp {
		for i := range n {
			c.Fill(render.Disc(render.Point{X: d.X[i], Y: d.Y[i]}, d.Radius), d.Color)
		}
		return
	}
	s := c.stamp(max(int(math.Round(d.Radius*fineness)), 1))
	src := newSource(d.Color)
	c.prepare(s, &src)
	w, h := float64(c.img.Rect.Dx()), float64(c.img.Rect.Dy())
	m := float64(s.margin)
	xs, ys, pix, stride := d.X[:n], d.Y[:n], c.img.Pix, uint(c.img.Stride)
	for i, x := range xs {
		y := ys[i]
		switch {
		case x >= m && x < w-m && y >= m && y < h-m:
			px, py := uint(x*phases), uint(y*phases)
			o := int(py/phases*stride + px/phases*4)
			for _, k := range c.ready[py%phases*phases+px%phases] {
				at := o + int(k.offset)
				blend(pix[at:at+4:at+4], k)
			}
		case x > -m && x < w+m && y > -m && y < h+m:
			c.edgeDot(s, x, y, &src)
		}
	}
}

// prepare works the stamp's coverage out for a colour.
func (c *Canvas) prepare(s *stamp, src *source) {
	for k, marks := range s.at {
		c.ready[k] = c.ready[k][:0]
		for _, m := range marks {
			c.ready[k] = append(c.ready[k], src.wash(m.offset, m.cover))
		}
	}
}

// edgeDot paints a disc that may reach beyond the picture.
func (c *Canvas) edgeDot(s *stamp, x, y float64, src *source) {
	px, py := int(math.Floor(x*phases)), int(math.Floor(y*phases))
	x0, y0 := floorDiv(px), floorDiv(py)
	for _, k := range s.at[(py-y0*phases)*phases+px-x0*phases] {
		u, v := x0+int(k.dx), y0+int(k.dy)
		if uint(u) < uint(c.img.Rect.Dx()) && uint(v) < uint(c.img.Rect.Dy()) {
			src.over(c.img.Pix[c.img.PixOffset(u, v):][:4], k.cover)
		}
	}
}

func floorDiv(v int) int { return int(math.Floor(float64(v) / phases)) }

// stamp is the prepared disc of a radius in sixteenths of a pixel.
func (c *Canvas) stamp(radius int) *stamp {
	if s := c.stamps[radius]; s != nil {
		return s
	}
	if c.stamps == nil {
		c.stamps = make(map[int]*stamp)
	}
	s := newStamp(float64(radius)/fineness, c.img.Stride)
	c.stamps[radius] = s
	return s
}

// samples is how many points along each axis of a pixel decide its coverage.
const samples = 16

// faintest is the coverage, of 256, below which a pixel is left out of a stamp;
// the others get its share. That spares a sixth of the work.
const faintest = 12

func newStamp(r float64, stride int) *stamp {
	s := &stamp{margin: int(math.Ceil(r + 1))}
	for k := range s.at {
		cx, cy := (float64(k%phases)+0.5)/phases, (float64(k/phases)+0.5)/phases
		all, kept := uint32(0), uint32(0)
		for dy := -s.margin; dy <= s.margin; dy++ {
			for dx := -s.margin; dx <= s.margin; dx++ {
				a := covered(float64(dx)-cx, float64(dy)-cy, r)
				all += a
				if a >= faintest {
					kept += a
					s.at[k] = append(s.at[k], inked{int32(dy*stride + 4*dx), int16(dx), int16(dy), a})
				}
			}
		}
		for i, m := range s.at[k] {
			s.at[k][i].cover = min((m.cover*all+kept/2)/kept, 256)
		}
	}
	return s
}

// covered is the part, of 256, of the pixel with its corner at (x, y) that a
// disc about the origin covers.
func covered(x, y, r float64) uint32 {
	if far := math.Hypot(max(math.Abs(x+0.5)-0.5, 0), max(math.Abs(y+0.5)-0.5, 0)); far >= r {
		return 0
	}
	n := 0
	for i := range samples {
		for j := range samples {
			u, v := x+(float64(i)+0.5)/samples, y+(float64(j)+0.5)/samples
			if u*u+v*v < r*r {
				n++
			}
		}
	}
	return uint32(n * 256 / (samples * samples))
}
