package main

import (
	"io/fs"
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/demo"
	"squint/scene"
	"squint/scene/project"
)

// firstHit is the nearest triangle along the ray by brute force, or -1.
func firstHit(tris []scene.Triangle, o, d r3.Vec) int {
	best, at := -1, math.Inf(1)
	for i, t := range tris {
		e1, e2 := r3.Sub(t.V[1], t.V[0]), r3.Sub(t.V[2], t.V[0])
		p := r3.Cross(d, e2)
		det := r3.Dot(e1, p)
		if det == 0 {
			continue
		}
		s := r3.Sub(o, t.V[0])
		u := r3.Dot(s, p) / det
		q := r3.Cross(s, e1)
		v := r3.Dot(d, q) / det
		if dist := r3.Dot(e2, q) / det; u >= 0 && v >= 0 && u+v <= 1 && dist > 1e-9 && dist < at {
			best, at = i, dist
		}
	}
	return best
}

// leaks counts rays from the middle of the room that reach the outside past
// all panes, or meet a room surface from behind.
func leaks(s *scene.Scene, tris []scene.Triangle, from r3.Vec, rays int) int {
	random := rand.New(rand.NewPCG(3, 1))
	n := 0
	for range rays {
		z := 2*random.Float64() - 1
		sin, cos := math.Sincos(2 * math.Pi * random.Float64())
		r := math.Sqrt(1 - z*z)
		d := r3.Vec{X: r * cos, Y: r * sin, Z: z}
		hit := firstHit(tris, from, d)
		if hit < 0 {
			n++
			continue
		}
		t := tris[hit]
		normal := r3.Cross(r3.Sub(t.V[1], t.V[0]), r3.Sub(t.V[2], t.V[0]))
		switch s.Parts[t.Part].Kind {
		case scene.Room:
			if r3.Dot(normal, d) >= 0 {
				n++
			}
		case scene.Surroundings, scene.GroundPlane:
			n++
		}
	}
	return n
}

// load builds the designs of a project, by name.
func load(t *testing.T, fsys fs.FS, name string) map[string]*scene.Scene {
	t.Helper()
	all, err := project.LoadAll(fsys, name)
	if err != nil {
		t.Fatal(err)
	}
	scenes := map[string]*scene.Scene{}
	for _, p := range all {
		s, err := scene.Build(fsys, p)
		if err != nil {
			t.Fatal(err)
		}
		scenes[p.Alternative] = s
	}
	return scenes
}

// Seen from indoors the room has no gap besides its glass.
func TestRoomsAreTight(t *testing.T) {
	designs := load(t, demo.FS(), demo.Project)
	eye := r3.Vec{X: 6.1, Y: 2.9, Z: 1.6}
	for name, s := range designs {
		if n := leaks(s, s.Triangles, eye, 3000); n != 0 {
			t.Errorf("demo, %s: %d of 3000 rays escape past the glass", name, n)
		}
	}
	s := designs["bare"]
	// Twin: without the panes rays must escape.
	var open []scene.Triangle
	for _, tri := range s.Triangles {
		if s.Parts[tri.Part].Kind != scene.Pane {
			open = append(open, tri)
		}
	}
	if leaks(s, open, eye, 3000) == 0 {
		t.Error("demo without glass: no ray escapes; the test cannot fail")
	}
	starter := load(t, demo.Starter(), demo.StarterProject)[""]
	if n := leaks(starter, starter.Triangles, r3.Vec{X: 2.1, Y: 2.9, Z: 1.6}, 3000); n != 0 {
		t.Errorf("starter: %d of 3000 rays escape past the glass", n)
	}
}

// Every window looks out along -y, 165 degrees from north in the demo, and has
// its shelf clear of the frames.
func TestOpeningsAndShelves(t *testing.T) {
	s := load(t, demo.FS(), demo.Project)["white shelf"]
	if len(s.Openings) != 2*bays {
		t.Fatalf("%d openings, want %d", len(s.Openings), 2*bays)
	}
	if az := (northDeg + 180) % 360; az != 165 {
		t.Errorf("the windows look to %d degrees", az)
	}
	for _, o := range s.Openings {
		out := o.Rect.Outward
		if math.Abs(out.Z) > 1e-12 || out.Y >= 0 {
			t.Errorf("%s: outward %v", o.Name, out)
		}
		if w, h := o.Rect.WidthM, o.Rect.HeightM; math.Abs(w-1.5) > 1e-9 || (math.Abs(h-1.1) > 1e-9 && math.Abs(h-0.8) > 1e-9) {
			t.Errorf("%s: %g by %g m", o.Name, w, h)
		}
	}
	frames := plainFrames()
	shelves := 0
	for _, tri := range s.Triangles {
		if s.Parts[tri.Part].Kind != scene.System {
			continue
		}
		shelves++
		for i, a := range tri.V {
			b := tri.V[(i+1)%3]
			for k := range 5 { // along each edge
				p := r3.Add(r3.Scale(float64(k)/4, a), r3.Scale(1-float64(k)/4, b))
				if in := inBody(append(frames, officeShell()), [3]float64{1000 * p.X, 1000 * p.Y, 1000 * p.Z}); in != "" {
					t.Fatalf("%s at %v is inside %s", s.Parts[tri.Part].Name, p, in)
				}
			}
		}
	}
	if want := bays * 24; shelves != want { // two boxes of 12 a shelf; the rollers are up
		t.Errorf("%d triangles of systems, want %d", shelves, want)
	}
}
