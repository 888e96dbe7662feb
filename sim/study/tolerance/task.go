package tolerance

import (
	"math"

	"cavitywright/sim/study"
)

// Total is the number of walls that Run measures, each of them a task: the wall
// as drawn, the copies with all errors, and, where there are several errors, the
// copies with each of them alone.
func (t *Tolerance) Total() int {
	if len(t.flaws) > 1 {
		return 1 + t.Plan.Copies*(1+len(t.flaws))
	}
	return 1 + t.Plan.Copies
}

// At is what task i measures: a copy from 0 with the error that it has alone,
// All for all of them. Task 0 is the wall as drawn, copy -1.
func (t *Tolerance) At(task int) (i, alone int) {
	if task == 0 {
		return -1, All
	}
	return (task - 1) % t.Plan.Copies, (task-1)/t.Plan.Copies + All
}

// Bench carries out tasks of a tolerance in any order. It measures the wall as
// drawn when a task first needs it: a copy of another size alone is read off it.
type Bench struct {
	*Tolerance
	kit     Kit
	nominal *Row
}

// Bench is one with the kit.
func (t *Tolerance) Bench(kit Kit) *Bench { return &Bench{Tolerance: t, kit: kit} }

// Knows tells the bench a row that was measured before.
func (b *Bench) Knows(task int, row Row) {
	if task == 0 {
		b.nominal = &row
	}
}

// Take carries out a task. The error is the kit's.
func (b *Bench) Take(task int) (Row, error) {
	if b.kit.Watch != nil {
		if err := b.kit.Watch(); err != nil {
			return Row{}, err
		}
	}
	i, alone := b.At(task)
	if i < 0 {
		return b.drawn()
	}
	c, err := b.Copy(i, alone, b.kit)
	row := Row{Copy: i + 1, Alone: alone, Scale: c.Scale, Draws: c.Draws, Misfit: c.Misfit}
	switch {
	case err != nil:
		row.Fault = err.Error()
		return row, nil
	case c.Table == b.Base: // nothing but its size is another
		nominal, err := b.drawn()
		row.Taken = b.scaled(nominal.Taken, c.Scale)
		return row, err
	}
	return b.measure(c, row, b.kit)
}

// drawn is the row of the wall as drawn.
func (b *Bench) drawn() (Row, error) {
	if b.nominal == nil {
		row, err := b.measure(Copy{Table: b.Base, Scale: 1}, Row{Alone: All, Scale: 1}, b.kit)
		if err != nil {
			return row, err
		}
		b.nominal = &row
	}
	return *b.nominal, nil
}

// measure takes the readings of a copy. One that is not finite is none, so that
// a row is the same before and after it was written down.
func (t *Tolerance) measure(c Copy, row Row, kit Kit) (Row, error) {
	taken, err := Take(c.Table, t.Plan.Readings, t.Plan.Effort, kit.Kit)
	row.Taken = t.scaled(taken, c.Scale)
	for i := range row.Taken {
		k := &row.Taken[i]
		k.Value, k.StdErr = finite(k.Value), finite(k.StdErr)
	}
	return row, err
}

func finite(v study.Number) study.Number {
	if math.IsInf(float64(v), 0) {
		return study.Number(math.NaN())
	}
	return v
}

// NewResult is a result without rows.
func (t *Tolerance) NewResult() *Result {
	return &Result{Tolerance: t, Alone: make([][]Row, len(t.flaws))}
}

// Add adds the row of a task; rows are added in the order of their tasks.
func (r *Result) Add(task int, row Row) {
	i, alone := r.At(task)
	row.Alone = alone
	switch {
	case i < 0:
		r.Nominal = row
	case alone == All:
		r.Rows = append(r.Rows, row)
	default:
		r.Alone[alone] = append(r.Alone[alone], row)
	}
}

// Row is the row of a task that was added.
func (r *Result) Row(task int) (row Row, done bool) {
	i, alone := r.At(task)
	if i < 0 {
		return r.Nominal, len(r.Nominal.Taken) > 0
	}
	rows := r.Rows
	if alone != All {
		rows = r.Alone[alone]
	}
	if i >= len(rows) {
		return Row{}, false
	}
	return rows[i], true
}

// Run makes and measures all copies. told, which may be nil, is called after each
// with the result so far. Where the kit's error ends it, the result is what was
// done by then.
func (t *Tolerance) Run(kit Kit, told func(done, total int, r *Result)) (*Result, error) {
	r, b := t.NewResult(), t.Bench(kit)
	for task := range t.Total() {
		row, err := b.Take(task)
		if err != nil {
			return r, err
		}
		if r.Add(task, row); told != nil {
			told(task+1, t.Total(), r)
		}
	}
	return r, nil
}
