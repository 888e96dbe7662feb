package study

import (
	"cmp"
	"math"
	"slices"
	"strings"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
)

// Result is a study with the rows that were brought so far, by their task.
type Result struct {
	*Study
	Rows map[int]Row
}

// NewResult is one without rows.
func NewResult(st *Study) *Result { return &Result{st, map[int]Row{}} }

// Add adds a row.
func (r *Result) Add(row Row) { r.Rows[row.Task] = row }

// Whole reports whether all tasks are done.
func (r *Result) Whole() bool { return len(r.Rows) == r.Tasks() }

// Point is the row of a point, if it is done.
func (r *Result) Point(i int) (Row, bool) {
	row, ok := r.Rows[i]
	return row, ok && i < r.Points()
}

// Marks are what is marked on the axis of a single dial: what the last task
// found, and the values at which the table is integrable.
func (r *Result) Marks() []Mark {
	all := slices.Clone(r.Rows[r.Points()].Marks)
	if !r.marked() {
		return nil
	}
	for i := range r.Points() {
		if row := r.Rows[i]; row.Integrable != "" {
			m := Mark{At: row.Values[0], Short: "no chaos", Text: strings.TrimPrefix(row.Integrable, "exactly 0: ")}
			if strings.Contains(m.Text, "integrable") {
				m.Short = "integrable"
			}
			all = append(all, m)
		}
	}
	slices.SortStableFunc(all, func(a, b Mark) int { return cmp.Compare(a.At, b.At) })
	return all
}

// taken is a reading at a point; not a number where there is none.
func (r *Result) taken(i int, name string) (value, stderr float64, unit string) {
	if row, ok := r.Point(i); ok {
		for _, t := range row.Taken {
			if t.Name == name {
				return float64(t.Value), float64(t.StdErr), t.Unit
			}
		}
	}
	return math.NaN(), math.NaN(), ""
}

// unit is that of a reading, where a point has it.
func (r *Result) unit(name string) string {
	for i := range r.Points() {
		if v, _, u := r.taken(i, name); !math.IsNaN(v) {
			if u == "1" {
				return ""
			}
			return u
		}
	}
	return ""
}

// Page is all readings: one figure where there is one, else a sheet of them. A
// sample is drawn over each of its dials.
func (r *Result) Page(program string) figure.Figure {
	var all []figure.Figure
	var names []string
	for _, name := range r.Sweep.Readings {
		if r.Sweep.Sample > 0 {
			for k := range r.Dials {
				all, names = append(all, r.cloud(name, k, program)), append(names, name+" by "+r.Label(k))
			}
			continue
		}
		all, names = append(all, r.Figure(name, program)), append(names, name)
	}
	if len(all) == 1 {
		return all[0]
	}
	t := r.Base
	s := figure.Sheet{Title: r.Sweep.Name, Head: r.pageHead(), Foot: []string{measure.Foot(t, program)}}
	if d := t.Design().Name; d != "" {
		s.Title = d + ": " + r.Sweep.Name
	}
	const across = 2
	for i, f := range all {
		if i%across == 0 {
			s.Rows = append(s.Rows, figure.SheetRow{Height: 1})
		}
		row := &s.Rows[len(s.Rows)-1]
		row.Blocks = append(row.Blocks, figure.Block{Heading: names[i], Width: 1, Show: uncaptioned(f)})
	}
	return s
}

// pageHead is the caption of a page: it begins with a capital.
func (r *Result) pageHead() []string {
	lines := r.caption()
	lines[0] = "Readings " + lines[0]
	return lines
}
