package annual_test

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/trace"
)

// discLoss bounds what the spread of the sun's disc takes from or adds to the
// cosine on a plane: alpha^2/4 of it, alpha 0.2665 degrees, and at low sun
// alpha^2 tan^2/4. Below 1e-4 for the altitudes here.
const discLoss = 1e-4

// TestSunPatch: a patch of 1 m2 and reflectance 0.3 in a black floor receives
// 50,000 lx of sun; a point 3 m above looks down on it.
func TestSunPatch(t *testing.T) {
	oracle := parity{group: "8.8 sun patch, path tracer"}
	engine := parity{group: "8.8 sun patch, annual engine"}
	m := newModel(t, 0.1)
	floor := r3.Vec{X: -0.5, Y: -0.5}
	m.face(m.part("patch", scene.Room), m.matte(0.3), floor, r3.Vec{X: 1}, r3.Vec{Y: 1}, nil)
	w := m.world()
	var moments []*scene.Moment
	for i, alt := range []float64{90, 60, 35} {
		moments = append(moments, sunMoment(t, i, deg(alt), deg(70), 50000/math.Sin(deg(alt))))
	}
	down := r3.Vec{Z: -1}
	sensors := []scene.Sensor{
		{Position: r3.Vec{Z: 3}, Normal: down},
		{Position: r3.Vec{X: .5, Y: .5, Z: 3}, Normal: down},
		{Position: r3.Vec{X: 2, Z: 3}, Normal: down},
	}
	wants := []float64{511.6019, 462.4410, 253.6596} // want: derived, reference 8.8, two routes
	p := plain(w, sensors, moments, 60000, 160)
	y := year(t, w, sensors, moments, effort{batches: 64, texelSamples: 64, sensorSamples: 65536, seed: 160})
	for i, want := range wants {
		for k, alt := range []float64{90, 60, 35} {
			name := fmt.Sprintf("point %d, sun at %g degrees", i+1, alt)
			oracle.add(outcome{name, want, p[i][k].mean, p[i][k].stdErr, want*discLoss + 5e-5, p[i][k].dof})
			engine.add(outcome{name, want, y[i][k].mean, y[i][k].stdErr, want*discLoss + 5e-5, y[i][k].dof})
		}
	}
	oracle.judge(t, 0.1)
	engine.judge(t, 0.05)
}

// TestSunFlux: a window of 2 x 1 m, sill 1 m, and a sun on the facade's
// normal with 80,000 lx on a plane facing it: the patch on the floor lies where
// the law of straight lines puts it, has E_n sin(altitude), and carries the flux
// that enters, E_n cos(altitude) x 2 m2. Sources: reference 8.9, exact.
func TestSunFlux(t *testing.T) {
	const normal = 80000.0
	m := newModel(t, 0.25)
	f := m.matte(0.4)
	lo, hi := r3.Vec{}, r3.Vec{X: 4, Y: 6, Z: 3}
	m.box(lo, hi, f, f, f, aperture{false, hole{1, 1, 3, 2}})
	w := m.world()
	altitudes := []float64{20, 30, 45, 60}
	fluxes := []float64{150350.8, 138564.1, 113137.1, 80000.0} // want: exact, reference 8.9
	floorLx := []float64{27361.6, 40000.0, 56568.5, 69282.0}   // want: exact, reference 8.9
	var moments []*scene.Moment
	for i, a := range altitudes {
		moments = append(moments, sunMoment(t, i, deg(a), 0, normal))
	}
	// Sensors on the part of the floor that any of the suns can reach, and a margin.
	org, u, v := r3.Vec{X: .5, Y: .3}, r3.Vec{X: 3}, r3.Vec{Y: 5.6}
	area := u.X * v.Y
	sensors := scattered(12000, 170, org, u, v, r3.Vec{Z: 1})
	set := effort{batches: 2, texelSamples: 16, sensorSamples: 4, seed: 170}
	d := prepare(t, w, sensors, nil, 0, set).run(t, moments, set, nil)
	flux := parity{group: "8.9 flux of the sun, annual engine's direct part"}
	patch := parity{group: "8.9 floor illuminance inside the patch"}
	for k, a := range altitudes {
		tan := math.Tan(deg(a))
		// Penumbra: the disc's half-angle over the slant path, 2 m / sin(altitude)
		// long at most, stretched by 1/sin(altitude) along the floor.
		blur := deg(0.2665) * 2 / math.Sin(deg(a)) / math.Sin(deg(a))
		var all, inside tally
		for i, sn := range sensors {
			e, x, y := float64(d.Direct[i][k]), sn.Position.X, sn.Position.Y
			all.add(e * area)
			in := math.Min(math.Min(x-1, 3-x), math.Min(y-1/tan, 2/tan-y))
			switch {
			case in > blur:
				inside.add(e)
			case in < -blur && e != 0:
				t.Errorf("sun at %g degrees: got %.1f lx at (%.3f, %.3f), want 0 outside the patch and its penumbra of %.3f m", a, e, x, y, blur)
			}
		}
		name := fmt.Sprintf("sun at %g degrees", a)
		flux.add(outcome{name, fluxes[k], all.mean(), all.stdErr(), fluxes[k] * discLoss, all.n - 1})
		// A disc point's sine differs from the centre's by alpha cos(altitude)/2 in
		// root mean square; all sensors share the moment's 16 points.
		se := normal * math.Cos(deg(a)) * deg(0.2665) / 2 / 4
		patch.add(outcome{name, floorLx[k], inside.mean(), se, floorLx[k]*discLoss + 0.05, inside.n - 1})
	}
	flux.judge(t, 0.1)
	patch.judge(t, 0.005)
	fluxBalance(t, w, moments, fluxes)
}

// fluxBalance: what enters is absorbed by the surfaces (reflectance 0.4) or
// leaves by the window again. Of the flux that lands first, 0.4 goes on; the
// mean illuminance by it over all surfaces times their absorptance and area, and
// over the window from inside, add up to that. The error comes from runs with
// seeds of their own, since the sensors of a run share its surfaces.
func fluxBalance(t *testing.T, w *trace.World, moments []*scene.Moment, fluxes []float64) {
	faces := []struct {
		org, u, v, n r3.Vec
		absorbs      float64
	}{
		{r3.Vec{}, r3.Vec{X: 4}, r3.Vec{Y: 6}, r3.Vec{Z: 1}, .6},
		{r3.Vec{Z: 3}, r3.Vec{X: 4}, r3.Vec{Y: 6}, r3.Vec{Z: -1}, .6},
		{r3.Vec{}, r3.Vec{X: 4}, r3.Vec{Z: 3}, r3.Vec{Y: 1}, .6},
		{r3.Vec{Y: 6}, r3.Vec{X: 4}, r3.Vec{Z: 3}, r3.Vec{Y: -1}, .6},
		{r3.Vec{}, r3.Vec{Y: 6}, r3.Vec{Z: 3}, r3.Vec{X: 1}, .6},
		{r3.Vec{X: 4}, r3.Vec{Y: 6}, r3.Vec{Z: 3}, r3.Vec{X: -1}, .6},
		// The window belongs to the facade above: it absorbs the rest, too.
		{r3.Vec{X: 1, Z: 1}, r3.Vec{X: 2}, r3.Vec{Z: 1}, r3.Vec{Y: 1}, .4},
	}
	const perFace = 60
	sums := make([]tally, len(moments))
	seeds := uint64(16)
	if testing.Short() {
		seeds = 6
	}
	for seed := range seeds {
		var sensors []scene.Sensor
		for i, fc := range faces {
			sensors = append(sensors, scattered(perFace, 1000*seed+172+uint64(i), fc.org, fc.u, fc.v, fc.n)...)
		}
		set := effort{batches: 8, texelSamples: 128, sensorSamples: 128, seed: 171 + seed}
		d := prepare(t, w, sensors, nil, 0, set).run(t, moments, set, nil)
		for k := range moments {
			var sum float64
			for s := range sensors {
				fc := &faces[s/perFace]
				sum += float64(d.E[s][k]-d.Direct[s][k]) * fc.absorbs * r3.Norm(r3.Cross(fc.u, fc.v)) / perFace
			}
			sums[k].add(sum)
		}
	}
	balance := parity{group: "8.9 flux balance with reflection, annual engine"}
	for k, m := range moments {
		want := 0.4 * fluxes[k]
		balance.add(outcome{fmt.Sprintf("sun %.0f degrees high", math.Asin(m.Sun.Z)*180/math.Pi), want, sums[k].mean(), sums[k].stdErr(), want * sweepBound(.4), sums[k].n - 1})
	}
	balance.judge(t, 0.15)
}
