package scene

import (
	"fmt"
	"maps"
	"math"
	"strings"
	"testing"
	"testing/fstest"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/project"
)

// near is the bound on rounding in metres: coordinates of some 10 m, a dozen
// operations, 2^-53 relative each.
const near = 1e-12

func apart(a, b r3.Vec) float64 { return r3.Norm(r3.Sub(a, b)) }

// head and tail make a project around the tables of a test.
const head = `[weather]
file = "w.epw"

[[finish]]
name = "white"
type = "matte"
reflectance = 0.8

[[finish]]
name = "grey"
type = "matte"
reflectance = 0.3

[[finish]]
name = "clear"
type = "glazing"
transmittance = 0.8

`

const tail = `
[[viewpoint]]
name = "eye"
position_m = [2, 3, 1.2]
azimuth_deg = 180
`

// roomMesh is the usual mesh table.
const roomMesh = "[[mesh]]\nfile = \"room.obj\"\nunit = \"m\"\nup = \"z\"\nfinish = \"white\"\n"

// load makes a project of tables between head and tail.
func load(t testing.TB, tables string) *project.Project {
	t.Helper()
	p, err := project.Load(fstest.MapFS{"p.toml": {Data: []byte(head + tables + tail)}}, "p.toml")
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// build makes a scene of tables and files.
func build(t testing.TB, tables string, files map[string]string) (*Scene, error) {
	t.Helper()
	p := load(t, tables)
	fsys := fstest.MapFS{}
	for name, text := range files {
		fsys[name] = &fstest.MapFile{Data: []byte(text)}
	}
	return Build(fsys, p)
}

func mustBuild(t testing.TB, tables string, files map[string]string) *Scene {
	t.Helper()
	s, err := build(t, tables, files)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// obj writes an OBJ file of quads.
type obj struct {
	b strings.Builder
	n int
}

func (o *obj) line(format string, args ...any) *obj {
	fmt.Fprintf(&o.b, format+"\n", args...)
	return o
}

// quad is wound counter-clockwise seen from its front.
func (o *obj) quad(corners ...[3]float64) *obj {
	for _, c := range corners {
		o.line("v %g %g %g", c[0], c[1], c[2])
	}
	o.line("f %d %d %d %d", o.n+1, o.n+2, o.n+3, o.n+4)
	o.n += 4
	return o
}

// room is a box seen from inside, 4 m by 6 m by 2.8 m from the origin, whose
// south side has a hole for a window from x 1 to 3 and z 0.9 to 2.4, in groups
// floor, ceiling and walls, with materials carpet and plaster.
func room() *obj {
	o := &obj{}
	o.line("g floor").line("usemtl carpet").quad([3]float64{0, 0, 0}, [3]float64{4, 0, 0}, [3]float64{4, 6, 0}, [3]float64{0, 6, 0})
	o.line("g ceiling").line("usemtl plaster").quad([3]float64{0, 0, 2.8}, [3]float64{0, 6, 2.8}, [3]float64{4, 6, 2.8}, [3]float64{4, 0, 2.8})
	o.line("g walls")
	o.quad([3]float64{0, 6, 0}, [3]float64{4, 6, 0}, [3]float64{4, 6, 2.8}, [3]float64{0, 6, 2.8})
	o.quad([3]float64{0, 0, 0}, [3]float64{0, 6, 0}, [3]float64{0, 6, 2.8}, [3]float64{0, 0, 2.8})
	o.quad([3]float64{4, 6, 0}, [3]float64{4, 0, 0}, [3]float64{4, 0, 2.8}, [3]float64{4, 6, 2.8})
	for _, w := range [][4]float64{{0, 4, 0, 0.9}, {0, 4, 2.4, 2.8}, {0, 1, 0.9, 2.4}, {3, 4, 0.9, 2.4}} {
		o.quad([3]float64{w[1], 0, w[2]}, [3]float64{w[0], 0, w[2]}, [3]float64{w[0], 0, w[3]}, [3]float64{w[1], 0, w[3]})
	}
	return o
}

// roomWithGlass has a group glass in the hole, facing south.
func roomWithGlass() *obj {
	return room().line("g glass").line("usemtl pane").
		quad([3]float64{1, 0, 0.9}, [3]float64{3, 0, 0.9}, [3]float64{3, 0, 2.4}, [3]float64{1, 0, 2.4})
}

func (o *obj) files() map[string]string { return map[string]string{"room.obj": o.b.String()} }

func with(files map[string]string, name, text string) map[string]string {
	out := maps.Clone(files)
	out[name] = text
	return out
}

// finishOf lists the finishes of the triangles of a part, by name, with areas.
func finishOf(s *Scene, part string) map[string]float64 {
	out := map[string]float64{}
	for _, t := range s.Triangles {
		if s.Parts[t.Part].Name == part {
			out[s.Finishes[t.Finish].Name] += area(t)
		}
	}
	return out
}

func area(t Triangle) float64 {
	return r3.Norm(r3.Cross(r3.Sub(t.V[1], t.V[0]), r3.Sub(t.V[2], t.V[0]))) / 2
}

// box of the triangles of a part.
func box(s *Scene, part string) (lo, hi r3.Vec) {
	var ts []Triangle
	for _, t := range s.Triangles {
		if s.Parts[t.Part].Name == part {
			ts = append(ts, t)
		}
	}
	b := bounds(ts)
	return b.Min, b.Max
}

func sameAreas(t *testing.T, what string, got, want map[string]float64) {
	t.Helper()
	ok := len(got) == len(want)
	for name, a := range want {
		ok = ok && math.Abs(got[name]-a) < 1e-9
	}
	if !ok {
		t.Errorf("%s: got %v, want %v", what, got, want)
	}
}

// sscan reads a vertex line.
func sscan(line string, v *r3.Vec) bool {
	n, _ := fmt.Sscanf(line, "v %g %g %g", &v.X, &v.Y, &v.Z)
	return n == 3
}
