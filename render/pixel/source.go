package pixel

import (
	"encoding/binary"
	"image/color"
)

// source is a colour made ready to be laid over pixels: as an opaque colour,
// its channels in pairs, each in a lane of 16 bits, so that two are mixed with
// one multiplication; and its opacity, by which coverage is scaled. To lay a
// translucent colour over something with full coverage is the same as to lay
// the opaque one over it with part of it.
type source struct {
	rb, ga uint32 // red and blue, green and alpha
	alpha  uint32 // opacity, 0 to 256
}

const (
	lanes = 0x00ff00ff
	half  = 0x00800080 // half a step in each lane, for rounding
)

func newSource(c color.RGBA) source {
	if c.A == 0 {
		return source{}
	}
	whole := func(v uint8) uint32 { return min(uint32(v)*255/uint32(c.A), 255) }
	return source{
		rb:    whole(c.R) | whole(c.B)<<16,
		ga:    whole(c.G) | 255<<16,
		alpha: (uint32(c.A)*256 + 127) / 255,
	}
}

// over lays the colour over one pixel of four bytes with coverage a in [0, 256].
func (s *source) over(pix []uint8, a uint32) { mix(pix, s.rb, s.ga, (a*s.alpha+128)>>8) }

// mix lays an opaque colour over one pixel. A lane is at most 255 * 256 + 128,
// so none runs over into the next; what is opaque stays so exactly, and no
// channel comes to exceed its alpha.
func mix(pix []uint8, rb, ga, a uint32) {
	d := binary.LittleEndian.Uint32(pix)
	keep := 256 - a
	rb = (d&lanes*keep + rb*a + half) >> 8 & lanes
	ga = (d>>8&lanes*keep + ga*a + half) & (lanes << 8)
	binary.LittleEndian.PutUint32(pix, rb|ga)
}

// wash is what a colour does to a pixel with a given coverage: keep so much, of
// 256, of what is there, and add this to it.
type wash struct {
	offset       int32 // of the pixel, in bytes, where it is one of a pattern
	keep, rb, ga uint32
}

// wash is the colour with a coverage a in [0, 256].
func (s *source) wash(offset int32, a uint32) wash {
	a = (a*s.alpha + 128) >> 8
	return wash{offset, 256 - a, s.rb*a + half, s.ga*a + half}
}

// blend applies a wash to one pixel.
func blend(pix []uint8, k wash) {
	d := binary.LittleEndian.Uint32(pix)
	rb := (d&lanes*k.keep + k.rb) >> 8 & lanes
	ga := (d>>8&lanes*k.keep + k.ga) & (lanes << 8)
	binary.LittleEndian.PutUint32(pix, rb|ga)
}
