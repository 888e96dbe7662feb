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
	wanted, named, err := c.wanted(t, speed)
	if err != nil {
		return &wrongUse{err}
	}
	seed := t.Design().Study.Seed
	if c.Seed != nil {
		seed = *c.Seed
	}
	rows, left, err := take(newRunner(ctx, sim.Compile(t), seed, c.Workers, std), wanted, c.Effort, speed)
	if err != nil {
		return err
	}
	left = append(named, left...)
	if len(rows) == 0 && len(left) > 0 { // nothing could be taken
		left, err = left[:len(left)-1], left[len(left)-1]
	}
	for _, no := range left {
		complain(std, no.Error())
	}
	if err != nil {
		return err
	}
	f := figure.Scalars{Rows: rows}
	for _, no := range left {
		f.None = append(f.None, figure.Missing{Name: no.Name, Why: no.Why})
	}
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

// wanted are the readings to take, and those named that the table does not have.
// One per second belongs to them where a speed is given and the table has an
// exponent. The error is a *reading.NoReading.
func (c *takeAll) wanted(t *table.Table, speed reading.Speed) (all []reading.Reading, none []*measure.NotMeasured, err error) {
	names := c.Only
	if len(names) == 0 {
		all, _ = reading.Wanted(t, nil) // there is no name to be wrong
	}
	if speed != 0 && !slices.Contains(names, perSecond) {
		names = append(slices.Clone(names), perSecond)
	}
	for _, name := range names {
		one, err := reading.Wanted(t, []string{name})
		if no := (*measure.NotMeasured)(nil); !errors.As(err, &no) {
			if err != nil {
				return nil, nil, err
			}
			all = append(all, one...)
		} else if len(c.Only) > 0 {
			none = append(none, no)
		}
	}
	return all, none, nil
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

// take takes the readings in turn. One that turns out not to exist withholds no
// other: it is left out, with the reason.
func take(r *runner, wanted []reading.Reading, effort float64, speed reading.Speed) (rows []figure.Scalar, left []*measure.NotMeasured, err error) {
	defer r.close()
	taker := reading.NewTaker(r.tracer, r.run, effort, r.seed, speed)
	for _, w := range wanted {
		r.title = w.Name
		s, err := taker.Take(w)
		if no := (*measure.NotMeasured)(nil); errors.As(err, &no) {
			left = append(left, no)
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
