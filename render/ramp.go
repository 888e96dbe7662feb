package render

import (
	"image/color"
	"math"
)

// Ramp is a scale of colours for the values of a map, from the least to the
// greatest. Its lightness falls steadily, so that grey print and eyes that
// miss a colour read it rightly, and neighbours are everywhere equally far
// apart as the eye sees it (in OKLab, Ottosson 2020).
type Ramp [rampSteps]color.RGBA

// rampSteps is about as fine as channels of eight bits can part the colours.
const rampSteps = 160

// rampPath is where a ramp runs through OKLCH: lightness and hue go evenly from
// the first to the second, and the chroma swells between them.
type rampPath struct {
	l0, l1     float64
	hue0, hue1 float64 // degrees
	chroma     float64 // the greatest
}

// The paths of the looks: from the colour of the paper, sand, over rose and
// violet to night; on slate from its dark to a pale sand.
var (
	onLight = rampPath{l0: 0.955, l1: 0.26, hue0: 85, hue1: -85, chroma: 0.125}
	onDark  = rampPath{l0: 0.34, l1: 0.95, hue0: -85, hue1: 85, chroma: 0.115}
)

// NewRamp computes the ramp of a look: the least value has nearly the colour
// of its paper.
func NewRamp(look Look) *Ramp {
	if lightness(look.Paper) < 0.5 {
		return &rampOnDark
	}
	return &rampOnLight
}

var rampOnLight, rampOnDark = onLight.ramp(), onDark.ramp()

// lightness is the lightness of a colour as in OKLab, near enough to tell paper
// from slate.
func lightness(c color.RGBA) float64 {
	return math.Cbrt(math.Pow((0.2126*float64(c.R)+0.7152*float64(c.G)+0.0722*float64(c.B))/255, 2.2))
}

// at is the place on the path, x from 0 to 1, in OKLab.
func (p rampPath) at(x float64) (l, c, hue float64) {
	l = p.l0 + x*(p.l1-p.l0)
	hue = (p.hue0 + x*(p.hue1-p.hue0)) * math.Pi / 180
	// Least at both ends, where sRGB has little room; never none, so that the
	// ends have a hue.
	return l, p.chroma * (0.22 + 0.78*math.Sin(math.Pi*x)), hue
}

// ramp puts the colours at equal distances along the path.
func (p rampPath) ramp() (r Ramp) {
	const fine = 40 * rampSteps
	length := make([]float64, fine+1)
	var before [3]float64
	for i := range length {
		l, c, hue := p.at(float64(i) / fine)
		sin, cos := math.Sincos(hue)
		now := [3]float64{l, c * cos, c * sin}
		if i > 0 {
			length[i] = length[i-1] + math.Hypot(math.Hypot(now[0]-before[0], now[1]-before[1]), now[2]-before[2])
		}
		before = now
	}
	at := 0
	for i := range r {
		for at < fine && length[at] < length[fine]*float64(i)/(rampSteps-1) {
			at++
		}
		r[i] = OKLCH(p.at(float64(at) / fine))
	}
	return r
}

// At is the colour at a fraction of the ramp, held to its ends; of a number
// that is none, that of 0.
func (r *Ramp) At(fraction float64) color.RGBA { return r[r.Step(fraction)] }

// Step is the index of that colour.
func (r *Ramp) Step(fraction float64) int {
	if !(fraction > 0) {
		return 0
	}
	return min(int(fraction*rampSteps), rampSteps-1)
}
