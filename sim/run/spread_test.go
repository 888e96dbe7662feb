package run

import (
	"context"
	"errors"
	"sync/atomic"
	"testing"
)

// Every piece is done once, on any number of goroutines.
func TestSpread(t *testing.T) {
	for _, workers := range []int{0, 1, 3, 64} {
		const pieces = 37
		var done [pieces]atomic.Int32
		if err := Spread(t.Context(), workers)(pieces, func(i int) error { done[i].Add(1); return nil }); err != nil {
			t.Fatal(err)
		}
		for i := range done {
			if n := done[i].Load(); n != 1 {
				t.Errorf("%d workers: piece %d was done %d times", workers, i, n)
			}
		}
	}
	if err := Spread(t.Context(), 2)(0, func(int) error { return errors.New("none") }); err != nil {
		t.Errorf("no pieces: %v", err)
	}
}

// An error, or the end of the context, begins no further piece.
func TestSpreadStops(t *testing.T) {
	stop := errors.New("stop")
	var begun atomic.Int32
	err := Spread(t.Context(), 2)(1000, func(i int) error {
		begun.Add(1)
		if i == 5 {
			return stop
		}
		return nil
	})
	if !errors.Is(err, stop) || begun.Load() == 1000 {
		t.Errorf("%v after %d pieces", err, begun.Load())
	}
	ctx, cancel := context.WithCancel(t.Context())
	begun.Store(0)
	err = Spread(ctx, 2)(1000, func(int) error {
		if begun.Add(1) == 3 {
			cancel()
		}
		return nil
	})
	if !errors.Is(err, context.Canceled) || begun.Load() > 10 {
		t.Errorf("%v after %d pieces", err, begun.Load())
	}
}
