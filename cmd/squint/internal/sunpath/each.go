package sunpath

import (
	"context"
	"errors"
	"sync"
	"sync/atomic"
)

// each does n pieces of work on some threads, until all are done or ctx ends.
func each(ctx context.Context, workers, n int, work func(i int) error) error {
	errs := make([]error, n)
	var next atomic.Int64
	var wg sync.WaitGroup
	for range max(1, workers) {
		wg.Add(1)
		go func() {
			defer wg.Done()
			for i := int(next.Add(1)) - 1; i < n && ctx.Err() == nil; i = int(next.Add(1)) - 1 {
				errs[i] = work(i)
			}
		}()
	}
	wg.Wait()
	return errors.Join(append(errs, ctx.Err())...)
}
