package pixel

import (
	"encoding/binary"
	"image/color"
)

// source is a colour made ready to be laid over pixels: its channels in pairs,
// each in a lane of 16 bits, so that two are mixed with one multiplication.
type source struct {
	rb, ga uint32 // red and blue, green and alpha
	alpha  uint32 // opacity, 0 to 256
	whole  uint32 // the colour as four bytes
}

const lanes = 0x00ff00ff

func newSource(c color.RGBA) source {
	s := source{
		rb:    uint32(c.R) | uint32(c.B)<<16,
		ga:    uint32(c.G) | uint32(c.A)<<16,
		whole: uint32(c.R) | uint32(c.G)<<8 | uint32(c.B)<<16 | uint32(c.A)<<24,
	}
	if c.A > 0 {
		s.alpha = uint32(c.A) + 1
	}
	return s
}

// over lays the colour over one pixel of four bytes with coverage a in [0, 256].
//
// Each lane is (s*a + d*(256 - alpha*a/256) + 255) / 256. The product alpha*a
// is rounded up, so that with s <= alpha-1 and d <= 255 no lane exceeds 65535;
// the 255 rounds the sum up, so that what is opaque stays so.
func (s *source) over(pix []uint8, a uint32) {
	d := binary.LittleEndian.Uint32(pix)
	keep := 256 - (s.alpha*a+255)>>8
	rb := (s.rb*a + (d&lanes)*keep + lanes) >> 8 & lanes
	ga := (s.ga*a + (d>>8&lanes)*keep + lanes) & (lanes << 8)
	binary.LittleEndian.PutUint32(pix, rb|ga)
}
