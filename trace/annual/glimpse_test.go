package annual_test

import (
	"context"
	"slices"
	"sync"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/trace/annual"
)

// TestGlimpses: a moment out of use is seen by the first batch of samples, bit by
// bit as in a moment in use; without glimpses it is not seen at all.
func TestGlimpses(t *testing.T) {
	w, sensors := office(t, .4)
	views := []scene.Viewpoint{{Name: "window", Position: r3.Vec{X: 1.5, Y: 3, Z: 1.2}, Direction: r3.Vec{Y: -1}}}
	f := effort{batches: 4, texelSamples: 64, sensorSamples: 256, seed: 5, workers: 2}
	e := prepare(t, w, sensors, views, 16, f)
	see := func(used, glimpses bool) (mean, batch [][]float32) {
		var moments []*scene.Moment
		for _, m := range officeMoments(t, 70) {
			c := *m
			c.Occupied = used
			moments = append(moments, &c)
		}
		mean, batch = make([][]float32, len(moments)), make([][]float32, len(moments))
		var mu sync.Mutex
		cfg := annual.Config{Workers: 2, Seed: f.seed, Glimpses: glimpses}
		if _, err := annual.Run(context.Background(), e.t, e.rec, moments, cfg, func(_ int, fr *annual.Frame) {
			mu.Lock()
			defer mu.Unlock()
			if want := map[bool]int{true: 4, false: 1}[used]; len(fr.Batch) != want {
				t.Errorf("got %d batches, want %d", len(fr.Batch), want)
			}
			mean[fr.Index], batch[fr.Index] = slices.Clone(fr.Mean), slices.Clone(fr.Batch[0])
		}, nil); err != nil {
			t.Fatal(err)
		}
		return mean, batch
	}
	whole, first := see(true, false)
	glimpse, _ := see(false, true)
	alike := 0
	for i := range first {
		if !slices.Equal(glimpse[i], first[i]) {
			t.Fatalf("moment %d: the glimpse is not what the first batch sees", i)
		}
		if slices.Equal(glimpse[i], whole[i]) {
			alike++
		}
	}
	if alike > 0 {
		t.Errorf("%d glimpses are what all batches see: the test sees nothing", alike)
	}
	if none, _ := see(false, false); slices.ContainsFunc(none, func(m []float32) bool { return m != nil }) {
		t.Error("moments out of use were seen without glimpses")
	}
}
