package export

import (
	"bytes"
	"fmt"
	"strings"
	"testing"
	"testing/fstest"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/mesh"
	"squint/scene/project"
)

// office is a room with a window, a light shelf of two tilted parts, a drawn
// roller and names that formats dislike.
const office = `title = "Export  office"

[site]
north_deg = 15

[weather]
file = "site.epw"

[ground]
level_m = -0.4
reflectance = 0.2

[[mesh]]
file = "room.obj"
unit = "m"
up = "z"
rotate_deg = 30
translate_m = [0.1, 0.2, 0.3]

[mesh.finishes]
plaster = "white wall"
carpet = "grey"

[[finish]]
name = "white wall"
type = "matte"
reflectance = 0.8

[[finish]]
name = "grey"
type = "matte"
reflectance = 0.3

[[finish]]
name = "metal"
type = "glossy"
total_reflectance = 0.85
specular_share = 0.8
spread_deg = 5

[[finish]]
name = "bright"
type = "mirror"
specular_reflectance = 0.9
diffuse_reflectance = 0.05

[[finish]]
name = "clear"
type = "glazing"
transmittance = 0.78
panes = 2

[[opening]]
name = "window"
corners_m = [[1, 0, 1], [3, 0, 1], [3, 0, 2.5], [1, 0, 2.5]]
outward_deg = 195
glazing = "clear"

[[viewpoint]]
name = "desk"
position_m = [2, 2, 1.5]
azimuth_deg = 90

[[light_shelf]]
name = "shelf"
opening = "window"
height_m = 0.9
outside_depth_m = 0.7
inside_depth_m = 0.5
outside_tilt_deg = 11
inside_tilt_deg = -7
thickness_m = 0.03
extend_m = 0.1
gap_m = 0.02
top = "bright"
underside = "metal"

[[roller]]
name = "screen"
opening = "window"
drawn = true
position = "outside"
gap_m = 1
openness = 0.05
diffuse_transmittance = 0.1
reflectance = 0.4
`

// room has a floor, four walls and a ceiling of two materials.
const room = `v 0 0 0
v 4 0 0
v 4 5 0
v 0 5 0
v 0 0 2.8
v 4 0 2.8
v 4 5 2.8
v 0 5 2.8
g the floor
usemtl carpet
f 1 2 3 4
g walls
usemtl plaster
f 1 5 6 2
f 2 6 7 3
f 3 7 8 4
f 4 8 5 1
g ceiling
f 5 8 6
usemtl carpet
f 6 8 7
`

func built(t testing.TB) *scene.Scene {
	t.Helper()
	fsys := fstest.MapFS{
		"p.toml":   {Data: []byte(office)},
		"room.obj": {Data: []byte(room)},
		"site.epw": {Data: []byte("x")},
	}
	p, err := project.Load(fsys, "p.toml")
	if err != nil {
		t.Fatal(err)
	}
	s, err := scene.Build(fsys, p)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// strange has parts and finishes whose names collide, before and after they
// are made fit for OBJ, far from the origin, and a triangle that is flat in
// single precision.
func strange(t testing.TB) *scene.Scene {
	t.Helper()
	matte, err := materials.NewMatte(0.5)
	if err != nil {
		t.Fatal(err)
	}
	s := &scene.Scene{}
	for _, name := range []string{"a b", "a_b", "a_b_2", "a b", "#c\\", "", "unused"} {
		s.Finishes = append(s.Finishes, scene.Finish{Name: name, BSDF: matte})
	}
	for i, name := range []string{"wall", "wall", "wall 2", "a\tb", "a b", "wall", "none", ""} {
		kind := scene.Room
		if i == 1 {
			kind = scene.System
		}
		s.Parts = append(s.Parts, scene.Part{Name: name, Kind: kind, Opening: -1})
	}
	add := func(finish, part int32, v ...r3.Vec) {
		s.Triangles = append(s.Triangles, scene.Triangle{V: [3]r3.Vec{v[0], v[1], v[2]}, Finish: finish, Part: part})
	}
	minusZero := -1 / inf()
	for i := range int32(6) {
		x := 1000*float64(i) + 1./3
		add(i, i, r3.Vec{X: x, Y: minusZero}, r3.Vec{X: x + 1, Y: 1e-17}, r3.Vec{X: x, Y: 1, Z: -0.1})
		add((i+1)%6, i, r3.Vec{X: x}, r3.Vec{X: x + 1}, r3.Vec{X: x, Z: 1})
	}
	add(0, 7, r3.Vec{X: 5000}, r3.Vec{X: 5000.00001}, r3.Vec{X: 5000, Z: 0.00001})
	add(0, 7, r3.Vec{X: 5000}, r3.Vec{X: 5001}, r3.Vec{X: 5000, Y: 1})
	return s
}

func inf() float64 { var z float64; return 1 / z }

func model(t testing.TB, s *scene.Scene, o Options) *Model {
	t.Helper()
	m, err := New(s, o)
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// readOBJ writes OBJ and MTL and reads them with scene/mesh.
func readOBJ(t testing.TB, m *Model) *mesh.Mesh {
	t.Helper()
	var obj, mtl bytes.Buffer
	if err := m.WriteOBJ(&obj, "x.mtl"); err != nil {
		t.Fatal(err)
	}
	if err := m.WriteMTL(&mtl); err != nil {
		t.Fatal(err)
	}
	fsys := fstest.MapFS{"x.obj": {Data: obj.Bytes()}, "x.mtl": {Data: mtl.Bytes()}}
	got, err := mesh.Read(fsys, "x.obj", mesh.Options{Unit: mesh.Metre, Up: mesh.Z})
	if err != nil {
		t.Fatal(err)
	}
	if len(got.Notes) > 0 || got.MissingMTL != "" || got.Degenerate > 0 {
		t.Fatalf("reader notes %q, misses %q, drops %d", got.Notes, got.MissingMTL, got.Degenerate)
	}
	return got
}

// wanted are the triangles of the scene itself, part by part, as texts that
// tell part, finish and corners to the last bit.
func wanted(s *scene.Scene, keep func(scene.Part) bool) map[string]int {
	out := map[string]int{}
	for _, t := range s.Triangles {
		if p := s.Parts[t.Part]; keep(p) {
			out[corners(p.Name, s.Finishes[t.Finish].Name, t.V)]++
		}
	}
	return out
}

func corners(part, finish string, v [3]r3.Vec) string {
	return strings.ReplaceAll(fmt.Sprintf("%s|%s|%x", part, finish, v), "-0x0p+00", "0x0p+00")
}

func differences(got, want map[string]int) (n int, first string) {
	for k := range want {
		if got[k] != want[k] {
			n, first = n+1, k
		}
	}
	for k := range got {
		if want[k] == 0 {
			n, first = n+1, k
		}
	}
	return n, first
}
