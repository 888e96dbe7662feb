package intake

import (
	"bufio"
	"fmt"
	"io"
	"math"
	"regexp"
	"strconv"
	"strings"

	"cavitywright/table"
	"cavitywright/table/outline"

	"gonum.org/v1/gonum/spatial/r2"
)

// tabulated is a table of points as it is read.
type tabulated struct {
	split   func(string) []string
	comma   bool // decimal commas
	x, y    int  // columns
	loop    int  // column of the loop's name, or -1
	unit    table.Unit
	loops   [][]r2.Vec
	name    string // of the loop in the column
	headed  bool
	total   int
	columns int
}

// readPoints reads a table of points: a row a point, columns x and y, told by a
// header or the first two; loops parted by empty lines or told by a column.
func readPoints(r io.Reader) (Drawing, error) {
	t := tabulated{x: 0, y: 1, loop: -1, loops: [][]r2.Vec{nil}}
	lines := bufio.NewScanner(r)
	lines.Buffer(make([]byte, 1<<16), 1<<20)
	for n := 1; lines.Scan(); n++ {
		line := strings.TrimSpace(strings.TrimPrefix(lines.Text(), "\ufeff"))
		if err := t.line(line, n); err != nil {
			return Drawing{}, err
		}
	}
	if err := lines.Err(); err != nil {
		if err == bufio.ErrTooLong {
			return Drawing{}, fault("The file is neither an SVG drawing nor a table of points: it has lines of more than a million characters; choose another.")
		}
		return Drawing{}, err
	}
	return t.drawing()
}

func (t *tabulated) line(line string, n int) error {
	if line == "" {
		if len(t.loops[len(t.loops)-1]) > 0 {
			t.loops = append(t.loops, nil)
		}
		return nil
	}
	for _, mark := range []string{"#", "%", "//"} {
		if text, is := strings.CutPrefix(line, mark); is {
			t.remark(text)
			return nil
		}
	}
	if t.split == nil {
		t.separate(line)
	}
	cells := t.split(line)
	if !t.headed && t.total == 0 {
		if _, ok := t.value(cells[0]); !ok {
			return t.head(cells, n)
		}
	}
	if t.columns == 0 {
		t.columns = len(cells)
	}
	if len(cells) <= max(t.x, t.y) {
		return fault("Line %d holds %q, which is no pair of coordinates; write x and y in each line.", n, short(line))
	}
	x, okX := t.value(cells[t.x])
	y, okY := t.value(cells[t.y])
	if !okX || !okY {
		bad := cells[t.x]
		if okX {
			bad = cells[t.y]
		}
		return fault("Line %d holds %q where a coordinate should stand; write a number there, or take the line out.", n, short(bad))
	}
	if t.loop >= 0 && t.loop < len(cells) && cells[t.loop] != t.name {
		if t.name = cells[t.loop]; len(t.loops[len(t.loops)-1]) > 0 {
			t.loops = append(t.loops, nil)
		}
	}
	if t.total++; t.total > mostEdges {
		return fault("The table has more than %d points; thin it out first.", mostEdges)
	}
	last := &t.loops[len(t.loops)-1]
	*last = append(*last, r2.Vec{X: x, Y: y})
	return nil
}

// separate tells what stands between the numbers: a semicolon, a tab, a comma
// or white space, in this order. Beside the first two a comma is the decimal
// mark.
func (t *tabulated) separate(line string) {
	by := func(sep string) func(string) []string {
		return func(s string) []string {
			cells := strings.Split(s, sep)
			for i := range cells {
				cells[i] = strings.Trim(strings.TrimSpace(cells[i]), `"`)
			}
			return cells
		}
	}
	switch {
	case strings.Contains(line, ";"):
		t.split, t.comma = by(";"), true
	case strings.Contains(line, "\t"):
		t.split, t.comma = by("\t"), true
	case strings.Contains(line, ","):
		t.split = by(",")
	default:
		t.split = strings.Fields
	}
}

func (t *tabulated) value(cell string) (float64, bool) {
	cell = strings.TrimSpace(cell)
	if t.comma {
		cell = strings.Replace(cell, ",", ".", 1)
	}
	x, err := strconv.ParseFloat(cell, 64)
	return x, err == nil && !math.IsNaN(x) && math.Abs(x) < 1e100
}

var (
	unitRemark = regexp.MustCompile(`(?i)^\s*units?\s*[:=]\s*(\S+)`)
	unitInHead = regexp.MustCompile(`(?:[\[(/_ ]\s*)([munµμc]?m)\s*[\])]?$`)
)

// remark takes the unit out of a comment.
func (t *tabulated) remark(text string) {
	if m := unitRemark.FindStringSubmatch(text); m != nil {
		if u, err := table.ParseUnit(strings.Replace(m[1], "μ", "µ", 1)); err == nil {
			t.unit = u
		}
	}
}

// head takes the columns, and the unit, out of the header.
func (t *tabulated) head(cells []string, n int) error {
	t.headed = true
	x, y := -1, -1
	for i, c := range cells {
		name := strings.ToLower(strings.TrimSpace(c))
		if m := unitInHead.FindStringSubmatchIndex(name); m != nil {
			if u, err := table.ParseUnit(strings.Replace(name[m[2]:m[3]], "μ", "µ", 1)); err == nil && t.unit == "" {
				t.unit = u
			}
			name = strings.TrimSpace(name[:m[0]])
		}
		switch name {
		case "x":
			x = i
		case "y":
			y = i
		case "loop", "contour", "polygon", "outline":
			t.loop = i
		}
	}
	switch {
	case x >= 0 && y >= 0:
		t.x, t.y = x, y
	case x < 0 && y < 0 && len(cells) == 2:
	default:
		return fault("Line %d is the header %q, without columns x and y; name them so.", n, short(strings.Join(cells, " ")))
	}
	return nil
}

// drawing is the points as polygons.
func (t *tabulated) drawing() (Drawing, error) {
	d := Drawing{Unit: t.unit}
	if t.unit == "" {
		d.Unit, d.Plain = table.Millimetre, 1
	}
	if t.total == 0 {
		return d, fault("The file holds no point; choose an SVG drawing, or a table with x and y in each line.")
	}
	for _, points := range t.loops {
		if len(points) == 0 {
			continue
		}
		name := fmt.Sprintf("Loop %d", len(d.Loops)+1)
		l, err := polygon(name, points, d.Unit)
		if err != nil {
			return d, err
		}
		d.Loops = append(d.Loops, l)
	}
	return d, nil
}

const (
	// fewPoints is the number of points from which a wide gap between the last
	// and the first is one that was not measured; wideGap how many times the
	// widest step it is.
	fewPoints, wideGap = 20, 5
)

// polygon is the closed polygon through points.
func polygon(name string, points []r2.Vec, unit table.Unit) (Loop, error) {
	lo, hi := points[0], points[0]
	for _, p := range points {
		lo = r2.Vec{X: math.Min(lo.X, p.X), Y: math.Min(lo.Y, p.Y)}
		hi = r2.Vec{X: math.Max(hi.X, p.X), Y: math.Max(hi.Y, p.Y)}
	}
	size := math.Hypot(hi.X-lo.X, hi.Y-lo.Y)
	kept := points[:1:1]
	widest := 0.0
	for _, p := range points[1:] {
		if step := r2.Norm(r2.Sub(p, kept[len(kept)-1])); step > nothing*size {
			widest = math.Max(widest, step)
			kept = append(kept, p)
		}
	}
	for len(kept) > 1 && near(kept[0], kept[len(kept)-1], nothing*size) {
		kept = kept[:len(kept)-1]
	}
	if len(kept) < 3 {
		return Loop{}, fault("%s has %d different points; an outline needs three at least.", name, len(kept))
	}
	a, b := kept[0], kept[len(kept)-1]
	if gap := r2.Norm(r2.Sub(a, b)); len(kept) >= fewPoints && gap > wideGap*widest {
		return Loop{}, fault("%s is open: it begins at (%.6g, %.6g) %s and ends at (%.6g, %.6g) %s, %.3g %s away; measure it all the way round.",
			name, a.X, a.Y, unit, b.X, b.Y, unit, gap, unit)
	}
	l := Loop{Name: name}
	for i, p := range kept {
		l.Edges = append(l.Edges, Edge{Kind: outline.Line, A: p, B: kept[(i+1)%len(kept)]})
	}
	return l, nil
}
