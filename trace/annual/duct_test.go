package annual_test

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
)

// TestMirrorDuct is the light at the foot of an upright mirrored duct under a
// uniform sky: what a Lambertian source at its head sends through. Source: the
// closed form for rectangular mirrored ducts (unfolding of plane mirrors, as in
// testdata of package trace) averaged over directions, derived apart from this
// code to a standard error of 0.0001, of which 3 are allowed. Package trace
// tests the same for single directions.
func TestMirrorDuct(t *testing.T) {
	oracle := parity{group: "10.2 mirrored duct, Lambertian, path tracer"}
	engine := parity{group: "10.2 mirrored duct, Lambertian, annual engine"}
	moments := []*scene.Moment{skyMoment(1, uniform(t))}
	n := 1000
	if testing.Short() {
		n = 200
	}
	for i, x := range []struct{ l, a, b, rho, want float64 }{
		{3, .5, 1, .9, .52442},
		{4, .5, 2, .85, .38769},
		{2, 1, 1, .95, .83889},
	} {
		mirror, err := materials.NewMirror(x.rho, 0)
		if err != nil {
			t.Fatal(err)
		}
		m := newModel(t, 1)
		p, f := m.part("duct", scene.System), m.finish(mirror)
		across, along, up := r3.Vec{X: x.a}, r3.Vec{Y: x.b}, r3.Vec{Z: x.l}
		m.face(p, f, r3.Vec{}, across, up, nil)
		m.face(p, f, along, across, up, nil)
		m.face(p, f, r3.Vec{}, along, up, nil)
		m.face(p, f, across, along, up, nil)
		w := m.world()
		// The foot is one millimetre above the lower rim, so that no light comes
		// in beneath the walls.
		foot := func(seed uint64) []scene.Sensor {
			return scattered(n, seed, r3.Vec{Z: .001}, across, along, r3.Vec{Z: 1})
		}
		name := fmt.Sprintf("%g x %g x %g m, rho %g", x.l, x.a, x.b, x.rho)
		allow := 3e-4 + .001/x.l // the millimetre
		a := overSensors(plain(w, foot(uint64(50+i)), moments, 64, 50), 0)
		oracle.add(outcome{name, x.want, a.mean / math.Pi, a.stdErr / math.Pi, allow, a.dof})
		b := overSensors(year(t, w, foot(uint64(60+i)), moments, effort{batches: 2, texelSamples: 2, sensorSamples: 256, seed: 51}), 0)
		engine.add(outcome{name, x.want, b.mean / math.Pi, b.stdErr / math.Pi, allow, b.dof})
	}
	oracle.judge(t, .05)
	engine.judge(t, .05)
}
