package measure

import (
	"math"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/table"
)

// Mosaic is a map of a field over a region of the section. It is filled cell by
// cell from coarse to fine: after the first pass every block of Coarsest by
// Coarsest cells has one that is known, and each pass after it halves that. A
// cell's number depends on its place alone, so the map is the same however the
// work is shared out.
//
// The cells are even on the axes of the table's own display: with p they are
// even in ds dp, with the angle they are not.
type Mosaic struct {
	Columns, Rows int
	table         *table.Table
	section       Section
	axes          figure.Dots // without dots
	field         Field
	values        []float64
	filled        []bool
	order         []int32
	done, under   int // cells known, and cells that are being measured
}

// Coarsest is the side of the blocks of the first pass, in cells.
const Coarsest = 16

// NewMosaic is an empty map of columns by rows cells over a region.
func NewMosaic(t *table.Table, f Field, g table.Region, columns, rows int) *Mosaic {
	m := &Mosaic{Columns: columns, Rows: rows, table: t, section: NewSection(t), field: f}
	m.axes = m.section.Axes(t, g)
	m.values, m.filled = make([]float64, columns*rows), make([]bool, columns*rows)
	m.order = make([]int32, 0, columns*rows)
	for step := Coarsest; step >= 1; step /= 2 {
		for r := 0; r < rows; r += step {
			for c := 0; c < columns; c += step {
				if step == Coarsest || r%(2*step) != 0 || c%(2*step) != 0 {
					m.order = append(m.order, int32(r*columns+c))
				}
			}
		}
	}
	return m
}

// First is the number of cells of the first pass.
func (m *Mosaic) First() int {
	return ((m.Columns + Coarsest - 1) / Coarsest) * ((m.Rows + Coarsest - 1) / Coarsest)
}

// Done is the share of the cells that are known, 1 for a map of none.
func (m *Mosaic) Done() float64 {
	if len(m.order) == 0 {
		return 1
	}
	return float64(m.done) / float64(len(m.order))
}

// Next measures the next n cells, fewer where fewer are left, nil where none
// is. Take must be called with its tally before Next is called again.
func (m *Mosaic) Next(n int) Measurement {
	m.under = min(n, len(m.order)-m.done)
	if m.under <= 0 {
		return nil
	}
	starts := make([]sim.State, m.under)
	for i, k := range m.order[m.done : m.done+m.under] {
		starts[i] = m.at(int(k)%m.Columns, int(k)/m.Columns)
	}
	return m.field.Along(starts)
}

// at is the state at the middle of a cell.
func (m *Mosaic) at(column, row int) sim.State {
	x := m.axes.X.Lo + (m.axes.X.Hi-m.axes.X.Lo)*(float64(column)+0.5)/float64(m.Columns)
	y := m.axes.Y.Lo + (m.axes.Y.Hi-m.axes.Y.Lo)*(float64(row)+0.5)/float64(m.Rows)
	s, p := m.section.Back(x, y)
	return sim.State{S: m.table.Wrap(s), P: p}
}

// Take puts what Next measured in its place.
func (m *Mosaic) Take(t Valued) {
	for i, v := range t.Values() {
		k := m.order[m.done+i]
		m.values[k], m.filled[k] = v, true
	}
	m.done += m.under
	m.under = 0
}

// Value is what is known of a cell: its own number, or while it has none that
// of the block that it lies in; NaN where that has none either.
func (m *Mosaic) Value(column, row int) float64 {
	for step := 1; step <= Coarsest; step *= 2 {
		if k := row/step*step*m.Columns + column/step*step; m.filled[k] {
			return m.values[k]
		}
	}
	return math.NaN()
}

// Blank is the number of cells that were measured and have no number.
func (m *Mosaic) Blank() int {
	n := 0
	for k, v := range m.values {
		if m.filled[k] && math.IsNaN(v) {
			n++
		}
	}
	return n
}

// Axis is the axis of the numbers, with ends that hold all that are known.
func (m *Mosaic) Axis() figure.Axis {
	a := m.field.Value()
	if a.Lo != a.Hi {
		return a
	}
	lo, hi := math.Inf(1), math.Inf(-1)
	for k, v := range m.values {
		if m.filled[k] && !math.IsNaN(v) && (v > 0 || a.Scale == figure.Linear) {
			lo, hi = math.Min(lo, v), math.Max(hi, v)
		}
	}
	if lo <= hi {
		a.Lo, a.Hi = lo, hi
	}
	return a
}

// Figure is the map with what is known of it. caption says what was measured;
// program is the name and version that it ends with.
func (m *Mosaic) Figure(caption []string, program string) figure.Grid {
	g := figure.Grid{
		X: m.axes.X, Y: m.axes.Y, Value: m.Axis(), Columns: m.Columns, Rows: m.Rows,
		Strip: m.axes.Strip, StripLo: m.axes.StripLo, StripHi: m.axes.StripHi,
		Values: make([]float64, 0, len(m.values)),
	}
	for r := range m.Rows {
		for c := range m.Columns {
			g.Values = append(g.Values, m.Value(c, r))
		}
	}
	g.Caption = append(append([]string{}, caption...), Foot(m.table, program))
	return g
}

// Fill measures what is left of the map.
func (m *Mosaic) Fill(run Runner) error {
	next := m.Next(len(m.order))
	if next == nil {
		return nil
	}
	ran, err := run(next)
	if err != nil {
		return err
	}
	m.Take(ran.(Valued))
	return nil
}
