package study

import (
	"context"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/project"
	"squint/scene/sky"
	"squint/scene/system"
	"squint/trace"
)

// causeRoom is a dark box of 4 x 4 x 3 m with a glazed window to the south (-y),
// a mirrored shelf under it and a white desk beside the shelf.
func causeRoom(t *testing.T) *scene.Scene {
	t.Helper()
	s := &scene.Scene{Project: &project.Project{File: "cause"}}
	finish := func(b materials.BSDF, err error) int32 {
		if err != nil {
			t.Fatal(err)
		}
		s.Finishes = append(s.Finishes, scene.Finish{BSDF: b})
		return int32(len(s.Finishes) - 1)
	}
	matte := func(rho float64) int32 { b, err := materials.NewMatte(rho); return finish(b, err) }
	part := func(name string, kind scene.Kind, opening int) int32 {
		s.Parts = append(s.Parts, scene.Part{Name: name, Kind: kind, Opening: opening, TexelM: .25})
		return int32(len(s.Parts) - 1)
	}
	rect := func(part, finish int32, o, u, v r3.Vec) {
		a, b, c := r3.Add(o, u), r3.Add(o, r3.Add(u, v)), r3.Add(o, v)
		s.Triangles = append(s.Triangles, scene.Triangle{V: [3]r3.Vec{o, a, b}, Finish: finish, Part: part},
			scene.Triangle{V: [3]r3.Vec{o, b, c}, Finish: finish, Part: part})
	}
	x, y, z := r3.Vec{X: 4}, r3.Vec{Y: 4}, r3.Vec{Z: 3}
	dark := matte(.02)
	walls := part("walls", scene.Room, -1)
	rect(walls, dark, r3.Vec{}, x, y)
	rect(walls, dark, z, y, x)
	rect(walls, dark, r3.Vec{}, y, z)
	rect(walls, dark, x, z, y)
	rect(walls, dark, y, x, z)
	rect(walls, dark, r3.Vec{}, r3.Vec{Z: 1}, x)
	rect(walls, dark, r3.Vec{Z: 2.5}, r3.Vec{Z: .5}, x)
	rect(walls, dark, r3.Vec{Z: 1}, r3.Vec{Z: 1.5}, r3.Vec{X: 1})
	rect(walls, dark, r3.Vec{X: 3, Z: 1}, r3.Vec{Z: 1.5}, r3.Vec{X: 1})
	s.Openings = []scene.Opening{{Name: "south window", Rect: system.Rect{Origin: r3.Vec{X: 1, Z: 1},
		Across: r3.Vec{X: 1}, Up: r3.Vec{Z: 1}, Outward: r3.Vec{Y: -1}, WidthM: 2, HeightM: 1.5}}}
	g, err := materials.NewGlazing(.88, 1)
	rect(part("glass of south window", scene.Pane, 0), finish(g, err), r3.Vec{X: 1, Z: 1}, r3.Vec{X: 2}, r3.Vec{Z: 1.5})
	m, err := materials.NewMirror(.9, 0)
	rect(part("shelf", scene.System, -1), finish(m, err), r3.Vec{X: 1.85, Y: .02, Z: .99}, r3.Vec{X: .3}, r3.Vec{Y: .9})
	rect(part("desk", scene.Room, -1), matte(.9), r3.Vec{X: 2.2, Y: .02, Z: .9}, r3.Vec{X: 1.6}, r3.Vec{Y: 1.5})
	s.GroundReflectance = [12]float64{.2, .9, .05}
	s.Viewpoints = []scene.Viewpoint{
		{Name: "indoors", Position: r3.Vec{X: 2, Y: .8, Z: 1.5}, Direction: r3.Vec{Y: -1}},
		{Name: "outdoors", Position: r3.Vec{X: 2, Y: -5, Z: 1.2}, Direction: r3.Vec{Y: -1}},
	}
	return s
}

// TestCauses: what carries the glare is named after what the eye sees, from
// the frames of a real run. Which it must be follows from the geometry: where
// the sun stands, what hides it, where its image lies.
func TestCauses(t *testing.T) {
	cases := []struct {
		name                 string
		view                 int
		altitudeDeg, fromDeg float64 // of the sun; azimuth from south to west (-x)
		sunLx, sky           float64 // normal illuminance; luminance of the even sky
		globalLx             float64
		month                int
		want                 Cause
		words                string
	}{
		// At 20 degrees it stands in the window, 0.29 m above the eye's height.
		{"sun in the window", 0, 20, 0, 50000, 10, 17000, 0, Cause{Kind: SunDisc, Via: "south window"}, "the sun's disc through south window"},
		// At 60 degrees the lintel hides it; its image lies 0.29 m before the eye on
		// the shelf, and the light on the way there passes the window at 1.87 m.
		{"sun in the shelf", 0, 60, 0, 50000, 10, 43000, 0, Cause{Kind: MirroredSun, Name: "shelf"}, "the sun mirrored in shelf"},
		// From the west at 55 degrees the lintel hides it and its image would lie
		// 0.18 m beside the middle of a shelf 0.3 m wide; it falls on the desk.
		{"sun on the desk", 0, 55, 30, 90000, 10, 74000, 2, Cause{Kind: Sunlit, Name: "desk"}, "sun on desk"},
		{"sky in the window", 0, 80, 180, 0, 9000, 28000, 0, Cause{Kind: SkySeen, Via: "south window"}, "the sky through south window"},
		{"snow before the window", 0, 80, 180, 0, 300, 90000, 1, Cause{Kind: GroundSeen, Via: "south window"}, "the ground outside through south window"},
		// Sky and snow of the same luminance all around: no source stands out.
		{"even brightness", 1, 80, 180, 0, 9000, 9000 * math.Pi / .9, 1, Cause{Kind: Brightness}, "the brightness of the whole view"},
	}
	s := causeRoom(t)
	w := trace.Accelerate(s, 1)
	p := &project.Project{File: "cause", Criteria: project.Criteria{SourceRule: "field mean", SourceMultiple: 2},
		Simulation: project.Simulation{Seed: 1, Batches: 8, FisheyePixels: 48, SamplesPerPixel: 16, TexelSamples: 16, MemoryMiB: 256}}
	var moments []*scene.Moment
	in := &Input{Project: p, Scene: s, World: w}
	for h, c := range cases {
		even, err := sky.NewCIE(5, r3.Vec{Z: 1}, sky.ByZenithLuminance(c.sky))
		if err != nil {
			t.Fatal(err)
		}
		sa, ca := math.Sincos(c.altitudeDeg * math.Pi / 180)
		sf, cf := math.Sincos(c.fromDeg * math.Pi / 180)
		moments = append(moments, &scene.Moment{Step: h, Month: c.month, Sun: r3.Vec{X: -ca * sf, Y: -ca * cf, Z: sa},
			SunNormalLx: c.sunLx, Sky: even, DiffuseLx: math.Pi * c.sky, GlobalLx: c.globalLx, Occupied: true})
		in.Occupied = append(in.Occupied, h)
	}
	in.Climate = &scene.Climate{Moments: moments, SinAltitude: make([]float64, len(moments))}
	in.Standings = []Standing{{Scene: s, World: w, Moments: moments}}
	y, err := computeYear(context.Background(), in, Options{Workers: 2, Progress: func(Stage, int, int) {}}, &Result{})
	if err != nil {
		t.Fatal(err)
	}
	for h, c := range cases {
		v := &y.glare.views[c.view]
		if v.Cause[h] < 0 {
			t.Errorf("%s: DGP %.3f: got no cause, want %q", c.name, v.DGP[h], c.words)
			continue
		}
		got := v.Causes[v.Cause[h]]
		t.Logf("%s: DGP %.3f, Ev %.0f lx, %s", c.name, v.DGP[h], v.Ev[h], got)
		if got != c.want || got.String() != c.words {
			t.Errorf("%s: got %q %+v, want %q %+v", c.name, got, got, c.words, c.want)
		}
	}
}
