package study

import (
	"context"
	"testing"

	"squint/scene/project"
)

// TestVariances: with few rays from the sensors and many from the surfaces the
// error is mostly the sensors' own, and the other way round.
func TestVariances(t *testing.T) {
	of := func(sensor, texel int) noise {
		in := evenRoom(t, 5000)
		in.Scene.Viewpoints = nil
		in.Project.Simulation.SensorSamples, in.Project.Simulation.TexelSamples = sensor, texel
		n, err := variances(context.Background(), in, Options{Workers: 2, Progress: func(Stage, int, int) {}})
		if err != nil {
			t.Fatal(err)
		}
		t.Logf("%d rays, %d samples: %+v", sensor, texel, n)
		return n
	}
	if n := of(16, 1024); !(n.rays > 4*n.shared) {
		t.Errorf("few rays: got a variance of %g from them and of %g shared", n.rays, n.shared)
	}
	if n := of(16384, 16); !(n.shared > 4*n.rays) {
		t.Errorf("few samples of surfaces: got a variance of %g from rays and of %g shared", n.rays, n.shared)
	}
}

// TestBatches: four times as many, at most 64, and no more than a quarter of the
// memory holds.
func TestBatches(t *testing.T) {
	for _, c := range []struct {
		batches, memory int
		each            float64
		want            int
	}{{8, 1024, 1, 32}, {32, 1024, 1, 64}, {64, 1024, 1, 64}, {8, 1024, 10, 16}, {8, 1024, 40, 8}, {8, 64, 0.5, 32}} {
		n := noise{batchMiB: c.each}
		if got := n.batches(project.Simulation{Batches: c.batches, MemoryMiB: c.memory}); got != c.want {
			t.Errorf("%+v: got %d", c, got)
		}
	}
}
