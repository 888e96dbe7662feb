package run_test

import (
	"context"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/sim/run/trial"
)

// few follows orbit i for i%7 bounces, though each might have 100.
type few struct{ *sim.Tracer }

func (f few) Orbits() int  { return 2000 }
func (f few) Bounces() int { return 100 }
func (f few) Start(_ int, uniform func() float64) sim.Start {
	return sim.Start{State: f.Uniform(uniform(), uniform())}
}
func (f few) Tally() measure.Tally { return &fewTally{} }

type fewTally struct {
	lasts   []int
	at, end int
}

func (t *fewTally) Open(i int)               { t.at, t.end = -1, i%7 }
func (t *fewTally) Add(b *sim.Bounce)        { t.at = b.N }
func (t *fewTally) Enough() bool             { return t.at >= t.end }
func (t *fewTally) Close()                   { t.lasts = append(t.lasts, t.at) }
func (t *fewTally) Merge(next measure.Tally) { t.lasts = append(t.lasts, next.(*fewTally).lasts...) }

// TestSated wants each orbit to end where its tally has enough of it.
func TestSated(t *testing.T) {
	tr := trial.Traced(t, "stadium", []float64{1, 1})
	for _, workers := range []int{1, 3} {
		ran, err := run.Run(context.Background(), run.Job{Tracer: tr, Measure: few{tr}, Workers: workers})
		if err != nil {
			t.Fatal(err)
		}
		for i, n := range ran.(*fewTally).lasts {
			if n != i%7 {
				t.Fatalf("%d workers: orbit %d ended after %d bounces, want %d", workers, i, n, i%7)
			}
		}
	}
}
