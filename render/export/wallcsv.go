package export

import (
	"bufio"
	"encoding/csv"
	"fmt"
	"io"
	"strconv"
	"strings"

	"cavitywright/sim/figure"
)

// writeWallCSV writes the points of an outline, one row a point, below comment
// lines that say what they are.
func writeWallCSV(w io.Writer, f figure.Outline) error {
	b := bufio.NewWriter(w)
	for _, line := range f.Caption {
		fmt.Fprintf(b, "# %s\n", strings.Join(strings.Fields(line), " "))
	}
	fmt.Fprintf(b, "# unit: %s\n", f.Unit)
	fmt.Fprintf(b, "# loop: number of the loop, from 1; its last point is its first again\n")
	column(b, "s", "arclength, loop after loop", f.Unit)
	column(b, "x", "position to the right", f.Unit)
	column(b, "y", "position upward", f.Unit)
	column(b, "nx, ny", "unit normal into the table", "")
	column(b, "curvature", "positive where the wall focuses", "1/"+f.Unit)
	rows := csv.NewWriter(b)
	_ = rows.Write([]string{"loop", "s", "x", "y", "nx", "ny", "curvature"}) // errors stay in the writer
	for _, p := range f.Points {
		_ = rows.Write([]string{strconv.Itoa(p.Loop + 1), number(p.S), number(p.X), number(p.Y), number(p.NX), number(p.NY), number(p.Curvature)})
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
