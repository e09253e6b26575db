package annual_test

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/sky"
)

// What the annual engine adds to chance in a room that reflects:
//
//   - Texels: a texel's light is taken as even over it. The engine is run at
//     two sizes, h and 2h, with the same seed; for an error that falls at least
//     like h, the difference is at least the error at h. It is the bound used
//     here, limited to texelCap of the value so that noise in the difference
//     cannot hide a defect.
//   - Sweeps end when the summed change is 2e-4 of the sum: what is left is
//     at most 2e-4 rho/(1-rho) of it, for the largest reflectance rho that a
//     sweep meets.
//   - A chain of links that returns to a texel uses the same random row twice:
//     its mean is too large by rho^3/(1-rho) times the largest link's view factor
//     over the number of rays of a batch, below 1e-4 in all rooms here.
const texelCap = 0.005

func texelBound(h, h2 float64) float64 { return math.Min(math.Abs(h2-h), texelCap*h) }

func sweepBound(rho float64) float64 { return 2e-4 * rho / (1 - rho) }

// TestDaylightFactor is the 4 x 4 x 3 m room with inter-reflection, without
// and with ground outside.
func TestDaylightFactor(t *testing.T) {
	moments := []*scene.Moment{skyMoment(1, overcast(t)), skyMoment(2, overcast(t))}
	moments[1].Month = 1
	lo, hi := r3.Vec{}, r3.Vec{X: 4, Y: 4, Z: 3}
	a := aperture{false, hole{1, 1, 3, 2}}
	m := newModel(t, 0.25)
	m.box(lo, hi, m.matte(0.2), m.matte(0.8), m.matte(0.5), a)
	m.s.GroundReflectance[1] = 0.2
	w := m.world()
	rows := table(t, "08f_daylight_factor_with_inter_reflection.csv")
	index := map[[2]float64]int{}
	var sensors []scene.Sensor
	for _, row := range rows {
		x := numbers(t, row)
		at := [2]float64{x[1], x[2]}
		if _, ok := index[at]; !ok {
			index[at] = len(sensors)
			sensors = append(sensors, up(2, x[1], x[2]))
		}
	}
	f := effort{batches: 32, texelSamples: 1024, sensorSamples: 32768, texels: fineTexels, seed: 60}
	samples := 60000
	if testing.Short() {
		f.texelSamples, f.sensorSamples, samples = 256, 8192, 8000
	}
	p := plain(w, sensors, moments, samples, 60)
	y := year(t, w, sensors, moments, f)
	f.coarsen = 2
	coarse := year(t, w, sensors, moments, f)
	fine := sky.NewPatches(sensorPatchFactor)
	o, u, v, out := a.rect(lo, hi)
	oracle := parity{group: "8.6 daylight factor, path tracer"}
	engine := parity{group: "8.6 daylight factor, annual engine"}
	for _, row := range rows {
		x := numbers(t, row)
		i, k := index[[2]float64{x[1], x[2]}], 0
		if x[0] > 0 {
			k = 1
		}
		want := x[3] + x[4]
		weights := patchWeights(fine, sensors[i].Position, sensors[i].Normal, o, u, v, out, nil)
		patch := math.Abs(100*patched(fine, weights, moments[k].Sky) - x[3])
		const reference = 0.001 // of the inter-reflected part, per cent of E
		name := fmt.Sprintf("ground %g, y %g, z %g", x[0], x[1], x[2])
		oracle.add(outcome{name, want, 100 * p[i][k].mean, 100 * p[i][k].stdErr, reference, p[i][k].dof})
		// Texels' patches: fineTexels; coarser ones have a test of their own.
		allow := reference + patch + 0.003*x[4] + sweepBound(0.5)*x[4] + 100*texelBound(y[i][k].mean, coarse[i][k].mean)
		engine.add(outcome{name, want, 100 * y[i][k].mean, 100 * y[i][k].stdErr, allow, y[i][k].dof})
	}
	oracle.judge(t, 0.1)
	engine.judge(t, 0.03)
}

// TestUnitCube is a cube whose ceiling emits an exitance of 1 and reflects
// nothing: an opening to a sky of luminance 1/pi.
func TestUnitCube(t *testing.T) {
	oracle := parity{group: "8.7 unit cube, path tracer"}
	engine := parity{group: "8.7 unit cube, annual engine"}
	moments := []*scene.Moment{skyMoment(1, uniform(t))}
	a := aperture{true, hole{0, 0, 1, 1}}
	edge := 0.05
	if testing.Short() {
		edge = 0.1
	}
	points := []scene.Sensor{up(.5, .5, 0), up(.25, .25, 0), up(.1, .5, 0),
		{Position: r3.Vec{Y: .5, Z: .5}, Normal: r3.Vec{X: 1}}}
	names := []string{"floor centre", "floor .25 .25", "floor .1 .5", "wall centre"}
	for i, row := range table(t, "08g_unit_cube_emitting_ceiling.csv") {
		if testing.Short() && i != 1 {
			continue
		}
		x := numbers(t, row)
		rho := x[0]
		m := newModel(t, edge)
		f := m.matte(rho)
		m.box(r3.Vec{}, r3.Vec{X: 1, Y: 1, Z: 1}, f, f, f, a)
		w := m.world()
		mean := scattered(600, uint64(70+i), r3.Vec{}, r3.Vec{X: 1}, r3.Vec{Y: 1}, r3.Vec{Z: 1})
		set := effort{batches: 32, texelSamples: 512, sensorSamples: 16384, seed: uint64(70 + i)}
		p := plain(w, points, moments, 40000, uint64(70+i))
		pm := overSensors(plain(w, scattered(40000, uint64(90+i), r3.Vec{}, r3.Vec{X: 1}, r3.Vec{Y: 1}, r3.Vec{Z: 1}), moments, 1, uint64(80+i)), 0)
		y := year(t, w, points, moments, set)
		set.coarsen = 2
		coarse := year(t, w, points, moments, set)
		set.coarsen, set.sensorSamples = 1, 64
		ym := overSensors(year(t, w, mean, moments, set), 0)
		const reference = 0.0003
		allow := func(v float64) float64 { return reference + v*sweepBound(rho) }
		for k, name := range append(names, "floor mean") {
			want := x[11+k]
			name = fmt.Sprintf("rho %g, %s", rho, name)
			a, b := pm, ym
			texel := 0.0
			if k < len(points) {
				a, b = p[k][0], y[k][0]
				texel = texelBound(b.mean, coarse[k][0].mean) / math.Pi
			}
			oracle.add(outcome{name, want, a.mean / math.Pi, a.stdErr / math.Pi, reference, a.dof})
			engine.add(outcome{name, want, b.mean / math.Pi, b.stdErr / math.Pi, allow(want) + texel, b.dof})
		}
	}
	oracle.judge(t, 0.03)
	engine.judge(t, 0.03)
}

// furnace is a moment whose sky and unshaded ground have luminance 1.
func furnace(t *testing.T) *scene.Moment {
	m := skyMoment(1, uniform(t))
	m.Month = 11
	return m
}

// TestFurnace: walls that let tau through and reflect rho, under luminance 1
// from all sides, have the luminance tau/(1-rho) inside a convex shell, and 1
// inside and outside any shape where rho + tau = 1. Exact: L = tau + rho L.
func TestFurnace(t *testing.T) {
	oracle := parity{group: "8.7 furnace, path tracer"}
	engine := parity{group: "8.7 furnace, annual engine"}
	for i, x := range []struct {
		name     string
		rho, tau float64
		shape    string
	}{
		{"box", 0.5, 0.3, "box"}, {"box", 0.8, 0.1, "box"}, {"box", 0.8, 0.2, "box"},
		{"sphere", 0.5, 0.3, "sphere"}, {"two boxes joined", 0.7, 0.3, "joined"},
	} {
		if testing.Short() && i != 1 && i != 4 {
			continue
		}
		m := newModel(t, 0.3)
		b, err := materials.NewDiffuser(x.tau, x.rho)
		if err != nil {
			t.Fatal(err)
		}
		f := m.finish(b)
		m.s.GroundReflectance[11] = 1
		var sensors []scene.Sensor
		switch x.shape {
		case "box":
			// Its aperture has no area: the box is closed.
			m.box(r3.Vec{}, r3.Vec{X: 2, Y: 3, Z: 1.5}, f, f, f, aperture{true, hole{1, 1, 1.5, 1.5}})
			m.face(m.part("lid", scene.Room), f, r3.Vec{X: 1, Y: 1, Z: 1.5}, r3.Vec{Y: 0.5}, r3.Vec{X: 0.5}, nil)
			sensors = []scene.Sensor{up(.5, 1, .2), {Position: r3.Vec{X: 1, Y: 2, Z: 1.4}, Normal: r3.Vec{X: .6, Z: -.8}}}
		case "sphere":
			m.sphere(f, 1.5, 24, 0)
			sensors = []scene.Sensor{up(.5, .1, .2), {Position: r3.Vec{X: 1}, Normal: r3.Vec{X: .6, Z: -.8}}}
		case "joined":
			m.box(r3.Vec{}, r3.Vec{X: 2, Y: 3, Z: 1.5}, f, f, f, aperture{false, hole{.5, 0.2, 1, 1}})
			m.box(r3.Vec{Y: -2}, r3.Vec{X: 2, Y: 0, Z: 3}, f, f, f, aperture{true, hole{0, -2, 2, 0}})
			m.s.Openings = m.s.Openings[:1]
			sensors = []scene.Sensor{up(.5, 1, .2), {Position: r3.Vec{X: 1, Y: -1, Z: 2}, Normal: r3.Vec{X: .6, Z: -.8}}}
		}
		w := m.world()
		moments := []*scene.Moment{furnace(t)}
		set := effort{batches: 32, texelSamples: 512, sensorSamples: 8192, seed: uint64(100 + i)}
		want := x.tau / (1 - x.rho)
		p := plain(w, sensors, moments, 20000, uint64(100+i))
		y := year(t, w, sensors, moments, set)
		for k := range sensors {
			name := fmt.Sprintf("%s, rho %g, tau %g, point %d", x.name, x.rho, x.tau, k+1)
			a, b := p[k][0], y[k][0]
			// Float32 sums over some thousand rays: 1e-5.
			oracle.add(outcome{name, want, a.mean / math.Pi, a.stdErr / math.Pi, 1e-5, a.dof})
			engine.add(outcome{name, want, b.mean / math.Pi, b.stdErr / math.Pi, want*sweepBound(x.rho) + 1e-5, b.dof})
		}
	}
	oracle.judge(t, 0.05)
	engine.judge(t, 0.02)
}

// sphere is a ball of n x 2n facets about the origin, open at the top from
// the polar angle capRad; fronts look inwards.
func (m *model) sphere(finish int32, r float64, n int, capRad float64) {
	part := m.part("sphere", scene.Room)
	at := func(i, j int) r3.Vec {
		st, ct := math.Sincos(capRad + (math.Pi-capRad)*float64(i)/float64(n))
		sp, cp := math.Sincos(math.Pi * float64(j%(2*n)) / float64(n))
		if i == n {
			st, ct = 0, -1
		}
		if i == 0 && capRad == 0 {
			st = 0
		}
		return r3.Vec{X: r * st * cp, Y: r * st * sp, Z: r * ct}
	}
	for i := range n {
		for j := range 2 * n {
			a, b, c, d := at(i, j), at(i, j+1), at(i+1, j+1), at(i+1, j)
			if i > 0 || capRad > 0 {
				m.tri(part, finish, a, b, d)
			}
			if i < n-1 {
				m.tri(part, finish, b, c, d)
			}
		}
	}
}

// TestSphereWithPort: a port of the share f of the sphere lets in the
// luminance 1. Every point sees the cap under the view factor f, so that
// E = pi f / (1 - rho (1-f)); and a sun through the port brings the flux Phi,
// of which everywhere Phi rho / (A (1 - rho (1-f))) arrives after reflection.
func TestSphereWithPort(t *testing.T) {
	oracle := parity{group: "8.7 sphere with port, path tracer"}
	engine := parity{group: "8.7 sphere with port, annual engine"}
	const r, n, share = 2.0, 32, 0.05
	capRad := math.Acos(1 - 2*share)
	sphere := 4 * math.Pi * r * r
	for i, rho := range []float64{0.5, 0.8, 0.9} {
		if testing.Short() && i != 1 {
			continue
		}
		m := newModel(t, 0.3)
		m.sphere(m.matte(rho), r, n, capRad)
		edge := r * math.Sin(capRad)
		z := r * math.Cos(capRad)
		m.opening(r3.Vec{Z: 1}, r3.Vec{X: -edge, Y: -edge, Z: z}, r3.Vec{X: edge, Y: -edge, Z: z}, r3.Vec{X: edge, Y: edge, Z: z}, r3.Vec{X: -edge, Y: edge, Z: z})
		w := m.world()
		const normal = 1000.0
		moments := []*scene.Moment{skyMoment(1, uniform(t)), sunMoment(t, 2, deg(90), 0, normal)}
		// Points on the sphere that the sun does not reach.
		var sensors []scene.Sensor
		for _, p := range [][2]float64{{deg(80), 0.4}, {deg(115), 2}} {
			d := r3.Vec{X: math.Sin(p[0]) * math.Cos(p[1]), Y: math.Sin(p[0]) * math.Sin(p[1]), Z: math.Cos(p[0])}
			sensors = append(sensors, scene.Sensor{Position: r3.Scale(0.99*r, d), Normal: r3.Scale(-1, d)})
		}
		set := effort{batches: 32, texelSamples: 512, sensorSamples: 4096, seed: uint64(120 + i)}
		p := plain(w, sensors, moments, 20000, uint64(120+i))
		y := year(t, w, sensors, moments, set)
		multiplier := 1 / (1 - rho*(1-share))
		// Facets: n to half a circle depart from the sphere by (pi/2n)^2/2 of the
		// radius and (pi/2n)^2 of areas, at every bounce; the sensors stand 1 %
		// of the radius inside, where the cap's view factor differs by as much.
		facet := math.Pi * math.Pi / 4 / n / n * multiplier
		flux := normal * math.Pi * edge * edge
		for h, c := range []struct {
			name  string
			want  float64
			inset float64
		}{
			{"sky", math.Pi * share * multiplier, 0.01},
			{"sun", flux * rho / sphere * multiplier, 0.002},
		} {
			for k := range sensors {
				name := fmt.Sprintf("rho %g, %s, point %d", rho, c.name, k+1)
				a, b := p[k][h], y[k][h]
				oracle.add(outcome{name, c.want, a.mean, a.stdErr, c.want * (facet + c.inset), a.dof})
				engine.add(outcome{name, c.want, b.mean, b.stdErr, c.want * (facet + c.inset + sweepBound(rho)), b.dof})
			}
		}
	}
	oracle.judge(t, 0.1)
	engine.judge(t, 0.05)
}

// TestParallelPlanes: between endless planes the exitance of one arrives at
// the other 1/(1 - rho1 rho2) times. The lower one lets light through from the
// ground beneath.
func TestParallelPlanes(t *testing.T) {
	oracle := parity{group: "8.7 parallel planes, path tracer"}
	engine := parity{group: "8.7 parallel planes, annual engine"}
	const half, tau = 50.0, 0.2
	for i, x := range [][3]float64{{0.2, 0.8, 1.190476}, {0.5, 0.5, 1.333333}} { // want: reference 8.7, Siegel & Howell
		if testing.Short() && i == 0 {
			continue
		}
		m := newModel(t, 2)
		d, err := materials.NewDiffuser(tau, x[0])
		if err != nil {
			t.Fatal(err)
		}
		lower, upper := m.finish(d), m.matte(x[1])
		org, u, v := r3.Vec{X: -half, Y: -half}, r3.Vec{X: 2 * half}, r3.Vec{Y: 2 * half}
		m.face(m.part("lower", scene.Room), lower, org, u, v, nil)
		m.face(m.part("upper", scene.Room), upper, r3.Add(org, r3.Vec{Z: 1}), v, u, nil)
		m.s.GroundReflectance[0] = 1
		mo := sunMoment(t, 1, deg(90), 0, 0)
		mo.GlobalLx = math.Pi // ground of luminance 1, black sky
		w := m.world()
		sensors := []scene.Sensor{{Position: r3.Vec{X: .3, Y: .4, Z: 0.99}, Normal: r3.Vec{Z: -1}}}
		p := plain(w, sensors, []*scene.Moment{mo}, 100000, uint64(140+i))
		y := year(t, w, sensors, []*scene.Moment{mo}, effort{batches: 32, texelSamples: 128, sensorSamples: 8192, seed: uint64(140 + i)})
		name := fmt.Sprintf("rho %g and %g", x[0], x[1])
		// Beyond the edge, at least 50 heights away, lies (1/50)^2 of a view, and
		// the ground or black sky instead of the planes; some bounces of it.
		edge := 1 / half / half * x[2] / tau
		want := tau * x[2]
		oracle.add(outcome{name, want, p[0][0].mean / math.Pi, p[0][0].stdErr / math.Pi, edge, p[0][0].dof})
		engine.add(outcome{name, want, y[0][0].mean / math.Pi, y[0][0].stdErr / math.Pi, edge + want*sweepBound(x[0]*x[1]), y[0][0].dof})
	}
	oracle.judge(t, 0.1)
	engine.judge(t, 0.1)
}
