package render

import (
	"strconv"

	"cavitywright/render/letter"
	"cavitywright/sim/figure"
)

// DrawScale draws the scale of a map that lies within a plot: a short bar of
// colours in the lower right corner of the frame, with the numbers of its ends,
// what they are, and between them a remark, which does not change its size. It is
// left out where the frame is small.
func DrawScale(c Canvas, a figure.Axis, remark string, frame Box, look Look) {
	name := title(a, 0)
	lo, hi := mended(a)
	w := max(look.Small*letter.Width(name, letter.Regular), 9*look.Small)
	h := (letter.CapHeight*2 + 0.5 + 0.7 + 0.5) * look.Small
	gap := 0.6 * look.Small
	at := NewBox(frame.Max.X-w-2*gap, frame.Max.Y-h-2*gap, w, h)
	if w > 0.7*frame.W() || h > 0.4*frame.H() {
		return
	}
	c.Fill(at.Inset(-gap).Path(), Fade(look.Paper, 0.85))
	ink := func(x, y float64, s string, side HAlign) {
		c.Text(Text{At: Point{x, y}, Size: look.Small, String: s, H: side, V: Top, Color: look.Ink})
	}
	ink(at.Min.X, at.Min.Y, name, Left)
	top := look.floor(at.Min.Y + (letter.CapHeight+0.5)*look.Small)
	bar := NewBox(look.floor(at.Min.X), top, w, look.ceil(0.7*look.Small))
	ramp := NewRamp(look)
	step := bar.W() / float64(len(ramp))
	for i := range ramp {
		x := bar.Min.X + step*float64(i)
		next := min(x+1.5*step, bar.Max.X)
		c.Fill(NewBox(x, bar.Min.Y, next-x, bar.H()).Path(), ramp[i])
	}
	c.Stroke(bar.Inset(-look.Hair/2).Path(), Pen{Width: look.Hair, Color: look.Ink, Cap: Butt})
	below := bar.Max.Y + 0.5*look.Small
	ink(bar.Min.X, below, short(lo), Left)
	ink(bar.Max.X, below, short(hi), Right)
	ink(bar.Min.X+bar.W()/2, below, remark, Center)
}

// DrawNote writes a sentence in the middle of a frame, on a ground of paper, so
// that no dots run through the words.
func DrawNote(c Canvas, text string, frame Box, look Look) {
	gap := 0.6 * look.Small
	lines := wrap([]string{text}, frame.W()-4*gap, look.Small)
	w := 0.0
	for _, l := range lines {
		w = max(w, look.Small*letter.Width(l, letter.Regular))
	}
	h := float64(len(lines)) * lineHeight * look.Small
	mid := frame.Center()
	c.Fill(NewBox(mid.X-w/2-gap, mid.Y-h/2-gap, w+2*gap, h+2*gap).Path(), Fade(look.Paper, 0.92))
	for i, l := range lines {
		y := mid.Y + (float64(i)-float64(len(lines)-1)/2)*lineHeight*look.Small
		c.Text(Text{At: Point{mid.X, y}, Size: look.Small, H: Center, V: Middle, Color: look.Ink, String: l})
	}
}

// short is a number with two digits.
func short(v float64) string { return Proper(strconv.FormatFloat(v, 'g', 2, 64)) }
