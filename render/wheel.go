package render

import (
	"image/color"
	"math"
)

// Wheel is a cyclic scale of colours of one lightness and one chroma, hue once
// around, so that no place on a wall looks nearer or more important than
// another. The steps are those of OKLCH, the polar form of OKLab (Ottosson
// 2020, "A perceptual color space for image processing").
type Wheel [wheelSteps]color.RGBA

// wheelSteps is finer than the eye: with it, neighbours differ by at most two
// steps of one channel.
const wheelSteps = 512

// wheelStart is the hue at s = 0, in degrees: a red, where most people expect
// a colour circle to begin.
const wheelStart = 25

// NewWheel computes the scale of lightness l and chroma c, both as in OKLCH.
// The whole circle must lie inside sRGB: c no more than about 0.12 at l = 0.7.
func NewWheel(l, c float64) *Wheel {
	var w Wheel
	for i := range w {
		w[i] = OKLCH(l, c, wheelStart*math.Pi/180+2*math.Pi*float64(i)/wheelSteps)
	}
	return &w
}

// At is the colour at a fraction of the circle, taken modulo 1. A fraction
// that is not a number has the colour of 0.
func (w *Wheel) At(fraction float64) color.RGBA {
	f := fraction - math.Floor(fraction)
	if !(f >= 0 && f < 1) {
		return w[0]
	}
	return w[int(f*wheelSteps)]
}

// OKLCH is the sRGB colour of lightness l in [0, 1], chroma c and hue in
// radians; channels outside sRGB are cut off (Ottosson 2020).
func OKLCH(l, c, hue float64) color.RGBA {
	r, g, b := oklch(l, c, hue)
	return color.RGBA{channel(r), channel(g), channel(b), 255}
}

// oklch gives linear sRGB, unbounded (Ottosson 2020: the inverse matrices).
func oklch(l, c, hue float64) (r, g, b float64) {
	sin, cos := math.Sincos(hue)
	u, v := c*cos, c*sin
	x := l + 0.3963377774*u + 0.2158037573*v
	y := l - 0.1055613458*u - 0.0638541728*v
	z := l - 0.0894841775*u - 1.2914855480*v
	x, y, z = x*x*x, y*y*y, z*z*z
	return 4.0767416621*x - 3.3077115913*y + 0.2309699292*z,
		-1.2684380046*x + 2.6097574011*y - 0.3413193965*z,
		-0.0041960863*x - 0.7034186147*y + 1.7076147010*z
}

// channel encodes a linear channel with the transfer curve of sRGB (IEC
// 61966-2-1).
func channel(v float64) uint8 {
	if v <= 0.0031308 {
		v *= 12.92
	} else {
		v = 1.055*math.Pow(v, 1/2.4) - 0.055
	}
	return uint8(math.Round(255 * min(max(v, 0), 1)))
}

// Fade is the colour made translucent: alpha 1 leaves it, 0 makes it vanish.
func Fade(c color.RGBA, alpha float64) color.RGBA {
	f := func(v uint8) uint8 { return uint8(math.Round(float64(v) * min(max(alpha, 0), 1))) }
	return color.RGBA{f(c.R), f(c.G), f(c.B), f(c.A)}
}
