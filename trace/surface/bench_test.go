package surface

import (
	"testing"

	"squint/scene"
)

// BenchmarkSolve solves one block of 64 moments in one batch, in a room like
// the demo's: from the dark, and from the light of another batch.
func BenchmarkSolve(b *testing.B) {
	tr := everySide(b, facadeRoom(b, .2, true).world(), Config{Batches: 2, Samples: 64, Seed: 1, Workers: 1})
	var moments []*scene.Moment
	for i := range Width {
		m := sunAt(b, i, 8+float64(i*29%56), -75+float64(i*47%150), 50000)
		m.Sky = skies(b)[0].Sky
		moments = append(moments, m)
	}
	bl := tr.NewBlock(moments, nil)
	var light, other Light
	tr.Solve(bl, 1, &other, nil)
	for _, start := range []struct {
		name string
		near *Light
	}{{"dark", nil}, {"another batch", &other}} {
		b.Run(start.name, func(b *testing.B) {
			for b.Loop() {
				tr.Solve(bl, 0, &light, start.near)
			}
			b.ReportMetric(float64(tr.Len()), "sides")
			b.ReportMetric(float64(light.Sweeps), "sweeps")
		})
	}
}

// BenchmarkCut cuts the room into texels.
func BenchmarkCut(b *testing.B) {
	w := facadeRoom(b, .2, true).world()
	for b.Loop() {
		cut(w, 1)
	}
}
