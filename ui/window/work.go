package window

import (
	"context"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/table"
	"cavitywright/ui/live"
)

// work is the long work of one sheet, at most one at a time, bound to the wall
// that it was begun for: when the wall changes it ends, and nothing of it is
// shown any more. No number stands beside another wall.
type work struct {
	w    *Window
	task *live.Task
	on   *table.Table // the table of the work at hand, or of what it brought
	turn int          // counts the works, so that a late post of an old one is known
	next func()       // what waits for the work at hand to end; nil for nothing
}

// newWork is the work of a sheet; it ends with the window.
func newWork(w *Window) *work {
	k := &work{w: w}
	w.works = append(w.works, k)
	return k
}

// Fits reports whether the work at hand, or what it brought, belongs to the
// table as it is now.
func (k *work) Fits() bool { return k.on != nil && k.on.SameWall(k.w.session.Table()) }

// Busy reports whether work is under way.
func (k *work) Busy() bool { return k.task != nil }

// Stop asks the work to end; its done is still called.
func (k *work) Stop() {
	if k.task != nil {
		k.task.Stop()
	}
}

// Drop ends the work and forgets what it was for: nothing of it is shown, its
// done included.
func (k *work) Drop() {
	k.Stop()
	k.task, k.on, k.next = nil, nil, nil
	k.turn++
}

// Follow is Start for short work that keeps up with a wall that is dragged:
// work under way is let end, and of the calls that wait the newest is kept.
func (k *work) Follow(do func(d desk) error, done func(error)) {
	if k.task != nil {
		k.next = func() { k.Start(do, nil, done) }
		return
	}
	k.Start(do, nil, done)
}

// desk is what long work is given.
type desk struct {
	ctx    context.Context
	tracer *sim.Tracer
	runner measure.Runner
	seed   uint64
	share  func(float64) // says how far the work is
	// show runs a function on the window's goroutine, unless the wall has
	// changed since or other work was begun.
	show func(func())
}

// running runs measurements on a tracer within the work, and says how far they
// are.
func (d desk) running(tr *sim.Tracer) measure.Runner {
	return func(m measure.Measurement) (measure.Tally, error) {
		return run.Run(d.ctx, run.Job{Tracer: tr, Measure: m, Seed: d.seed,
			Progress: func(done, total int, _ measure.Tally) { d.share(float64(done) / float64(total)) }})
	}
}

// part is the desk of a part of the work, from one share of it to another.
func (d desk) part(from, to float64) desk {
	whole := d.share
	d.share = func(x float64) { whole(from + x*(to-from)) }
	d.runner = d.running(d.tracer)
	return d
}

// Start begins work on the table as it is now; work that is under way is
// dropped. progress and done are called on the window's goroutine and only
// while the work fits the wall; either may be nil.
func (k *work) Start(do func(d desk) error, progress func(share float64), done func(error)) {
	k.Drop()
	t := k.w.session.Table()
	k.on = t
	turn := k.turn
	fits := func() bool { return k.turn == turn && t.SameWall(k.w.session.Table()) }
	k.task = live.Start(k.w.post, func(ctx context.Context, share func(float64)) error {
		d := desk{ctx: ctx, tracer: sim.Compile(t), seed: t.Design().Study.Seed, share: share}
		d.runner = d.running(d.tracer)
		d.show = func(f func()) {
			k.w.post(func() {
				if fits() {
					f()
				}
			})
		}
		return do(d)
	}, func(x float64) {
		if progress != nil && fits() {
			progress(x)
		}
	}, func(err error) {
		if k.turn != turn {
			return
		}
		next := k.next
		k.task, k.next = nil, nil
		if done != nil && fits() {
			done(err)
		}
		if next != nil {
			next()
		}
	})
}
