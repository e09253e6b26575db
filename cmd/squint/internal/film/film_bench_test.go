package film

import "testing"

// A view of the demo: 48 pixels across, 2,600 hours.
func BenchmarkDevelop(b *testing.B) {
	r := NewRoll(1810, 2600, 0.05, 1e6)
	all, sun := make([]float32, r.Points), make([]float32, r.Points)
	for i := range r.Frames {
		for p := range all {
			all[p], sun[p] = scene(i, p%200)
		}
		r.Keep(i, all, sun, 0)
	}
	for b.Loop() {
		r.Develop(12, Fine)
	}
}
