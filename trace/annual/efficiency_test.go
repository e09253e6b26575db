package annual_test

import (
	"math"
	"os"
	"slices"
	"syscall"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/view"
	"squint/trace"
	"squint/trace/annual"
)

// The rendering task of the efficiency figures: a 256 px fisheye of the 4 x 4
// x 3 m room with the 2 x 1 m opening under the traditional overcast sky, seen
// from the back of the room. Error is the median over pixels of the relative
// difference to a converged picture, bias included.
const efficiencyPixels = 256

func efficiencyRoom(b testing.TB) (*trace.World, scene.Viewpoint, *scene.Moment) {
	m := newModel(b, 0.1)
	lo, hi := r3.Vec{}, r3.Vec{X: 4, Y: 4, Z: 3}
	m.box(lo, hi, m.matte(0.2), m.matte(0.8), m.matte(0.5), aperture{false, hole{1, 1, 3, 2}})
	v := scene.Viewpoint{Position: r3.Vec{X: 2, Y: 3.5, Z: 1.2}, Direction: r3.Vec{Y: -1}}
	mom := skyMoment(1, overcast(b))
	mom.Occupied = true
	return m.world(), v, mom
}

// efficiencyTruth renders every 97th pixel with many paths.
func efficiencyTruth(b testing.TB, w *trace.World, v scene.Viewpoint, m *scene.Moment, spp int, seed uint64) map[int]float64 {
	vw, err := view.New(v.Position, v.Direction, r3.Vec{Z: 1}, view.Equidistant, math.Pi, efficiencyPixels, efficiencyPixels)
	if err != nil {
		b.Fatal(err)
	}
	tr := trace.NewTracer(w, []*scene.Moment{m})
	tr.Portals = true
	out := map[int]float64{}
	var l [1]float64
	for px := 0; px < efficiencyPixels*efficiencyPixels; px += 97 {
		if vw.SolidAngle(px%efficiencyPixels, px/efficiencyPixels) == 0 {
			continue
		}
		l[0] = 0
		n := 0
		for k := range spp {
			s := sampling.Stream4(seed, 5, uint64(px), uint64(k))
			dir, ok := vw.Ray(float64(px%efficiencyPixels)+s.Float64(), float64(px/efficiencyPixels)+s.Float64())
			if ok {
				n++
				tr.Luminance(v.Position, dir, 1, &s, l[:])
			}
		}
		if n > 0 {
			out[px] = l[0] / float64(n)
		}
	}
	return out
}

func medianError(got func(px int) float64, truth map[int]float64) float64 {
	var e []float64
	for px, want := range truth {
		if want > 0 {
			e = append(e, math.Abs(got(px)/want-1))
		}
	}
	slices.Sort(e)
	return e[len(e)/2]
}

// cpuSeconds is the process's user time so far.
func cpuSeconds() float64 {
	var u syscall.Rusage
	if syscall.Getrusage(syscall.RUSAGE_SELF, &u) != nil {
		return math.NaN()
	}
	return float64(u.Utime.Sec) + float64(u.Utime.Usec)/1e6
}

// BenchmarkFisheyeEfficiency compares the two engines at equal median error.
// The plain tracer aims at the opening (its next event estimation) and is
// scaled to 2 % by the law of its error, one over the root of the samples;
// the annual engine is run as it is for one moment. Reported: CPU seconds and
// median errors of both, and the ratio at 2 %. The truth takes a while, so it
// runs where SQUINT_LONG is set.
func BenchmarkFisheyeEfficiency(b *testing.B) {
	if os.Getenv("SQUINT_LONG") == "" {
		b.Skip("takes minutes; set SQUINT_LONG=1")
	}
	w, v, m := efficiencyRoom(b)
	truth := efficiencyTruth(b, w, v, m, 40000, 1)
	for b.Loop() {
		const spp = 256
		start := cpuSeconds()
		rough := efficiencyTruth(b, w, v, m, spp, 2)
		plainSeconds := (cpuSeconds() - start) * 97
		plainError := medianError(func(px int) float64 { return rough[px] }, truth)

		start = cpuSeconds()
		var image []float32
		e := prepare(b, w, nil, []scene.Viewpoint{v}, efficiencyPixels, effort{batches: 8, texelSamples: 512, seed: 3})
		_, err := annual.Run(b.Context(), e.t, e.rec, []*scene.Moment{m}, annual.Config{Workers: 1, Seed: 3},
			func(_ int, f *annual.Frame) { image = slices.Clone(f.Mean) }, nil)
		if err != nil {
			b.Fatal(err)
		}
		cachedSeconds := cpuSeconds() - start
		cachedError := medianError(func(px int) float64 { return float64(image[px]) }, truth)

		scaled := plainSeconds * plainError * plainError / (0.02 * 0.02)
		b.ReportMetric(plainSeconds, "plain-cpu-s")
		b.ReportMetric(100*plainError, "plain-error-%")
		b.ReportMetric(scaled, "plain-at-2%-cpu-s")
		b.ReportMetric(cachedSeconds, "texels-cpu-s")
		b.ReportMetric(100*cachedError, "texels-error-%")
		b.ReportMetric(scaled/cachedSeconds, "ratio")
	}
}
