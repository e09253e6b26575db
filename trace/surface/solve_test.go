package surface

import (
	"math"
	"testing"
)

// TestStart: where the iteration starts changes where it ends by no more than
// its tolerance, on the way up and from another batch's light, and the second
// takes fewer sweeps. What is left after a sweep that changes the sum by a share
// of q is about q r/(1-r), r being the ratio of one change to the next, below a
// half here: both ends lie within the tolerance of the truth.
func TestStart(t *testing.T) {
	tr := everySide(t, facadeRoom(t, .5, false).world(), Config{Batches: 2, Samples: 128, Seed: 1, Workers: 1})
	bl := tr.NewBlock(skies(t), nil)
	var other, dark, near Light
	tr.Solve(bl, 1, &other, nil)
	tr.Solve(bl, 0, &dark, nil)
	tr.Solve(bl, 0, &near, &other)
	sums := func(l *Light) (sum float64) {
		for i := range l.E {
			sum += float64(l.E[i][0])
		}
		return sum
	}
	a, b, c := sums(&dark), sums(&near), sums(&other)
	if math.Abs(b/a-1) > 2*sweepTolerance {
		t.Errorf("from another batch: got %g in all, want %g as from the dark", b, a)
	}
	if math.Abs(c/a-1) < 2*sweepTolerance {
		t.Errorf("the other batch differs by %g only: the test sees nothing", c/a-1)
	}
	if near.Sweeps >= dark.Sweeps {
		t.Errorf("got %d sweeps from another batch and %d from the dark, want fewer", near.Sweeps, dark.Sweeps)
	}
}
