package pixel

import (
	"math"

	"cavitywright/render"
)

// one is 1 in the fixed-point numbers of this file: 16 bits of fraction.
const one = 1 << 16

// hairline draws a straight line of width w, up to a few pixels, from p to q.
//
// It walks along the axis in which the line is longer, pixel by pixel, and
// covers across it the stretch that the line's width cuts out there: what Wu
// (1991, "An efficient antialiasing technique") does for two pixels, with the
// true extent. Ends are cut across the axis.
func (c *Canvas) hairline(p, q render.Point, w float64, src *source) {
	reach := 2 * w
	p, q, ok := c.bounds.Inset(-reach-1).Clip(p, q)
	if !ok {
		return
	}
	dx, dy := q.X-p.X, q.Y-p.Y
	if math.Abs(dx) >= math.Abs(dy) {
		if dx < 0 {
			p, q = q, p
		}
		if dx == 0 {
			return
		}
		c.walk(walk{p.X, q.X, p.Y, dy / dx, w, 4, c.img.Stride, c.img.Rect.Dx(), c.img.Rect.Dy()}, src)
		return
	}
	if dy < 0 {
		p, q = q, p
	}
	c.walk(walk{p.Y, q.Y, p.X, dx / dy, w, c.img.Stride, 4, c.img.Rect.Dy(), c.img.Rect.Dx()}, src)
}

// walk is a line along one axis of the picture: from u0 to u1, at v0 across,
// rising by slope. du and dv are the steps in bytes along and across; nu and nv
// the pixels there are.
type walk struct {
	u0, u1, v0, slope, width float64
	du, dv, nu, nv           int
}

func (c *Canvas) walk(k walk, src *source) {
	thick := k.width * math.Sqrt(1+k.slope*k.slope)
	t := int(thick*one + 0.5)
	first, last := max(int(math.Floor(k.u0)), 0), min(int(math.Floor(k.u1)), k.nu-1)
	v := int(math.Floor((k.v0+(float64(first)+0.5-k.u0)*k.slope-thick/2)*one + 0.5))
	rise := int(math.Floor(k.slope*one + 0.5))
	for u := first; u <= last; u++ {
		share := uint32(256)
		if u == first || u == last {
			along := min(k.u1, float64(u+1)) - max(k.u0, float64(u))
			share = uint32(256*max(along, 0) + 0.5)
		}
		c.across(u*k.du, v, t, share, k, src)
		v += rise
	}
}

// across covers the pixels from v to v+t across the walk at byte offset o.
func (c *Canvas) across(o, v, t int, share uint32, k walk, src *source) {
	at := v >> 16
	cover := min(one-v&(one-1), t)
	for {
		if uint(at) < uint(k.nv) {
			src.over(c.img.Pix[o+at*k.dv:][:4], uint32(cover)>>8*share>>8)
		}
		if t -= cover; t <= 0 {
			return
		}
		cover = min(t, one)
		at++
	}
}
