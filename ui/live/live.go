// Package live keeps the rays and the portrait on the screen in step with the
// session: it takes the newest request, runs it in rounds short enough that a
// drag is followed, and hands finished pictures to the panes. It is the only
// place of the user interface that starts a goroutine, and the only one that
// posts to the window's goroutine.
//
// The rule of its loop: a request is not dropped before its first frame; of
// the requests that wait, only the newest is kept; a frame carries the
// revision it shows.
package live

import (
	"image"
	"sync"
	"time"

	"cavitywright/render"
	"cavitywright/table"
	"cavitywright/ui/session"
)

// Request is what is to be shown: a table, how the portrait and the rays are
// laid out, and the settings.
type Request struct {
	Revision uint64
	Table    *table.Table
	Section  table.Region
	Settings session.Settings
	Look     render.Look
	Portrait image.Point // size of the portrait's picture in pixels
	Rays     image.Point // size of the rays' picture in pixels
	RaysView render.View // one of no Scale fits the table

	Reference *table.Table // whose portrait lies faint under this one's; nil for none
}

// Status is what the status line says of the work.
type Status struct {
	Revision  uint64
	Bounces   int64   // of the portrait that is shown
	Done      float64 // share of what the study asks for, 0 to 1
	PerSecond float64 // bounces a second, while it fills
	Undecided int64   // orbits that ended at a corner or a grazing tangent
	Lost      int64
	Escaped   int64
	FirstMs   float64 // from request to first frame, milliseconds
	Held      Filling
	Mapped    float64 // share of the map under the portrait that is known; 1 where none is asked for
}

// Filling says whether the portrait fills or was stopped by hand.
type Filling uint8

// The portrait fills, or stands.
const (
	Fills Filling = iota
	Stands
)

// Engine is the loop.
type Engine struct {
	PortraitFrames, RaysFrames Frames

	post   func(func())
	shown  func(Status)
	wake   chan struct{}
	done   chan struct{}
	ended  chan struct{}
	mu     sync.Mutex
	next   *Request
	asked  time.Time
	status Status
	hold   Filling
	once   sync.Once
}

// tick is the time from frame to frame while something moves.
const tick = 33 * time.Millisecond

// New starts an engine. post runs a function on the window's goroutine; shown
// is called there after each round of frames.
func New(post func(func()), shown func(Status)) *Engine {
	e := &Engine{post: post, shown: shown, wake: make(chan struct{}, 1), done: make(chan struct{}), ended: make(chan struct{})}
	go e.loop()
	return e
}

// Show replaces the request that waits.
func (e *Engine) Show(r Request) {
	e.mu.Lock()
	if e.next == nil {
		e.asked = time.Now()
	}
	e.next = &r
	e.mu.Unlock()
	e.nudge()
}

// Fill lets the portrait go on filling, or stops it.
func (e *Engine) Fill(f Filling) {
	e.mu.Lock()
	e.hold = f
	e.mu.Unlock()
	e.nudge()
}

func (e *Engine) nudge() {
	select {
	case e.wake <- struct{}{}:
	default:
	}
}

// Close ends the engine and waits for it.
func (e *Engine) Close() {
	e.once.Do(func() { close(e.done) })
	<-e.ended
}

// take is the request that waits, if any.
func (e *Engine) take() (r *Request, asked time.Time, hold Filling) {
	e.mu.Lock()
	defer e.mu.Unlock()
	r, asked = e.next, e.asked
	e.next = nil
	return r, asked, e.hold
}

func (e *Engine) loop() {
	defer close(e.ended)
	var p portrait
	var b balls
	clock := time.NewTicker(tick)
	defer clock.Stop()
	last := time.Now()
	running := false
	for {
		if running {
			select {
			case <-e.done:
				return
			case <-e.wake:
			case <-clock.C:
			}
		} else {
			select {
			case <-e.done:
				return
			case <-e.wake:
			}
			last = time.Now()
		}
		r, asked, hold := e.take()
		now := time.Now()
		fresh := r != nil
		if fresh {
			p.show(r)
			b.show(r, p.tracer)
		}
		moved := b.advance(now.Sub(last).Seconds())
		last = now
		filled := p.fill(fresh, hold)
		if fresh || filled {
			e.PortraitFrames.publish(p.draw)
		}
		if fresh || moved {
			e.RaysFrames.publish(b.draw)
		}
		if fresh || filled || moved {
			e.report(&p, fresh, asked, hold)
		}
		running = b.moving() || p.filling(hold)
	}
}

// report posts the status and the refresh of the panes.
func (e *Engine) report(p *portrait, fresh bool, asked time.Time, hold Filling) {
	s := p.status()
	s.Held = hold
	s.FirstMs = e.status.FirstMs
	if fresh {
		s.FirstMs = float64(time.Since(asked).Microseconds()) / 1000
	}
	e.status = s
	if !e.PortraitFrames.claim() {
		return // the window has not yet drawn the last frames
	}
	e.post(func() {
		e.PortraitFrames.release()
		e.shown(s)
	})
}
