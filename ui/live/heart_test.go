package live

import (
	"testing"
	"time"
)

// The heart tells a goroutine that answers from one that hangs, and stops.
func TestHeart(t *testing.T) {
	posts := make(chan func(), 10)
	var waits, stalls int
	var worst Stall
	h := NewHeart(func(f func()) { posts <- f }, func(wait time.Duration, s *Stall) {
		waits++
		if s != nil {
			stalls++
			worst = *s
		}
	})
	for range 5 {
		(<-posts)()
	}
	if waits != 5 {
		t.Errorf("after 5 answers %d were told", waits)
	}
	was := stalls
	f := <-posts
	time.Sleep(3 * StallFrom)
	f()
	if stalls != was+1 || worst.WaitMs < ms(3*StallFrom) {
		t.Errorf("a stall of %v is told as %d stalls, the last %+v", 3*StallFrom, stalls-was, worst)
	}
	if worst.RanMs > worst.WaitMs || worst.RanMs < 0 || worst.QueuedMs < 0 {
		t.Errorf("of %g ms the thread ran %g and waited %g for a processor", worst.WaitMs, worst.RanMs, worst.QueuedMs)
	}
	h.Close()
}
