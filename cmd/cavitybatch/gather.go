package main

import (
	"context"
	"fmt"
	"os"
	"strings"

	"cavitywright/render/export"
	"cavitywright/sim/study/part"
)

// gather joins the parts of a sweep or a tolerance run.
type gather struct {
	Parts []string `arg:"" placeholder:"PART" help:"The parts that cavitybatch study or tolerance wrote, in any order."`
	Out   string   `short:"o" placeholder:"FILE" help:"The result: .csv, .json, .png, .svg, .pdf, or .jsonl for a part 1/1; each to the byte what a single run writes."`
	JSON  bool     `help:"Write JSON."`
	Worst bool     `help:"Of a tolerance run, the figure: the worst copies drawn over the wall, in place of the distribution."`
	studyPage
}

// Run joins them.
func (c *gather) Run(ctx context.Context, std streams) error {
	if c.Out != "" && !strings.HasSuffix(c.Out, partEnding) {
		if _, err := export.FormatOf(c.Out); err != nil {
			return &wrongUse{err}
		}
	}
	var all []part.Named
	for _, name := range c.Parts {
		b, err := os.ReadFile(name)
		if err != nil {
			return fmt.Errorf("%s: %w", quoted(name), unreadable(err))
		}
		f, err := part.Read(b)
		if err != nil {
			return fmt.Errorf("%s: %w", quoted(name), err)
		}
		all = append(all, part.Named{Name: quoted(name), File: f})
	}
	if len(all) > 0 && all[0].File.Head.Tolerance != "" {
		return c.copies(ctx, std, all)
	}
	if c.Worst {
		return misuse("--worst belongs to the parts of a tolerance run, and these are of a sweep; leave it out")
	}
	r, err := part.Gather(all)
	if err != nil {
		return err
	}
	c.otherProgram(std, all)
	return c.write(r, c.Out, c.JSON, std)
}

// copies joins the parts of a tolerance run.
func (c *gather) copies(ctx context.Context, std streams, all []part.Named) error {
	r, err := part.GatherCopies(all)
	if err != nil {
		return err
	}
	c.otherProgram(std, all)
	as := copies{leaf: leaf{WidthMM: c.WidthMM, HeightMM: c.HeightMM, DPI: c.DPI}, JSON: c.JSON, Out: c.Out, Show: c.Reading, Worst: c.Worst}
	if as.WidthMM == 0 {
		as.WidthMM = columnMM
	}
	shown, format, err := as.asked(r.Plan)
	if err != nil {
		return err
	}
	return as.report(ctx, std, r, kitOf(ctx, r.Base.Design().Study.Seed, 0), shown, format)
}

// otherProgram says where another version took the readings.
func (c *gather) otherProgram(std streams, all []part.Named) {
	if p := all[0].File.Head.Program; p != program {
		complain(std, fmt.Sprintf("the parts were made by %s; this is %s", p, program))
	}
}
