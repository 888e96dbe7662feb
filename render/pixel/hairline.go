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
	p, q, ok := c.bounds.Inset(-2*w-1).Clip(p, q)
	if !ok || p == q {
		return
	}
	dx, dy := q.X-p.X, q.Y-p.Y
	size := c.img.Rect.Size()
	if math.Abs(dx) >= math.Abs(dy) {
		if dx < 0 {
			p, q = q, p
		}
		k := walk{slope: dy / dx, du: 4, dv: c.img.Stride, nv: size.Y}
		k.along(c.img.Pix, p.X, q.X, p.Y, w, size.X, src)
		return
	}
	if dy < 0 {
		p, q = q, p
	}
	k := walk{slope: dx / dy, du: c.img.Stride, dv: 4, nv: size.X}
	k.along(c.img.Pix, p.Y, q.Y, p.X, w, size.Y, src)
}

// walk is a way along one axis of the picture, u, rising by slope across it,
// v. du and dv are the steps in bytes along and across; nv the pixels there
// are across.
type walk struct {
	slope      float64
	du, dv, nv int
}

// along draws the line from u0 to u1, at v0 across, over nu pixels.
func (k *walk) along(pix []uint8, u0, u1, v0, width float64, nu int, src *source) {
	thick := width * math.Sqrt(1+k.slope*k.slope)
	t := int(thick*one + 0.5)
	rise := int(math.Floor(k.slope*one + 0.5))
	first, last := max(int(math.Floor(u0)), 0), min(int(math.Floor(u1)), nu-1)
	// edge is where the line's lower edge stands in the middle of pixel u.
	edge := func(u int) int {
		return int(math.Floor((v0+(float64(u)+0.5-u0)*k.slope-thick/2)*one + 0.5))
	}
	// An end that lies within its pixel covers a part of it, about the middle
	// of that part.
	end := func(u int) {
		lo, hi := max(u0, float64(u)), min(u1, float64(u+1))
		if hi > lo {
			v := edge(u) + int((lo+hi-2*float64(u)-1)/2*k.slope*one)
			k.across(pix, u*k.du, v, t, uint32(256*(hi-lo)+0.5), src)
		}
	}
	if first > last {
		return
	}
	end(first)
	if last > first {
		end(last)
	}
	k.middle(pix, (first+1)*k.du, last-first-1, edge(first+1), rise, t, src)
}

// middle covers n whole pixels along the walk: the inner loop of all live
// drawing, written out for that.
func (k *walk) middle(pix []uint8, o, n, v, rise, t int, src *source) {
	rb, ga, alpha, dv, nv := src.rb, src.ga, src.alpha, k.dv, uint(k.nv)
	for ; n > 0; n-- {
		at := v >> 16
		cover := one - v&(one-1)
		rest := t - cover
		if rest < 0 {
			cover, rest = t, 0
		}
		i := o + at*dv
		if uint(at) < nv {
			mix(pix[i:i+4:i+4], rb, ga, (uint32(cover)>>8*alpha+128)>>8)
		}
		for ; rest > one; rest -= one {
			at++
			i += dv
			if uint(at) < nv {
				mix(pix[i:i+4:i+4], rb, ga, alpha)
			}
		}
		if at++; uint(at) < nv {
			i += dv
			mix(pix[i:i+4:i+4], rb, ga, (uint32(rest)>>8*alpha+128)>>8)
		}
		o += k.du
		v += rise
	}
}

// across covers the pixels from v to v+t across the walk at byte offset o.
func (k *walk) across(pix []uint8, o, v, t int, share uint32, src *source) {
	for at := v >> 16; t > 0; at++ {
		cover := min(one-v&(one-1), t)
		if uint(at) < uint(k.nv) {
			src.over(pix[o+at*k.dv:][:4], uint32(cover)>>8*share>>8)
		}
		t -= cover
		v += cover
	}
}
