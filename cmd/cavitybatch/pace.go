package main

import (
	"context"
	"errors"
	"fmt"
	"runtime"
	"text/tabwriter"
	"time"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
)

// pace measures the speed of tracing.
type pace struct {
	File    string  `arg:"" placeholder:"FILE" help:"The table, or - for standard input."`
	Seconds float64 `default:"2" placeholder:"T" help:"How long to run on one worker, and again on all (${default})."`
	JSON    bool    `help:"Write JSON."`
}

// speeds is the JSON of pace.
type speeds struct {
	One     float64 `json:"bounces_per_second_one"`
	All     float64 `json:"bounces_per_second_all"`
	Workers int     `json:"workers"`
	Seconds float64 `json:"seconds"` // of each run
}

const (
	leastSeconds = 0.05
	mostSeconds  = 3600
	// warmUp is the part of a run's time that is run before it and not
	// counted: it fills the caches and wakes the processors.
	warmUp = 0.1
	// endless is more orbits than any run finishes.
	endless = 1 << 40
	// each is the number of bounces of an orbit, so that starts cost little.
	each = 500
)

// Run measures.
func (c *pace) Run(ctx context.Context, std streams) error {
	if !(c.Seconds >= leastSeconds && c.Seconds <= mostSeconds) {
		return misuse("the time is %g s, but must lie between %g and %d s", c.Seconds, leastSeconds, mostSeconds)
	}
	t, err := readTable(c.File, std)
	if err != nil {
		return err
	}
	tr := sim.Compile(t)
	s := speeds{Workers: runtime.GOMAXPROCS(0), Seconds: c.Seconds}
	for _, r := range []struct {
		seconds float64
		workers int
		speed   *float64
	}{{warmUp * c.Seconds, 1, new(float64)}, {c.Seconds, 1, &s.One}, {warmUp * c.Seconds, s.Workers, new(float64)}, {c.Seconds, s.Workers, &s.All}} {
		if *r.speed, err = speed(ctx, tr, r.seconds, r.workers); err != nil {
			return err
		}
	}
	if c.JSON {
		return writeJSON(std.out, s)
	}
	w := tabwriter.NewWriter(std.out, 0, 0, 2, ' ', 0)
	fmt.Fprintf(w, "one worker\t%.3g bounces/s\n%d workers\t%.3g bounces/s\n", s.One, s.Workers, s.All)
	return w.Flush()
}

// speed traces real orbits for a time, and counts the bounces of the blocks
// that were finished in it.
func speed(ctx context.Context, tr *sim.Tracer, seconds float64, workers int) (float64, error) {
	ctx, cancel := context.WithTimeout(ctx, time.Duration(seconds*float64(time.Second)))
	defer cancel()
	start, last := time.Now(), 0.0
	job := run.Job{
		Tracer: tr, Measure: measure.Chord{Tracer: tr, N: endless, Each: each}, Seed: 1, Workers: workers,
		Progress: func(int, int, measure.Tally) { last = time.Since(start).Seconds() },
	}
	sum, err := run.Run(ctx, job)
	if err != nil && !errors.Is(err, context.DeadlineExceeded) {
		return 0, err
	}
	if last == 0 {
		return 0, fmt.Errorf("no block of bounces was finished in %g s; give it more --seconds", seconds)
	}
	return float64(sum.(*measure.ChordTally).Count) / last, nil
}
