package study

import (
	"fmt"
	"math"
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

// Bounds of the laws. Bytes allocated stand for rows, samples and frames and are
// nearly free of noise: slices that grow by a quarter at a time are the 1.3. CPU
// time is not: 1.6 is what busy neighbours on the same core may add.
const (
	mostSteeper = 1.3
	mostSlower  = 1.6
)

// broken tells what of a linear law does not hold.
func broken(size, bytes, seconds []float64) (problems []string) {
	if s := steeper(size, bytes); s > mostSteeper {
		problems = append(problems, fmt.Sprintf("memory rises %.2f times faster at the end than at the beginning, want at most %g", s, mostSteeper))
	}
	n := len(size) - 1
	if s := seconds[n] / seconds[0] / (size[n] / size[0]); s > mostSlower {
		problems = append(problems, fmt.Sprintf("the last takes %.2f times the CPU time that its size explains, want at most %g", s, mostSlower))
	}
	return problems
}

// TestFloorLaws: cost grows no worse than linearly with viewpoints, sensors and
// hours. With triangles neither the number of texel sides nor that of what is
// allocated grows, and CPU time as their logarithm.
func TestFloorLaws(t *testing.T) {
	if testing.Short() {
		t.Skip("takes half a minute")
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
			var at, bytes, seconds []float64
			for _, x := range sizes {
				f := tiny
				set(&f, x)
				c, _ := f.measure(t, Options{Workers: 1, Bare: true})
				at, bytes, seconds = append(at, float64(size(c))), append(bytes, float64(c.bytes)), append(seconds, c.prepare+c.run)
				t.Logf("%s %5.0f: %7.1f MiB allocated, %d texel sides, %.2f CPU s", name, at[len(at)-1], float64(c.bytes)/(1<<20), c.sides, c.prepare+c.run)
			}
			for _, p := range broken(at, bytes, seconds) {
				t.Error(p)
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
		// The depth of the search trees.
		law := math.Log(float64(many.triangles)) / math.Log(float64(few.triangles))
		if s := many.run / few.run; s > mostSlower*law {
			t.Errorf("CPU time: got %.2f times, want at most %.2f, the logarithms' ratio %.2f and %g", s, mostSlower*law, law, mostSlower)
		}
	})
}

// Twin: a part that grows with the square is found, a fixed part and noise of a
// tenth are not.
func TestFloorLawsFindSquares(t *testing.T) {
	size := []float64{16, 40, 80}
	at := func(f func(x float64) float64) []float64 { return []float64{f(size[0]), f(size[1]), f(size[2])} }
	linear, square := at(func(x float64) float64 { return 100 + x }), at(func(x float64) float64 { return 100 + x*x })
	if p := broken(size, linear, []float64{1, 2.5, 5.5}); len(p) > 0 {
		t.Errorf("linear: got %q, want nothing", p)
	}
	if p := broken(size, square, linear); len(p) != 1 {
		t.Errorf("memory by squares: got %q, want one problem", p)
	}
	if p := broken(size, linear, at(func(x float64) float64 { return x * x })); len(p) != 1 {
		t.Errorf("time by squares: got %q, want one problem", p)
	}
}
