package trace_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/trace"
)

// BenchmarkMirroredShoot shoots the sun at the level shelf of the derived room,
// without its furniture of surfaces that only reflect.
func BenchmarkMirroredShoot(b *testing.B) {
	m := newMirroredModel(b)
	derivedShelf().build(m)
	w := m.world()
	sun := mirroredSun(40, 0)
	const photons = 4096
	landed := 0
	b.ResetTimer()
	for i := range b.N {
		s := sampling.Stream2(1, uint64(i))
		w.Aim(sun).Shoot(50, photons, mirroredDraw(sun), &s, func(*trace.Hit, float64) { landed++ })
	}
	b.ReportMetric(photons*float64(b.N)/b.Elapsed().Seconds(), "photons/s")
	b.ReportMetric(float64(landed)/float64(b.N)/photons, "landed/photon")
}

// BenchmarkMirroredFind looks for the images of one sun in a curved shelf of
// 378 facets, from an eye that sees some and from one below the shelf.
func BenchmarkMirroredFind(b *testing.B) {
	m := newMirroredModel(b)
	mirroredTrough{1.85, false}.mesh(m, .9, 18.9*math.Pi/180, .1*math.Pi/180, 0, 1.6)
	w := m.world()
	sun := mirroredSun(40, 0)
	for _, c := range []struct {
		name string
		eye  r3.Vec
	}{{"above", r3.Vec{Y: 3 * -sun.Y, Z: 3 * sun.Z}}, {"below", r3.Vec{Y: 4, Z: -.8}}} {
		b.Run(c.name, func(b *testing.B) {
			var out []trace.Image
			facets := w.MirrorsFrom(c.eye)
			b.ResetTimer()
			for range b.N {
				out = w.Images(c.eye, sun, facets, aboveAll, out[:0])
			}
			b.ReportMetric(float64(len(out)), "images")
		})
	}
}
