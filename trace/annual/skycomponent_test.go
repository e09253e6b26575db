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

// TestVerticalWindow is the sky component of an unglazed window that stands on
// the working plane, to one side of its foot, under two skies.
func TestVerticalWindow(t *testing.T) {
	oracle := parity{group: "8.2 vertical window, path tracer"}
	engine := parity{group: "8.2 vertical window, annual engine"}
	moments := []*scene.Moment{skyMoment(1, uniform(t)), skyMoment(2, overcast(t))}
	fine := sky.NewPatches(sensorPatchFactor)
	for i, row := range table(t, "08b_sky_component_vertical_window_standing_on_plane.csv") {
		x := numbers(t, row)
		m := newModel(t, 1)
		black := m.matte(0)
		lo, hi := r3.Vec{X: -1, Y: -x[2], Z: -1}, r3.Vec{X: x[0] + 1, Y: 1, Z: x[1] + 1}
		a := aperture{false, hole{0, 0, x[0], x[1]}}
		m.box(lo, hi, black, black, black, a)
		w := m.world()
		sensors := []scene.Sensor{up(0, 0, 0)}
		p := plain(w, sensors, moments, 60000, uint64(10+i))
		y := year(t, w, sensors, moments, effort{batches: 64, texelSamples: 64, sensorSamples: 16384, seed: uint64(10 + i)})
		o, u, v, out := a.rect(lo, hi)
		weights := patchWeights(fine, r3.Vec{}, r3.Vec{Z: 1}, o, u, v, out, nil)
		for k, column := range []int{3, 5} {
			scale := 100 / moments[k].GlobalLx
			want := x[column]
			name := fmt.Sprintf("w %g h %g d %g, %s", x[0], x[1], x[2], [2]string{"uniform", "overcast"}[k])
			bias := math.Abs(patched(fine, weights, moments[k].Sky)*scale - want)
			oracle.add(outcome{name, want, p[0][k].mean * scale, p[0][k].stdErr * scale, 1e-6, p[0][k].dof})
			engine.add(outcome{name, want, y[0][k].mean * scale, y[0][k].stdErr * scale, bias + 1e-6, y[0][k].dof})
		}
	}
	oracle.judge(t, 0.1)
	engine.judge(t, 0.03)
}

// roomColumns are the openings of the 4 x 4 x 3 m room of 08c.
var roomColumns = []struct {
	name   string
	column int
	a      aperture
	glazed bool
}{
	{"roof 1x1", 3, aperture{true, hole{1.5, 1.5, 2.5, 2.5}}, false},
	{"roof 4x4", 4, aperture{true, hole{0, 0, 4, 4}}, false},
	{"roof 1x1 glazed", 5, aperture{true, hole{1.5, 1.5, 2.5, 2.5}}, true},
	{"facade 2x1", 6, aperture{false, hole{1, 1, 3, 2}}, false},
	{"facade 4x3", 7, aperture{false, hole{0, 0, 4, 3}}, false},
	{"facade 2x1 glazed", 8, aperture{false, hole{1, 1, 3, 2}}, true},
}

// TestRoomSkyComponents is the 4 x 4 x 3 m room under the 15 CIE general
// skies and the overcast sky of Moon & Spencer.
func TestRoomSkyComponents(t *testing.T) {
	rows := table(t, "08c_room_sky_components_by_sky_type.csv")
	// The file's rows run over y within a sky: one moment a sky.
	const depths = 7
	var moments []*scene.Moment
	var sensors []scene.Sensor
	for i := 0; i < len(rows); i += depths {
		x := numbers(t, rows[i])
		moments = append(moments, skyMoment(i, standardSky(t, int(x[0]), deg(x[1]))))
	}
	for i := range depths {
		sensors = append(sensors, up(2, number(t, rows[i][2]), 0))
	}
	fine := sky.NewPatches(sensorPatchFactor)
	tracerSamples, sensorSamples := 20000, 16384
	if testing.Short() {
		tracerSamples, sensorSamples = 4000, 4096
	}
	oracle := parity{group: "8.3 room sky components, path tracer"}
	engine := parity{group: "8.3 room sky components, annual engine"}
	lo, hi := r3.Vec{}, r3.Vec{X: 4, Y: 4, Z: 3}
	thin := newPane(1.52, 0.88)
	for c, col := range roomColumns {
		m := newModel(t, 1)
		black := m.matte(0)
		m.box(lo, hi, black, black, black, col.a)
		var glass *materials.Glazing
		if col.glazed {
			g, err := materials.NewGlazing(0.88, 1)
			if err != nil {
				t.Fatal(err)
			}
			glass = g
			m.pane(lo, hi, col.a, g)
		}
		w := m.world()
		p := plain(w, sensors, moments, tracerSamples, uint64(20+c))
		y := year(t, w, sensors, moments, effort{batches: 64, texelSamples: 64, sensorSamples: sensorSamples, seed: uint64(20 + c)})
		o, u, v, out := col.a.rect(lo, hi)
		for i, sn := range sensors {
			var ours, theirs func(float64) float64
			if glass != nil {
				ours, theirs = glass.Transmittance, thin.transmittance
			}
			weights := patchWeights(fine, sn.Position, sn.Normal, o, u, v, out, ours)
			var index float64 // largest relative effect of glass of index 1.526 for 1.52
			if glass != nil {
				index = indexEffect(fine, sn, o, u, v, out, ours, theirs)
			}
			for k, mo := range moments {
				row := rows[k*depths+i]
				if got := number(t, row[2]); got != sn.Position.Y {
					t.Fatalf("row %v: not the depth %g", row, sn.Position.Y)
				}
				want, scale := number(t, row[col.column]), 100/mo.GlobalLx
				name := fmt.Sprintf("%s, sky %s az %s, y %s", col.name, row[0], row[1], row[2])
				// The file's quadrature is trusted to its last digit but one.
				digits := 1e-5
				bias := math.Abs(patched(fine, weights, mo.Sky)*scale - want)
				oracle.add(outcome{name, want, p[i][k].mean * scale, p[i][k].stdErr * scale, digits + want*index, p[i][k].dof})
				engine.add(outcome{name, want, y[i][k].mean * scale, y[i][k].stdErr * scale, digits + bias, y[i][k].dof})
			}
		}
	}
	oracle.judge(t, 0.1)
	engine.judge(t, 0.03)
	var largest outcome
	for _, o := range engine.rows {
		if o.allow/o.want > largest.allow/math.Max(largest.want, 1e-9) {
			largest = o
		}
	}
	t.Logf("largest bias of %d patches: %.2f %% at %s", fine.Count(), 100*largest.allow/largest.want, largest.name)
}

// standardSky is sky type 1 to 15 of CIE S 011/E:2003, or 16, with 1 lx on a
// level plane and the sun at 60 degrees of altitude.
func standardSky(t testing.TB, kind int, fromFacadeRad float64) *sky.Sky {
	if kind == 16 {
		return overcast(t)
	}
	s, err := sky.NewCIE(kind, direction(deg(60), fromFacadeRad), sky.ByHorizontalIlluminance(1))
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// singlePane is one pane by Fresnel's and Bouguer's laws, both polarisations.
// Source: Duffie & Beckman 2013, Solar engineering of thermal processes,
// equations 5.1.1 to 5.3.1 (numbers from memory).
type singlePane struct{ index, depth float64 }

// newPane sets the absorption such that tau passes at normal incidence.
func newPane(index, tau float64) singlePane {
	lo, hi := 0.0, 1.0
	for range 60 {
		mid := (lo + hi) / 2
		if (singlePane{index, mid}).transmittance(1) > tau {
			lo = mid
		} else {
			hi = mid
		}
	}
	return singlePane{index, lo}
}

func (g singlePane) transmittance(cos float64) float64 {
	inner := math.Sqrt(1 - (1-cos*cos)/g.index/g.index)
	rs := (cos - g.index*inner) / (cos + g.index*inner)
	rp := (g.index*cos - inner) / (g.index*cos + inner)
	a := math.Exp(-g.depth / inner)
	var sum float64
	for _, r := range []float64{rs * rs, rp * rp} {
		sum += a * (1 - r) * (1 - r) / (1 - a*a*r*r)
	}
	return sum / 2
}

// TestSinglePane holds the pane above against the reference's own values.
func TestSinglePane(t *testing.T) {
	g := newPane(1.52, 0.88)
	// want: derived, reference values of the file 08c (single pane, n 1.52)
	for angle, want := range map[float64]float64{30: 0.875508, 45: 0.859903, 60: 0.799868, 70: 0.683852, 80: 0.423546} {
		if got := g.transmittance(math.Cos(deg(angle))); math.Abs(got-want) > 1e-6 {
			t.Errorf("%g degrees: got %.6f, want %.6f to its last digit", angle, got, want)
		}
	}
}

// indexEffect is the largest relative change of a sensor's weight for any patch
// when the glass's index is ours instead of the reference's.
func indexEffect(p *sky.Patches, sn scene.Sensor, o, u, v, out r3.Vec, ours, theirs func(float64) float64) float64 {
	a := patchWeights(p, sn.Position, sn.Normal, o, u, v, out, ours)
	b := patchWeights(p, sn.Position, sn.Normal, o, u, v, out, theirs)
	var worst float64
	for k := range a {
		if b[k] > 0 {
			worst = math.Max(worst, math.Abs(a[k]/b[k]-1))
		}
	}
	return worst
}

// TestVerticalSkyComponent is a facade point behind an endless obstruction.
func TestVerticalSkyComponent(t *testing.T) {
	oracle := parity{group: "8.5 vertical sky component, path tracer"}
	engine := parity{group: "8.5 vertical sky component, annual engine"}
	moments := []*scene.Moment{skyMoment(1, uniform(t)), skyMoment(2, overcast(t))}
	fine := sky.NewPatches(sensorPatchFactor)
	const distance, reach = 10.0, 1000.0
	// Past the obstruction's ends, within d/W of the facade's plane, the
	// sensor sees the whole sky: less than the integral of the cosine over
	// these azimuths, (d/W)^2/2 each side, times pi/4 over altitude, L <= 2 E/pi.
	const truncation = 100 * distance / reach * distance / reach / 2
	for i, row := range table(t, "08e_vertical_sky_component_obstruction.csv") {
		x := numbers(t, row)
		m := newModel(t, 1)
		height := distance * math.Tan(deg(x[0]))
		if height > 0 {
			m.quad(m.part("obstruction", scene.Surroundings), m.matte(0),
				r3.Vec{X: -reach, Y: -distance, Z: 0}, r3.Vec{X: reach, Y: -distance, Z: 0},
				r3.Vec{X: reach, Y: -distance, Z: height}, r3.Vec{X: -reach, Y: -distance, Z: height})
		} else {
			m.quad(m.part("underground", scene.Surroundings), m.matte(0),
				r3.Vec{Z: -10}, r3.Vec{X: 1, Z: -10}, r3.Vec{X: 1, Y: 1, Z: -10}, r3.Vec{Y: 1, Z: -10})
		}
		w := m.world()
		sn := scene.Sensor{Normal: r3.Vec{Y: -1}}
		p := plain(w, []scene.Sensor{sn}, moments, 40000, uint64(40+i))
		y := year(t, w, []scene.Sensor{sn}, moments, effort{batches: 64, texelSamples: 64, sensorSamples: 16384, seed: uint64(40 + i)})
		weights := openWeights(fine, sn.Normal, func(az float64) float64 {
			c := -math.Cos(az)
			if c <= 0 {
				return 0
			}
			return math.Atan(height / distance * c)
		})
		for k, column := range []int{1, 3} {
			want, scale := x[column], 100/moments[k].GlobalLx
			name := fmt.Sprintf("%g degrees, %s", x[0], [2]string{"uniform", "overcast"}[k])
			bias := math.Abs(patched(fine, weights, moments[k].Sky)*scale - want)
			oracle.add(outcome{name, want, p[0][k].mean * scale, p[0][k].stdErr * scale, truncation, p[0][k].dof})
			engine.add(outcome{name, want, y[0][k].mean * scale, y[0][k].stdErr * scale, truncation + bias, y[0][k].dof})
		}
	}
	oracle.judge(t, 0.1)
	engine.judge(t, 0.05)
}
