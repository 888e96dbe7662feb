package tolerance

import (
	"errors"
	"math"
	"strings"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/reading"
	"cavitywright/sim/study"
	"cavitywright/table"
)

// Row is what was measured on one copy.
type Row struct {
	Copy int `json:"copy"` // from 1; 0 is the wall as drawn
	// Alone is the error that the copy has alone, All where it has all of them.
	Alone int       `json:"-"`
	Scale float64   `json:"scale"`
	Draws []float64 `json:"draws"`
	// Misfit is that of the Copy.
	Misfit float64 `json:"misfit"`
	// Fault is why there is no such wall, in place of readings.
	Fault string        `json:"fault,omitzero"`
	Taken []study.Taken `json:"readings"`
}

// value is a reading of a row with its error, not a number where there is none.
func (r *Row) value(k int) (v, stderr float64) {
	if r.Fault != "" || k >= len(r.Taken) {
		return math.NaN(), math.NaN()
	}
	return float64(r.Taken[k].Value), float64(r.Taken[k].StdErr)
}

// Total is the number of walls that Run measures.
func (t *Tolerance) Total() int {
	if len(t.flaws) > 1 {
		return 1 + t.Plan.Copies*(1+len(t.flaws))
	}
	return 1 + t.Plan.Copies
}

// Run makes and measures all copies: the wall as drawn, the copies with all
// errors, and, where there are several, those with each of them alone. told,
// which may be nil, is called after each with the result so far. Where the kit's
// error ends it, the result is what was done by then.
func (t *Tolerance) Run(kit Kit, told func(done, total int, r *Result)) (*Result, error) {
	r := &Result{Tolerance: t, Alone: make([][]Row, len(t.flaws))}
	done, total := 0, t.Total()
	step := func(into *[]Row, row Row, err error) error {
		if err != nil {
			return err
		}
		*into = append(*into, row)
		if done++; told != nil {
			told(done, total, r)
		}
		return nil
	}
	nominal, err := t.measure(Copy{Table: t.Base, Scale: 1}, Row{Alone: All, Scale: 1}, kit)
	var first []Row
	if err := step(&first, nominal, err); err != nil {
		return r, err
	}
	r.Nominal = first[0]
	for i := range t.Plan.Copies {
		row, err := t.row(i, All, r.Nominal, kit)
		if err := step(&r.Rows, row, err); err != nil {
			return r, err
		}
	}
	if len(t.flaws) < 2 {
		return r, nil
	}
	for k := range t.flaws {
		for i := range t.Plan.Copies {
			row, err := t.row(i, k, r.Nominal, kit)
			if err := step(&r.Alone[k], row, err); err != nil {
				return r, err
			}
		}
	}
	return r, nil
}

// row makes a copy and measures it.
func (t *Tolerance) row(i, alone int, nominal Row, kit Kit) (Row, error) {
	if kit.Watch != nil {
		if err := kit.Watch(); err != nil {
			return Row{}, err
		}
	}
	c, err := t.Copy(i, alone, kit)
	row := Row{Copy: i + 1, Alone: alone, Scale: c.Scale, Draws: c.Draws, Misfit: c.Misfit}
	switch {
	case err != nil:
		row.Fault = err.Error()
		return row, nil
	case c.Table == t.Base: // nothing but its size is another
		row.Taken = t.scaled(nominal.Taken, c.Scale)
		return row, nil
	}
	return t.measure(c, row, kit)
}

// measure takes the readings of a copy.
func (t *Tolerance) measure(c Copy, row Row, kit Kit) (Row, error) {
	taken, err := Take(c.Table, t.Plan.Readings, t.Plan.Effort, kit.Kit)
	row.Taken = t.scaled(taken, c.Scale)
	return row, err
}

// Take takes readings of a table with the seed of its study; one that the table
// does not have is not a number, and its note says why. The error is the kit's.
func Take(t *table.Table, names []string, effort float64, kit study.Kit) (all []study.Taken, err error) {
	seed := t.Design().Study.Seed
	tr := sim.Compile(t)
	taker := reading.NewTaker(tr, kit.Run(tr, seed), effort, seed, 0)
	for _, name := range names {
		no := (*measure.NotMeasured)(nil)
		wanted, err := reading.Wanted(t, []string{name})
		if err == nil {
			s, err := taker.Take(wanted[0])
			if err == nil {
				all = append(all, study.Taken{Name: name, Value: study.Number(s.Value), StdErr: study.Number(s.StdErr), Unit: s.Unit, Bounces: s.Bounces, Note: s.Note})
				continue
			}
			if !errors.As(err, &no) {
				return all, err
			}
		} else if !errors.As(err, &no) {
			return all, err
		}
		all = append(all, study.Taken{Name: name, Value: study.Number(math.NaN()), StdErr: study.Number(math.NaN()), Note: no.Error()})
	}
	return all, nil
}

// scaled are the readings of the wall enlarged by k.
func (t *Tolerance) scaled(taken []study.Taken, k float64) []study.Taken {
	out := append([]study.Taken(nil), taken...)
	for i := range out {
		if n := Dimension(out[i].Unit, t.Base.Design().Unit); n != 0 && k != 1 {
			by := study.Number(math.Pow(k, float64(n)))
			out[i].Value *= by
			out[i].StdErr *= by
		}
	}
	return out
}

// Dimension is the power of length in a reading's unit: 2 for an area, -1 for a
// rate per path; at a given speed a rate in time too. Readings of power 0 are
// the same at every size.
func Dimension(unit string, length table.Unit) int {
	u := length.String()
	switch unit {
	case u:
		return 1
	case u + "²":
		return 2
	case "1/" + u, "1/s":
		return -1
	}
	return 0
}

// unitOf is the unit of a reading, "" for a pure number.
func (r *Result) unitOf(k int) string {
	if k < len(r.Nominal.Taken) && r.Nominal.Taken[k].Unit != "1" {
		return strings.TrimSpace(r.Nominal.Taken[k].Unit)
	}
	return ""
}
