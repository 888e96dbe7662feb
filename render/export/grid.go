package export

import (
	"bufio"
	"encoding/csv"

	"cavitywright/sim/figure"
)

// gridRows writes a map, one row a cell with the place of its middle, row by
// row from the lower left; a cell without a value has an empty field.
func gridRows(b *bufio.Writer, rows *csv.Writer, f figure.Grid) {
	x, y := "x", "y"
	if f.Strip {
		x, y = "s", "p"
	}
	column(b, x, f.X.Label+" at the middle of the cell", f.X.Unit)
	column(b, y, f.Y.Label+" at the middle of the cell", f.Y.Unit)
	column(b, "value", f.Value.Label, f.Value.Unit)
	_ = rows.Write([]string{x, y, "value"}) // errors stay in the writer
	for i, v := range f.Values[:min(len(f.Values), f.Columns*f.Rows)] {
		at := func(lo, hi float64, k, n int) string {
			return number(lo + (hi-lo)*(float64(k)+0.5)/float64(n))
		}
		_ = rows.Write([]string{at(f.X.Lo, f.X.Hi, i%f.Columns, f.Columns), at(f.Y.Lo, f.Y.Hi, i/f.Columns, f.Rows), number(v)})
	}
}
