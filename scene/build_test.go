package scene

import (
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
)

// TestFinishes: the group decides before the material, the mesh's own finish
// last. Areas by hand: floor and ceiling 24 m2, walls 2 x 16.8 + 11.2 + 8.2.
func TestFinishes(t *testing.T) {
	const wallM2 = 2*6*2.8 + 4*2.8 + 4*2.8 - 2*1.5
	for _, c := range []struct {
		name, mesh           string
		floor, ceiling, wall map[string]float64
	}{
		{"default", "finish = \"white\"\n", map[string]float64{"white": 24}, map[string]float64{"white": 24}, map[string]float64{"white": wallM2}},
		{"group", "finish = \"white\"\n[mesh.finishes]\nwalls = \"grey\"\n", map[string]float64{"white": 24}, map[string]float64{"white": 24}, map[string]float64{"grey": wallM2}},
		{"material", "[mesh.finishes]\ncarpet = \"grey\"\nplaster = \"white\"\n", map[string]float64{"grey": 24}, map[string]float64{"white": 24}, map[string]float64{"white": wallM2}},
		{"group before material", "[mesh.finishes]\nplaster = \"white\"\nfloor = \"white\"\ncarpet = \"grey\"\nwalls = \"grey\"\n", map[string]float64{"white": 24}, map[string]float64{"white": 24}, map[string]float64{"grey": wallM2}},
		{"material before default", "finish = \"white\"\n[mesh.finishes]\ncarpet = \"grey\"\n", map[string]float64{"grey": 24}, map[string]float64{"white": 24}, map[string]float64{"white": wallM2}},
	} {
		t.Run(c.name, func(t *testing.T) {
			s := mustBuild(t, "[[mesh]]\nfile = \"room.obj\"\nunit = \"m\"\nup = \"z\"\n"+c.mesh, room().files())
			sameAreas(t, "floor", finishOf(s, "floor"), c.floor)
			sameAreas(t, "ceiling", finishOf(s, "ceiling"), c.ceiling)
			sameAreas(t, "walls", finishOf(s, "walls"), c.wall)
		})
	}
}

// TestBackFinish: the front is the side from which the corners run
// counter-clockwise, and the back has the finish named as back.
func TestBackFinish(t *testing.T) {
	s := mustBuild(t, `[[finish]]
name = "sheet"
type = "matte"
reflectance = 0.6
back = "grey"

[[mesh]]
file = "room.obj"
unit = "m"
up = "z"
finish = "sheet"
`, room().files())
	f := s.Finishes[s.Triangles[0].Finish].BSDF
	front, _ := f.Lambert(materials.Front)
	back, _ := f.Lambert(materials.Back)
	if front != 0.6 || back != 0.3 { // as in the project
		t.Errorf("reflectance: got %g and %g, want 0.6 on the front and 0.3 on the back", front, back)
	}
}

func TestBuildErrors(t *testing.T) {
	files := room().files()
	const bare = "[[mesh]]\nfile = \"room.obj\"\nunit = \"m\"\nup = \"z\"\n"
	for _, c := range []struct {
		name, tables string
		files        map[string]string
		want         []string
	}{
		{"unknown group", bare + "finish = \"white\"\n[mesh.finishes]\nflor = \"grey\"\n", files,
			[]string{`p.toml:25: mesh.finishes: room.obj has no group or material "flor" (did you mean "floor"?); it has groups "floor", "ceiling", "walls" and materials "carpet", "plaster"`}},
		{"no finish", bare + "[mesh.finishes]\nfloor = \"grey\"\n", files,
			[]string{`p.toml:19: mesh.finishes: room.obj: no finish for ceiling (material plaster), walls (material plaster); name these groups or materials under [mesh.finishes], or give the mesh one finish; the project has finishes "white", "grey", "clear"`}},
		{"library not there", bare + "[mesh.finishes]\nwood = \"grey\"\n", map[string]string{"room.obj": "mtllib lost.mtl\n" + files["room.obj"]},
			[]string{`no group or material "wood"; it has groups`, `the material library lost.mtl that the mesh names is not there`, `no finish for ceiling`}},
		{"no file", strings.Replace(bare, "room.obj", "rooms/a.obj", 1) + "finish = \"white\"\n", files,
			[]string{"p.toml:19: mesh.file: rooms/a.obj is not there; paths count from the project file's folder"}},
		{"damaged file", bare + "finish = \"white\"\n", map[string]string{"room.obj": "v 0 0 0\nv 1 0\n"},
			[]string{"room.obj:2: v: got 2 numbers"}},
		{"millimetres", bare + "finish = \"white\"\n", map[string]string{"room.obj": scaled(1000)},
			[]string{`p.toml:19: mesh: room.obj: size: got 4000 x 6000 x 2800 m with unit = "m"`, `unit = "mm" would make it 4 x 6 x 2.8 m`}},
		{"metres as millimetres", strings.Replace(bare, `"m"`, `"mm"`, 1) + "finish = \"white\"\n", files,
			[]string{`p.toml:19: mesh: room.obj: size: got`, `unit = "m" would make it 4 x 6 x 2.8 m`}},
		{"two at once", bare + "[mesh.finishes]\nflor = \"grey\"\n\n" + strings.Replace(bare, "room.obj", "none.stl", 1) + "finish = \"white\"\n", files,
			[]string{"p.toml:26: mesh.file: none.stl is not there", `no group or material "flor"`}},
		{"glazing beyond glass", "[[finish]]\nname = \"ice\"\ntype = \"glazing\"\ntransmittance = 0.99\n\n" + bare + "finish = \"white\"\n", files,
			[]string{`p.toml:19: finish "ice": transmittance: got 0.99`}},
		{"opening of an unknown group", bare + "finish = \"white\"\n\n[[opening]]\nname = \"w\"\nmesh_group = \"wall\"\n", files,
			[]string{`p.toml:25: opening "w": mesh_group: no mesh has a group "wall" (did you mean "walls"?); there are "floor", "ceiling", "walls"`}},
		{"opening of a group that is no rectangle", bare + "finish = \"white\"\n\n[[opening]]\nname = \"w\"\nmesh_group = \"walls\"\noutward_deg = 180\n", files,
			[]string{`p.toml:25: opening "w": not plane`}},
		{"opening of opaque glass", bare + "finish = \"white\"\n\n[[opening]]\nname = \"w\"\nmesh_group = \"glass\"\noutward_deg = 180\n", roomWithGlass().files(),
			[]string{`p.toml:25: opening "w": mesh_group: the mesh gives group "glass" the finish "white", which lets no light through`}},
		{"plane too small", bare + "finish = \"white\"\n\n[[work_plane]]\nname = \"p\"\npolygon_m = [[1, 1], [2, 1], [2, 2], [1, 2]]\n", files,
			[]string{`p.toml:25: work_plane "p": polygon_m: no sensor fits between the perimeter band of 0.5 m and the outline`}},
		{"plane too fine", bare + "finish = \"white\"\n\n[[work_plane]]\nname = \"p\"\npolygon_m = [[0, 0], [90, 0], [90, 90], [0, 90]]\nspacing_m = 0.02\n", files,
			[]string{`p.toml:25: work_plane "p": spacing_m: got 0.02, which makes 4450 by 4450 cells`}},
	} {
		t.Run(c.name, func(t *testing.T) {
			s, err := build(t, c.tables, c.files)
			if err == nil || s != nil {
				t.Fatalf("got a scene, want an error with %q", c.want)
			}
			for _, w := range c.want {
				if !strings.Contains(err.Error(), w) {
					t.Errorf("got %q\nwant %q in it", err, w)
				}
			}
		})
	}
}

// scaled is the room with its coordinates times k.
func scaled(k float64) string {
	o := room()
	var out strings.Builder
	for _, line := range strings.Split(o.b.String(), "\n") {
		var v r3.Vec
		if sscan(line, &v) {
			v = r3.Scale(k, v)
			line = (&obj{}).line("v %g %g %g", v.X, v.Y, v.Z).b.String()
			line = strings.TrimSuffix(line, "\n")
		}
		out.WriteString(line + "\n")
	}
	return out.String()
}

// TestUnitsAndUp: the same room from millimetres, from feet, and from a file
// with y up.
func TestUnitsAndUp(t *testing.T) {
	want := r3.Box{Max: r3.Vec{X: 4, Y: 6, Z: 2.8}}
	yUp := func() string {
		var out strings.Builder
		for _, line := range strings.Split(room().b.String(), "\n") {
			var v r3.Vec
			if sscan(line, &v) {
				// z up from y up turns (x, y, z) to (x, -z, y)
				line = strings.TrimSuffix((&obj{}).line("v %g %g %g", v.X, v.Z, -v.Y).b.String(), "\n")
			}
			out.WriteString(line + "\n")
		}
		return out.String()
	}()
	for _, c := range []struct{ name, unit, up, text string }{
		{"metres", "m", "z", room().b.String()},
		{"millimetres", "mm", "z", scaled(1000)},
		{"feet", "ft", "z", scaled(1 / 0.3048)}, // the international foot
		{"y up", "m", "y", yUp},
	} {
		s := mustBuild(t, "[[mesh]]\nfile = \"room.obj\"\nunit = \""+c.unit+"\"\nup = \""+c.up+"\"\nfinish = \"white\"\n", map[string]string{"room.obj": c.text})
		// %g writes all digits: what is left is rounding
		if apart(s.Bounds.Min, want.Min) > 1e-9 || apart(s.Bounds.Max, want.Max) > 1e-9 {
			t.Errorf("%s: got %v, want %v", c.name, s.Bounds, want)
		}
		if lo, hi := box(s, "floor"); hi.Z-lo.Z > 1e-9 || math.Abs(hi.Z) > 1e-9 {
			t.Errorf("%s: the floor is not level at 0: %v to %v", c.name, lo, hi)
		}
		m := s.Meshes[0]
		if m.File != "room.obj" || m.Role != "room" || m.Triangles != 18 || len(m.SHA256) != 64 { // 9 quads
			t.Errorf("%s: summary %+v", c.name, m)
		}
	}
}

// TestPlacement: rotated clockwise seen from above, then moved.
func TestPlacement(t *testing.T) {
	s := mustBuild(t, roomMesh+"rotate_deg = 90\ntranslate_m = [10, 20, 1]\n", room().files())
	// By hand: a quarter turn clockwise takes +y to +x and +x to -y, so that
	// the room of 4 by 6 lies in x 0 to 6, y -4 to 0, then 10, 20 and 1 further.
	want := r3.Box{Min: r3.Vec{X: 10, Y: 16, Z: 1}, Max: r3.Vec{X: 16, Y: 20, Z: 3.8}}
	if apart(s.Bounds.Min, want.Min) > 1e-12 || apart(s.Bounds.Max, want.Max) > 1e-12 {
		t.Errorf("got %v, want %v", s.Bounds, want)
	}
	if lo, hi := box(s, "floor"); lo.Z != 1 || hi.Z != 1 {
		t.Errorf("floor at %g to %g, want 1", lo.Z, hi.Z)
	}
}

// TestSurroundings: a block of its own kind and texel size, which may be far
// larger than a room.
func TestSurroundings(t *testing.T) {
	const block = "solid\nfacet normal 0 0 1\nouter loop\nvertex -400 -900 30\nvertex 400 -900 30\nvertex 0 -700 30\nendloop\nendfacet\nendsolid\n"
	tables := roomMesh + "\n[[mesh]]\nfile = \"city.stl\"\nunit = \"m\"\nup = \"z\"\nrole = \"surroundings\"\nfinish = \"grey\"\n"
	s := mustBuild(t, tables, with(room().files(), "city.stl", block))
	found := false
	for _, p := range s.Parts {
		switch p.Kind {
		case Surroundings:
			found = true
			// 80,000 m2 in at most 20,000 texels: 2 m
			if math.Abs(p.TexelM-2) > 1e-9 || p.Opening != -1 {
				t.Errorf("surroundings: %+v, want texels of 2 m", p)
			}
		case Room:
			if p.TexelM != 0.2 { // the project's default
				t.Errorf("room: %+v", p)
			}
		}
	}
	if !found {
		t.Error("no part is of kind Surroundings")
	}
	if _, err := build(t, strings.Replace(tables, `role = "surroundings"`, `role = "room"`, 1), with(room().files(), "city.stl", block)); err == nil {
		t.Error("a room of 800 m is taken")
	}
}

// TestGround: one level square around the project, a hair below its level,
// facing up, and cut to 300 m.
func TestGround(t *testing.T) {
	for _, c := range []struct {
		name, tables string
		lo, hi       r3.Vec
	}{
		{"default", roomMesh, r3.Vec{X: -30, Y: -30, Z: -0.01}, r3.Vec{X: 34, Y: 36, Z: -0.01}},
		{"below", "[ground]\nlevel_m = -9\nreflectance = 0.1\n\n" + roomMesh, r3.Vec{X: -30, Y: -30, Z: -9.01}, r3.Vec{X: 34, Y: 36, Z: -9.01}},
		{"wide", roomMesh + "\n[[mesh]]\nfile = \"city.stl\"\nunit = \"m\"\nup = \"z\"\nrole = \"surroundings\"\nfinish = \"grey\"\n",
			r3.Vec{X: -150, Y: -597, Z: -0.01}, r3.Vec{X: 150, Y: -297, Z: -0.01}}, // y from -900 to 6: middle -447
	} {
		const block = "solid\nfacet normal 0 0 1\nouter loop\nvertex -400 -900 30\nvertex 400 -900 30\nvertex 0 -700 30\nendloop\nendfacet\nendsolid\n"
		s := mustBuild(t, c.tables, with(room().files(), "city.stl", block))
		lo, hi := box(s, "ground")
		if apart(lo, c.lo) > near || apart(hi, c.hi) > near {
			t.Errorf("%s: got %v to %v, want %v to %v", c.name, lo, hi, c.lo, c.hi)
		}
		for _, tri := range s.Triangles {
			if p := s.Parts[tri.Part]; p.Kind == GroundPlane {
				if n := r3.Cross(r3.Sub(tri.V[1], tri.V[0]), r3.Sub(tri.V[2], tri.V[0])); n.Z <= 0 {
					t.Errorf("%s: the ground faces down", c.name)
				}
			}
		}
		if s.Bounds.Max.Z != 2.8 && s.Bounds.Max.Z != 30 {
			t.Errorf("%s: the bounds %v hold the ground", c.name, s.Bounds)
		}
	}
	s := mustBuild(t, "[ground]\nlevel_m = -9\nreflectance_by_month = [0.6, 0.6, 0.4, 0.2, 0.2, 0.2, 0.2, 0.2, 0.2, 0.2, 0.2, 0.4]\n\n"+roomMesh, room().files())
	if s.GroundLevelM != -9 || s.GroundReflectance != [12]float64{.6, .6, .4, .2, .2, .2, .2, .2, .2, .2, .2, .4} {
		t.Errorf("level %g, reflectance %v", s.GroundLevelM, s.GroundReflectance)
	}
}
