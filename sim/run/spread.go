package run

import (
	"context"
	"runtime"
	"sync/atomic"

	"golang.org/x/sync/errgroup"
)

// Spread is a function that runs do for each piece from 0 to pieces-1 on so many
// goroutines (0 means as many as there are processors) and returns the first
// error, after which no further piece is begun; so it does when ctx ends. It is
// for work that comes in pieces of its own, such as the search for orbits.
func Spread(ctx context.Context, workers int) func(pieces int, do func(piece int) error) error {
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	return func(pieces int, do func(piece int) error) error {
		group, ctx := errgroup.WithContext(ctx)
		var next atomic.Int64
		for range min(workers, pieces) {
			group.Go(func() error {
				for {
					if err := ctx.Err(); err != nil {
						return err
					}
					i := int(next.Add(1)) - 1
					if i >= pieces {
						return nil
					}
					if err := do(i); err != nil {
						return err
					}
				}
			})
		}
		return group.Wait()
	}
}
