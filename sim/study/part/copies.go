package part

import (
	"fmt"

	"cavitywright/sim/study/tolerance"
	"cavitywright/table"
)

// copyRow is a row of a tolerance run with its task.
type copyRow struct {
	Task int           `json:"task"`
	Row  tolerance.Row `json:",inline"`
}

// NewCopiesHead is the head of part k of n of a tolerance run whose design holds
// the tolerance.
func NewCopiesHead(t *tolerance.Tolerance, program string, k, n int) (Head, error) {
	h, err := headOf(t.Base, program, k, n)
	h.Tolerance, h.Tasks = t.Plan.Name, t.Total()
	return h, err
}

// Tolerances is the tolerance run that the head carries. The error is a sentence.
func (h Head) Tolerances() (*tolerance.Tolerance, error) {
	t, err := h.table()
	if err != nil {
		return nil, err
	}
	for _, p := range t.Design().Study.Tolerances {
		if p.Name == h.Tolerance {
			return tolerance.New(t, p)
		}
	}
	return nil, fmt.Errorf("the table in it has no tolerance called %q", h.Tolerance)
}

// CopyLine is the line of a row of a tolerance run, the end of the line included.
func CopyLine(task int, row tolerance.Row) ([]byte, error) {
	return sealed("row", copyRow{task, row})
}

// GatherCopies joins the parts of one tolerance run, as Gather those of a sweep.
func GatherCopies(parts []Named) (*tolerance.Result, error) {
	if err := whole(parts); err != nil {
		return nil, err
	}
	first := parts[0].File.Head
	t, err := first.Tolerances()
	if err != nil {
		return nil, fmt.Errorf("%s holds no tolerance run: %w", parts[0].Name, err)
	}
	if err := counted(parts[0].Name, first, t.Total()); err != nil {
		return nil, err
	}
	rows := make([]tolerance.Row, t.Total())
	for _, p := range parts {
		for n, task := range p.File.Head.Due() {
			rows[task] = p.File.Copies[n]
		}
	}
	r := t.NewResult()
	for task, row := range rows {
		r.Add(task, row)
	}
	return r, nil
}

// WrittenCopies is a result as a part 1 of 1, as Written that of a sweep.
func WrittenCopies(r *tolerance.Result, program string) ([]byte, error) {
	h, err := NewCopiesHead(r.Tolerance, program, 1, 1)
	if err != nil {
		return nil, err
	}
	b, err := h.Line()
	if err != nil {
		return nil, err
	}
	for task := range r.Total() {
		row, done := r.Row(task)
		if !done {
			break
		}
		line, err := CopyLine(task, row)
		if err != nil {
			return nil, err
		}
		b = append(b, line...)
	}
	return b, nil
}

// Holding is the table with a tolerance in its study, in place of one of its
// name: what a part carries.
func Holding(t *table.Table, p table.Tolerance) (*table.Table, error) {
	d := t.Design()
	all := []table.Tolerance{p}
	for _, other := range d.Study.Tolerances {
		if other.Name != p.Name {
			all = append(all, other)
		}
	}
	d.Study.Tolerances = all
	return table.New(d)
}
