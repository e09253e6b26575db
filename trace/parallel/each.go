// Package parallel spreads pieces of work over goroutines. Which goroutine does
// which piece is left to chance: results go by the piece.
package parallel

import (
	"context"
	"sync"
	"sync/atomic"
)

// Each calls work for 0 to n-1, each once, from that many goroutines, at least
// one, and waits for them. Once ctx ends no further piece is begun; its error is
// returned.
func Each(ctx context.Context, workers, n int, work func(i int)) error {
	return EachWith(ctx, workers, n, func() func(int) { return work })
}

// EachWith is Each for work with scratch: every goroutine calls start and does its
// pieces with what that returns.
func EachWith(ctx context.Context, workers, n int, start func() (work func(i int))) error {
	var next atomic.Int64
	var wg sync.WaitGroup
	for range max(1, min(workers, n)) {
		wg.Add(1)
		go func() {
			defer wg.Done()
			work := start()
			for ctx.Err() == nil {
				i := int(next.Add(1)) - 1
				if i >= n {
					return
				}
				work(i)
			}
		}()
	}
	wg.Wait()
	return ctx.Err()
}

// Try is Each for work that may fail. All pieces are done all the same; the error
// is that of ctx or else of the lowest piece that has one.
func Try(ctx context.Context, workers, n int, work func(i int) error) error {
	errs := make([]error, n)
	if err := Each(ctx, workers, n, func(i int) { errs[i] = work(i) }); err != nil {
		return err
	}
	for _, err := range errs {
		if err != nil {
			return err
		}
	}
	return nil
}
