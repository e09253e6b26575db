package parallel

import (
	"context"
	"errors"
	"sync/atomic"
	"testing"
)

// TestEach: every piece is done once, with any number of workers, each of which
// starts once.
func TestEach(t *testing.T) {
	for _, workers := range []int{-1, 0, 1, 3, 50} {
		for _, n := range []int{0, 1, 20} {
			done := make([]int32, n)
			var started atomic.Int32
			err := EachWith(t.Context(), workers, n, func() func(int) {
				started.Add(1)
				return func(i int) { atomic.AddInt32(&done[i], 1) }
			})
			if err != nil {
				t.Fatal(err)
			}
			for i, times := range done {
				if times != 1 {
					t.Errorf("%d workers: piece %d of %d was done %d times, want once", workers, i, n, times)
				}
			}
			if want := max(1, min(workers, n)); int(started.Load()) != want {
				t.Errorf("%d workers, %d pieces: got %d starts, want %d", workers, n, started.Load(), want)
			}
		}
	}
}

// TestStop: no piece is begun after the context has ended, and its error comes
// before those of the work.
func TestStop(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	var done atomic.Int32
	err := Try(ctx, 2, 1000, func(i int) error {
		if done.Add(1) == 10 {
			cancel()
		}
		return errors.New("work")
	})
	// The other goroutine may be within a piece, and one more between its look at
	// the context and the piece.
	if n := done.Load(); !errors.Is(err, context.Canceled) || n > 12 {
		t.Errorf("got %v after %d pieces, want the stop after 10 to 12", err, n)
	}
}

// TestTry: the lowest piece's error is told, whatever was done first, and the
// others are done all the same.
func TestTry(t *testing.T) {
	first, second := errors.New("first"), errors.New("second")
	var done atomic.Int32
	err := Try(t.Context(), 4, 30, func(i int) error {
		done.Add(1)
		switch i {
		case 7:
			return first
		case 3:
			return second
		}
		return nil
	})
	if err != second || done.Load() != 30 {
		t.Errorf("got %v after %d pieces, want %v after 30", err, done.Load(), second)
	}
}
