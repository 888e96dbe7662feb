package render

import (
	"cavitywright/render/letter"
	"cavitywright/sim/figure"
)

// Measures of a sheet, in type sizes of its text, and the shape of its page
// (ISO 216: the long side is sqrt 2 times the short one).
const (
	sheetMargin   = 4.5
	titleSize     = 2.0
	headingGap    = 0.8
	sheetRowGap   = 1.2
	sheetAspect   = 1.4142135623730951
	sheetBlockGap = 2
)

// drawSheet lays out a page: title and head, the rows of figures, and the foot
// at the bottom edge.
func drawSheet(c Canvas, f figure.Sheet, box Box, look Look) {
	t := look.Text
	page := box.Inset(sheetMargin * t)
	y := page.Min.Y + titleSize*t*letter.Ascent
	c.Text(Text{At: Point{page.Min.X, y}, Size: titleSize * t, String: f.Title, Weight: letter.Bold, Color: look.Ink})
	y += titleSize * t * letter.Descent
	for _, line := range wrap(f.Head, page.W(), t) {
		y += lineHeight * t
		c.Text(Text{At: Point{page.Min.X, y}, Size: t, String: line, Color: look.Ink})
	}
	y += sheetRowGap * t
	rule := func(y float64) {
		c.Stroke(Segment(Point{page.Min.X, y}, Point{page.Max.X, y}), Pen{Width: look.Hair, Color: look.Ink, Cap: Butt})
	}
	rule(y)
	foot := wrap(f.Foot, page.W(), look.Small)
	bottom := page.Max.Y
	for i := len(foot) - 1; i >= 0; i-- {
		c.Text(Text{At: Point{page.Min.X, bottom - look.Small*letter.Descent}, Size: look.Small, String: foot[i], Color: look.Ink})
		bottom -= lineHeight * look.Small
	}
	bottom -= sheetRowGap * look.Small
	rule(bottom)
	drawSheetRows(c, f.Rows, NewBox(page.Min.X, y, page.W(), bottom-y), look)
}

// drawSheetRows shares the room among the rows and their blocks.
func drawSheetRows(c Canvas, rows []figure.SheetRow, room Box, look Look) {
	var heights float64
	for _, r := range rows {
		heights += r.Height
	}
	gap := sheetRowGap * look.Text
	free := room.H() - gap*float64(len(rows)+1)
	y := room.Min.Y + gap
	for _, r := range rows {
		high := free * r.Height / heights
		var widths float64
		for _, b := range r.Blocks {
			widths += b.Width
		}
		between := sheetBlockGap * look.Text
		wide := room.W() - between*float64(len(r.Blocks)-1)
		x := room.Min.X
		for _, b := range r.Blocks {
			w := wide * b.Width / widths
			c.Text(Text{At: Point{x, y + look.Text*letter.Ascent}, Size: look.Text, String: b.Heading, Weight: letter.Bold, Color: look.Ink})
			head := look.Text * (lineHeight + headingGap)
			Draw(c, b.Show, NewBox(x, y+head, w, high-head), look)
			x += w + between
		}
		y += high + gap
	}
}
