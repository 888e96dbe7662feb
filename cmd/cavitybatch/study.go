package main

import (
	"bytes"
	"context"
	"strings"

	"cavitywright/render/export"
	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/sim/study"
	"cavitywright/table/tablefile"
)

// studyRun carries out a sweep, or a part of it.
type studyRun struct {
	File     string   `arg:"" placeholder:"FILE" help:"The table, or - for standard input."`
	Sweep    string   `placeholder:"NAME" help:"The sweep of the table's study; where it has one alone, that one."`
	List     bool     `help:"List the sweeps of the table, and the numbers of it that can be turned."`
	Vary     []string `sep:"none" placeholder:"DIAL=LO:HI:N" help:"A sweep of your own: N evenly spaced values of a number of the table, or DIAL=A,B,C. May be given again: every combination is a point."`
	Sample   int      `placeholder:"N" help:"With --vary: N points that fill the ranges evenly instead of every combination."`
	Readings []string `placeholder:"A,B" help:"With --vary: the readings to take, separated by commas."`
	Orbits   int      `placeholder:"N" help:"With --vary, one number: mark where periodic orbits up to N bounces are born."`
	Effort   float64  `placeholder:"K" help:"Multiply the bounces of each reading; the sweep's own, or 1, where none is given."`
	Seed     *uint64  `placeholder:"N" help:"Seed of chance, the same at every point; the study's where none is given."`
	Keep     string   `placeholder:"FILE" help:"Write the table with this sweep in its study to a file."`
	Part     string   `placeholder:"K/N" help:"Do part K of N alone, from 1; gather joins the parts."`
	Out      string   `short:"o" placeholder:"FILE" help:"Where to write: NAME.jsonl for a part, which a run that was killed goes on with; .csv, .json, .png, .svg or .pdf for the result of a whole sweep."`
	Workers  int      `default:"0" placeholder:"N" help:"Number of workers, which changes no number; 0 for all processors."`
	JSON     bool     `help:"Write JSON: the result, or of a part how far it is."`
	studyPage
}

// Help explains the numbers above the flags.
func (*studyRun) Help() string {
	return "Numbers are called as cavitybatch study FILE --list shows them: eps, or 1.eps of shape 1; 1.x, 1.y, 1.turn, 1.scale; 1.node3.x, 1.node3.fillet; coat2.from, coat2.at (its middle, which slides it), coat2.index; bare.index.\n\nThe readings are those of cavitybatch readings."
}

// partEnding is the ending of the files of parts.
const partEnding = ".jsonl"

// Run carries out the sweep.
func (c *studyRun) Run(ctx context.Context, std streams) error {
	k, n, err := c.check()
	if err != nil {
		return err
	}
	t, err := readTable(c.File, std)
	if err != nil {
		return err
	}
	if c.List {
		return listSweeps(t, std)
	}
	st, err := c.study(t)
	if err != nil {
		return err
	}
	if c.Keep != "" {
		var file bytes.Buffer
		if err := tablefile.Write(&file, st.Base.Design()); err != nil {
			return err
		}
		if err := writeFile(c.Keep, file.Bytes()); err != nil {
			return err
		}
	}
	if strings.HasSuffix(c.Out, partEnding) {
		return c.runPart(ctx, std, st, k, n)
	}
	r := study.NewResult(st)
	var all []int
	for i := range st.Tasks() {
		all = append(all, i)
	}
	err = c.tasks(ctx, std, st, all, func(row study.Row) error { r.Add(row); return nil })
	if err != nil {
		return err
	}
	return c.write(r, c.Out, c.JSON, std)
}

// check holds the flags to one another, and reads the part.
func (c *studyRun) check() (k, n int, err error) {
	if err := checkWorkers(c.Workers); err != nil {
		return 0, 0, err
	}
	if c.Effort != 0 {
		if err := checkEffort(c.Effort); err != nil {
			return 0, 0, err
		}
	}
	if k, n, err = partAsked(c.Part, c.Out); err != nil {
		return 0, 0, err
	}
	switch {
	case len(c.Vary) == 0 && (c.Sample != 0 || len(c.Readings) > 0 || c.Orbits != 0):
		return 0, 0, misuse("--sample, --readings and --orbits belong to a sweep given with --vary; name its numbers, or leave them out")
	case len(c.Vary) > 0 && c.Sweep != "":
		return 0, 0, misuse("--sweep and --vary are two ways to say what is turned; give one of them")
	case c.Out != "" && !strings.HasSuffix(c.Out, partEnding):
		if _, err := export.FormatOf(c.Out); err != nil {
			return 0, 0, misuse("%q does not end in %s, .csv, .json, .png, .svg or .pdf; name the file so that its ending says what is written", c.Out, partEnding)
		}
	}
	return k, n, nil
}

// tasks does tasks of a study in turn, each on all workers, with a bar where
// somebody watches.
func (c *studyRun) tasks(ctx context.Context, std streams, st *study.Study, all []int, took func(study.Row) error) error {
	bar := newTaskBar(std, st.Sweep.Name, len(all))
	defer bar.close()
	kit := study.Kit{Spread: run.Spread(ctx, c.Workers), Watch: ctx.Err, Run: func(tr *sim.Tracer, seed uint64) measure.Runner {
		return func(m measure.Measurement) (measure.Tally, error) {
			return run.Run(ctx, run.Job{Tracer: tr, Measure: m, Seed: seed, Workers: c.Workers})
		}
	}}
	for _, i := range all {
		row, err := st.Take(i, kit)
		if err == nil {
			err = ctx.Err()
		}
		if err != nil {
			return err
		}
		if err := took(row); err != nil {
			return err
		}
		bar.step()
	}
	return nil
}
