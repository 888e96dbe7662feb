package main

import (
	"context"

	"cavitywright/sim"
	"cavitywright/sim/measure/sheet"
)

// designSheet writes the one-page summary of a table.
type designSheet struct {
	page
	Effort float64 `default:"0.3" placeholder:"K" help:"Multiply the number of bounces of the readings (${default})."`
}

// Run measures what the page shows and writes it.
func (c *designSheet) Run(ctx context.Context, std streams) error {
	if err := checkEffort(c.Effort); err != nil {
		return err
	}
	format, t, err := c.open(std)
	if err != nil {
		return err
	}
	if t, err = c.studied(t.Design()); err != nil {
		return err
	}
	tr := sim.Compile(t)
	r := newRunner(ctx, tr, t.Design().Study.Seed, c.Workers, std)
	r.title = "measuring"
	page, err := sheet.Of(sheet.Job{Tracer: tr, Runner: r.run, Effort: c.Effort, Program: program})
	r.close()
	if err != nil {
		return err
	}
	return c.publish(ctx, t, c.Out, format, page)
}
