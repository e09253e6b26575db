package study

import (
	"fmt"
	"os"
	"testing"
)

// steeper is by how much cost rises faster between the last two sizes than
// between the first two: 1 for cost that is linear apart from a fixed part, for
// squares the ratio of the sums of the sizes.
func steeper(size, cost []float64) float64 {
	n := len(size)
	first := (cost[1] - cost[0]) / (size[1] - size[0])
	last := (cost[n-1] - cost[n-2]) / (size[n-1] - size[n-2])
	return last / first
}

// mostSteeper bounds it for bytes allocated, which stand for rows, samples and
// frames and are nearly free of noise: slices that grow by a quarter at a time are
// the 1.3. CPU time is a matter for BenchmarkFloor.
const mostSteeper = 1.3

// broken tells whether a linear law of memory does not hold.
func broken(size, bytes []float64) error {
	if s := steeper(size, bytes); s > mostSteeper {
		return fmt.Errorf("memory rises %.2f times faster at the end than at the beginning, want at most %g", s, mostSteeper)
	}
	return nil
}

// TestFloorLaws: what is allocated grows no worse than linearly with viewpoints,
// sensors and hours. With triangles the number of texel sides hardly grows.
func TestFloorLaws(t *testing.T) {
	if os.Getenv("SQUINT_LONG") == "" {
		t.Skip("takes half a minute; set SQUINT_LONG=1, as .ci/run does")
	}
	tiny := floor{triangles: 12000, viewM: 30, sensorM: 6, days: 60, simulation: `fisheye_pixels = 32
samples_per_pixel = 8
sensor_samples = 256
texel_m = 2
texel_samples = 16
photons = 64
`}
	linear := func(name string, sizes []float64, set func(f *floor, x float64), size func(c floorCost) int) {
		t.Run(name, func(t *testing.T) {
			var at, bytes []float64
			for _, x := range sizes {
				f := tiny
				set(&f, x)
				c, _ := f.measure(t, Options{Workers: 1, Bare: true})
				at, bytes = append(at, float64(size(c))), append(bytes, float64(c.bytes))
				t.Logf("%s %5.0f: %7.1f MiB allocated, %d texel sides, %.2f CPU s", name, at[len(at)-1], float64(c.bytes)/(1<<20), c.sides, c.prepare+c.run)
			}
			if err := broken(at, bytes); err != nil {
				t.Error(err)
			}
		})
	}
	linear("views", []float64{30, 12, 6}, func(f *floor, m float64) { f.viewM = m }, func(c floorCost) int { return c.views })
	linear("sensors", []float64{4, 2, 1.4}, func(f *floor, m float64) { f.sensorM = m }, func(c floorCost) int { return c.sensors })
	linear("hours", []float64{60, 30, 15}, func(f *floor, n float64) { f.days = int(n) }, func(c floorCost) int { return c.hours })
	t.Run("triangles", func(t *testing.T) {
		few, _ := tiny.measure(t, Options{Workers: 1, Bare: true})
		f := tiny
		f.triangles = 200000
		many, _ := f.measure(t, Options{Workers: 1, Bare: true})
		t.Logf("%d and %d triangles: %d and %d texel sides, %.1f and %.1f MiB allocated, %.2f and %.2f CPU s", few.triangles, many.triangles,
			few.sides, many.sides, float64(few.bytes)/(1<<20), float64(many.bytes)/(1<<20), few.run, many.run)
		if s := float64(many.sides) / float64(few.sides); s > 1.2 {
			t.Errorf("texel sides: got %.2f times as many, want at most 1.2", s)
		}
	})
}

// Twin: a part that grows with the square is found, a fixed part is not.
func TestFloorLawsFindSquares(t *testing.T) {
	size := []float64{16, 40, 80}
	at := func(f func(x float64) float64) []float64 { return []float64{f(size[0]), f(size[1]), f(size[2])} }
	if err := broken(size, at(func(x float64) float64 { return 100 + x })); err != nil {
		t.Errorf("linear: got %v, want nothing", err)
	}
	if err := broken(size, at(func(x float64) float64 { return 100 + x*x })); err == nil {
		t.Error("memory by squares: got nothing, want an error")
	}
}
