// Package render turns figures into drawings. It knows figures, colours and
// sizes, and a Canvas of four methods; it knows neither files nor windows, and
// it computes no physics.
//
// The canvas unit is decided by whoever calls: one pixel for a pane, one
// millimetre for a page. Its origin is the top left corner and y points DOWN.
// A Look holds every colour and every size, in the same unit.
//
//	raster/  pixels of a page, for PNG      vector/  SVG and PDF
//	pixel/   pixels of a pane, live         export/  one file format each
package render

import (
	"image/color"

	"cavitywright/render/letter"
)

// Canvas is what can be drawn on. All colours are premultiplied, as color.RGBA
// always is. Coordinates that are not finite are left out, and anything
// outside the canvas is cut off; neither is an error.
type Canvas interface {
	// Fill paints the inside of the path, even-odd over all its contours,
	// which it closes.
	Fill(Path, color.RGBA)
	// Stroke draws along the path with round joins.
	Stroke(Path, Pen)
	// Text sets one line of text.
	Text(Text)
	// Dots paints equal discs.
	Dots(Dots)
}

// Pen is how a path is stroked. Width and the lengths of Dash, drawn and left
// out by turns, are in canvas units; no Dash is an unbroken line.
type Pen struct {
	Width float64
	Color color.RGBA
	Dash  []float64
	Cap   Cap
}

// Cap is the form of a line's ends, and of the ends of its dashes.
type Cap uint8

// The forms of an end: a half disc beyond it, or cut off straight at it.
const (
	Round Cap = iota
	Butt
)

// Text is one line of text of type size Size, its anchor placed at At.
type Text struct {
	At     Point
	Size   float64
	String string
	H      HAlign
	V      VAlign
	Turn   Turn
	Weight letter.Weight
	Color  color.RGBA
}

// HAlign says which point along the text stands at its anchor.
type HAlign uint8

// Where along the text the anchor is.
const (
	Left HAlign = iota
	Center
	Right
)

// VAlign says which height of the text stands at its anchor.
type VAlign uint8

// The heights: of the baseline, half way up a capital, and its top.
const (
	Baseline VAlign = iota
	Middle
	Top
)

// Turn is the direction in which a text reads.
type Turn uint8

// Level reads to the right; Upward is turned by 90 degrees and reads to the
// top of the canvas, as along a y axis.
const (
	Level Turn = iota
	Upward
)

// Width is the length of the text in canvas units.
func (t Text) Width() float64 { return t.Size * letter.Width(t.String, t.Weight) }

// Foot is the anchor moved, across the text only, to the baseline: what a
// canvas needs that aligns text along its line by itself.
func (t Text) Foot() Point {
	drop := 0.0
	switch t.V {
	case Middle:
		drop = letter.CapHeight / 2 * t.Size
	case Top:
		drop = letter.CapHeight * t.Size
	}
	if t.Turn == Upward {
		return Point{t.At.X + drop, t.At.Y}
	}
	return Point{t.At.X, t.At.Y + drop}
}

// Start is where the baseline begins.
func (t Text) Start() Point {
	p, back := t.Foot(), 0.0
	switch t.H {
	case Center:
		back = t.Width() / 2
	case Right:
		back = t.Width()
	}
	if t.Turn == Upward {
		return Point{p.X, p.Y + back}
	}
	return Point{p.X - back, p.Y}
}

// Dots are discs of one radius and colour, centred at the points of X and Y,
// which are of equal length. A canvas may keep neither slice.
type Dots struct {
	X, Y   []float64
	Radius float64
	Color  color.RGBA
}
