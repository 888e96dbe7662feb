package run_test

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"math"
	"testing"

	"cavitywright/assets"
	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/chaos"
	"cavitywright/sim/run"
	"cavitywright/table"
	"cavitywright/table/tablefile"

	"github.com/google/go-cmp/cmp"
	"go.uber.org/goleak"
)

func TestMain(m *testing.M) { goleak.VerifyTestMain(m) }

// gallery are the tables of the gallery by name.
func gallery(t testing.TB) map[string]*sim.Tracer {
	t.Helper()
	names := assets.GalleryNames()
	all := map[string]*sim.Tracer{}
	for i, b := range assets.Gallery() {
		d, err := tablefile.Read(bytes.NewReader(b))
		if err != nil {
			t.Fatalf("%s: %v", names[i], err)
		}
		tab, err := table.New(d)
		if err != nil {
			t.Fatalf("%s: %v", names[i], err)
		}
		all[names[i]] = sim.Compile(tab)
	}
	if len(all) < 8 {
		t.Fatalf("the gallery has only %d tables", len(all))
	}
	return all
}

// reduced is n, or a hundredth of it in short runs.
func reduced(n int) int {
	if testing.Short() {
		return max(1, n/100)
	}
	return n
}

func chord(t *testing.T, tr *sim.Tracer, orbits, each, workers int, seed uint64) *measure.ChordTally {
	t.Helper()
	tally, err := run.Run(context.Background(), run.Job{
		Tracer: tr, Measure: measure.Chord{Tracer: tr, N: orbits, Each: each}, Seed: seed, Workers: workers,
	})
	if err != nil {
		t.Fatal(err)
	}
	return tally.(*measure.ChordTally)
}

// TestMeanChord: over uniform (s, p) the mean flight is pi A / L on any closed
// table (Santaló, Integral Geometry and Geometric Probability, 1976, ch. 3;
// Chernov, J. Stat. Phys. 88, 1, 1997). 10^7 bounces a table. Three standard
// errors: of a dozen tables about one in thirty runs would miss by chance, and
// the seed is fixed.
func TestMeanChord(t *testing.T) {
	for name, tr := range gallery(t) {
		want := sim.MeanChord(tr.Table())
		if math.IsNaN(want) {
			continue
		}
		// Where rays leave, those that stay are not even any more.
		tr, err := chaos.Mirrored(tr)
		if err != nil {
			t.Fatal(err)
		}
		tally := chord(t, tr, reduced(200_000), 50, 0, 7)
		mean, stderr := tally.Mean()
		if tally.Stops[sim.Lost] > 0 {
			t.Errorf("%s: %d orbits lost", name, tally.Stops[sim.Lost])
		}
		if off := math.Abs(mean - want); !(off <= 3*stderr) || stderr > 2e-3*want*math.Sqrt(200_000/float64(reduced(200_000))) {
			t.Errorf("%s: mean chord %.8g ± %.2g after %d bounces, want %.8g (%.1f standard errors)", name, mean, stderr, tally.Count, want, off/stderr)
		}
	}
}

// TestNoneLost runs 10^8 bounces over the gallery. A lost ray is a defect.
func TestNoneLost(t *testing.T) {
	all := gallery(t)
	total := reduced(100_000_000)
	var bounces int64
	for name, tr := range all {
		each := 2000
		tally := chord(t, tr, total/len(all)/each+1, each, 0, 11)
		bounces += tally.Count
		if n := tally.Stops[sim.Lost]; n > 0 {
			t.Errorf("%s: %d rays lost", name, n)
		}
	}
	t.Logf("%d bounces", bounces)
}

// TestWorkers: a result is the same to the last bit on any number of workers.
func TestWorkers(t *testing.T) {
	for name, tr := range gallery(t) {
		var want any
		for _, workers := range []int{1, 2, 16} {
			tally, err := run.Run(context.Background(), run.Job{
				Tracer: tr, Measure: measure.NewPortrait(tr, tr.Table().Design().Study.Launches, 300), Seed: 3, Workers: workers,
			})
			if err != nil {
				t.Fatal(err)
			}
			sets := tally.(*measure.PortraitTally).Sets()
			mean, stderr := chord(t, tr, 3000, 40, workers, 5).Mean()
			got := []any{sets, mean, stderr}
			if want == nil {
				want = got
			} else if d := cmp.Diff(want, got); d != "" {
				t.Errorf("%s: %d workers differ from one", name, workers)
			}
		}
	}
}

// TestStopped: a run that is stopped says so and leaves nothing running.
func TestStopped(t *testing.T) {
	for _, tr := range gallery(t) {
		ctx, cancel := context.WithCancel(context.Background())
		job := run.Job{Tracer: tr, Measure: measure.Chord{Tracer: tr, N: 1_000_000, Each: 1_000_000}, Workers: 3,
			Progress: func(done, _ int, _ measure.Tally) { cancel() }}
		cancel()
		if _, err := run.Run(ctx, job); !errors.Is(err, context.Canceled) {
			t.Fatalf("stopped run answers %v", err)
		}
		return
	}
}

// BenchmarkBounce is the time of one bounce, by table.
func BenchmarkBounce(b *testing.B) {
	for name, tr := range gallery(b) {
		b.Run(name, func(b *testing.B) {
			w := tr.Walker()
			bounce := w.Start(sim.State{S: 0.123 * tr.Length(), P: 0.2})
			b.ReportAllocs()
			for b.Loop() {
				if bounce.Stop != sim.Going {
					bounce = w.Start(sim.State{S: 0.123 * tr.Length(), P: 0.2})
				}
				bounce = w.Next(0.5)
			}
			if bounce.Stop == sim.Lost {
				b.Fatal("lost")
			}
		})
	}
}

// BenchmarkWorkers is the time of one bounce of a run on one worker and on two.
func BenchmarkWorkers(b *testing.B) {
	tr := gallery(b)["02-mixing-plate"]
	for _, workers := range []int{1, 2} {
		b.Run(fmt.Sprint(workers), func(b *testing.B) {
			const each = 500
			n := b.N/each + 1
			b.ResetTimer()
			tally, err := run.Run(context.Background(), run.Job{Tracer: tr, Measure: measure.Chord{Tracer: tr, N: n, Each: each}, Workers: workers})
			if err != nil {
				b.Fatal(err)
			}
			if mean, _ := tally.(*measure.ChordTally).Mean(); !(mean > 0) {
				b.Fatal("no flight was measured")
			}
		})
	}
}
