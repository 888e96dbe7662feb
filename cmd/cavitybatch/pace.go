package main

import (
	"context"
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
	// each is the number of bounces of an orbit, so that starts cost little.
	each = 500
	// first is the number of orbits a worker runs before anything is known of
	// the speed, and growth the most by which the next run is larger. The
	// smaller runs fill the caches and wake the processors.
	first  = 20
	growth = 10
	// enough is the part of the time that a run must take to count.
	enough = 0.6
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
	if s.One, err = speed(ctx, tr, c.Seconds, 1); err != nil {
		return err
	}
	if s.All, err = speed(ctx, tr, c.Seconds, s.Workers); err != nil {
		return err
	}
	if c.JSON {
		return writeJSON(std.out, s)
	}
	w := tabwriter.NewWriter(std.out, 0, 0, 2, ' ', 0)
	fmt.Fprintf(w, "one worker\t%.3g bounces/s\n%d workers\t%.3g bounces/s\n", s.One, s.Workers, s.All)
	return w.Flush()
}

// speed traces real orbits, more each time until a run takes about as long as
// asked, and gives the bounces a second of that run.
func speed(ctx context.Context, tr *sim.Tracer, seconds float64, workers int) (float64, error) {
	for orbits := first * workers; ; {
		start := time.Now()
		job := run.Job{Tracer: tr, Measure: measure.Chord{Tracer: tr, N: orbits, Each: each}, Seed: 1, Workers: workers}
		sum, err := run.Run(ctx, job)
		if err != nil {
			return 0, err
		}
		took := time.Since(start).Seconds()
		if took >= enough*seconds {
			return float64(sum.(*measure.ChordTally).Count) / took, nil
		}
		orbits = int(float64(orbits) * min(seconds/took, growth))
	}
}
