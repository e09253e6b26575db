package annual_test

import (
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/trace/annual"
)

// BenchmarkRun is the year's part of a small office: 256 moments, 4 sensors
// and, where named, 2 views of 96 pixels, surfaces traced beforehand.
func BenchmarkRun(b *testing.B) {
	w, sensors := office(b, .2)
	moments := officeMoments(b, 256)
	views := []scene.Viewpoint{
		{Position: r3.Vec{X: 1.5, Y: 3, Z: 1.2}, Direction: r3.Vec{Y: -1}},
		{Position: r3.Vec{X: 1, Y: 2, Z: 1.2}, Direction: r3.Vec{X: 1}},
	}
	f := effort{batches: 8, texelSamples: 256, sensorSamples: 4096, seed: 1, workers: 1}
	for _, c := range []struct {
		name  string
		views []scene.Viewpoint
	}{{"sensors", nil}, {"sensors and views", views}} {
		e := prepare(b, w, sensors, c.views, 96, f)
		var sink annual.Sink
		if c.views != nil {
			sink = func(int, *annual.Frame) {}
		}
		b.Run(c.name, func(b *testing.B) {
			for b.Loop() {
				e.run(b, moments, f, sink)
			}
			b.ReportMetric(float64(e.t.Len()), "sides")
			b.ReportMetric(float64(b.Elapsed().Milliseconds())/float64(b.N)/float64(len(moments)), "ms/moment")
		})
	}
}

// BenchmarkTransport traces the surfaces of the small office.
func BenchmarkTransport(b *testing.B) {
	w, sensors := office(b, .2)
	f := effort{batches: 8, texelSamples: 256, sensorSamples: 4096, seed: 1, workers: 1}
	var sides int
	for b.Loop() {
		sides = prepare(b, w, sensors, nil, 0, f).t.Len()
	}
	b.ReportMetric(float64(sides), "sides")
}
