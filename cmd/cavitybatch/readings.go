package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"text/tabwriter"

	"cavitywright/render"
	"cavitywright/render/export"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/reading"
	"cavitywright/table"
)

// takeAll takes the readings of a table.
type takeAll struct {
	File    string   `arg:"" placeholder:"FILE" help:"The table, or - for standard input."`
	Only    []string `placeholder:"NAME" help:"Take these readings only, separated by commas."`
	Speed   string   `placeholder:"V" help:"Take lyapunov-per-second as well: light (in vacuum), sound (in air), or metres a second."`
	Out     string   `short:"o" placeholder:"FILE" help:"Write the readings to a file: .csv, .json, .png, .svg or .pdf."`
	Effort  float64  `default:"1" placeholder:"K" help:"Multiply the number of bounces; the error falls as its square root, or faster (${default})."`
	Seed    *uint64  `placeholder:"N" help:"Seed of chance; the study's where none is given."`
	Workers int      `default:"0" placeholder:"N" help:"Number of workers, which changes no number; 0 for all processors."`
	JSON    bool     `help:"Write JSON."`
}

// Help explains the readings above the flags.
func (*takeAll) Help() string {
	text := "Readings:"
	for _, r := range reading.Readings() {
		text += "\n\n" + r.Name + ": " + r.About
	}
	return text
}

// Run takes the readings.
func (c *takeAll) Run(ctx context.Context, std streams) error {
	if err := checkEffort(c.Effort); err != nil {
		return err
	}
	if err := checkWorkers(c.Workers); err != nil {
		return err
	}
	t, err := readTable(c.File, std)
	if err != nil {
		return err
	}
	speed, err := reading.ParseSpeed(c.Speed)
	if err != nil {
		return &wrongUse{err}
	}
	var format export.Format
	if c.Out != "" {
		if format, err = export.FormatOf(c.Out); err != nil {
			return &wrongUse{err}
		}
	}
	wanted, err := c.wanted(t, speed)
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
	rows, left, err := c.take(newRunner(ctx, sim.Compile(t), seed, c.Workers, std), wanted, speed)
	if err != nil {
		return err
	}
	for _, e := range left {
		complain(std, e.Error())
	}
	f := figure.Scalars{Rows: rows}
	if c.Out != "" {
		var out bytes.Buffer
		if err := export.Write(&out, format, f, export.Options{WidthMM: readingsMM, Header: header(t)}); err != nil {
			return err
		}
		if err := writeFile(c.Out, out.Bytes()); err != nil {
			return err
		}
	}
	switch {
	case c.JSON:
		return export.Write(std.out, export.JSON, f, export.Options{})
	case c.Out == "":
		return list(rows, std)
	}
	return nil
}

// readingsMM is the width of a page of readings: two columns of a journal.
const readingsMM = 175

// wanted are the readings to take. One per second belongs to them where a speed
// is given and the table has an exponent.
func (c *takeAll) wanted(t *table.Table, speed reading.Speed) ([]reading.Reading, error) {
	all, err := reading.Wanted(t, c.Only)
	if err != nil || speed == 0 || slices.ContainsFunc(all, func(r reading.Reading) bool { return r.Name == perSecond }) {
		return all, err
	}
	more, err := reading.Wanted(t, []string{perSecond})
	if no := (*measure.NotMeasured)(nil); errors.As(err, &no) && len(c.Only) == 0 {
		return all, nil
	}
	return append(all, more...), err
}

const perSecond = "lyapunov-per-second"

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
func (c *takeAll) take(r *runner, wanted []reading.Reading, speed reading.Speed) (rows []figure.Scalar, left []error, err error) {
	defer r.close()
	taker := reading.NewTaker(r.tracer, r.run, c.Effort, r.seed, speed)
	for _, w := range wanted {
		r.title = w.Name
		s, err := taker.Take(w)
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
