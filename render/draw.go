package render

import (
	"strings"
	"unicode/utf8"

	"cavitywright/render/letter"
	"cavitywright/sim/figure"
)

// Draw draws a figure into a box of the canvas, on paper. It is the one switch
// over the kinds of figure.
func Draw(c Canvas, f figure.Figure, box Box, look Look) {
	c.Fill(box.Path(), look.Paper)
	switch f := f.(type) {
	case figure.Dots:
		p := LayoutDots(f, box, look)
		drawFrame(c, f, p, look)
		DrawDots(c, f, p, look)
		DrawMarks(c, f, p, look)
	case figure.Paths:
		drawPaths(c, f, box, look)
	case figure.Series:
		drawSeries(c, f, LayoutSeries(f, box, look), look)
	case figure.Polar:
		drawPolar(c, f, box, look)
	case figure.Grid:
		drawGrid(c, f, LayoutGrid(f, box, look), look)
	case figure.Scalars:
		drawScalars(c, f, box, look)
	case figure.Sheet:
		drawSheet(c, f, box, look)
	default:
		panic("render: a figure of an unknown kind")
	}
}

// Height is the height, in canvas units, at which a figure of the given width
// looks its best: what an export uses where nobody asked for another.
func Height(f figure.Figure, width float64, look Look) float64 {
	switch f := f.(type) {
	case figure.Dots:
		return 0.62*width + keysHeight(f.X.Keys, width-2*look.Margin, look) + captionHeight(f.Caption, width, look)
	case figure.Series:
		return 0.62*width + captionHeight(f.Caption, width, look)
	case figure.Polar:
		return polarHeight(f, width, look)
	case figure.Grid:
		return 0.62*width + barRoom(look) + captionHeight(f.Caption, width, look)
	case figure.Paths:
		e := Bounds(f)
		edge := 2 * (look.Margin + look.Wall)
		aspect := min((e.Y1-e.Y0)/(e.X1-e.X0), 1.4)
		if !finite(aspect) {
			aspect = 1
		}
		free := NewBox(0, 0, width, 0)
		_, _, used := pathsRoom(f, free, look)
		return (width-edge)*aspect + edge + used
	case figure.Scalars:
		return scalarsHeight(f, width, look)
	case figure.Sheet:
		return sheetAspect * width
	}
	panic("render: a figure of an unknown kind")
}

// captionHeight is the height of a wrapped caption with the gap above it.
func captionHeight(caption []string, width float64, look Look) float64 {
	n := len(wrap(caption, width-2*look.Margin, look.Small))
	if n == 0 {
		return 0
	}
	return (captionGap + float64(n)*lineHeight) * look.Small
}

// drawCaption sets lines of small type, the last one's descenders on bottom.
func drawCaption(c Canvas, lines []string, left, bottom float64, look Look) {
	for i, line := range lines {
		up := float64(len(lines)-1-i)*lineHeight + letter.Descent
		c.Text(Text{At: Point{left, bottom - up*look.Small}, Size: look.Small, String: line, Color: look.Ink})
	}
}

// wrap breaks lines at spaces so that none is wider than width at the type
// size; a single word that is wider stays whole. A number keeps the short word
// after it, its unit or its next three digits, on the same line.
func wrap(lines []string, width, size float64) []string {
	var out []string
	for _, line := range lines {
		row := ""
		for _, word := range unbroken(strings.Fields(line)) {
			longer := strings.TrimSpace(row + " " + word)
			if row != "" && size*letter.Width(longer, letter.Regular) > width {
				out = append(out, row)
				longer = word
			}
			row = longer
		}
		if row != "" {
			out = append(out, row)
		}
	}
	return out
}

// longestUnit is the length, in letters, of a word that is taken for a unit.
const longestUnit = 4

// unbroken joins the words that must not be parted.
func unbroken(words []string) []string {
	var out []string
	for _, word := range words {
		n := len(out)
		if n > 0 && endsInDigit(out[n-1]) && utf8.RuneCountInString(word) <= longestUnit {
			out[n-1] += " " + word
			continue
		}
		out = append(out, word)
	}
	return out
}

func endsInDigit(s string) bool { return s[len(s)-1] >= '0' && s[len(s)-1] <= '9' }

// PlotOf is where a figure drawn into a box has its axes; ok is false where it
// has none.
func PlotOf(f figure.Figure, box Box, look Look) (p Plot, ok bool) {
	switch f := f.(type) {
	case figure.Dots:
		return LayoutDots(f, box, look), true
	case figure.Series:
		return LayoutSeries(f, box, look), true
	case figure.Grid:
		return LayoutGrid(f, box, look).Plot, true
	}
	return Plot{}, false
}
