package trace_test

import (
	"fmt"
	"math"
	"strings"
	"testing"
	"testing/fstest"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/project"
	"squint/scene/system"
	"squint/trace"
)

// ceilingM is the height of a large ceiling over the shelves here, whose
// straight line starts at the origin.
const ceilingM = 0.5

// shelfUnderCeiling is a mirror under a ceiling, the opening's lower edge at z = 0,
// and the parts of both.
func shelfUnderCeiling(t testing.TB, s system.LightShelf) (w *trace.World, shelf, ceiling int32) {
	m := newMirroredModel(t)
	s.Top, s.Underside, s.GapM = "mirror", "black", 0.001
	faces, err := s.Build(north(-1, 0, 2, 1))
	shelf = addSystem(m, faces, err, map[string]materials.BSDF{"mirror": m.mirror(.9), "black": m.matte(0)})
	ceiling = m.level(m.matte(.8), -20, 20, -20, 20, ceilingM)
	return m.world(), shelf, ceiling
}

// lands follows a ray of the sun to a point of the shelf's top and on to the
// ceiling. It starts below the ceiling, which is no obstacle to it.
func lands(w *trace.World, ceiling int32, on, sun r3.Vec) (r3.Vec, bool) {
	var found trace.Found
	s := sampling.Stream2(5, 822)
	start := r3.Add(on, r3.Scale(.01, sun))
	w.Walk(start, r3.Scale(-1, sun), 1, 0, &s, &found)
	if len(found.Landings) != 1 || found.Landings[0].Hit.Part != ceiling || !found.Landings[0].Mirrored {
		return r3.Vec{}, false
	}
	return found.Landings[0].Hit.Point, true
}

// TestMirroredPatchOfShelf: where a mirrored shelf throws the sun, by the law of
// reflection in its section: sun that falls by the profile angle rises by it
// less twice the slope; along the opening it keeps its speed. Curved tops are
// allowed what their facets may be off.
func TestMirroredPatchOfShelf(t *testing.T) {
	const depth = 0.8
	for _, c := range []struct {
		name    string
		profile system.Profile
		slope   func(l float64) (up, slope float64) // of the top over its line at a distance along it
	}{
		{"flat", system.Profile{}, func(float64) (float64, float64) { return 0, 0 }},
		{"arc", system.Profile{Shape: system.Arc, SagittaM: .04}, func(l float64) (float64, float64) {
			// R = h/2 + c^2/8h
			r := .02 + depth*depth/.32
			d := l - depth/2
			return r - .04 - math.Sqrt(r*r-d*d), math.Asin(d / r)
		}},
		{"parabola", system.Profile{Shape: system.Parabola, FocusM: 1}, func(l float64) (float64, float64) {
			d := l - depth/2
			return (d*d - depth*depth/4) / 4, math.Atan(d / 2) // y = x^2/4f
		}},
	} {
		for _, tilt := range []float64{-4, 0, 8} {
			s := system.LightShelf{OutsideDepthM: depth, ThicknessM: .02, OutsideTiltRad: radians(tilt), OutsideProfile: c.profile, ExtendM: 1}
			w, _, ceiling := shelfUnderCeiling(t, s)
			wrong := s
			wrong.OutsideTiltRad += radians(1)
			other, _, _ := shelfUnderCeiling(t, wrong)
			checked, noticed := 0, 0
			for i := range 200 {
				u := sampling.Stream3(6, 822, uint64(i))
				sun := sunBefore(radians(40+30*u.Float64()), radians(40*(u.Float64()-.5)))
				l := depth * (.05 + .9*u.Float64())
				up, slope := c.slope(l)
				sin, cos := math.Sincos(radians(tilt))
				on := vec(0, l*cos-up*sin, l*sin+up*cos)
				profile := math.Atan2(sun.Z, sun.Y)
				rise := profile - 2*(slope+radians(tilt))
				speed := math.Hypot(sun.Y, sun.Z)
				if rise < radians(5) || rise > radians(150) {
					continue
				}
				far := (ceilingM - on.Z) / (speed * math.Sin(rise))
				want := vec(-far*sun.X, on.Y-far*speed*math.Cos(rise), ceilingM)
				got, ok := lands(w, ceiling, on, sun)
				if !ok {
					// The shelf's own rim may stand in the way of a flat ray.
					if c.profile.Shape == "" {
						t.Errorf("%s, tilt %g: no sun from %v", c.name, tilt, on)
					}
					continue
				}
				checked++
				// The ray starts epsilon off the mirror, whose foot that moves
				// by up to as much over the sine; rounding. A ray off by a
				// moves its foot by a h / sin^2.
				allow := 1.5*w.Epsilon()/math.Sin(rise) + 5e-6
				if c.profile.Shape != "" {
					allow += 1.05 * 2 * system.MirrorFacetRad * (ceilingM - on.Z) / (math.Sin(rise) * math.Sin(rise)) / speed
				}
				if off := r3.Norm(r3.Sub(got, want)); off > allow {
					t.Errorf("%s, tilt %g: from %v the sun meets the ceiling at %v, want %v: off by %.2g m, allowed %.2g", c.name, tilt, on, got, want, off, allow)
				}
				if got, ok := lands(other, ceiling, on, sun); ok && r3.Norm(r3.Sub(got, want)) > allow {
					noticed++
				}
			}
			if checked < 100 || noticed < 80 {
				t.Errorf("%s, tilt %g: %d rays checked; of a mirror tilted by 1 degree more %d were noticed", c.name, tilt, checked, noticed)
			}
		}
	}
}

// TestTiltForFarCeiling: with the outer edge up by (profile angle -
// atan(h/x))/2 the sun at that profile angle just reaches the far end, x away,
// of a ceiling h above the mirror (law of reflection). An overhead sun with h =
// 0.5 m and x = 3 m asks for 40.27 degrees: (90 - 9.4623)/2 by hand; common
// practice, no published source, says about 40.
func TestTiltForFarCeiling(t *testing.T) {
	if got := system.RedirectTilt(math.Pi/2, .5, 3) * 180 / math.Pi; math.Abs(got-40.2688) > 1e-4 {
		t.Errorf("overhead sun: got %.4f degrees, want 40.2688", got)
	}
	for _, profile := range []float64{90, 70, 50, 35} {
		for _, far := range []float64{3, 6} {
			tilt := system.RedirectTilt(radians(profile), ceilingM, far)
			// Of the part indoors the outer edge is the one at the glass.
			s := system.LightShelf{InsideDepthM: .3, ThicknessM: .01, InsideTiltRad: tilt, ExtendM: .5}
			w, _, ceiling := shelfUnderCeiling(t, s)
			// A narrow strip at the glass: 0.02 m along the shelf.
			on := vec(0, -.02*math.Cos(tilt), -.02*math.Sin(tilt))
			got, ok := lands(w, ceiling, on, sunBefore(radians(profile), radians(10)))
			if !ok {
				t.Errorf("profile %g: no sun on the ceiling", profile)
				continue
			}
			// From the strip the ray starts lower and further in.
			want := -far * (ceilingM - on.Z) / ceilingM
			if math.Abs(got.Y-on.Y-want) > 1e-3 {
				t.Errorf("profile %g, tilt %g: the sun meets the ceiling %g m from the mirror, want %g", profile, tilt*180/math.Pi, on.Y-got.Y, -want)
			}
		}
	}
}

// windowSky is the sky component, as a share, of a window of half width w and
// height h that stands on the working plane d away, under the overcast sky of
// Moon & Spencer 1942, both sides of the foot. Closed form equivalent to the
// tables of Hopkinson, Petherbridge & Longmore, Daylighting, 1966.
func windowSky(w, h, d float64) float64 {
	k, s := h/math.Hypot(h, d), w/math.Hypot(w, d)
	r := math.Hypot(d, h)
	one := 3/(14*math.Pi)*(math.Atan(w/d)-d/r*math.Atan(w/r)) +
		2/(7*math.Pi)*(math.Asin(k*s)-k*(1-k*k)*s/math.Sqrt(1-k*k*s*s))
	return 2 * one
}

// TestSkyHiddenByShelf: what the sky component loses to a shelf is what the
// window's strip gives through which the shelf is seen: from its far lower edge
// to its near upper one, drawn onto the glass from the point.
func TestSkyHiddenByShelf(t *testing.T) {
	if got := windowSky(1, 1.5, 2) / 2; math.Abs(got-.019355195) > 1e-9 { // reference values of testdata 08b in trace/annual
		t.Fatalf("the closed form gives %.9f, want 0.019355195", got)
	}
	const half, head = 1.0, 1.9
	n := 160000
	if testing.Short() {
		n = 20000
	}
	var rows []mirroredRow
	for i, c := range []struct{ d, height, depth, thickness float64 }{{1, 1.2, .6, .05}, {2.5, 1.2, .6, .05}, {5, 1.2, .6, .05}, {2, .6, 1, .1}, {3, 1.7, .4, .02}} {
		m := newMirroredModel(t)
		s := system.LightShelf{HeightM: c.height, OutsideDepthM: c.depth, ThicknessM: c.thickness, GapM: .01, ExtendM: 3, Top: "black", Underside: "black"}
		faces, err := s.Build(north(-half, 0, 2*half, head))
		addSystem(m, faces, err, map[string]materials.BSDF{"black": m.matte(0)})
		w := m.world()
		eye := vec(0, -c.d, 0)
		var lost mirroredTally
		var found trace.Found
		for k := range n {
			u := sampling.Stream4(7, 823, uint64(i), uint64(k))
			// Evenly over the window, in 200 strips.
			to := vec(half*(2*u.Float64()-1), 0, head*(float64(k%200)+u.Float64())/200)
			dir := r3.Sub(to, eye)
			r := r3.Norm(dir)
			dir = r3.Scale(1/r, dir)
			found.Reset()
			w.Walk(eye, dir, 1, 0, &u, &found)
			hidden := 1.0
			for _, x := range found.Exits {
				hidden -= x.Weight
			}
			// Luminance (1 + 2 sin)/3 of the zenith's, which makes 7 pi/9 outdoors.
			lost.add(hidden * (1 + 2*dir.Z) / 3 * dir.Z * dir.Y / (r * r) * 2 * half * head / (7 * math.Pi / 9))
		}
		low := (c.height - c.thickness) * c.d / (c.d + c.depth)
		high := c.height * c.d / (c.d + .01)
		want := windowSky(half, high, c.d) - windowSky(half, low, c.d)
		rows = append(rows, mirroredRow{fmt.Sprintf("%g m away, shelf %g m high, %g m deep", c.d, c.height, c.depth), want, lost.mean(), lost.stdErr(), 1e-7, lost.n - 1})
	}
	mirroredJudge(t, "sky hidden by a shelf", rows, .05)
}

// TestBlindBetweenPanes: raised it leaves the scene as the two panes alone make
// it. Two equal panes pass what light does that keeps its polarisation from pane
// to pane; unequal ones stay apart, and pass what a pile of two plates does,
// t1 t2/(1 - r1 r2), each pane's t and r taken as they are of light without
// polarisation. Source of the latter: Stokes 1862, "On the intensity of the light
// reflected from or transmitted through a pile of plates", Proc. R. Soc. 11 (from
// memory). Drawn, the panes stand apart; between slats light loses its
// polarisation.
func TestBlindBetweenPanes(t *testing.T) {
	const text = `
[weather]
file = "w.epw"
[[finish]]
name = "white"
type = "matte"
reflectance = 0.8
[[finish]]
name = "pane"
type = "glazing"
transmittance = 0.88
panes = 1
[[finish]]
name = "tinted"
type = "glazing"
transmittance = 0.6
panes = 1
[[mesh]]
file = "wall.obj"
unit = "m"
up = "z"
finish = "white"
[[opening]]
name = "window"
corners_m = [[0, 0, 1], [2, 0, 1], [2, 0, 2.6], [0, 0, 2.6]]
glazing = "pane"
inner_glazing = "pane"
cavity_m = 0.12
[[viewpoint]]
name = "eye"
position_m = [1, 3, 1.2]
azimuth_deg = 180
`
	const blind = `
[[blind]]
name = "venetian"
opening = "window"
position = "between"
slat_width_mm = 80
pitch_mm = 72
upper = "white"
`
	tinted := strings.Replace(text, `inner_glazing = "pane"`, `inner_glazing = "tinted"`, 1)
	build := func(text string, choice map[string]string) *scene.Scene {
		fsys := fstest.MapFS{"p.toml": {Data: []byte(text)}, // a floor and a back wall
			"wall.obj": {Data: []byte("v 0 0 0\nv 4 0 0\nv 4 6 0\nv 0 6 0\nv 0 6 3\nv 4 6 3\nf 1 2 3 4\nf 4 3 6 5\n")}}
		p, err := project.Load(fsys, "p.toml")
		if err != nil {
			t.Fatal(err)
		}
		s, err := scene.Build(fsys, project.WithStates(p, choice))
		if err != nil {
			t.Fatal(err)
		}
		return s
	}
	bare, raised := build(text, nil), build(text+blind, map[string]string{"venetian": project.RaisedState})
	if len(bare.Triangles) != len(raised.Triangles) {
		t.Fatalf("got %d triangles with the blind raised, want the %d without it", len(raised.Triangles), len(bare.Triangles))
	}
	for i := range bare.Triangles {
		if bare.Triangles[i].V != raised.Triangles[i].V {
			t.Fatalf("triangle %d: got %v, want %v", i, raised.Triangles[i], bare.Triangles[i])
		}
	}
	// (1.6 - 0.08)/0.072 = 21.1: 22 slats, axes from 0.04 to 1.552 m, and the
	// rail from 1.592 m.
	if drawn := build(text+blind, map[string]string{"venetian": project.DrawnState}); len(drawn.Triangles) != len(bare.Triangles)+2*22+2+2 {
		t.Errorf("drawn: got %d triangles more, want those of 22 slats, a rail and the inner pane", len(drawn.Triangles)-len(bare.Triangles))
	}
	pane, err := materials.NewGlazing(.88, 1)
	if err != nil {
		t.Fatal(err)
	}
	dark, err := materials.NewGlazing(.6, 1)
	if err != nil {
		t.Fatal(err)
	}
	// Equal panes, by hand. Straight ahead a surface reflects (0.526/2.526)^2 =
	// 0.0433615, index 1.526 (Duffie & Beckman 2013, section 5.1), and a pane of
	// 0.88 lets 0.959918 through from face to face: (1-r)^2 a/(1 - r^2 a^2) = 0.88.
	// At 60 degrees the refracted angle is 34.57701 degrees (Snell), a surface
	// reflects 0.1854775 across and 0.0014479 along the plane of incidence
	// (Fresnel), the way through a pane is 1/cos 34.57701 as long, a = 0.9515302.
	// So a pane passes 0.6515852 and 0.9487785 and reflects r (1 + t a) = 0.3004742
	// and 0.0027551; two panes pass t^2/(1-r^2) = 0.4666991 and 0.9001875: the mean
	// is 0.6834433. Averaged before the panes are joined it would be 0.6554. The
	// same steps give the values at 20 and 40 degrees.
	equal := map[float64]float64{0: .7793869, 20: .7772979, 40: .7638931, 60: .6834433}
	var rows []mirroredRow
	for _, angle := range []float64{0, 20, 40, 60} {
		sum := throughUnit(trace.Accelerate(raised, 1), angle)
		rows = append(rows, mirroredRow{fmt.Sprintf("two equal panes at %g degrees", angle), equal[angle], sum.mean(), sum.stdErr(), 1e-5, sum.n - 1})
		cos := math.Cos(radians(angle))
		r1, t1 := pane.Delta(materials.Front, cos)
		r2, t2 := dark.Delta(materials.Front, cos)
		sum = throughUnit(trace.Accelerate(build(tinted+blind, map[string]string{"venetian": project.RaisedState}), 1), angle)
		rows = append(rows, mirroredRow{fmt.Sprintf("unequal panes at %g degrees", angle), t1 * t2 / (1 - r1*r2), sum.mean(), sum.stdErr(), 1e-5, sum.n - 1})
	}
	// 1e-5 for stored tables and single precision of the incidence.
	mirroredJudge(t, "two panes, the blind raised", rows, .001)
	// Twin: equal panes that stood apart would pass less.
	r1, t1 := pane.Delta(materials.Front, .5)
	if apart := t1 * t1 / (1 - r1*r1); math.Abs(apart-equal[60]) < 0.02 {
		t.Errorf("panes apart pass %g at 60 degrees, want 0.655 and not %g", apart, equal[60])
	}
}

// throughUnit is the share of light at an incidence in degrees that passes the
// window of TestBlindBetweenPanes outwards. Every path is followed both ways;
// from the fifth pane on roulette decides, hence the repeats. It crosses the
// outer pane at x = 0.3; each time to and fro it moves on by 0.42 m at 60
// degrees, and there is room for four times.
func throughUnit(w *trace.World, angleDeg float64) mirroredTally {
	dir := sunBefore(0, radians(angleDeg))
	dir = vec(dir.X, -dir.Y, dir.Z) // from the middle of the room's side outdoors, to -y
	var sum mirroredTally
	var found trace.Found
	for k := range 2000 {
		s := sampling.Stream3(8, 824, uint64(k))
		found.Reset()
		w.Walk(vec(.3-.5*math.Tan(radians(angleDeg)), .5, 1.8), dir, 1, 40, &s, &found)
		passed := 0.0
		for _, x := range found.Exits {
			if x.Dir.Y < 0 {
				passed += x.Weight
			}
		}
		sum.add(passed)
	}
	return sum
}
