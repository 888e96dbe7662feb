package tolerance

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"math"
	"strconv"
	"strings"

	"cavitywright/sim/study"

	"github.com/go-json-experiment/json"
	"github.com/go-json-experiment/json/jsontext"
)

// spoken is a result in the form of its JSON.
type spoken struct {
	Name     string          `json:"name"`
	Plan     string          `json:"tolerance"`
	Unit     string          `json:"unit"`
	Seed     uint64          `json:"seed"`
	Effort   float64         `json:"effort"`
	Errors   []string        `json:"errors"`
	Readings []spokenReading `json:"readings"`
	Yield    *spokenYield    `json:"yield"` // of all limits together, null without limits
	Misfit   float64         `json:"misfit"`
	Copies   []Row           `json:"copies"`
	Lines    []string        `json:"lines"`
}

type spokenReading struct {
	Name       string         `json:"name"`
	Unit       string         `json:"unit"`
	Nominal    study.Number   `json:"nominal"`
	NominalErr study.Number   `json:"nominal_stderr"`
	Copies     int            `json:"copies"`
	None       int            `json:"without_value"`
	Mean       study.Number   `json:"mean"`
	MeanErr    study.Number   `json:"mean_stderr"`
	Deviation  study.Number   `json:"standard_deviation"`
	Wall       study.Number   `json:"of_the_walls"`
	Noise      study.Number   `json:"of_the_reading"`
	Quantiles  []quantile     `json:"quantiles"`
	Parts      []spokenPart   `json:"shares"`
	Limits     []*spokenYield `json:"limits"`
	Worst      []int          `json:"worst_copies"`
}

type quantile struct {
	Share float64      `json:"share"`
	Value study.Number `json:"value"`
}

type spokenPart struct {
	Error     string       `json:"error"`
	Deviation study.Number `json:"standard_deviation"`
	Share     study.Number `json:"share"`
	Err       study.Number `json:"share_stderr"`
	Known     bool         `json:"exact"`
}

type spokenYield struct {
	Limit string  `json:"limit"`
	Good  int     `json:"good"`
	Of    int     `json:"of"`
	Share float64 `json:"share"`
	Err   float64 `json:"stderr"`
	Lo    float64 `json:"from_95"`
	Hi    float64 `json:"to_95"`
	Near  int     `json:"near_the_limit"`
}

func yielded(limit string, y Yield) *spokenYield {
	return &spokenYield{limit, y.Good, y.Of, y.Share, y.Err, y.Lo, y.Hi, y.Near}
}

// quantiles are those that are written.
var quantiles = []float64{0.01, 0.05, 0.25, 0.5, 0.75, 0.95, 0.99}

// JSON is the result for another program.
func (r *Result) JSON() ([]byte, error) {
	d := r.Base.Design()
	s := spoken{Name: d.Name, Plan: r.Plan.Name, Unit: d.Unit.String(), Seed: d.Study.Seed, Effort: r.Plan.Effort, Copies: append([]Row{}, r.Rows...), Misfit: r.misfit(), Lines: r.Lines()}
	for k := range r.flaws {
		s.Errors = append(s.Errors, r.Words(k))
	}
	for k := range r.Plan.Readings {
		s.Readings = append(s.Readings, r.spokenReading(k))
	}
	if len(r.Plan.Limits) > 0 {
		s.Yield = yielded("all limits together", r.Yield(All))
	}
	b, err := json.Marshal(s, jsontext.WithIndent("  "), json.Deterministic(true))
	return append(b, '\n'), err
}

func (r *Result) spokenReading(k int) spokenReading {
	x, u := r.OfReading(k), r.unitOf(k)
	n := func(v float64) study.Number { return study.Number(v) }
	row := spokenReading{Name: r.Plan.Readings[k], Unit: u, Nominal: n(x.Nominal), NominalErr: n(x.NominalErr), Copies: len(x.Values), None: x.None,
		Mean: n(x.Mean), MeanErr: n(x.MeanErr), Deviation: n(x.Deviation), Wall: n(x.Wall()), Noise: n(x.Noise), Limits: []*spokenYield{}, Worst: []int{}}
	for _, p := range quantiles {
		row.Quantiles = append(row.Quantiles, quantile{p, n(x.Quantile(p))})
	}
	for i, p := range r.Parts(k) {
		row.Parts = append(row.Parts, spokenPart{r.Name(i), n(p.Deviation), n(p.Share), n(p.Err), p.Exact == Known})
	}
	for i, l := range r.Plan.Limits {
		if l.Reading == row.Name {
			row.Limits = append(row.Limits, yielded(limitWords(l, spaced(u)), r.Yield(i)))
		}
	}
	for _, i := range r.Worst(k, worstDrawn) {
		row.Worst = append(row.Worst, i+1)
	}
	return row
}

// CSV is the table of the copies: the scale, what was drawn for each error, then
// each reading with its standard error; what is not finite is an empty field.
func (r *Result) CSV(program string) []byte {
	var b bytes.Buffer
	fmt.Fprintf(&b, "# %s, tolerance %s\n", program, strings.Join(strings.Fields(r.Plan.Name), " "))
	for _, line := range r.Lines() {
		fmt.Fprintf(&b, "# %s\n", strings.Join(strings.Fields(line), " "))
	}
	header := []string{"copy", "scale"}
	for k := range r.flaws {
		header = append(header, strings.ReplaceAll(r.Name(k), " ", "-"))
	}
	for _, name := range r.Plan.Readings {
		header = append(header, name, name+"-stderr")
	}
	w := csv.NewWriter(&b)
	_ = w.Write(append(header, "fault")) // a buffer takes all
	for i := range r.Rows {
		row := &r.Rows[i]
		fields := []string{strconv.Itoa(row.Copy), digits(row.Scale)}
		for _, x := range row.Draws {
			fields = append(fields, digits(x))
		}
		for k := range r.Plan.Readings {
			v, e := row.value(k)
			fields = append(fields, digits(v), digits(e))
		}
		_ = w.Write(append(fields, row.Fault))
	}
	w.Flush()
	return b.Bytes()
}

func digits(v float64) string {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return ""
	}
	return strconv.FormatFloat(v, 'g', -1, 64)
}
