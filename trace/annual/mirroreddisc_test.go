package annual_test

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/photometry"
	"squint/trace/annual"
	"squint/trace/surface"
)

// discsOf runs one view and returns the discs it sees.
func discsOf(t *testing.T, m *model, v scene.Viewpoint, moment *scene.Moment, seed uint64) []annual.Disc {
	t.Helper()
	w := m.world()
	cfg := surface.Config{Batches: 2, Samples: 2, Seed: seed, Workers: 1}
	_, p := newShelfEngine(t, w, nil, []scene.Viewpoint{v}, cfg, 2, 2).run(t, moment)
	return p[0].discs
}

// TestMirroredDisc: the sun's image in a wide level mirror, behind panes or not,
// is a source as large as the sun with its luminance less what mirror and glass
// take. Sources: law of reflection; luminance of a disc E/omega (exact); pane:
// the formulas of Fresnel as in the sky component checks.
func TestMirroredDisc(t *testing.T) {
	mirror, err := materials.NewMirror(.85, 0)
	if err != nil {
		t.Fatal(err)
	}
	g, err := materials.NewGlazing(.88, 1)
	if err != nil {
		t.Fatal(err)
	}
	moment := sunMoment(t, 3, deg(40), deg(20), 50000)
	moment.Occupied = true
	image := r3.Vec{X: moment.Sun.X, Y: moment.Sun.Y, Z: -moment.Sun.Z}
	omega := 2 * math.Pi * (1 - math.Cos(photometry.SunDiameterRad/2))
	tau := newPane(materials.GlassIndex, .88).transmittance(-moment.Sun.Y)
	for _, c := range []struct {
		name  string
		want  float64 // of the sun's luminance
		share float64 // of its solid angle; 0: not seen
		look  r3.Vec
		build func(m *model)
	}{
		{"mirror", .85, 1, r3.Vec{Y: -1}, func(*model) {}},
		{"through a pane", .85 * tau, 1, r3.Vec{Y: -1}, func(m *model) {
			m.face(m.part("pane", scene.Pane), m.finish(g), r3.Vec{X: -5, Y: -.2, Z: .01}, r3.Vec{X: 10}, r3.Vec{Z: 1.09}, nil)
		}},
		{"behind the back", .85, 0, r3.Vec{Y: 1}, func(*model) {}},
		{"behind a screen", .85, 0, r3.Vec{Y: -1}, func(m *model) {
			m.face(m.part("screen", scene.Room), m.matte(0), r3.Vec{X: -5, Y: -.2, Z: .01}, r3.Vec{X: 10}, r3.Vec{Z: 1.09}, nil)
		}},
	} {
		m := newModel(t, 1)
		m.face(m.part("mirror", scene.System), m.finish(mirror), r3.Vec{X: -5, Y: -5}, r3.Vec{X: 10}, r3.Vec{Y: 10}, nil)
		c.build(m)
		var found []annual.Disc
		for _, d := range discsOf(t, m, scene.Viewpoint{Position: r3.Vec{Z: 1}, Direction: c.look}, moment, 1) {
			if d.Mirror >= 0 {
				found = append(found, d)
			}
		}
		if c.share == 0 {
			if len(found) != 0 {
				t.Errorf("%s: got %v, want no image", c.name, found)
			}
			continue
		}
		if len(found) != 1 {
			t.Fatalf("%s: got %d images, want 1", c.name, len(found))
		}
		d := found[0]
		for _, q := range []struct {
			what             string
			got, want, allow float64
		}{
			{"direction", r3.Norm(r3.Sub(d.Dir, image)), 0, 1e-9},
			{"solid angle", d.OmegaSr, omega, 1e-9 * omega},
			// The pane's transmittance changes by less than 2e-4 over the disc.
			{"luminance", d.Luminance, c.want * 50000 / omega, 2e-4 * 50000 / omega},
		} {
			if !(math.Abs(q.got-q.want) <= q.allow) {
				t.Errorf("%s: %s: got %.8g, want %.8g within %.2g", c.name, q.what, q.got, q.want, q.allow)
			}
		}
	}
}

// curvedOmegaAllow is the relative error in solid angle of an image that costs
// 0.005 of DGP where it carries all glare: 10^(0.005/0.0918)-1 (weight of the
// logarithm: Wienold & Christoffersen 2006), half of the bound on DGP's RMSE.
const curvedOmegaAllow = 0.13

const insideCaustic = "parabola, nearer its focus"

// TestMirroredDiscCurved: images in the facets of a curved shelf are one source,
// of the solid angle that a fine grid of lines of sight finds, in every run.
// Inside the caustic of the last case two stretches of the shelf show the sun,
// 12 degrees apart: the law of reflection has two solutions there.
func TestMirroredDiscCurved(t *testing.T) {
	moment := sunMoment(t, 4, deg(40), deg(15), 50000)
	moment.Occupied = true
	for _, c := range []struct {
		name string
		p    mirroredProfile
		y, z float64
	}{
		{"arc, 1.2 m", arcProfile(.1, deg(.1)), 1.2, 2.6},
		{"arc, 1.6 m", arcProfile(.1, deg(.1)), 1.6, 2.6},
		{"parabola, 1.2 m", parabolaProfile(.08, deg(.1)), 1.2, 2.6},
		{"parabola, 1.6 m", parabolaProfile(.08, deg(.1)), 1.6, 2.6},
		{"flat parabola, enlarged", parabolaProfile(.02, deg(.05)), .7, 2.5},
		{"parabola, near its focus", parabolaProfile(.04, deg(.1)), .755, 2.656},
		{insideCaustic, parabolaProfile(.04, deg(.1)), .868, 2.754},
	} {
		w, shelf := whiteRoom(t, .5, c.p)
		vp := scene.Viewpoint{Position: r3.Vec{X: 1.8, Y: c.y, Z: c.z}, Direction: r3.Unit(r3.Vec{Y: -1, Z: -.5})}
		b := &bruteShelf{w: w, m: moment, profile: c.p}
		want := b.images(vp.Position, vp.Direction)
		if len(want) != 1 {
			t.Fatalf("%s: no image to compare with", c.name)
		}
		const tries = 8
		var square, off float64
		counts := map[int]int{}
		for k := range tries {
			cfg := surface.Config{Batches: 2, Samples: 2, Seed: uint64(k), Workers: 1}
			_, p := newShelfEngine(t, w, nil, []scene.Viewpoint{vp}, cfg, 2, 2).run(t, moment)
			var omega float64
			var dir r3.Vec
			n := 0
			for _, d := range p[0].discs {
				if d.Mirror == shelf {
					n++
					omega += d.OmegaSr
					dir = r3.Add(dir, r3.Scale(d.OmegaSr, d.Dir))
				}
			}
			counts[n]++
			x := omega/want[0].OmegaSr - 1
			square += x * x
			if n > 0 {
				off = math.Max(off, math.Acos(math.Min(1, r3.Dot(r3.Unit(dir), want[0].Dir))))
			}
		}
		rms := math.Sqrt(square / tries)
		size := want[0].OmegaSr / photometry.DiscSolidAngle(photometry.SunDiameterRad)
		t.Logf("%-26s %.3f of the sun's solid angle: relative error %.3f; off by up to %.3f degrees; number of sources %v", c.name, size, rms, off*180/math.Pi, counts)
		if rms > curvedOmegaAllow {
			t.Errorf("%s: solid angle: relative error (RMS of %d runs) %.2f, want at most %.2f", c.name, tries, rms, curvedOmegaAllow)
		}
		sources := 1
		if c.name == insideCaustic {
			sources = 2
		}
		if counts[sources] != tries {
			t.Errorf("%s: got sources %s in %d runs, want %d each", c.name, fmt.Sprint(counts), tries, sources)
		}
		// Half the disc: where the image is taken to be decides its position index.
		if off > 1.5*photometry.SunDiameterRad {
			t.Errorf("%s: direction: off by %.2f degrees, want at most %.2f", c.name, off*180/math.Pi, 1.5*photometry.SunDiameterRad*180/math.Pi)
		}
	}
}
