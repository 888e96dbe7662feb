package main

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"strconv"
	"strings"

	"cavitywright/render/export"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/sim/study"
	"cavitywright/sim/study/tolerance"
	"cavitywright/table"
)

// copies takes readings of copies of a table as a workshop makes them.
type copies struct {
	leaf
	Name       string   `placeholder:"NAME" help:"The tolerance of the study to carry out; without it and --error the only one there is."`
	Error      []string `sep:"none" placeholder:"E" help:"An error of the workshop; may be given several times, in place of the study's tolerance."`
	Take       []string `placeholder:"NAME" help:"The readings, separated by commas."`
	Copies     int      `default:"0" placeholder:"N" help:"Number of copies; the study's, or 100."`
	AtLeast    []string `placeholder:"NAME=V" help:"A reading is good from this value on, for the yield."`
	AtMost     []string `placeholder:"NAME=V" help:"A reading is good up to this value."`
	Wavelength float64  `default:"0" placeholder:"W" help:"Wavelength outside the body, in the table's unit, by which it is judged where rays hold."`
	Effort     float64  `default:"0" placeholder:"K" help:"Multiply the number of bounces of each reading; the study's, or 0.1."`
	JSON       bool     `help:"Write JSON."`
	Out        string   `short:"o" placeholder:"FILE" help:"Write to a file; its ending says how: .csv the copies, one row each; .png, .svg or .pdf a figure."`
	Show       string   `placeholder:"NAME" help:"The reading that a figure shows; the first where none is given."`
	Worst      bool     `help:"The figure: the worst copies drawn over the wall, in place of the distribution."`
}

// Help explains the errors above the flags.
func (*copies) Help() string {
	return "Errors: " + tolerance.FlawForms + ". LAW is normal or uniform, WIDTH its standard deviation or half width, MEAN its middle. Lengths are in the table's unit. All copies of one seed are the same on any number of workers."
}

// Run makes the copies and measures them.
func (c *copies) Run(ctx context.Context, std streams) error {
	if err := checkWorkers(c.Workers); err != nil {
		return err
	}
	t, err := readTable(c.File, std)
	if err != nil {
		return err
	}
	if t, err = c.studied(t.Design()); err != nil {
		return err
	}
	plan, err := c.plan(t)
	if err != nil {
		return err
	}
	tol, err := tolerance.New(t, plan)
	if err != nil {
		return described(c.Error, err)
	}
	shown := 0
	if c.Show != "" {
		if shown = slices.Index(plan.Readings, c.Show); shown < 0 {
			return misuse("%s is not taken, so that it cannot be shown; add it to --take", c.Show)
		}
	}
	format := export.CSV
	if c.Out != "" {
		if format, err = export.FormatOf(c.Out); err != nil {
			return &wrongUse{err}
		}
		if format == export.JSON {
			return misuse("JSON goes to standard output with --json, but %s ends in .json", c.Out)
		}
	}
	kit := kitOf(ctx, t.Design().Study.Seed, c.Workers)
	bar := newTaskBar(std, "copies", tol.Total())
	r, err := tol.Run(kit, func(int, int, *tolerance.Result) { bar.step() })
	bar.close()
	if err != nil {
		return err
	}
	return c.report(ctx, std, r, kit, shown, format)
}

// report writes what was asked for.
func (c *copies) report(ctx context.Context, std streams, r *tolerance.Result, kit tolerance.Kit, shown int, format export.Format) error {
	switch {
	case c.Out == "":
	case format == export.CSV:
		if err := writeFile(c.Out, r.CSV(program)); err != nil {
			return err
		}
	default:
		var f figure.Figure = r.Histogram(shown, program)
		if c.Worst {
			drawn, err := r.WorstDrawn(shown, kit, program)
			if err != nil {
				return err
			}
			f = drawn
		}
		if err := c.publish(ctx, r.Base, c.Out, format, f); err != nil {
			return err
		}
	}
	switch {
	case c.JSON:
		b, err := r.JSON()
		if err != nil {
			return err
		}
		_, err = std.out.Write(b)
		return err
	case c.Out == "":
		for _, line := range r.Lines() {
			fmt.Fprintln(std.out, line)
		}
	}
	return nil
}

// plan is the study's tolerance, or one that the flags make.
func (c *copies) plan(t *table.Table) (table.Tolerance, error) {
	const copiesMade, effortMade = 100, 0.1
	p := table.Tolerance{Name: "command line", Copies: copiesMade, Effort: effortMade}
	if len(c.Error) == 0 {
		of, err := named(t.Design().Study.Tolerances, c.Name, "tolerance", func(t table.Tolerance) string { return t.Name })
		if err != nil {
			return p, err
		}
		p = of
	}
	for _, text := range c.Error {
		f, err := tolerance.ParseFlaw(text)
		if err != nil {
			return p, &wrongUse{err}
		}
		p.Flaws = append(p.Flaws, f)
	}
	if c.Copies != 0 {
		p.Copies = c.Copies
	}
	if c.Effort != 0 {
		if err := checkEffort(c.Effort); err != nil {
			return p, err
		}
		p.Effort = c.Effort
	}
	if c.Wavelength != 0 {
		p.Wavelength = c.Wavelength
	}
	if len(c.Take) > 0 {
		p.Readings, p.Limits = c.Take, nil
	}
	for i, list := range [][]string{c.AtLeast, c.AtMost} {
		for _, text := range list {
			name, v, err := setting(text)
			if err != nil {
				return p, err
			}
			l := table.Limit{Reading: name, Lo: math.Inf(-1), Hi: math.Inf(1)}
			if i == 0 {
				l.Lo = v
			} else {
				l.Hi = v
			}
			p.Limits = append(p.Limits, l)
		}
	}
	return p, nil
}

// named is the plan of a name, or the only one where none is given.
func named[T any](all []T, name, what string, of func(T) string) (T, error) {
	var none T
	var names []string
	for _, p := range all {
		if of(p) == name {
			return p, nil
		}
		names = append(names, of(p))
	}
	switch {
	case len(all) == 0:
		return none, misuse("the table has no %s in its study; describe one by the flags", what)
	case name != "":
		return none, misuse("the study has no %s called %q; it has %s", what, name, strings.Join(names, ", "))
	case len(all) > 1:
		return none, misuse("the study has %d of them (%s); choose one with --name", len(all), strings.Join(names, ", "))
	}
	return all[0], nil
}

// setting is NAME=V.
func setting(text string) (name string, v float64, err error) {
	name, value, ok := strings.Cut(text, "=")
	v, bad := strconv.ParseFloat(value, 64)
	if !ok || bad != nil || math.IsNaN(v) || math.IsInf(v, 0) {
		return "", 0, misuse("%q is not understood; write NAME=VALUE, window-share=0.7 for example", text)
	}
	return name, v, nil
}

// described makes errors of a plan that flags describe wrong use; what the table
// does not have stays the table's fault.
func described(flags []string, err error) error {
	if no := (*measure.NotMeasured)(nil); len(flags) > 0 && !errors.As(err, &no) {
		return &wrongUse{err}
	}
	return err
}

// kitOf is what copies and walls are made and measured with.
func kitOf(ctx context.Context, seed uint64, workers int) tolerance.Kit {
	return tolerance.Kit{
		Kit: study.Kit{
			Run: func(tr *sim.Tracer, seed uint64) measure.Runner {
				return func(m measure.Measurement) (measure.Tally, error) {
					return run.Run(ctx, run.Job{Tracer: tr, Measure: m, Seed: seed, Workers: workers})
				}
			},
			Spread: run.Spread(ctx, workers),
			Watch:  ctx.Err,
		},
		Chance: func(stream uint64) rand.Source { return run.Chance(seed, stream) },
	}
}
