package main

import (
	"errors"
	"fmt"
	"strconv"
	"strings"
	"text/tabwriter"

	"cavitywright/sim/measure/reading"
	"cavitywright/sim/orbit"
	"cavitywright/sim/study"
	"cavitywright/table"
	"cavitywright/table/dial"
)

// study is the sweep asked for, in the study of a table that holds it.
func (c *studyRun) study(t *table.Table) (*study.Study, error) {
	d := t.Design()
	s, err := c.sweep(d)
	if err != nil {
		return nil, err
	}
	if c.Effort != 0 {
		s.Effort = c.Effort
	}
	if c.Seed != nil {
		d.Study.Seed = *c.Seed
	}
	sweeps := []table.DialSweep{s}
	for _, other := range d.Study.Sweeps {
		if other.Name != s.Name {
			sweeps = append(sweeps, other)
		}
	}
	d.Study.Sweeps = sweeps
	if t, err = table.New(d); err != nil {
		return nil, err
	}
	st, err := study.New(t, s)
	return st, asUse(err)
}

// asUse is an error of a sweep as one of the command line, where a name or a
// number in it is wrong.
func asUse(err error) error {
	if err == nil {
		return nil
	}
	refusal, unknown, none, limit := (*study.Refusal)(nil), (*dial.Unknown)(nil), (*reading.NoReading)(nil), (*orbit.Limit)(nil)
	if errors.As(err, &refusal) || errors.As(err, &unknown) || errors.As(err, &none) || errors.As(err, &limit) {
		return &wrongUse{err}
	}
	return err
}

// sweep is the one that is named, the only one, or the one given with --vary.
func (c *studyRun) sweep(d table.Design) (table.DialSweep, error) {
	if len(c.Vary) > 0 {
		return c.varied(d)
	}
	var names []string
	for _, s := range d.Study.Sweeps {
		if s.Name == c.Sweep || c.Sweep == "" && len(d.Study.Sweeps) == 1 {
			return s, nil
		}
		names = append(names, strconv.Quote(s.Name))
	}
	switch {
	case len(names) == 0:
		return table.DialSweep{}, misuse("the study of this table has no sweep; give one with --vary, for example --vary eps=0.1:0.45:15 --readings window-share")
	case c.Sweep == "":
		return table.DialSweep{}, misuse("the study of this table has %d sweeps; name one of %s with --sweep", len(names), strings.Join(names, ", "))
	}
	return table.DialSweep{}, misuse("there is no sweep called %q; the study has %s", c.Sweep, strings.Join(names, ", "))
}

// varied is the sweep that --vary describes.
func (c *studyRun) varied(d table.Design) (table.DialSweep, error) {
	s := table.DialSweep{Sample: c.Sample, Readings: c.Readings, Effort: 1, Orbits: c.Orbits}
	if c.Sample < 0 {
		return s, misuse("a sample has at least 1 point")
	}
	if len(c.Readings) == 0 {
		return s, misuse("say what is to be read at each point with --readings, for example --readings window-share,lyapunov-per-length")
	}
	for _, v := range c.Vary {
		t, err := turnOf(v)
		if err != nil {
			return s, err
		}
		x, err := dial.Find(d, t.Dial)
		if err != nil {
			return s, &wrongUse{err}
		}
		t.Dial = x.String()
		s.Turns = append(s.Turns, t)
		if s.Name != "" {
			s.Name += " and "
		}
		s.Name += study.Label(d, x)
	}
	return s, nil
}

// turnOf reads DIAL=LO:HI:N or DIAL=A,B,C.
func turnOf(text string) (table.Turn, error) {
	wrong := misuse("%q is not understood; write a number's name and its values, for example eps=0.1:0.45:15 or coat1.te=0,1", text)
	name, values, ok := strings.Cut(text, "=")
	t := table.Turn{Dial: strings.TrimSpace(name)}
	if !ok || t.Dial == "" {
		return t, wrong
	}
	if f := strings.Split(values, ":"); len(f) > 1 {
		if len(f) != 3 {
			return t, wrong
		}
		var err [3]error
		t.From, err[0] = strconv.ParseFloat(strings.TrimSpace(f[0]), 64)
		t.To, err[1] = strconv.ParseFloat(strings.TrimSpace(f[1]), 64)
		t.Points, err[2] = strconv.Atoi(strings.TrimSpace(f[2]))
		if errors.Join(err[:]...) != nil || t.Points < 2 || t.Points > study.MostPoints {
			return t, wrong
		}
		return t, nil
	}
	for _, f := range strings.Split(values, ",") {
		v, err := strconv.ParseFloat(strings.TrimSpace(f), 64)
		if err != nil {
			return t, wrong
		}
		t.Values = append(t.Values, v)
	}
	return t, nil
}

// listSweeps lists what a table's study has, and what can be turned.
func listSweeps(t *table.Table, std streams) error {
	d := t.Design()
	w := tabwriter.NewWriter(std.out, 0, 0, 2, ' ', 0)
	fmt.Fprintf(w, "sweeps\t%d\n", len(d.Study.Sweeps))
	for _, s := range d.Study.Sweeps {
		text := ""
		for _, turn := range s.Turns {
			lo, hi := turn.Ends()
			text += fmt.Sprintf(" %s from %.6g to %.6g (%d values);", turn.Dial, lo, hi, len(turn.All()))
		}
		fmt.Fprintf(w, "%s\t%s readings %s\n", s.Name, text[1:], strings.Join(s.Readings, ", "))
	}
	fmt.Fprintf(w, "numbers that can be turned\n")
	for _, x := range dial.All(d) {
		spec, err := x.Spec(d)
		if err != nil {
			return err
		}
		v, err := x.Value(d)
		if err != nil {
			return err
		}
		fmt.Fprintf(w, "%s\t%.9g, from %.6g to %.6g: %s\n", x, v, spec.Lo, spec.Hi, spec.Description)
	}
	return w.Flush()
}
