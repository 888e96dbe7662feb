package main

import (
	"context"
	"errors"
	"math"

	"cavitywright/render/export"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/leak"
	"cavitywright/table"
)

// findings is what a command is asked that has both a figure and numbers: a
// file for the one, JSON or a list for the others.
type findings struct {
	leaf
	Out    string  `short:"o" placeholder:"FILE" help:"The figure's file; its ending says the format: .png, .svg, .pdf or .csv."`
	JSON   bool    `help:"Write the numbers as JSON."`
	Effort float64 `default:"1" placeholder:"K" help:"Multiply the number of rays; the error falls as its square root, or faster (${default})."`
}

// begin checks the flags, reads the table and gives it the seed asked for.
func (c *findings) begin(std streams) (export.Format, *table.Table, error) {
	if !(c.Effort >= leastEffort && c.Effort <= mostEffort) {
		return 0, nil, misuse("the effort is %g, but must lie between %g and %g", c.Effort, leastEffort, mostEffort)
	}
	format, t, err := export.PNG, (*table.Table)(nil), error(nil)
	if c.Out != "" {
		format, t, err = c.openFor(c.Out, std)
	} else if err = checkWorkers(c.Workers); err == nil {
		t, err = readTable(c.File, std)
	}
	if err == nil {
		t, err = c.studied(t.Design())
	}
	return format, t, err
}

// measured carries out a measurement on a table, under a title.
func (c *findings) measured(ctx context.Context, t *table.Table, std streams, title string, do func(tr *sim.Tracer, run measure.Runner) error) error {
	tr := sim.Compile(t)
	r := newRunner(ctx, tr, t.Design().Study.Seed, c.Workers, std)
	r.title = title
	err := do(tr, r.run)
	r.close()
	if bad := (*leak.BadSeeding)(nil); errors.As(err, &bad) {
		return &wrongUse{err}
	}
	return err
}

// report writes what was asked for: the figure, the JSON, or else the list.
func (c *findings) report(ctx context.Context, t *table.Table, format export.Format, f figure.Figure, content any, rows []figure.Scalar, std streams) error {
	if c.Out != "" {
		if err := c.publish(ctx, t, c.Out, format, f); err != nil {
			return err
		}
	}
	if c.JSON {
		return writeJSON(std.out, content)
	}
	return list(rows, std)
}

// seeding reads how rays start, or what is natural for the table.
func seeding(text string, t *table.Table) (leak.Seeding, error) {
	if text == "" {
		return leak.NaturalSeeding(t), nil
	}
	s, err := leak.ParseSeeding(text)
	if err != nil {
		return s, &wrongUse{err}
	}
	return s, nil
}

// accountRow is what became of the weight of all rays, as shares of what
// started.
type accountRow struct {
	Left      float64 `json:"left"`
	Absorbed  float64 `json:"absorbed"`
	Kept      float64 `json:"still_inside"`
	Undecided float64 `json:"undecided"`
	Balance   float64 `json:"balance"` // the sum less 1
}

func accounted(a leak.Account) accountRow {
	n := a.Started
	return accountRow{a.Left / n, a.Absorbed / n, a.Kept / n, a.Undecided / n, a.Balance()}
}

// numbers are values that JSON can write: null for one that is not finite.
func numbers(v []float64) []*float64 {
	all := make([]*float64, len(v))
	for i := range v {
		if !math.IsNaN(v[i]) && !math.IsInf(v[i], 0) {
			all[i] = &v[i]
		}
	}
	return all
}

// valued is a number with its standard error.
type valued struct {
	Value float64 `json:"value"`
	Err   float64 `json:"stderr"`
}

func withError(v, err float64) valued { return valued{v, err} }

// in scales a number and its error.
func (v valued) in(unit float64) valued { return valued{v.Value / unit, v.Err / unit} }
