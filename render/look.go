package render

import (
	"image/color"
	"math"
)

// Look is every colour and every size of a drawing in one value. Sizes are in
// canvas units.
type Look struct {
	Palette
	Sizes
}

// Palette is the colours of a look. Accent is the colour of what can be
// dragged and of nothing else. Wheel paints the wall by arclength.
type Palette struct {
	Paper  color.RGBA // behind everything
	Floor  color.RGBA // the inside of a table
	Ink    color.RGBA // text, axes, wall edges
	Faint  color.RGBA // grid, construction
	Accent color.RGBA
	Sea    color.RGBA // orbits without a colour of their own
	Orbits [8]color.RGBA
	Wheel  *Wheel
}

// Sizes is the measures of a look.
type Sizes struct {
	Text   float64 // type size of axis labels
	Small  float64 // type size of all else
	Line   float64 // width of rays and curves
	Hair   float64 // width of frames and ticks
	Wall   float64 // width of the coloured band of the wall
	Dot    float64 // radius of a dot of a portrait
	Tick   float64 // length of a tick
	Strip  float64 // height of the strip of the wall under the s axis
	Margin float64 // blank border
	Grid   float64 // size of the device pixel that lines are put on; 0 where there is none
}

// Hue is the colour of a place on the wall: fraction is s/L, taken modulo 1.
func (l Look) Hue(fraction float64) color.RGBA { return l.Wheel.At(fraction) }

// Orbit is the colour of an orbit: the sea where hue < 0, else the colour of
// that index, taken modulo 8.
func (l Look) Orbit(hue int) color.RGBA {
	if hue < 0 {
		return l.Sea
	}
	return l.Orbits[hue%len(l.Orbits)]
}

// snap moves a coordinate to the middle of a device pixel, where there are
// pixels, so that a hairline there is one pixel wide and not two half ones.
func (l Look) snap(v float64) float64 {
	if l.Grid <= 0 {
		return v
	}
	odd := math.Mod(math.Round(l.Hair/l.Grid), 2)
	return (math.Floor(v/l.Grid) + odd/2) * l.Grid
}

// floor and ceil move an edge to whole device pixels, where there are any.
func (l Look) floor(v float64) float64 {
	if l.Grid <= 0 {
		return v
	}
	return math.Floor(v/l.Grid) * l.Grid
}

func (l Look) ceil(v float64) float64 {
	if l.Grid <= 0 {
		return v
	}
	return math.Ceil(v/l.Grid) * l.Grid
}

// Paper is the look of a printed page: black on white. unitsPerMM is 1 for a
// canvas in millimetres. Sizes suit a column 85 mm wide: type of 8 and 7
// points, lines of half a point and a quarter (common practice of journals).
func Paper(unitsPerMM float64) Look {
	mm := unitsPerMM
	pt := mm * 25.4 / 72
	return Look{inks, Sizes{
		Text: 8 * pt, Small: 7 * pt,
		Line: 0.5 * pt, Hair: 0.35 * pt, Wall: 0.8 * mm, Dot: 0.075 * mm,
		Tick: 0.9 * mm, Strip: 1.1 * mm, Margin: 1.2 * mm,
	}}
}

// Light is the look of a pane on warm paper, Dark that on slate. scale is the
// number of pixels to a pixel of a plain screen, 1 or above.
func Light(scale float64) Look { return Look{warm, panes(scale)} }

// Dark is the look of a pane on slate, written in chalk.
func Dark(scale float64) Look { return Look{slate, panes(scale)} }

func panes(scale float64) Sizes {
	return Sizes{
		Text: 13 * scale, Small: 11.5 * scale,
		Line: 1.2 * scale, Hair: max(1, math.Round(scale)), Wall: 5 * scale, Dot: 0.8 * scale,
		Tick: 5 * scale, Strip: 6 * scale, Margin: 9 * scale, Grid: 1,
	}
}
