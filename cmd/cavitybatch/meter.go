package main

import (
	"context"
	"io"
	"os"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"

	"github.com/vbauerster/mpb/v8"
	"github.com/vbauerster/mpb/v8/decor"
)

// runner carries out measurements on a tracer, with a bar for each where
// standard error is a terminal.
type runner struct {
	ctx     context.Context
	tracer  *sim.Tracer
	seed    uint64
	workers int
	bars    *mpb.Progress // nil where nobody watches
	title   string
}

func newRunner(ctx context.Context, tr *sim.Tracer, seed uint64, workers int, std streams) *runner {
	r := &runner{ctx: ctx, tracer: tr, seed: seed, workers: workers}
	if isTerminal(std.err) {
		r.bars = mpb.New(mpb.WithOutput(std.err), mpb.WithWidth(60))
	}
	return r
}

func isTerminal(w io.Writer) bool {
	f, ok := w.(*os.File)
	if !ok {
		return false
	}
	info, err := f.Stat()
	return err == nil && info.Mode()&os.ModeCharDevice != 0
}

// run is a measure.Runner.
func (r *runner) run(m measure.Measurement) (measure.Tally, error) {
	job := run.Job{Tracer: r.tracer, Measure: m, Seed: r.seed, Workers: r.workers}
	if r.bars == nil {
		return run.Run(r.ctx, job)
	}
	// A total of 0 leaves it open until the first block is done.
	bar := r.bars.New(0, mpb.BarStyle(), mpb.BarRemoveOnComplete(),
		mpb.PrependDecorators(decor.Name(r.title, decor.WC{W: 18, C: decor.DindentRight})),
		mpb.AppendDecorators(decor.Percentage()))
	job.Progress = func(done, total int, _ measure.Tally) {
		bar.SetTotal(int64(total), false)
		bar.SetCurrent(int64(done))
	}
	t, err := run.Run(r.ctx, job)
	bar.SetTotal(-1, true)
	if err != nil {
		bar.Abort(true)
	}
	return t, err
}

// close takes the bars off the terminal.
func (r *runner) close() {
	if r.bars != nil {
		r.bars.Wait()
	}
}
