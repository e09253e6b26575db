package main

import (
	"fmt"
	"io/fs"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/demo"
	"squint/scene"
	"squint/scene/project"
)

// unsound says why a body is not closed with all faces outward: every edge
// must be run through once each way, and the signed volume must be positive.
func unsound(s solid) string {
	count := map[[2]point]int{}
	for _, f := range s.faces {
		if len(f.corners) < 3 {
			return "a face with fewer than three corners"
		}
		for i, a := range f.corners {
			b := f.corners[(i+1)%len(f.corners)]
			if a == b {
				return fmt.Sprintf("an edge without length at %v", a)
			}
			count[[2]point{a, b}]++
		}
	}
	for e, n := range count {
		if back := count[[2]point{e[1], e[0]}]; n != 1 || back != 1 {
			return fmt.Sprintf("edge %v: run through %d times one way and %d the other", e, n, back)
		}
	}
	if v := volumeM3(s); v <= 0 {
		return fmt.Sprintf("volume %g m3: the faces look inward", v)
	}
	return ""
}

// volumeM3 is the divergence theorem over the fans of the faces.
func volumeM3(s solid) float64 {
	six := 0.0
	for _, f := range s.faces {
		a := f.corners[0]
		for i := 1; i+1 < len(f.corners); i++ {
			b, c := f.corners[i], f.corners[i+1]
			six += float64(a[0])*float64(b[1]*c[2]-b[2]*c[1]) +
				float64(a[1])*float64(b[2]*c[0]-b[0]*c[2]) +
				float64(a[2])*float64(b[0]*c[1]-b[1]*c[0])
		}
	}
	return six / 6e9
}

func allSolids() map[string][]solid {
	return map[string][]solid{"office": officeSolids(), "frames": plainFrames(), "mouths": mouthFrames(), "shed": shedSolids(), "starter": starterSolids()}
}

func TestSolidsAreClosedAndLookOutward(t *testing.T) {
	for scene, solids := range allSolids() {
		names := map[string]bool{}
		for _, s := range solids {
			if why := unsound(s); why != "" {
				t.Errorf("%s: %s: %s", scene, s.name, why)
			}
			if names[s.name] {
				t.Errorf("%s: two bodies named %s", scene, s.name)
			}
			names[s.name] = true
		}
	}
}

// Planted defects must be found.
func TestUnsoundFindsDefects(t *testing.T) {
	missing := officeShell()
	missing.faces = missing.faces[1:]
	flipped := officeShell()
	f := &flipped.faces[7]
	f.corners = []point{f.corners[3], f.corners[2], f.corners[1], f.corners[0]}
	double := officeShell()
	double.faces = append(double.faces, double.faces[3])
	inside := box("inside out", point{0, 0, 0}, point{1000, 1000, 1000}, "g", "m")
	for i := range inside.faces {
		c := inside.faces[i].corners
		inside.faces[i].corners = []point{c[3], c[2], c[1], c[0]}
	}
	for name, s := range map[string]solid{"missing": missing, "flipped": flipped, "double": double, "inside out": inside} {
		if unsound(s) == "" {
			t.Errorf("%s face: not found", name)
		}
	}
}

func TestVolumes(t *testing.T) {
	for _, c := range []struct {
		name string
		s    solid
		want float64 // m3, exact: products of the dimensions
	}{
		{"shell", officeShell(), 12.6*9.6*3.8 - 12*9*3.2 - 6*1.6*2.1*0.3},
		{"shed", shedSolids()[0], 17 * (9*4.45 + 9*2.0/2)},
		{"frame", plainFrames()[0], 0.06 * (1.62*2.12 - 1.49*(1.09+0.79))},
	} {
		// 1e-9 m3: rounding of sums of a few thousand float64 terms.
		if got := volumeM3(c.s); got < c.want-1e-9 || got > c.want+1e-9 {
			t.Errorf("%s: %.12g m3, want %.12g", c.name, got, c.want)
		}
	}
}

// Materials and groups of the room's inner surfaces cover what they should.
func TestInnerSurfaces(t *testing.T) {
	area := map[string]float64{} // m2 by group
	for _, f := range officeShell().faces {
		a, b, c := f.corners[0], f.corners[1], f.corners[2]
		w, h := 0, 0
		for axis := range a {
			w += max(b[axis]-a[axis], a[axis]-b[axis])
			h += max(c[axis]-b[axis], b[axis]-c[axis])
		}
		area[f.group] += float64(w) * float64(h) / 1e6
	}
	for group, want := range map[string]float64{ // exact: products of the dimensions
		"floor": 108, "ceiling": 108, "back_wall": 38.4, "left_wall": 28.8, "right_wall": 28.8,
		"window_wall": 38.4 - 6*1.6*2.1, "reveals": 6 * 2 * (1.6 + 2.1) * 0.3,
	} {
		if got := area[group]; got < want-1e-9 || got > want+1e-9 {
			t.Errorf("%s: %g m2, want %g", group, got, want)
		}
	}
}

// inBody tells whether a point lies in one of the bodies, by the parity of
// crossings of a slanting ray with the faces' fans.
func inBody(solids []solid, p [3]float64) string {
	d := [3]float64{0.5773, 0.2113, 0.7887} // no axis, no diagonal of the model
	for _, s := range solids {
		hits := 0
		for _, f := range s.faces {
			for i := 1; i+1 < len(f.corners); i++ {
				if crosses(p, d, f.corners[0], f.corners[i], f.corners[i+1]) {
					hits++
				}
			}
		}
		if hits%2 == 1 {
			return s.name
		}
	}
	return ""
}

// crosses is the ray and triangle intersection of Moeller and Trumbore 1997.
func crosses(o, d [3]float64, a, b, c point) bool {
	sub := func(p, q point) [3]float64 {
		return [3]float64{float64(p[0] - q[0]), float64(p[1] - q[1]), float64(p[2] - q[2])}
	}
	cross := func(p, q [3]float64) [3]float64 {
		return [3]float64{p[1]*q[2] - p[2]*q[1], p[2]*q[0] - p[0]*q[2], p[0]*q[1] - p[1]*q[0]}
	}
	dot := func(p, q [3]float64) float64 { return p[0]*q[0] + p[1]*q[1] + p[2]*q[2] }
	e1, e2 := sub(b, a), sub(c, a)
	pv := cross(d, e2)
	det := dot(e1, pv)
	if det == 0 {
		return false
	}
	tv := [3]float64{o[0] - float64(a[0]), o[1] - float64(a[1]), o[2] - float64(a[2])}
	u := dot(tv, pv) / det
	qv := cross(tv, e1)
	v := dot(d, qv) / det
	return u >= 0 && v >= 0 && u+v <= 1 && dot(e2, qv)/det > 0
}

// Eyes and sensors of the scene as it is built stand in the room's air.
func TestReceiversStandFree(t *testing.T) {
	for _, c := range []struct {
		fsys           fs.FS
		project        string
		solids         []solid
		eyes, sensors  int // at least
		lengthM, wideM float64
	}{
		{demo.FS(), demo.Project, append(officeSolids(), plainFrames()...), 12, 200, 12, 9},
		{demo.Starter(), demo.StarterProject, starterSolids(), 2, 50, 4, 6},
	} {
		p, err := project.Load(c.fsys, c.project)
		if err != nil {
			t.Fatal(err)
		}
		s, err := scene.Build(c.fsys, p)
		if err != nil {
			t.Fatal(err)
		}
		if !p.Invented {
			t.Errorf("%s: not marked as invented", c.project)
		}
		if len(s.Notes) > 0 {
			t.Errorf("%s: notes %q, want none", c.project, s.Notes)
		}
		if len(s.Viewpoints) < c.eyes || s.Sensors() < c.sensors {
			t.Errorf("%s: %d eyes and %d sensors, want %d and %d", c.project, len(s.Viewpoints), s.Sensors(), c.eyes, c.sensors)
		}
		free := func(what string, v r3.Vec, clearM float64) {
			if in := inBody(c.solids, [3]float64{1000 * v.X, 1000 * v.Y, 1000 * v.Z}); in != "" {
				t.Errorf("%s: %s at %v is inside %s", c.project, what, v, in)
			}
			if v.X < clearM || v.X > c.lengthM-clearM || v.Y < clearM || v.Y > c.wideM-clearM {
				t.Errorf("%s: %s at %v is closer than %g m to a wall", c.project, what, v, clearM)
			}
		}
		for _, v := range s.Viewpoints {
			free(v.Name, v.Position, 0.3)
		}
		for _, w := range s.WorkPlanes {
			for _, r := range w.Sensors {
				free("a sensor", r.Position, 0.5)
			}
		}
	}
}

func TestInBodyFindsBodies(t *testing.T) {
	solids := officeSolids()
	for _, c := range []struct {
		at   [3]float64
		want string
	}{
		{[3]float64{1600, 8500, 400}, "plan_chest_1"},
		{[3]float64{6003, -151, 700}, "building"},
		{[3]float64{1600, 1900, 725}, "desk_1_top"},
		{[3]float64{6003, 4503, 1511}, ""},
	} {
		if got := inBody(solids, c.at); got != c.want {
			t.Errorf("%v: in %q, want %q", c.at, got, c.want)
		}
	}
}

// Every material of the geometry has a finish in its project file.
func TestMaterialsHaveFinishes(t *testing.T) {
	files, err := texts()
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		project string
		solids  [][]solid
	}{
		{"files/demo.toml", [][]solid{officeSolids(), shedSolids()}},
		{"starter/project.toml", [][]solid{starterSolids()}},
	} {
		for _, solids := range c.solids {
			for _, s := range solids {
				for _, f := range s.faces {
					if !strings.Contains(string(files[c.project]), "\n"+f.material+" = ") {
						t.Fatalf("%s: no finish for material %s", c.project, f.material)
					}
				}
			}
		}
	}
}
