package live

import (
	"bytes"
	"fmt"
	"os"
	"runtime"
	"strings"
	"time"
)

// Stall is a time in which the window's goroutine did nothing that was posted
// to it.
type Stall struct {
	WaitMs float64 // from the post to the answer, milliseconds
	// RanMs is how long the window's thread computed in it, QueuedMs how long it
	// merely waited for a processor that others had; the rest it waited for a
	// disk, the screen or another thread. RanMs is WaitMs where the system does
	// not tell.
	RanMs, QueuedMs float64
	Doing           []string // the functions it was in after StallFrom, innermost first
}

const (
	// StallFrom is the wait from which a person sees that the window hangs.
	StallFrom = 100 * time.Millisecond
	// beatEvery is the time from an answer to the next post.
	beatEvery = 20 * time.Millisecond
	// doingDepth is the number of functions of a stall that are kept.
	doingDepth = 96
)

// Heart posts to the window's goroutine again and again and measures how long
// the answer takes. It is for tests and for finding what blocks the window.
type Heart struct {
	done, ended chan struct{}
}

// NewHeart starts to beat. told is called on the window's goroutine at each
// answer, with the wait; with a *Stall where it was a stall, else nil.
func NewHeart(post func(func()), told func(wait time.Duration, s *Stall)) *Heart {
	h := &Heart{done: make(chan struct{}), ended: make(chan struct{})}
	go h.beat(post, told)
	return h
}

// Close stops it; it does not wait for an answer that is due.
func (h *Heart) Close() {
	close(h.done)
	<-h.ended
}

func (h *Heart) beat(post func(func()), told func(time.Duration, *Stall)) {
	defer close(h.ended)
	late := time.NewTimer(StallFrom)
	defer late.Stop()
	for {
		// Each beat has its own answer, so that one that never comes is nobody's.
		answered := make(chan struct{})
		begun, before := time.Now(), threadTimes()
		looked := make(chan []string, 1)
		post(func() {
			wait := time.Since(begun)
			close(answered)
			var s *Stall
			if wait >= StallFrom {
				s = &Stall{WaitMs: ms(wait), RanMs: ms(wait)}
				if now := threadTimes(); now.known && before.known {
					s.RanMs, s.QueuedMs = ms(now.ran-before.ran), ms(now.queued-before.queued)
				}
				select {
				case s.Doing = <-looked:
				case <-time.After(time.Second):
				}
			}
			told(wait, s)
		})
		late.Reset(StallFrom)
		select {
		case <-answered:
		case <-late.C:
			looked <- windowDoing()
			select {
			case <-answered:
			case <-h.done:
				return
			}
		case <-h.done:
			return
		}
		select {
		case looked <- nil: // a stall that ended just before it was looked at
		default:
		}
		select {
		case <-time.After(beatEvery):
		case <-h.done:
			return
		}
	}
}

func ms(d time.Duration) float64 { return float64(d.Microseconds()) / 1000 }

// times are how long a thread has run, and waited for a processor, in all.
type times struct {
	ran, queued time.Duration
	known       bool
}

// threadTimes are those of the first thread of the program, which is the
// window's (Linux, proc(5), schedstat).
func threadTimes() times {
	b, err := os.ReadFile(fmt.Sprintf("/proc/self/task/%d/schedstat", os.Getpid()))
	if err != nil {
		return times{}
	}
	var ran, queued int64
	if n, _ := fmt.Sscan(string(b), &ran, &queued); n < 2 {
		return times{}
	}
	return times{time.Duration(ran), time.Duration(queued), true}
}

// windowDoing are the functions that the first goroutine is in, which is the
// window's, innermost first.
func windowDoing() []string {
	buf := make([]byte, 1<<20)
	buf = buf[:runtime.Stack(buf, true)]
	for _, g := range bytes.Split(buf, []byte("\n\n")) {
		if !bytes.HasPrefix(g, []byte("goroutine 1 ")) {
			continue
		}
		var all []string
		for i, line := range strings.Split(string(g), "\n") {
			if i == 0 || strings.HasPrefix(line, "\t") || strings.HasPrefix(line, "created by") {
				continue
			}
			if at := strings.LastIndexByte(line, '('); at > 0 {
				line = line[:at]
			}
			all = append(all, line[strings.LastIndexByte(line, '/')+1:])
		}
		return all[:min(len(all), doingDepth)]
	}
	return nil
}
