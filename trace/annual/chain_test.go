package annual_test

import (
	"context"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/sky"
	"squint/trace/annual"
	"squint/trace/surface"
)

// TestChainedSun: the sun comes down on level sensors by two level mirrors, one
// looking up, one down. Closed form: the beam keeps its width, so the
// illuminance is En R1 R2 sin(altitude) inside it and 0 beside it; the law of
// reflection sets the edges, y = 0.5 to 1.5 m on the sensors' plane. Exact but
// for the disc's penumbra of 2 cm; tolerance 4.5 standard errors of the 8
// batches (Student, 3 sensors, 7 degrees of freedom, 0.99 together). The twin
// reckons with one mirror's reflectance and must be rejected.
func TestChainedSun(t *testing.T) {
	const r1, r2, en = 0.9, 0.8, 50000.0
	m := newModel(t, 0.25)
	mirror := func(r float64) int32 {
		b, err := materials.NewMirror(r, 0)
		if err != nil {
			t.Fatal(err)
		}
		return m.finish(b)
	}
	level := func(name string, finish int32, y0, y1, z float64) {
		m.quad(m.part(name, scene.System), finish, r3.Vec{X: -2, Y: y0, Z: z}, r3.Vec{X: 2, Y: y0, Z: z}, r3.Vec{X: 2, Y: y1, Z: z}, r3.Vec{X: -2, Y: y1, Z: z})
	}
	level("up", mirror(r1), -3, -2, 0)
	level("down", mirror(r2), -1.5, 0.5, 2)
	level("floor", m.matte(0.1), -8, 8, -3)
	var sensors []scene.Sensor
	for _, y := range []float64{0.7, 1, 1.3, 1.9} {
		s := up(0.1, y, 0.5)
		s.AreaM2 = 0.04
		sensors = append(sensors, s)
	}
	w := m.world()
	tr := surface.NewTransport(w, sky.NewPatches(1), surface.Config{Batches: 8, Samples: 64, Seed: 3, Workers: 1, Photons: 1600000})
	rec := annual.Receivers{Sensors: sensors, Fine: sky.NewPatches(1), Rows: make([]surface.Rows, 8)}
	if err := tr.Trace(context.Background(), nil); err != nil {
		t.Fatal(err)
	}
	for b := range rec.Rows {
		rec.Rows[b] = surface.NewRows()
		for range sensors {
			rec.Rows[b].Add(tr, &surface.Gathered{})
		}
	}
	moment := sunMoment(t, 1, deg(45), 0, en)
	d, err := annual.Run(context.Background(), tr, rec, []*scene.Moment{moment}, annual.Config{Workers: 1, Seed: 3}, nil, nil)
	if err != nil {
		t.Fatal(err)
	}
	want := en * r1 * r2 * math.Sin(deg(45))
	for i := range sensors {
		got, se := float64(d.E[i][0]), float64(d.StdErr[i][0])
		if i == 3 { // beside the beam
			if got != 0 {
				t.Errorf("y %g: got %g lx beside the beam, want 0", sensors[i].Position.Y, got)
			}
			continue
		}
		t.Logf("y %g: want %.0f lx, got %.0f +- %.0f", sensors[i].Position.Y, want, got, se)
		if math.Abs(got-want) > 4.5*se {
			t.Errorf("y %g: got %.0f lx, want %.0f within 4.5 x %.0f", sensors[i].Position.Y, got, want, se)
		}
		if twin := want / r2; math.Abs(got-twin) <= 4.5*se {
			t.Errorf("y %g: %.0f +- %.0f does not tell one mirror's reflectance missing", sensors[i].Position.Y, got, se)
		}
	}
}
