// Package run carries out measurements on any number of workers. It is the
// only place in the kernel that starts goroutines and the only one that makes
// random numbers: a generator for each orbit, seeded by the seed and the
// orbit's number, so that a result depends on neither workers nor timing.
//
// A tally that wants the tangent map of each step implements Stepped beside
// measure.Tally: it is then handed the derivative with each bounce, and need
// not follow orbits of its own.
package run

import (
	"context"
	"runtime"

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
	Lanes   int // blocks that a worker carries out at once, 1 to most; 0 means as many as are fastest
	// Progress, if not nil, is called on the merging goroutine after each
	// block with the merged tally so far, which must not be kept.
	Progress func(done, total int, sum measure.Tally)
}

// Stepped is a Tally that wants the derivative of each step. For a bounce with
// N > 0 that goes on from the wall (Stop is Going, and so was the bounce before
// it on the wall) Step is called instead of Add, with the derivative of the
// step from the bounce before; all other bounces, the opening one among them,
// are given to Add. On walls that scatter by chance there is no such
// derivative: what is handed over is that of a mirror.
type Stepped interface {
	Step(b *sim.Bounce, j sim.Jacobian)
}

const (
	// blockBounces is the work of a block at most: some 3 ms, so that merging
	// costs nothing.
	blockBounces = 50_000
	// leastBounces is that of a block at least, and fewBlocks the number of
	// blocks into which a job is cut as long as they are not smaller: all
	// lanes of all workers then end at nearly the same time.
	leastBounces = 1000
	fewBlocks    = 128
	// most is the number of lanes a worker has: with more of them a bounce
	// takes no less time, and a tally a lane stands in the way of the cache.
	most = 8
	// checkEvery is how many bounces the lanes run between looks at the
	// context.
	checkEvery = 512
)

// Run carries out the job. When ctx ends it returns the tally of the blocks
// merged so far with ctx's error.
func Run(ctx context.Context, j Job) (measure.Tally, error) {
	if e, is := j.Measure.(measure.Elsewhere); is {
		j.Tracer = e.On()
	}
	size := blockSize(j.Measure)
	r := &round{job: j, size: size, blocks: (j.Measure.Orbits() + size - 1) / size}
	workers := j.Workers
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	workers = max(1, min(workers, r.blocks))
	lanes := most
	if j.Lanes > 0 {
		lanes = min(j.Lanes, most)
	}
	lanes = max(1, min(lanes, (r.blocks+workers-1)/workers))
	r.results = make(chan done, workers)
	// Workers may run ahead of the merge by this many blocks, no further, so
	// that waiting tallies stay few.
	r.ahead = make(chan struct{}, (lanes+4)*workers)
	group, ctx := errgroup.WithContext(ctx)
	for range workers {
		group.Go(func() error { return newWorker(r, lanes).work(ctx) })
	}
	failed := make(chan error, 1)
	go func() {
		failed <- group.Wait()
		close(r.results)
	}()
	sum := j.Measure.Tally()
	waiting := map[int]measure.Tally{}
	merged := 0
	for d := range r.results {
		waiting[d.block] = d.tally
		for t, ok := waiting[merged]; ok; t, ok = waiting[merged] {
			sum.Merge(t)
			delete(waiting, merged)
			merged++
			<-r.ahead
			if j.Progress != nil {
				j.Progress(merged, r.blocks, sum)
			}
		}
	}
	return sum, <-failed
}

// blockSize is the number of orbits in a block; it depends on the measurement
// alone.
func blockSize(m measure.Measurement) int {
	each := max(1, m.Bounces())
	bounces := min(max(m.Orbits()/fewBlocks*each, leastBounces), blockBounces)
	return max(1, bounces/each)
}
