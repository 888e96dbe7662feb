package run

import (
	"context"
	"math/rand/v2"
	"sync/atomic"

	"cavitywright/sim"
	"cavitywright/sim/measure"
)

// round is a job under way, shared by its workers.
type round struct {
	job     Job
	size    int // orbits a block
	blocks  int
	next    atomic.Int64 // block to be handed out
	results chan done
	ahead   chan struct{}
}

// done is a block's tally.
type done struct {
	block int
	tally measure.Tally
}

// worker is one goroutine's scratch: lanes that advance together, each with a
// block of its own.
type worker struct {
	*round
	walkers *sim.Walkers
	lanes   []lane
	u       []float64
	busy    int
	chance  bool // the wall needs numbers
}

// lane is a block being carried out.
type lane struct {
	busy      bool
	done      // the block and what it has yielded so far
	sated     measure.Sated
	stepped   Stepped
	orbit, hi int // the orbit at hand; the first that is not the block's
	piece     int // where that orbit stands
	pcg       rand.PCG
	uniform   func() float64
}

func newWorker(r *round, lanes int) *worker {
	tr := r.job.Tracer
	w := &worker{round: r, walkers: tr.Walkers(lanes), lanes: make([]lane, lanes), u: make([]float64, lanes), chance: !tr.Mirrors()}
	for i := range w.lanes {
		l := &w.lanes[i]
		l.uniform = rand.New(&l.pcg).Float64
	}
	return w
}

// work carries out blocks until there are no more.
func (w *worker) work(ctx context.Context) error {
	for {
		if err := w.fill(ctx); err != nil {
			return err
		}
		if w.busy == 0 && int(w.next.Load()) >= w.blocks {
			return nil
		}
		for n := 0; w.busy > 0 && (n == 0 || n < checkEvery && w.busy == len(w.lanes)); n++ {
			if err := w.step(ctx); err != nil {
				return err
			}
		}
		if ctx.Err() != nil {
			return ctx.Err()
		}
	}
}

// fill gives every idle lane a block, as long as there are some. It waits for
// the merge only where no lane has anything to do.
func (w *worker) fill(ctx context.Context) error {
	for i := range w.lanes {
		if w.lanes[i].busy || int(w.next.Load()) >= w.blocks {
			continue
		}
		if w.busy == 0 {
			select {
			case w.ahead <- struct{}{}:
			case <-ctx.Done():
				return ctx.Err()
			}
		} else {
			select {
			case w.ahead <- struct{}{}:
			default:
				return nil
			}
		}
		block := int(w.next.Add(1)) - 1
		if block >= w.blocks {
			return nil
		}
		if err := w.begin(ctx, i, block); err != nil {
			return err
		}
	}
	return nil
}

// begin gives lane i a block.
func (w *worker) begin(ctx context.Context, i, block int) error {
	l := &w.lanes[i]
	w.busy++
	l.busy, l.done = true, done{block, w.job.Measure.Tally()}
	l.orbit, l.hi = block*w.size-1, min((block+1)*w.size, w.job.Measure.Orbits())
	l.sated, _ = l.tally.(measure.Sated)
	l.stepped, _ = l.tally.(Stepped)
	return w.open(ctx, i)
}

// open opens the next orbit of lane i that goes anywhere, or hands over its
// block.
func (w *worker) open(ctx context.Context, i int) error {
	l, m := &w.lanes[i], w.job.Measure
	for l.orbit++; l.orbit < l.hi; l.orbit++ {
		l.pcg.Seed(w.job.Seed, uint64(l.orbit))
		w.walkers.Open(i, m.Start(l.orbit, l.uniform))
		b := w.walkers.Last(i)
		l.tally.Open(l.orbit)
		l.tally.Add(b)
		if l.piece = b.Piece; w.goesOn(l, b) {
			return nil
		}
		l.tally.Close()
		if ctx.Err() != nil {
			return ctx.Err()
		}
	}
	w.walkers.Rest(i)
	w.busy--
	l.busy = false
	select {
	case w.results <- l.done:
		return nil
	case <-ctx.Done():
		return ctx.Err()
	}
}

func (w *worker) goesOn(l *lane, b *sim.Bounce) bool {
	return b.Stop == sim.Going && b.N < w.job.Measure.Bounces() && !(l.sated != nil && l.sated.Enough())
}

// step takes the orbit of each busy lane one bounce on.
func (w *worker) step(ctx context.Context) error {
	if w.chance {
		for i := range w.lanes {
			if w.lanes[i].busy {
				w.u[i] = w.lanes[i].uniform()
			}
		}
	}
	w.walkers.Next(w.u)
	for i := range w.lanes {
		l := &w.lanes[i]
		if !l.busy {
			continue
		}
		b := w.walkers.Last(i)
		if l.stepped != nil && l.piece >= 0 && b.Stop == sim.Going {
			l.stepped.Step(b, w.walkers.Jacobian(i))
		} else {
			l.tally.Add(b)
		}
		if l.piece = b.Piece; w.goesOn(l, b) {
			continue
		}
		l.tally.Close()
		if err := w.open(ctx, i); err != nil {
			return err
		}
	}
	return nil
}
