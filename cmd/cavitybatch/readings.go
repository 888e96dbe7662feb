package main

import (
	"context"
	"errors"
	"fmt"
	"strconv"
	"strings"
	"text/tabwriter"

	"cavitywright/render"
	"cavitywright/render/export"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/reading"
)

// takeAll takes the readings of a table.
type takeAll struct {
	File    string   `arg:"" placeholder:"FILE" help:"The table, or - for standard input."`
	Only    []string `placeholder:"NAME" help:"Take these readings only, separated by commas."`
	Effort  float64  `default:"1" placeholder:"K" help:"Multiply the number of bounces; the error falls as its square root, or faster (${default})."`
	Seed    *uint64  `placeholder:"N" help:"Seed of chance; the study's where none is given."`
	Workers int      `default:"0" placeholder:"N" help:"Number of workers, which changes no number; 0 for all processors."`
	JSON    bool     `help:"Write JSON."`
}

// Help explains the readings above the flags.
func (*takeAll) Help() string {
	text, awaited := "Readings:", []string{}
	for _, r := range reading.Readings() {
		if r.Kind == reading.Awaited {
			awaited = append(awaited, r.Name)
			continue
		}
		text += "\n\n" + r.Name + ": " + r.About
	}
	return text + "\n\nNot measured by this version: " + strings.Join(awaited, ", ") + "."
}

// Run takes the readings.
func (c *takeAll) Run(ctx context.Context, std streams) error {
	if !(c.Effort >= leastEffort && c.Effort <= mostEffort) {
		return misuse("the effort is %g, but must lie between %g and %g", c.Effort, leastEffort, mostEffort)
	}
	if err := checkWorkers(c.Workers); err != nil {
		return err
	}
	t, err := readTable(c.File, std)
	if err != nil {
		return err
	}
	wanted, err := reading.Wanted(t, c.Only)
	if err != nil {
		if no := (*reading.NoReading)(nil); errors.As(err, &no) {
			return &wrongUse{err}
		}
		return err
	}
	seed := t.Design().Study.Seed
	if c.Seed != nil {
		seed = *c.Seed
	}
	rows, left, err := c.take(newRunner(ctx, sim.Compile(t), seed, c.Workers, std), wanted)
	if err != nil {
		return err
	}
	for _, e := range left {
		complain(std, e.Error())
	}
	if c.JSON {
		return export.Write(std.out, export.JSON, figure.Scalars{Rows: rows}, export.Options{})
	}
	return list(rows, std)
}

const (
	leastEffort = 1e-3
	mostEffort  = 1e4
)

func checkWorkers(n int) error {
	if n < 0 {
		return misuse("the number of workers is %d, but must be 0 (all processors) or more", n)
	}
	return nil
}

// take takes the readings in turn. A reading that turns out not to exist is an
// error where it was named, else it is left out and said.
func (c *takeAll) take(r *runner, wanted []reading.Reading) (rows []figure.Scalar, left []error, err error) {
	defer r.close()
	for _, w := range wanted {
		r.title = w.Name
		s, err := w.Take(r.tracer, r.run, c.Effort, r.seed)
		if no := (*measure.NotMeasured)(nil); errors.As(err, &no) && len(c.Only) == 0 {
			left = append(left, err)
			continue
		}
		if err != nil {
			return nil, nil, err
		}
		rows = append(rows, s)
	}
	return rows, left, nil
}

// list writes the readings for a person.
func list(rows []figure.Scalar, std streams) error {
	w := tabwriter.NewWriter(std.out, 0, 0, 2, ' ', 0)
	for _, s := range rows {
		note := s.Note
		if s.Bounces > 0 {
			note += "; " + strconv.FormatInt(s.Bounces, 10) + " bounces, seed " + strconv.FormatUint(s.Seed, 10)
		}
		unit := s.Unit
		if unit == "1" { // a pure number
			unit = ""
		}
		fmt.Fprintf(w, "%s\t%s\t%s\n", s.Name, strings.TrimSpace(fmt.Sprint(render.Written(s), " ", unit)), note)
	}
	return w.Flush()
}
