package render

import (
	"strconv"
	"strings"

	"cavitywright/render/letter"
	"cavitywright/sim/figure"
)

// scalarRow is one reading as it is written in the table.
type scalarRow struct {
	name, value, err string // err with the unit
	note             []string
}

// columns is the left edges of a table of readings, in canvas units from the
// left; values end at value. Lines down to a value and to its note are 0 where
// they stand beside the name.
type columns struct {
	value, err, note, right float64
	valueLine, noteLine     int
}

// rowGap is the height from one reading to the next, beyond its lines, in
// small type sizes; cellGap is the gap between columns.
const (
	rowGap  = 0.55
	cellGap = 1.2
)

// leastNote is the least width of the column of notes, in small type sizes;
// where less is left, a note goes below its reading.
const leastNote = 14

// scalarRows writes the readings and finds the columns they need.
func scalarRows(f figure.Scalars, width float64, look Look) ([]scalarRow, columns) {
	rows := make([]scalarRow, len(f.Rows))
	var name, value, err float64
	size := look.Small
	for i, s := range f.Rows {
		w := Written(s)
		r := scalarRow{name: s.Name, value: w.Value}
		if w.Error != "" {
			r.err = "± " + w.Error
		}
		if s.Unit != "1" {
			r.err = strings.TrimSpace(r.err + " " + unitText(s.Unit))
		}
		rows[i] = r
		name = max(name, size*letter.Width(r.name, letter.Bold))
		value = max(value, size*letter.Width(r.value, letter.Regular))
		err = max(err, size*letter.Width(r.err, letter.Regular))
	}
	var c columns
	c.right = width - look.Margin
	c.value = look.Margin + name + cellGap*size + value
	c.err = c.value + 0.3*size
	c.note = c.err + err + cellGap*size
	if c.right-c.note < leastNote*size {
		c.note, c.noteLine = look.Margin+cellGap*size, 1
	}
	if c.err+err > c.right {
		c.value, c.valueLine, c.noteLine = look.Margin+cellGap*size+value, 1, 2
		c.err = c.value + 0.3*size
	}
	for i, s := range f.Rows {
		rows[i].note = wrap([]string{remark(s)}, c.right-c.note, size)
	}
	return rows, c
}

// remark is the note of a reading with what it was measured on.
func remark(s figure.Scalar) string {
	text := s.Note
	if s.Bounces > 0 {
		if text != "" {
			text += "; "
		}
		text += grouped(s.Bounces) + " bounces, seed " + strconv.FormatUint(s.Seed, 10)
	}
	return text
}

// grouped writes a count with a narrow space every three digits.
func grouped(n int64) string {
	s := strconv.FormatInt(n, 10)
	for i := len(s) - 3; i > 0 && s[i-1] != '-'; i -= 3 {
		s = s[:i] + "\u00a0" + s[i:]
	}
	return s
}

// lines is the number of lines of type that a reading takes.
func (r scalarRow) lines(c columns) int { return max(c.valueLine+1, c.noteLine+len(r.note)) }

// scalarsHeight is the height of the whole table.
func scalarsHeight(f figure.Scalars, width float64, look Look) float64 {
	rows, c := scalarRows(f, width, look)
	h := 2*look.Margin + rowGap*look.Small
	for _, r := range rows {
		h += (float64(r.lines(c))*lineHeight + rowGap) * look.Small
	}
	return h
}

// drawScalars draws readings as a plain table between two lines: name, value
// and error with their unit, and what has to be said about it. Rows that the box has no
// room for are left out, and their number is said.
func drawScalars(c Canvas, f figure.Scalars, box Box, look Look) {
	rows, col := scalarRows(f, box.W(), look)
	x0 := box.Min.X
	rule := func(y, width float64, p Pen) {
		p.Width = width
		c.Stroke(Segment(Point{x0 + look.Margin, y}, Point{x0 + col.right, y}), p)
	}
	ink, faint := Pen{Color: look.Ink, Cap: Butt}, Pen{Color: look.Faint, Cap: Butt}
	y := look.snap(box.Min.Y + look.Margin)
	rule(y, 1.5*look.Hair, ink)
	for i, r := range rows {
		h := (float64(r.lines(col))*lineHeight + rowGap) * look.Small
		if last := i == len(rows)-1; y+h > box.Max.Y-look.Margin+0.01*look.Small || !last && y+h+lineHeight*look.Small > box.Max.Y {
			text := strconv.Itoa(len(rows)-i) + " more"
			c.Text(Text{At: Point{x0 + look.Margin, y + lineHeight*look.Small}, Size: look.Small, String: text, Color: look.Ink})
			return
		}
		drawScalar(c, r, col, Point{x0, y + (rowGap/2+letter.Ascent)*look.Small}, look)
		y = y + h
		if i < len(rows)-1 {
			rule(look.snap(y), look.Hair, faint)
		}
	}
	rule(look.snap(y), 1.5*look.Hair, ink)
}

// drawScalar sets one reading, its first baseline at from.
func drawScalar(c Canvas, r scalarRow, col columns, from Point, look Look) {
	set := func(x float64, line int, s string, h HAlign, w letter.Weight) {
		if s == "" {
			return
		}
		c.Text(Text{At: Point{from.X + x, from.Y + float64(line)*lineHeight*look.Small}, Size: look.Small,
			String: s, H: h, Weight: w, Color: look.Ink})
	}
	set(look.Margin, 0, r.name, Left, letter.Bold)
	set(col.value, col.valueLine, r.value, Right, letter.Regular)
	set(col.err, col.valueLine, r.err, Left, letter.Regular)
	for i, line := range r.note {
		set(col.note, col.noteLine+i, line, Left, letter.Regular)
	}
}
