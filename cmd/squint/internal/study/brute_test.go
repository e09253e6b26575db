package study

import (
	"context"
	"math"
	"os"
	"runtime"
	"sync"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/demo"
	"squint/glare"
	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/photometry"
	"squint/trace"
	"squint/trace/annual"
)

// TestAnnualAgainstBruteForce holds the annual run's DGP against pictures of
// the same hours made by the plain path tracer, pixel by pixel at twice the
// default resolution: no texels, no sky patches, no links. It takes minutes and
// runs where SQUINT_LONG is set, as .ci/run does.
//
// The bounds are those asked of the method: RMSE 0.01, largest 0.03. The brute
// force pictures' own error is measured by their batches and must be small
// against the bounds.
func TestAnnualAgainstBruteForce(t *testing.T) {
	if os.Getenv("SQUINT_LONG") == "" {
		t.Skip("takes minutes; set SQUINT_LONG=1, as .ci/run does")
	}
	in, err := prepareFile(demo.FS(), demo.Project, "white shelf", runtime.NumCPU())
	if err != nil {
		t.Fatal(err)
	}
	// The plain tracer does not find the sun by way of panes, so that light is
	// left out here; it has checks of its own.
	in.Project.Simulation.Photons = 0
	// Two views: one towards the windows, one along them.
	views := []int{3, 0}
	in.Scene.Viewpoints = []scene.Viewpoint{in.Scene.Viewpoints[views[0]], in.Scene.Viewpoints[views[1]]}
	in.Scene.WorkPlanes = nil
	moments := spreadMoments(in.Climate.Moments, 20)
	in.Climate.Moments = moments
	in.Standings = []Standing{{Scene: in.Scene, World: in.World, Moments: moments}}
	in.operation = nil // the rollers stay up, here as there
	r, err := Run(context.Background(), in, Options{Workers: runtime.NumCPU()})
	if err != nil {
		t.Fatal(err)
	}
	var sum, worst, bruteSE, bruteSquares float64
	n := 0
	for k, v := range in.Scene.Viewpoints {
		dgp, se := bruteForce(t, in, v, moments, 256)
		for i, m := range moments {
			got := float64(r.Views[k].DGP[m.Step])
			d := got - dgp[i]
			t.Logf("%-8s %s sun %6.0f lx  annual %.4f +- %.4f  brute %.4f +- %.4f  difference %+.4f",
				v.Name, m.Time.Format("01-02 15:04"), m.SunNormalLx, got, r.Views[k].StdErr[m.Step], dgp[i], se[i], d)
			sum += d * d
			worst = math.Max(worst, math.Abs(d))
			bruteSE = math.Max(bruteSE, se[i])
			bruteSquares += se[i] * se[i]
			n++
		}
	}
	rmse := math.Sqrt(sum / float64(n))
	t.Logf("DGP: RMSE %.4f, largest difference %.4f over %d pictures; largest standard error of brute force %.4f", rmse, worst, n, bruteSE)
	if rmse > 0.01 || worst > 0.03 {
		t.Errorf("RMSE %.4f, largest %.4f; want at most 0.01 and 0.03", rmse, worst)
	}
	// Brute force may be off by a fifth of each bound: in the mean square, and
	// at most.
	if rms := math.Sqrt(bruteSquares / float64(n)); rms > 0.002 || bruteSE > 0.006 {
		t.Errorf("brute force is not converged: standard error %.4f RMS, %.4f at most; want 0.002 and 0.006", rms, bruteSE)
	}
}

// spreadMoments takes n occupied moments evenly from the year.
func spreadMoments(all []*scene.Moment, n int) []*scene.Moment {
	var used []*scene.Moment
	for _, m := range all {
		if m.Occupied {
			used = append(used, m)
		}
	}
	var out []*scene.Moment
	for i := range n {
		out = append(out, used[(2*i+1)*len(used)/(2*n)])
	}
	return out
}

// bruteBatches is the number of independent repetitions of a plain picture, and
// brutePixels its width where it is to be the truth: twice the default.
const (
	bruteBatches = 8
	brutePixels  = 192
)

// bruteImages are the means of some samples for every moment, batch and pixel.
// Moments share paths.
func bruteImages(t testing.TB, w *trace.World, v scene.Viewpoint, moments []*scene.Moment, pixels, samples int, seed uint64, workers int) [][bruteBatches][]float32 {
	t.Helper()
	view, inside := fisheye(t, v, pixels)
	images := make([][bruteBatches][]float32, len(moments))
	for i := range images {
		for b := range images[i] {
			images[i][b] = make([]float32, pixels*pixels)
		}
	}
	var wg sync.WaitGroup
	jobs := make(chan int)
	for range workers {
		wg.Add(1)
		go func() {
			defer wg.Done()
			tr := trace.NewTracer(w, moments)
			tr.Portals = true
			out := make([]float64, len(moments))
			for px := range jobs {
				for b := range bruteBatches {
					clear(out)
					s := sampling.Stream4(seed, 1, uint64(px), uint64(b))
					for range samples {
						dir, ok := view.Ray(float64(px%pixels)+s.Float64(), float64(px/pixels)+s.Float64())
						for !ok {
							dir, ok = view.Ray(float64(px%pixels)+s.Float64(), float64(px/pixels)+s.Float64())
						}
						tr.Luminance(v.Position, dir, 1, &s, out)
					}
					for i := range out {
						images[i][b][px] = float32(out[i] / float64(samples))
					}
				}
			}
		}()
	}
	for _, px := range inside {
		jobs <- int(px)
	}
	close(jobs)
	wg.Wait()
	return images
}

// bruteForce renders every moment with spp samples a pixel and returns DGP
// with its jackknife error over 8 batches.
func bruteForce(t *testing.T, in *Input, v scene.Viewpoint, moments []*scene.Moment, spp int) (dgp, se []float64) {
	t.Helper()
	view, _ := fisheye(t, v, brutePixels)
	images := bruteImages(t, in.World, v, moments, brutePixels, spp/bruteBatches, 77, runtime.NumCPU())
	field := glare.NewField(view)
	var scratch glare.Scratch
	for i, m := range moments {
		disc := bruteDisc(in, v, m)
		var discs []glare.Disc
		if disc.OmegaSr > 0 {
			discs = append(discs, glare.Disc{Dir: view.Local(disc.Dir), OmegaSr: disc.OmegaSr, Luminance: disc.Luminance})
		}
		pooled := make([]float32, len(images[i][0]))
		for b := range bruteBatches {
			for px, l := range images[i][b] {
				pooled[px] += l / bruteBatches
			}
		}
		d, _ := glare.DGPOnly(field, pooled, discs, glare.Options{}, &scratch)
		var s1, s2 float64
		rest := make([]float32, len(pooled))
		for b := range bruteBatches {
			for px := range rest {
				rest[px] = max(0, (pooled[px]*bruteBatches-images[i][b][px])/(bruteBatches-1))
			}
			x, _ := glare.DGPOnly(field, rest, discs, glare.Options{}, &scratch)
			s1 += x
			s2 += x * x
		}
		mean := s1 / bruteBatches
		dgp = append(dgp, d)
		se = append(se, math.Sqrt(math.Max(0, s2/bruteBatches-mean*mean)*(bruteBatches-1)))
	}
	return dgp, se
}

// bruteDisc looks at the sun with many rays.
func bruteDisc(in *Input, v scene.Viewpoint, m *scene.Moment) annual.Disc {
	const n = 4096
	if m.SunNormalLx <= 0 || r3.Dot(m.Sun, v.Direction) <= 0 {
		return annual.Disc{}
	}
	s := sampling.Stream3(78, 2, uint64(m.Step))
	var open, tau float64
	for range n {
		dir := trace.ConeDirection(m.Sun, photometry.SunDiameterRad/2, s.Float64(), s.Float64())
		if dir.Z <= 0 || in.Scene.HasHorizon && in.Scene.Horizon.Hides(dir) || in.World.Blocked(v.Position, dir, math.Inf(1)) {
			continue
		}
		open++
		tau += in.World.Straight(v.Position, dir, math.Inf(1))
	}
	if open == 0 {
		return annual.Disc{}
	}
	return annual.Disc{Dir: m.Sun, OmegaSr: photometry.DiscSolidAngle(photometry.SunDiameterRad) * open / n,
		Luminance: photometry.DiscLuminance(m.SunNormalLx, photometry.SunDiameterRad) * tau / open}
}
