package export

import (
	"bufio"
	"encoding/csv"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"

	"cavitywright/sim/figure"
)

// writeCSV writes the numbers of a figure, one row a point, below comment
// lines that begin with # and say what they are. All digits are kept; a value
// that is not finite is an empty field.
func writeCSV(w io.Writer, f figure.Figure, o Options) error {
	b := bufio.NewWriter(w)
	for _, line := range append(append([]string{}, o.Header...), strings.Split(caption(f), "\n")...) {
		if line = strings.Join(strings.Fields(line), " "); line != "" {
			fmt.Fprintf(b, "# %s\n", line)
		}
	}
	rows := csv.NewWriter(b)
	switch f := f.(type) {
	case figure.Dots:
		dotRows(b, rows, f)
	case figure.Paths:
		pathRows(b, rows, f)
	case figure.Series:
		seriesRows(b, rows, f)
	case figure.Polar:
		polarRows(b, rows, f)
	case figure.Grid:
		gridRows(b, rows, f)
	case figure.Scalars:
		scalarRows(rows, f)
	}
	rows.Flush()
	if err := rows.Error(); err != nil {
		return fmt.Errorf("write CSV: %w", err)
	}
	if err := b.Flush(); err != nil {
		return fmt.Errorf("write CSV: %w", err)
	}
	return nil
}

// number writes a value with as many digits as it takes to read it back.
func number(v float64) string {
	if !finite(v) {
		return ""
	}
	return strconv.FormatFloat(v, 'g', -1, 64)
}

// column tells the meaning of a column in a comment line.
func column(b *bufio.Writer, name, label, unit string) {
	if unit == "" {
		unit = "pure number"
	}
	fmt.Fprintf(b, "# %s: %s, %s\n", name, label, unit)
}

// dotRows writes the points of a portrait: orbit is the set's number from 1;
// the columns s and p are called x and y where the X axis is
// not arclength.
func dotRows(b *bufio.Writer, rows *csv.Writer, f figure.Dots) {
	x, y := "x", "y"
	if f.Strip {
		x, y = "s", "p"
	}
	fmt.Fprintf(b, "# orbit: number of the orbit in the order drawn, from 1\n")
	column(b, x, f.X.Label, f.X.Unit)
	column(b, y, f.Y.Label, f.Y.Unit)
	_ = rows.Write([]string{"orbit", x, y}) // errors stay in the writer
	for k, set := range f.Sets {
		orbit := strconv.Itoa(k + 1)
		for i := range min(len(set.X), len(set.Y)) {
			_ = rows.Write([]string{orbit, number(set.X[i]), number(set.Y[i])})
		}
	}
}

// roleNames are the roles of lines as the file calls them.
var roleNames = [...]string{
	figure.Wall: "wall", figure.Ray: "ray", figure.Ball: "ball",
	figure.Construct: "construction", figure.JointMark: "joint", figure.Floor: "floor", figure.Coat: "coat",
}

// pathRows writes the points of a drawing; a closed line repeats its first.
func pathRows(b *bufio.Writer, rows *csv.Writer, f figure.Paths) {
	fmt.Fprintf(b, "# line: number of the line, from 1\n")
	column(b, "x", "position to the right", f.Unit)
	column(b, "y", "position upward", f.Unit)
	_ = rows.Write([]string{"line", "role", "x", "y"})
	for k, line := range f.Lines {
		n := min(len(line.X), len(line.Y))
		for i := range n {
			_ = rows.Write([]string{strconv.Itoa(k + 1), roleNames[line.Role], number(line.X[i]), number(line.Y[i])})
		}
		if line.Closed && n > 0 {
			_ = rows.Write([]string{strconv.Itoa(k + 1), roleNames[line.Role], number(line.X[0]), number(line.Y[0])})
		}
	}
}

// seriesRows writes the points of curves, with an empty error where there is
// none.
func seriesRows(b *bufio.Writer, rows *csv.Writer, f figure.Series) {
	column(b, "x", f.X.Label, f.X.Unit)
	column(b, "y", f.Y.Label, f.Y.Unit)
	column(b, "stderr", "one standard error of y", f.Y.Unit)
	_ = rows.Write([]string{"curve", "x", "y", "stderr"})
	curveRows(rows, f.Curves, 1)
}

// curveRows writes the points of curves, x in units of one.
func curveRows(rows *csv.Writer, curves []figure.Curve, one float64) {
	for _, c := range curves {
		for i := range min(len(c.X), len(c.Y)) {
			err := ""
			if i < len(c.Err) {
				err = number(c.Err[i])
			}
			_ = rows.Write([]string{c.Name, number(c.X[i] / one), number(c.Y[i]), err})
		}
	}
}

// polarRows writes the points of curves against direction.
func polarRows(b *bufio.Writer, rows *csv.Writer, f figure.Polar) {
	column(b, "angle_deg", "direction, counter-clockwise from +x", "degrees")
	column(b, "value", f.Radius.Label, f.Radius.Unit)
	column(b, "stderr", "one standard error of value", f.Radius.Unit)
	_ = rows.Write([]string{"curve", "angle_deg", "value", "stderr"})
	curveRows(rows, f.Curves, math.Pi/180)
}

// scalarRows writes readings.
func scalarRows(rows *csv.Writer, f figure.Scalars) {
	_ = rows.Write([]string{"name", "value", "stderr", "unit", "bounces", "seed", "note"})
	for _, s := range f.Rows {
		_ = rows.Write([]string{s.Name, number(s.Value), number(s.StdErr), s.Unit,
			strconv.FormatInt(s.Bounces, 10), strconv.FormatUint(s.Seed, 10), s.Note})
	}
}
