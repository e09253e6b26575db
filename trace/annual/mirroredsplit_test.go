package annual_test

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"testing"

	"squint/trace"
	"squint/trace/surface"
)

// TestMirroredSunAlone holds the light that meets the mirror first, apart from
// all other, against the room's answers (derived, not published: two estimators
// that agree). It is the difference of runs with and without photons, which
// share all else; its standard error is the spread over independent runs.
func TestMirroredSunAlone(t *testing.T) {
	f, err := os.Open(filepath.Join(sharedRooms(t), "values.csv"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	s := mirroredRoom(t)
	w := trace.Accelerate(s, 2)
	m := mirroredMoment(t)
	sensors := s.WorkPlanes[0].Sensors
	runs, photons := 6, 8000
	if os.Getenv("SQUINT_LONG") != "" {
		runs, photons = 12, 32000
	}
	// alone gives each sensor's tally for texels coarsen times as wide.
	alone := func(coarsen float64) []tally {
		out := make([]tally, len(sensors))
		for k := range runs {
			cfg := surface.Config{Batches: 2, Samples: 128, Seed: uint64(700 + k), Workers: 2, Photons: photons, Coarsen: coarsen}
			e := newShelfEngine(t, w, sensors, nil, cfg, 2048, 0)
			with, _ := e.run(t, m)
			e.t.Config.Photons = 0
			without, _ := e.run(t, m)
			for i := range sensors {
				out[i].add(float64(with.E[i][0]) - float64(without.E[i][0]))
			}
		}
		return out
	}
	fine, coarse := alone(1), alone(2)
	p := parity{group: "mirrored-sun room, sun on the mirror (derived)"}
	for i, r := range rows[1:] {
		want, se := number(t, r[9]), number(t, r[10])
		a := &fine[i]
		// The images that sensors see are in both runs; here none is seen.
		p.add(outcome{r[0], want, a.mean(), math.Hypot(a.stdErr(), se), texelBound(a.mean(), coarse[i].mean()) + want*sweepBound(.7), runs - 1})
	}
	p.judge(t, .2)
}
