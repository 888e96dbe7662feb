package orbit

import (
	"encoding/csv"
	"fmt"
	"io"
	"strconv"
	"strings"

	"cavitywright/sim/measure"
	"cavitywright/table"
)

// Number is what moves: its name, and its unit, empty for a pure number.
type Number struct{ Name, Unit string }

// Standing says in sentences what changes, and what may be missing.
func (f *Followed) Standing(n Number) (lines []string) {
	unit := ""
	if n.Unit != "" {
		unit = " " + n.Unit
	}
	for _, c := range f.Changes() {
		lines = append(lines, fmt.Sprintf("%s = %.9g%s: %s.", n.Name, c.V, unit, c.Text))
	}
	if f.Families > 0 {
		lines = append(lines, fmt.Sprintf("Up to %s met; families are not followed.", were(f.Families)))
	}
	return append(lines, fmt.Sprintf("Changes are located to %.2g of %s, those at a joint of the wall to ten times that; an orbit that is born and vanishes between two of the %d values at which all are searched for is not seen.",
		LocatedTo*(f.To-f.From), n.Name, censuses))
}

func were(families int) string {
	if families == 1 {
		return "1 marginal family was"
	}
	return strconv.Itoa(families) + " marginal families were"
}

// Caption is that of the figure.
func (f *Followed) Caption(t *table.Table, program string) []string {
	return []string{
		fmt.Sprintf("%speriodic orbits up to %d bounces, one of each set of copies; stable between the lines at 2 and −2. Changes, located to %.2g, are marked with the numbers of bounces of those that part.",
			measure.Head(t), f.UpTo, LocatedTo*(f.To-f.From)),
		measure.Foot(t, program),
	}
}

// WriteCSV writes a row for each orbit at each value, below comment lines that
// say what they are. program is the name and version that they begin with.
func (f *Followed) WriteCSV(out io.Writer, t *table.Table, n Number, program string) error {
	d := t.Design()
	head := []string{fmt.Sprintf("%s, periodic orbits up to %d bounces while %s moves", program, f.UpTo, n.Name)}
	if name := strings.Join(strings.Fields(d.Name), " "); name != "" {
		head = append(head, "table: "+name)
	}
	unit := n.Unit
	if unit == "" {
		unit = "pure number"
	}
	head = append(head, fmt.Sprintf("unit of length: %s; unit of %s: %s", d.Unit, n.Name, unit),
		"trace and residue of one period in (s, p); one orbit of each set of copies by symmetry")
	for _, line := range append(head, f.Standing(n)...) {
		if _, err := fmt.Fprintf(out, "# %s\n", line); err != nil {
			return err
		}
	}
	w := csv.NewWriter(out)
	_ = w.Write([]string{"branch", "period", "winding", "word", "value", "length", "trace", "residue", "kind", "confined"}) // errors stay in the writer
	for i := range f.Branches {
		b := &f.Branches[i]
		for k, v := range b.V {
			o := &b.Orbits[k]
			_ = w.Write([]string{strconv.Itoa(i + 1), strconv.Itoa(b.Period), strconv.Itoa(o.Winding), o.Word, digits(v), digits(o.Length), digits(o.Trace()), digits(o.Residue()), o.Kind().String(), strconv.FormatBool(o.Confined)})
		}
	}
	w.Flush()
	return w.Error()
}
