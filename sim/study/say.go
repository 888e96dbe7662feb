package study

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"math"
	"strconv"
	"strings"

	"cavitywright/sim/measure"

	"github.com/go-json-experiment/json"
	"github.com/go-json-experiment/json/jsontext"
)

// captionOf is the caption of the figure of one reading.
func (r *Result) captionOf(name string) []string {
	lines := r.caption()
	lines[0] = measure.Head(r.Base) + name + " " + lines[0]
	return lines
}

// caption says what was turned, how the points were made, what is marked, in few
// words, and what is missing.
func (r *Result) caption() []string {
	lines := []string{r.outline()}
	if marks := r.Marks(); len(marks) > 0 {
		text, orbits := "Marked:", false
		for i, m := range marks {
			if i > 0 {
				text += ","
			}
			text += fmt.Sprintf(" %s at %.6g%s", m.Short, m.At, spaced(r.Unit(0)))
			orbits = orbits || m.rank() > 0
		}
		if orbits {
			text += " (n:m, orbits of m bounces part from one of n; n alone, orbits of n bounces are born or end)"
		}
		lines = append(lines, text+".")
	}
	return append(lines, r.remarks()...)
}

// outline says what was turned and how the points were made.
func (r *Result) outline() string {
	var turned []string
	for k, t := range r.Sweep.Turns {
		lo, hi := t.Ends()
		turned = append(turned, fmt.Sprintf("%s from %.6g to %.6g%s (%d values)", r.Label(k), lo, hi, spaced(r.Unit(k)), len(r.values[k])))
		if r.Sweep.Sample > 0 {
			turned[k] = fmt.Sprintf("%s from %.6g to %.6g%s", r.Label(k), lo, hi, spaced(r.Unit(k)))
		}
	}
	how := fmt.Sprintf("%d points", r.Points())
	if r.Sweep.Sample > 0 {
		how = fmt.Sprintf("%d points that fill the box evenly", r.Points())
	}
	return fmt.Sprintf("over %s; %s, effort %g, the same seed %d at each; bands and bars are one standard error.",
		strings.Join(turned, " and "), how, r.Sweep.Effort, r.Base.Design().Study.Seed)
}

// mostFaults is how many faults a caption tells in full.
const mostFaults = 3

// Standing says in sentences what is marked, which points are no tables, and how
// many are still to be done.
func (r *Result) Standing() (lines []string) {
	for _, m := range r.Marks() {
		lines = append(lines, r.MarkText(m))
	}
	return append(lines, r.remarks()...)
}

// remarks are the sentences about what could not be done, or is still to be done.
func (r *Result) remarks() (lines []string) {
	if remark := r.Rows[r.Points()].Remark; remark != "" {
		lines = append(lines, capital(remark))
	}
	faults, done := 0, 0
	for i := range r.Points() {
		row, ok := r.Point(i)
		if !ok {
			continue
		}
		done++
		if row.Fault == "" {
			continue
		}
		if faults++; faults <= mostFaults {
			lines = append(lines, fmt.Sprintf("No table at %s: %s", r.place(row.Values), capital(row.Fault)))
		}
	}
	if faults > mostFaults {
		lines = append(lines, fmt.Sprintf("%d points in all are no tables.", faults))
	}
	if done < r.Points() {
		lines = append(lines, fmt.Sprintf("%d of %d points are done.", done, r.Points()))
	}
	return lines
}

// place is a point in words.
func (st *Study) place(at []float64) string {
	var words []string
	for k, v := range at {
		words = append(words, fmt.Sprintf("%s = %.6g%s", st.Label(k), v, spaced(st.Unit(k))))
	}
	return strings.Join(words, ", ")
}

// Place is a point in words: "eps = 0.4, index of coat 1 = 3.3".
func (st *Study) Place(i int) string { return st.place(st.At(i)) }

// capital makes a sentence of an error's text.
func capital(s string) string {
	if s == "" {
		return s
	}
	s = strings.ToUpper(s[:1]) + s[1:]
	if !strings.HasSuffix(s, ".") {
		s += "."
	}
	return s
}

// CSV is the table of the points: the dials, then each reading with its
// standard error; what is not finite is an empty field. Lines that begin with #
// say what the columns are.
func (r *Result) CSV(program string) []byte {
	var b bytes.Buffer
	say := func(format string, args ...any) {
		fmt.Fprintf(&b, "# %s\n", strings.Join(strings.Fields(fmt.Sprintf(format, args...)), " "))
	}
	d := r.Base.Design()
	say("%s, sweep %s", program, r.Sweep.Name)
	if d.Name != "" {
		say("table: %s", d.Name)
	}
	say("%s", r.outline())
	for _, line := range r.Standing() {
		say("%s", line)
	}
	header := []string{"point"}
	for k := range r.Dials {
		header = append(header, r.Dials[k].String())
		say("%s: %s, %s", r.Dials[k], r.Specs[k].Description, pure(r.Unit(k)))
	}
	for _, name := range r.Sweep.Readings {
		header = append(header, name, name+"-stderr")
		say("%s: %s; %s-stderr: one standard error", name, pure(r.unit(name)), name)
	}
	w := csv.NewWriter(&b)
	_ = w.Write(append(header, "fault")) // a buffer takes all
	for i := range r.Points() {
		row, ok := r.Point(i)
		if !ok {
			continue
		}
		fields := []string{strconv.Itoa(i + 1)}
		for _, v := range row.Values {
			fields = append(fields, digits(v))
		}
		for _, name := range r.Sweep.Readings {
			v, e, _ := r.taken(i, name)
			fields = append(fields, digits(v), digits(e))
		}
		_ = w.Write(append(fields, row.Fault))
	}
	w.Flush()
	return b.Bytes()
}

func pure(unit string) string {
	if unit == "" {
		return "pure number"
	}
	return unit
}

func digits(v float64) string {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return ""
	}
	return strconv.FormatFloat(v, 'g', -1, 64)
}

// spoken is a result in the form of its JSON.
type spoken struct {
	Name     string       `json:"name"`
	Sweep    string       `json:"sweep"`
	Unit     string       `json:"unit"`
	Seed     uint64       `json:"seed"`
	Effort   float64      `json:"effort"`
	Dials    []spokenDial `json:"dials"`
	Readings []string     `json:"readings"`
	Points   []spokenRow  `json:"points"`
	Marks    []Mark       `json:"marks"`
	Standing []string     `json:"standing"`
}

type spokenDial struct {
	Dial  string `json:"dial"`
	Label string `json:"label"`
	Unit  string `json:"unit"`
}

type spokenRow struct {
	Point      int       `json:"point"`
	Values     []float64 `json:"values"`
	Fault      string    `json:"fault"`
	Integrable string    `json:"integrable"`
	Readings   []Taken   `json:"readings"`
}

// JSON is the result for another program.
func (r *Result) JSON() ([]byte, error) {
	d := r.Base.Design()
	s := spoken{Name: d.Name, Sweep: r.Sweep.Name, Unit: d.Unit.String(), Seed: d.Study.Seed, Effort: r.Sweep.Effort,
		Readings: r.Sweep.Readings, Points: []spokenRow{}, Marks: append([]Mark{}, r.Marks()...), Standing: append([]string{}, r.Standing()...)}
	for k, x := range r.Dials {
		s.Dials = append(s.Dials, spokenDial{x.String(), r.Label(k), r.Unit(k)})
	}
	for i := range r.Points() {
		if row, ok := r.Point(i); ok {
			s.Points = append(s.Points, spokenRow{i + 1, row.Values, row.Fault, row.Integrable, append([]Taken{}, row.Taken...)})
		}
	}
	b, err := json.Marshal(s, jsontext.WithIndent("  "))
	return append(b, '\n'), err
}
