package main

import (
	"context"
	"fmt"
	"slices"
	"strings"

	"cavitywright/render/export"
	"cavitywright/sim/figure"
	"cavitywright/sim/study/part"
	"cavitywright/sim/study/tolerance"
	"cavitywright/table"
)

// columnMM is the width of a figure of one column.
const columnMM = 85

// asked holds what is to be written to the plan: the number of the reading that
// a figure shows, and the format of the file.
func (c *copies) asked(plan table.Tolerance) (shown int, format export.Format, err error) {
	if c.Show != "" {
		if shown = slices.Index(plan.Readings, c.Show); shown < 0 {
			return 0, 0, misuse("the tolerance takes no reading called %q, so that it cannot be shown; it takes %s", c.Show, strings.Join(plan.Readings, ", "))
		}
	}
	format = export.CSV
	if c.Out != "" && !strings.HasSuffix(c.Out, partEnding) {
		if format, err = export.FormatOf(c.Out); err != nil {
			return 0, 0, &wrongUse{err}
		}
	}
	return shown, format, nil
}

// runPart does what is missing of part k of n, in the file named with -o.
func (c *copies) runPart(std streams, tol *tolerance.Tolerance, kit tolerance.Kit, k, n int) error {
	h, err := part.NewCopiesHead(tol, program, k, n)
	if err != nil {
		return err
	}
	return goOn(std, c.Out, h, c.JSON, func(stands part.File, due []int, add func([]byte, error) error) error {
		bench := tol.Bench(kit)
		for i, row := range stands.Copies {
			bench.Knows(h.Due()[i], row)
		}
		bar := newTaskBar(std, "copies", len(due))
		defer bar.close()
		for _, task := range due {
			row, err := bench.Take(task)
			if err != nil {
				return err
			}
			if err := add(part.CopyLine(task, row)); err != nil {
				return err
			}
			bar.step()
		}
		return nil
	})
}

// report writes what was asked for.
func (c *copies) report(ctx context.Context, std streams, r *tolerance.Result, kit tolerance.Kit, shown int, format export.Format) error {
	if c.Out != "" {
		if err := c.save(ctx, r, kit, shown, format); err != nil {
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

// save writes the file.
func (c *copies) save(ctx context.Context, r *tolerance.Result, kit tolerance.Kit, shown int, format export.Format) error {
	if strings.HasSuffix(c.Out, partEnding) {
		b, err := part.WrittenCopies(r, program)
		if err != nil {
			return err
		}
		return writeFile(c.Out, b)
	}
	switch format {
	case export.CSV:
		return writeFile(c.Out, r.CSV(program))
	case export.JSON:
		b, err := r.JSON()
		if err != nil {
			return err
		}
		return writeFile(c.Out, b)
	}
	var f figure.Figure = r.Histogram(shown, program)
	if c.Worst {
		drawn, err := r.WorstDrawn(shown, kit, program)
		if err != nil {
			return err
		}
		f = drawn
	}
	return c.publish(ctx, r.Base, c.Out, format, f)
}
