package main

import (
	"sync"
	"time"
)

// A heartbeat says now and then that a silent command is still going.
type heartbeat struct {
	site  *site
	began time.Time
	mu    sync.Mutex // guards timer, and the site's output while the heart beats
	timer *time.Timer
}

func startHeartbeat(s *site) *heartbeat {
	h := &heartbeat{site: s, began: time.Now()}
	h.mu.Lock()
	defer h.mu.Unlock()
	h.timer = time.AfterFunc(s.tell, h.beat)
	return h
}

func (h *heartbeat) beat() {
	h.mu.Lock()
	defer h.mu.Unlock()
	if h.timer == nil {
		return // stopped while this beat was under way
	}
	h.site.say("  still building, %s", spoken(time.Since(h.began)))
	h.timer.Reset(h.site.tell)
}

// stop ends the heartbeat and returns how long it lasted; nothing is said after it returns.
func (h *heartbeat) stop() time.Duration {
	h.mu.Lock()
	defer h.mu.Unlock()
	h.timer.Stop()
	h.timer = nil
	return time.Since(h.began)
}
