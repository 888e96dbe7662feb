package live

import (
	"context"
	"time"
)

// Task is one piece of long work beside the window: the export of a figure,
// for example. It reports its progress at most ten times a second and can be
// stopped.
type Task struct {
	stop  context.CancelFunc
	ended chan struct{}
}

// showEvery is the time from one report of progress to the next.
const showEvery = 100 * time.Millisecond

// Start runs work on a goroutine of its own. progress, on the window's
// goroutine, is told the share done; done, there too, is called once with
// work's error, after the last progress.
func Start(post func(func()), work func(ctx context.Context, share func(float64)) error, progress func(float64), done func(error)) *Task {
	ctx, stop := context.WithCancel(context.Background())
	t := &Task{stop: stop, ended: make(chan struct{})}
	var last time.Time
	go func() {
		defer close(t.ended)
		defer stop()
		err := work(ctx, func(x float64) {
			if time.Since(last) >= showEvery {
				last = time.Now()
				post(func() { progress(x) })
			}
		})
		post(func() { done(err) })
	}()
	return t
}

// Stop asks the work to end; done is still called.
func (t *Task) Stop() { t.stop() }

// Wait waits until the work has ended and done has been posted.
func (t *Task) Wait() { <-t.ended }
