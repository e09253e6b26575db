package annual_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
	"gonum.org/v1/gonum/stat/distuv"

	"squint/scene"
	"squint/trace/surface"
)

// TestMirroredErrorsCover: in the mirrored-sun room, at points where mirrored
// sun is more than half of the light, the 95 % interval from the 8 batches of a
// run (Student, 7 degrees of freedom) contains the truth in 89 to 99 of 100
// runs: the binomial's 0.5 and 99 % quantiles. The truth is the mean of many
// more runs of the same texels and patches, so that their bias does not enter.
// Standard errors 0.4 times as large must be rejected.
func TestMirroredErrorsCover(t *testing.T) {
	const runs = 100
	others := 150
	if testing.Short() {
		others = 40
	}
	if lo, hi := binomialQuantile(runs, .95, .005), binomialQuantile(runs, .95, .99); lo < 88 || lo > 90 || hi < 98 || hi > 100 {
		t.Errorf("quantiles of the binomial: %d and %d, want about 89 and 99", lo, hi)
	}
	s := mirroredRoom(t)
	for i := range s.Parts {
		s.Parts[i].TexelM = .4
	}
	points := []int{1, 3, 5, 8, 16} // 1 m, 2 m, 3 m, 4.5 m and the eye
	var sensors []scene.Sensor
	for _, k := range points {
		sensors = append(sensors, s.WorkPlanes[0].Sensors[k])
	}
	s.WorkPlanes[0].Sensors = append(sensors, scene.Sensor{Position: r3.Vec{X: 1.8, Y: .9, Z: 2.75}, Normal: r3.Vec{Z: -1}}) // in the beam
	moment := []*scene.Moment{mirroredMoment(t)}
	n := len(s.WorkPlanes[0].Sensors)
	mean, se := make([][]float64, n), make([][]float64, n)
	truth := make([]tally, n)
	for seed := range runs + others {
		d := runSensors(t, s, moment, surface.Config{Batches: 8, Samples: 64, Seed: uint64(seed), Workers: 2, Photons: 2000}, 512)
		for i := range n {
			truth[i].add(float64(d.E[i][0]))
			if seed < runs {
				mean[i] = append(mean[i], float64(d.E[i][0]))
				se[i] = append(se[i], float64(d.StdErr[i][0]))
			}
		}
	}
	quantile := distuv.StudentsT{Sigma: 1, Nu: 7}.Quantile(.975)
	covered := func(i int, shrink float64) int {
		k := 0
		for r := range runs {
			if math.Abs(mean[i][r]-truth[i].mean()) <= quantile*shrink*math.Hypot(se[i][r], truth[i].stdErr()) {
				k++
			}
		}
		return k
	}
	rejected := 0
	for i := range n {
		sn := s.WorkPlanes[0].Sensors[i]
		var claimed float64
		for _, x := range se[i] {
			claimed += x * x
		}
		spread := truth[i].stdErr() * math.Sqrt(float64(runs+others))
		k, twin := covered(i, 1), covered(i, .4)
		t.Logf("y %.1f m, z %.2f m: mean %9.4f, spread of runs %.4f, claimed %.4f: %d of %d intervals cover, %d with errors 0.4 times as large",
			sn.Position.Y, sn.Position.Z, truth[i].mean(), spread, math.Sqrt(claimed/runs), k, runs, twin)
		if k < 89 || k > 99 {
			t.Errorf("y %.1f m, z %.2f m: %d of %d intervals cover, want 89 to 99", sn.Position.Y, sn.Position.Z, k, runs)
		}
		if twin < 89 {
			rejected++
		}
	}
	if rejected == 0 {
		t.Error("twin: errors 0.4 times as large were not rejected")
	}
}
