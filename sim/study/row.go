package study

import (
	"errors"
	"math"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/chaos"
	"cavitywright/sim/measure/reading"

	"github.com/go-json-experiment/json"
)

// Row is what one task brought: the point with its values and readings, or the
// sentence why it is no table; of the last task the marks on the axis.
type Row struct {
	Task   int       `json:"task"`
	Values []float64 `json:"values,omitempty"`
	// Fault is why there is no table at the point, in place of readings.
	Fault string `json:"fault,omitzero"`
	// Integrable is why no orbit of the table off mirrors is chaotic.
	Integrable string  `json:"integrable,omitzero"`
	Taken      []Taken `json:"readings,omitempty"`
	Marks      []Mark  `json:"marks,omitempty"`
	// Remark is what has to be said about the marks.
	Remark string `json:"remark,omitzero"`
}

// Taken is one reading at a point. Value is not a number where the table has no
// such reading, and Note says why.
type Taken struct {
	Name    string `json:"name"`
	Value   Number `json:"value"`
	StdErr  Number `json:"stderr"`
	Unit    string `json:"unit"`
	Bounces int64  `json:"bounces"`
	Note    string `json:"note"`
}

// Number is a number in a file, null where it is not finite.
type Number float64

// MarshalJSON writes all digits.
func (n Number) MarshalJSON() ([]byte, error) {
	if math.IsNaN(float64(n)) || math.IsInf(float64(n), 0) {
		return []byte("null"), nil
	}
	return json.Marshal(float64(n))
}

// UnmarshalJSON reads null as no number.
func (n *Number) UnmarshalJSON(b []byte) error {
	if string(b) == "null" {
		*n = Number(math.NaN())
		return nil
	}
	return json.Unmarshal(b, (*float64)(n))
}

// Take does task i. The error is that of the kit, or of the marks.
func (st *Study) Take(i int, kit Kit) (Row, error) {
	if i >= st.points {
		return st.marks(i, kit)
	}
	row := Row{Task: i, Values: st.At(i)}
	t, err := st.Table(row.Values)
	if err != nil {
		row.Fault = err.Error()
		return row, nil
	}
	row.Integrable = chaos.Integrable(t)
	seed := t.Design().Study.Seed
	tr := sim.Compile(t)
	taker := reading.NewTaker(tr, kit.Run(tr, seed), st.Sweep.Effort, seed, 0)
	for _, name := range st.Sweep.Readings {
		k, err := st.take(taker, tr, name)
		if err != nil {
			return Row{}, err
		}
		row.Taken = append(row.Taken, k)
	}
	return row, nil
}

// take takes one reading, or says why there is none.
func (st *Study) take(taker *reading.Taker, tr *sim.Tracer, name string) (Taken, error) {
	none := (*measure.NotMeasured)(nil)
	wanted, err := reading.Wanted(tr.Table(), []string{name})
	if err == nil {
		s, err := taker.Take(wanted[0])
		if err == nil {
			return Taken{name, Number(s.Value), Number(s.StdErr), s.Unit, s.Bounces, s.Note}, nil
		}
		if !errors.As(err, &none) {
			return Taken{}, err
		}
	} else if !errors.As(err, &none) {
		return Taken{}, err
	}
	return Taken{Name: name, Value: Number(math.NaN()), StdErr: Number(math.NaN()), Note: none.Error()}, nil
}
