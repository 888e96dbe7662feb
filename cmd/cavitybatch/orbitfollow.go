package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"
	"text/tabwriter"

	"cavitywright/render/export"
	"cavitywright/sim/orbit"
	"cavitywright/table"
	"cavitywright/table/dial"
	"cavitywright/table/param"
)

// stepsOfFollow is the number of steps in which a range is followed where none
// is given.
const stepsOfFollow = 60

// followed is a following, in the form of its JSON. Lengths are in Unit.
type followed struct {
	Name     string      `json:"name"`
	Unit     string      `json:"unit"`
	Number   string      `json:"number"` // the number that moves
	Of       string      `json:"number_unit"`
	From     float64     `json:"from"`
	To       float64     `json:"to"`
	UpTo     int         `json:"up_to"`
	Located  float64     `json:"located_to"` // how well the changes are located
	Families int         `json:"families"`   // marginal families, not followed
	Changes  []changeRow `json:"changes"`
	Branches []branchRow `json:"branches"`
	standing []string
}

type changeRow struct {
	At   float64 `json:"at"`
	Text string  `json:"text"`
}

type branchRow struct {
	Branch   int        `json:"branch"`
	Period   int        `json:"period"`
	Winding  int        `json:"winding"`
	Word     string     `json:"word"`
	Symmetry string     `json:"symmetry"`
	Start    string     `json:"start"`
	End      string     `json:"end"`
	Points   []pointRow `json:"points"`
}

type pointRow struct {
	At       float64 `json:"at"`
	Length   float64 `json:"length"`
	Trace    float64 `json:"trace"`
	Residue  float64 `json:"residue"`
	Kind     string  `json:"kind"`
	Confined bool    `json:"confined"`
}

// follow follows the orbits while a number of the table moves.
func (c *orbits) follow(ctx context.Context, std streams, t *table.Table, ask orbit.Search, format export.Format, ended func()) error {
	name, from, to, steps, err := courseOf(c.Follow)
	if err != nil {
		return err
	}
	d, err := dial.Find(t.Design(), name)
	if err != nil {
		return &wrongUse{err}
	}
	spec, err := d.Spec(t.Design())
	if err != nil {
		return &wrongUse{err}
	}
	f, err := orbit.Follow(orbit.Course{From: from, To: to, Steps: steps, Search: ask, Table: func(v float64) (*table.Table, error) {
		turned, err := d.Turned(t.Design(), v)
		if err != nil {
			return nil, err
		}
		return table.New(turned)
	}})
	ended()
	limit, out := (*orbit.Limit)(nil), (*param.RangeError)(nil)
	if errors.As(err, &limit) || errors.As(err, &out) {
		return &wrongUse{err}
	}
	if err != nil {
		return err
	}
	number := orbit.Number{Name: d.String(), Unit: map[param.Unit]string{param.Length: t.Design().Unit.String(), param.Angle: "rad"}[spec.Unit]}
	rows := courseRows(t, f, number)
	switch {
	case c.Out != "" && format == export.CSV:
		var out bytes.Buffer
		_ = f.WriteCSV(&out, t, number, program) // a buffer takes all
		err = writeFile(c.Out, out.Bytes())
	case c.Out != "":
		err = c.publish(ctx, t, c.Out, format, f.Figure(number, f.Caption(t, program)))
	}
	switch {
	case err != nil:
		return err
	case c.JSON:
		return writeJSON(std.out, rows)
	case c.Out == "":
		return rows.tell(std.out)
	}
	return nil
}

// courseOf reads NAME=LO:HI[:STEPS].
func courseOf(text string) (name string, from, to float64, steps int, err error) {
	wrong := misuse("%q is not understood; write the number's name and its range, for example eps=0.05:0.15 or eps=0.05:0.15:80", text)
	name, ends, ok := strings.Cut(text, "=")
	fields := strings.Split(ends, ":")
	if !ok || name == "" || len(fields) < 2 || len(fields) > 3 {
		return "", 0, 0, 0, wrong
	}
	from, err1 := strconv.ParseFloat(strings.TrimSpace(fields[0]), 64)
	to, err2 := strconv.ParseFloat(strings.TrimSpace(fields[1]), 64)
	steps = stepsOfFollow
	var err3 error
	if len(fields) == 3 {
		steps, err3 = strconv.Atoi(strings.TrimSpace(fields[2]))
	}
	switch {
	case err1 != nil || err2 != nil || err3 != nil || math.IsNaN(from) || math.IsNaN(to):
		return "", 0, 0, 0, wrong
	case !(from < to) || math.IsInf(to-from, 0):
		return "", 0, 0, 0, misuse("the range from %g to %g is empty; give the lower end first", from, to)
	case steps < orbit.MinSteps || steps > orbit.MaxSteps:
		return "", 0, 0, 0, misuse("%d steps are asked for; give %d to %d", steps, orbit.MinSteps, orbit.MaxSteps)
	}
	return name, from, to, steps, nil
}

// courseRows is what was followed in the form of the JSON.
func courseRows(t *table.Table, f *orbit.Followed, n orbit.Number) *followed {
	d := t.Design()
	r := &followed{Name: d.Name, Unit: d.Unit.String(), Number: n.Name, Of: n.Unit, From: f.From, To: f.To, UpTo: f.UpTo,
		Located: orbit.LocatedTo * (f.To - f.From), Families: f.Families, Changes: []changeRow{}, Branches: []branchRow{}, standing: f.Standing(n)}
	for _, c := range f.Changes() {
		r.Changes = append(r.Changes, changeRow{c.V, c.Text})
	}
	for i := range f.Branches {
		b := &f.Branches[i]
		o := &b.Orbits[0]
		row := branchRow{Branch: i + 1, Period: b.Period, Winding: o.Winding, Word: o.Word, Symmetry: o.Symmetry(), Start: b.Start.What.String(), End: b.End.What.String()}
		for k, v := range b.V {
			o := &b.Orbits[k]
			row.Points = append(row.Points, pointRow{v, o.Length, o.Trace(), o.Residue(), o.Kind().String(), o.Confined})
		}
		r.Branches = append(r.Branches, row)
	}
	return r
}

// tell writes what was followed for a person: the branches, then the changes.
func (f *followed) tell(out io.Writer) error {
	w := tabwriter.NewWriter(out, 0, 0, 2, ' ', 0)
	fmt.Fprintf(w, "branch\tbounces\tturns\t%s from\tto\tlength (%s) from\tto\ttrace from\tto\tstart\tend\tcopies\t\n", f.Number, f.Unit)
	for _, b := range f.Branches {
		first, last := b.Points[0], b.Points[len(b.Points)-1]
		fmt.Fprintf(w, "%d\t%d\t%d\t%.9g\t%.9g\t%.9g\t%.9g\t%.6g\t%.6g\t%s\t%s\t%s\t\n", b.Branch, b.Period, b.Winding,
			first.At, last.At, first.Length, last.Length, clean(first.Trace), clean(last.Trace), b.Start, b.End, b.Symmetry)
	}
	if err := w.Flush(); err != nil {
		return err
	}
	_, err := io.WriteString(out, strings.Join(f.standing, "\n")+"\n")
	return err
}
