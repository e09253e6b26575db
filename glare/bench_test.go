package glare

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/view"
)

// office returns a field and an image with bright pixels: a window patch of
// roughly the given number of them, in two panes.
func office(t testing.TB, size int, bright float64) (*Field, []float32) {
	v := fisheye(t, view.Equidistant, 180, size)
	half := math.Sqrt(bright) / 2 * math.Pi / float64(size)
	return NewField(v), render(v, func(d r3.Vec) float64 {
		if az := math.Abs(math.Atan2(d.Y, d.X) - 0.5); az < half && az > half/8 && math.Abs(math.Asin(d.Z)-0.3) < half {
			return 5000
		}
		return 400
	})
}

// No garbage in the hot path.
func TestDGPOnlyDoesNotAllocate(t *testing.T) {
	f, lum := office(t, 64, 100)
	scratch := new(Scratch)
	discs := []Disc{{Dir: toward(0.5, 0.5), OmegaSr: 6.8e-5, Luminance: 1e8}}
	for _, o := range []Options{{}, {Method: MultipleOfMean}, {Method: MultipleOfTask}} {
		DGPOnly(f, lum, discs, o, scratch)
		if n := testing.AllocsPerRun(100, func() { DGPOnly(f, lum, discs, o, scratch) }); n != 0 {
			t.Errorf("%+v: %g allocations a call, want none", o, n)
		}
	}
}

func BenchmarkDGPOnly(b *testing.B) {
	for _, c := range []struct {
		name   string
		size   int
		bright float64
	}{{"64px/dark", 64, 0}, {"64px/bright20", 64, 20}, {"64px/bright100", 64, 100}, {"64px/bright500", 64, 500}, {"96px/bright50", 96, 50}} {
		f, lum := office(b, c.size, c.bright)
		discs := []Disc{{Dir: toward(0.5, 0.5), OmegaSr: 6.8e-5, Luminance: 1e8}}
		b.Run(c.name, func(b *testing.B) {
			scratch := new(Scratch)
			b.ReportAllocs()
			for range b.N {
				DGPOnly(f, lum, discs, Options{}, scratch)
			}
			b.ReportMetric(float64(len(scratch.bright)), "bright")
		})
	}
}

func BenchmarkEvaluate(b *testing.B) {
	f, lum := office(b, 64, 100)
	scratch := new(Scratch)
	b.ReportAllocs()
	for range b.N {
		Evaluate(f, lum, nil, Options{}, scratch)
	}
}

func BenchmarkNewField(b *testing.B) {
	v := fisheye(b, view.Equidistant, 180, 64)
	for range b.N {
		NewField(v)
	}
}
