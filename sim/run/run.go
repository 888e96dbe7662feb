// Package run carries out measurements on any number of workers. It is the
// only place in the kernel that starts goroutines and the only one that makes
// random numbers: a generator for each orbit, seeded by the seed and the
// orbit's number, so that a result depends on neither workers nor timing.
package run

import (
	"context"
	"math/rand/v2"
	"runtime"
	"sync/atomic"

	"cavitywright/sim"
	"cavitywright/sim/measure"

	"golang.org/x/sync/errgroup"
)

// Job is a measurement with what its result depends on, and how it is run.
type Job struct {
	Tracer  *sim.Tracer
	Measure measure.Measurement
	Seed    uint64
	Workers int // 0 means all processors
	// Progress, if not nil, is called on the merging goroutine after each
	// block with the merged tally so far, which must not be kept.
	Progress func(done, total int, sum measure.Tally)
}

const (
	// blockBounces is the work of one block: some 5 ms, so that a stop is
	// felt at once and merging costs nothing.
	blockBounces = 50_000
	// checkEvery is how many bounces an orbit runs between looks at the
	// context.
	checkEvery = 4096
)

// Run carries out the job. When ctx ends it returns the tally of the blocks
// merged so far with ctx's error.
func Run(ctx context.Context, j Job) (measure.Tally, error) {
	size := blockSize(j.Measure)
	blocks := (j.Measure.Orbits() + size - 1) / size
	workers := j.Workers
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	type done struct {
		block int
		tally measure.Tally
	}
	results := make(chan done, workers)
	// A worker may run ahead of the merge by this many blocks, no further, so
	// that waiting tallies stay few.
	ahead := make(chan struct{}, 4*workers)
	group, ctx := errgroup.WithContext(ctx)
	var next atomic.Int64
	for range min(workers, max(blocks, 1)) {
		group.Go(func() error {
			w := newWorker(j)
			for {
				select {
				case ahead <- struct{}{}:
				case <-ctx.Done():
					return ctx.Err()
				}
				b := int(next.Add(1)) - 1
				if b >= blocks {
					return nil
				}
				t, err := w.block(ctx, b*size, min((b+1)*size, j.Measure.Orbits()))
				if err != nil {
					return err
				}
				select {
				case results <- done{b, t}:
				case <-ctx.Done():
					return ctx.Err()
				}
			}
		})
	}
	failed := make(chan error, 1)
	go func() {
		failed <- group.Wait()
		close(results)
	}()
	sum := j.Measure.Tally()
	waiting := map[int]measure.Tally{}
	merged := 0
	for r := range results {
		waiting[r.block] = r.tally
		for t, ok := waiting[merged]; ok; t, ok = waiting[merged] {
			sum.Merge(t)
			delete(waiting, merged)
			merged++
			<-ahead
			if j.Progress != nil {
				j.Progress(merged, blocks, sum)
			}
		}
	}
	return sum, <-failed
}

// blockSize is the number of orbits in a block; it depends on the measurement
// alone.
func blockSize(m measure.Measurement) int {
	return max(1, blockBounces/max(1, m.Bounces()))
}

// worker is one goroutine's scratch.
type worker struct {
	job    Job
	walker *sim.Walker
	pcg    rand.PCG
	rand   *rand.Rand
}

func newWorker(j Job) *worker {
	w := &worker{job: j, walker: j.Tracer.Walker()}
	w.rand = rand.New(&w.pcg)
	return w
}

// block runs the orbits from lo to hi-1 into a tally of their own.
func (w *worker) block(ctx context.Context, lo, hi int) (measure.Tally, error) {
	m := w.job.Measure
	t := m.Tally()
	uniform := w.rand.Float64
	for i := lo; i < hi; i++ {
		w.pcg.Seed(w.job.Seed, uint64(i))
		b := w.walker.Open(m.Start(i, uniform))
		t.Open(i)
		t.Add(&b)
		for b.Stop == sim.Going && b.N < m.Bounces() {
			b = w.walker.Next(uniform())
			t.Add(&b)
			if b.N%checkEvery == 0 && ctx.Err() != nil {
				return nil, ctx.Err()
			}
		}
		t.Close()
		if ctx.Err() != nil {
			return nil, ctx.Err()
		}
	}
	return t, nil
}
