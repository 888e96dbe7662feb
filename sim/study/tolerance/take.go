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
