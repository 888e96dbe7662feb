package render

import (
	"cavitywright/render/letter"
	"cavitywright/sim/figure"
)

// keyRow is one row of a legend, entries side by side.
type keyRow []figure.Key

// The measures of a legend of textures, in small type sizes.
const (
	keySample = 2.4 // length of the sample of wall
	keyAfter  = 0.5 // from the sample to its text
	keyBeside = 1.6 // from one entry to the next
	keyLine   = 1.45
)

// keyRows breaks a legend into rows no wider than width.
func keyRows(keys []figure.Key, width float64, look Look) []keyRow {
	var rows []keyRow
	left := 0.0
	for _, k := range keys {
		w := keyWidth(k, look) + keyBeside*look.Small
		if n := len(rows); n > 0 && w-keyBeside*look.Small <= left {
			rows[n-1] = append(rows[n-1], k)
		} else {
			rows = append(rows, keyRow{k})
			left = width
		}
		left -= w
	}
	return rows
}

func keyWidth(k figure.Key, look Look) float64 {
	return (keySample+keyAfter)*look.Small + look.Small*letter.Width(k.Text, letter.Regular)
}

// keysHeight is the height of a legend set in a width.
func keysHeight(keys []figure.Key, width float64, look Look) float64 {
	return float64(len(keyRows(keys, width, look))) * keyLine * look.Small
}

// drawKeyRows sets the rows of a legend below top.
func drawKeyRows(c Canvas, rows []keyRow, left, top float64, look Look) {
	for i, row := range rows {
		x, y := left, top+(float64(i)+0.5)*keyLine*look.Small
		for _, k := range row {
			drawKey(c, k, x, y, look)
			x += keyWidth(k, look) + keyBeside*look.Small
		}
	}
}

// drawKey draws a sample of wall with its texture, and what it means.
func drawKey(c Canvas, k figure.Key, x, y float64, look Look) {
	end := x + keySample*look.Small
	low := y + coatDepth/2*look.Hair
	pen := Pen{Width: 1.5 * look.Hair, Color: look.Ink, Cap: Butt}
	if k.Texture == figure.Gap {
		a, b := x+0.3*(end-x), end-0.3*(end-x)
		c.Stroke(Segment(Point{x, low}, Point{a, low}), pen)
		c.Stroke(Segment(Point{b, low}, Point{end, low}), pen)
		pen.Width = postWidth * look.Hair
		for _, q := range []float64{a, b} {
			c.Stroke(Segment(Point{q, low - coatDepth*look.Hair}, Point{q, low + coatDepth/2*look.Hair}), pen)
		}
	} else {
		c.Stroke(Segment(Point{x, low}, Point{end, low}), pen)
		pts := []wallPoint{{Point: Point{x, low}}, {Point: Point{end, low}}}
		drawTexture(c, pts, false, k.Texture, NewBox(x, y-look.Small, end-x, 2*look.Small), look)
	}
	c.Text(Text{At: Point{end + keyAfter*look.Small, y}, Size: look.Small, String: k.Text, V: Middle, Color: look.Ink})
}

// keyPad is the paper around a legend in a pane, in small type sizes.
const keyPad = 0.4

// KeysBox is the room that DrawKeys takes from a place on; empty for none.
func KeysBox(keys []figure.Key, at Point, look Look) Box {
	if len(keys) == 0 {
		return Box{at, at}
	}
	wide := 0.0
	for _, k := range keys {
		wide = max(wide, keyWidth(k, look))
	}
	return NewBox(at.X, at.Y, wide+2*keyPad*look.Small, (float64(len(keys))*keyLine+keyPad)*look.Small)
}

// DrawKeys draws a legend below and to the right of a place, one entry a row.
func DrawKeys(c Canvas, keys []figure.Key, at Point, look Look) {
	rows := make([]keyRow, len(keys))
	for i, k := range keys {
		rows[i] = keyRow{k}
	}
	drawKeyRows(c, rows, at.X+keyPad*look.Small, at.Y+keyPad/2*look.Small, look)
}
