package run_test

import (
	"context"
	"reflect"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
)

// TestLanes: a result is the same to the last bit whether a worker follows one
// orbit at a time or several at once, on any number of workers.
func TestLanes(t *testing.T) {
	for name, tr := range gallery(t) {
		var want any
		for _, c := range []struct{ workers, lanes int }{{1, 1}, {1, 8}, {2, 3}, {2, 0}, {16, 5}, {16, 1}} {
			measured := []any{}
			for _, m := range []measure.Measurement{
				measure.NewPortrait(tr, tr.Table().Design().Study.Launches, 60),
				measure.Chord{Tracer: tr, N: 1500, Each: 20},
			} {
				tally, err := run.Run(context.Background(), run.Job{Tracer: tr, Measure: m, Seed: 3, Workers: c.workers, Lanes: c.lanes})
				if err != nil {
					t.Fatal(err)
				}
				switch tally := tally.(type) {
				case *measure.PortraitTally:
					measured = append(measured, tally.Sets(), tally.Stops)
				case *measure.ChordTally:
					mean, stderr := tally.Mean()
					measured = append(measured, mean, stderr, tally.Count, tally.Stops)
				}
			}
			if want == nil {
				want = measured
			} else if !reflect.DeepEqual(want, any(measured)) {
				t.Errorf("%s: %d workers with %d lanes differ from one with one", name, c.workers, c.lanes)
			}
		}
	}
}

// openings counts orbits of which it wants no bounce.
type openings struct{ *sim.Tracer }

func (o openings) Orbits() int  { return 100_000 }
func (o openings) Bounces() int { return 50 }
func (o openings) Start(_ int, uniform func() float64) sim.Start {
	return sim.Start{State: o.Uniform(uniform(), uniform())}
}
func (o openings) Tally() measure.Tally { return new(opened) }

type opened []int

func (o *opened) Open(i int)               { *o = append(*o, i) }
func (o *opened) Add(*sim.Bounce)          {}
func (o *opened) Enough() bool             { return true }
func (o *opened) Close()                   {}
func (o *opened) Merge(next measure.Tally) { *o = append(*o, *next.(*opened)...) }

// TestOpenings: orbits that end where they open are all counted, in order.
func TestOpenings(t *testing.T) {
	for _, tr := range gallery(t) {
		for _, workers := range []int{1, 2, 5} {
			tally, err := run.Run(context.Background(), run.Job{Tracer: tr, Measure: openings{tr}, Workers: workers})
			if err != nil {
				t.Fatal(err)
			}
			o := *tally.(*opened)
			for i, n := range o {
				if i != n {
					t.Fatalf("%d workers: orbit %d stands in the place of orbit %d", workers, n, i)
				}
			}
			if len(o) != (openings{}).Orbits() {
				t.Fatalf("%d workers: %d orbits of %d", workers, len(o), (openings{}).Orbits())
			}
		}
		return
	}
}
