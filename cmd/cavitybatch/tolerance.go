package main

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"strconv"
	"strings"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/sim/study"
	"cavitywright/sim/study/part"
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
	Part       string   `placeholder:"K/N" help:"Do part K of N alone, from 1; gather joins the parts."`
	Out        string   `short:"o" placeholder:"FILE" help:"Write to a file; its ending says how: .csv the copies, one row each; .json the result; .png, .svg or .pdf a figure; .jsonl a part, which a run that was killed goes on with."`
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
	k, n, err := partAsked(c.Part, c.Out)
	if err != nil {
		return err
	}
	tol, err := c.ready(std)
	if err != nil {
		return err
	}
	kit := kitOf(ctx, tol.Base.Design().Study.Seed, c.Workers)
	if strings.HasSuffix(c.Out, partEnding) {
		return c.runPart(std, tol, kit, k, n)
	}
	shown, format, err := c.asked(tol.Plan)
	if err != nil {
		return err
	}
	bar := newTaskBar(std, "copies", tol.Total())
	r, err := tol.Run(kit, func(int, int, *tolerance.Result) { bar.step() })
	bar.close()
	if err != nil {
		return err
	}
	return c.report(ctx, std, r, kit, shown, format)
}

// ready is the tolerance asked for, in the study of a table that holds it.
func (c *copies) ready(std streams) (*tolerance.Tolerance, error) {
	t, err := readTable(c.File, std)
	if err != nil {
		return nil, err
	}
	if t, err = c.studied(t.Design()); err != nil {
		return nil, err
	}
	plan, err := c.plan(t)
	if err != nil {
		return nil, err
	}
	if _, err := tolerance.New(t, plan); err != nil {
		return nil, described(c.Error, err)
	}
	if t, err = part.Holding(t, plan); err != nil {
		return nil, err
	}
	return tolerance.New(t, plan)
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
