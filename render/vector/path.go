// Package vector draws a page as SVG or PDF: the canvas unit is one millimetre.
// The same drawing gives the same bytes, always.
package vector

import (
	"image/color"
	"strconv"

	"cavitywright/render"
)

// flatness is the distance, in millimetres, within which chords stand for a
// curve where one has to be cut.
const flatness = 0.001

// within is a path cut to the surroundings of the page where it goes far
// beyond it, and as it is where it does not: viewers fail at huge numbers.
func within(p render.Path, page render.Box, clip func(render.Path, render.Box, float64) render.Path) render.Path {
	around := page.Inset(-max(page.W(), page.H()))
	for _, q := range p.Points {
		if !around.Contains(q) {
			return clip(p, around, flatness)
		}
	}
	return p
}

// opacity is the share of a colour's opacity and the colour as it is when
// opaque.
func opacity(c color.RGBA) (color.NRGBA, float64) {
	n := color.NRGBAModel.Convert(c).(color.NRGBA)
	return n, float64(n.A) / 255
}

// number appends a coordinate with at most three places, a micrometre.
func number(b []byte, v float64) []byte { return places(b, v, 3) }

// places appends a number rounded to so many places, without the zeros at its
// end.
func places(b []byte, v float64, n int) []byte {
	from := len(b)
	b = strconv.AppendFloat(b, v, 'f', n, 64)
	for b[len(b)-1] == '0' {
		b = b[:len(b)-1]
	}
	if b[len(b)-1] == '.' {
		b = b[:len(b)-1]
	}
	if string(b[from:]) == "-0" {
		b = append(b[:from], '0')
	}
	return b
}
