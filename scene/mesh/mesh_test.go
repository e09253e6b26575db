package mesh

import (
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

func TestMeshQueries(t *testing.T) {
	m, err := Read(files("a.obj", `
v 0 0 0
v 2 0 0
v 2 3 0
v 0 3 0
v 0 0 4
g floor
usemtl oak
f 1 2 3 4
g wall
usemtl
f 1 2 5
`), "a.obj", metresZ)
	if err != nil {
		t.Fatal(err)
	}
	// Exact: rectangle 2 x 3, and half of 2 x 4.
	if got := m.GroupAreas(); !slices.Equal(got, []float64{6, 4}) {
		t.Errorf("group areas %v, want [6 4]", got)
	}
	areas, without := m.MaterialAreas()
	if !slices.Equal(areas, []float64{6}) || without != 4 {
		t.Errorf("material areas %v and %g, want [6] and 4", areas, without)
	}
	if got := m.Bounds(); got != r3.NewBox(0, 0, 0, 2, 3, 4) {
		t.Errorf("bounds %v", got)
	}
	if m.GroupIndex("wall") != 1 || m.GroupIndex("Wall") != -1 || m.MaterialIndex("oak") != 0 || m.MaterialIndex("") != -1 {
		t.Errorf("indices of names are wrong: %v %v", m.Groups, m.Materials)
	}
	if got := m.GroupTriangles(1); len(got) != 1 || got[0] != [3]r3.Vec{{}, {X: 2}, {Z: 4}} {
		t.Errorf("triangles of wall: %v", got)
	}
	if got := (&Mesh{}).Bounds(); got != (r3.Box{}) {
		t.Errorf("bounds of nothing: %v", got)
	}
}

func TestFlat(t *testing.T) {
	third := r3.Vec{X: 0.1, Y: 0.1, Z: 0.1}
	tests := []struct {
		name string
		v    [3]r3.Vec
		want bool // exact geometry of the decimals written
	}{
		{"right angle", [3]r3.Vec{{}, {X: 1}, {Y: 1}}, false},
		{"a millimetre far away", [3]r3.Vec{{X: 5e5}, {X: 5e5 + 0.001}, {X: 5e5, Y: 0.001}}, false},
		{"thin as paper", [3]r3.Vec{{}, {X: 100}, {X: 50, Y: 1e-4}}, false},
		{"one point", [3]r3.Vec{third, third, third}, true},
		{"two points", [3]r3.Vec{{}, third, third}, true},
		{"on a line, rounded", [3]r3.Vec{{}, third, {X: 0.3, Y: 0.3, Z: 0.3}}, true},
		{"on a line far away", [3]r3.Vec{{X: 4e5 + 0.1, Y: 3e5 + 0.1}, {X: 4e5 + 0.2, Y: 3e5 + 0.2}, {X: 4e5 + 0.7, Y: 3e5 + 0.7}}, true},
	}
	for _, tt := range tests {
		for i := range 3 {
			v := [3]r3.Vec{tt.v[i], tt.v[(i+1)%3], tt.v[(i+2)%3]}
			if got := flat(v); got != tt.want {
				t.Errorf("%s, corner %d first: flat is %v, want %v", tt.name, i, got, tt.want)
			}
		}
	}
}

// checkMesh fails unless a mesh is what Read promises.
func checkMesh(t *testing.T, m *Mesh) {
	t.Helper()
	if len(m.Triangles) == 0 {
		t.Error("no triangles and no error")
	}
	for i, tri := range m.Triangles {
		if tri.Group < 0 || int(tri.Group) >= len(m.Groups) || tri.Material < -1 || int(tri.Material) >= len(m.Materials) {
			t.Fatalf("triangle %d: group %d of %d, material %d of %d", i, tri.Group, len(m.Groups), tri.Material, len(m.Materials))
		}
		if a := tri.Area(); !(a > 0) || math.IsInf(a, 0) {
			t.Fatalf("triangle %d: area %g", i, a)
		}
	}
	for _, names := range [][]string{m.Groups, m.Materials} {
		for i, name := range names {
			checkName(t, name)
			if slices.Contains(names[:i], name) {
				t.Errorf("name %q twice", name)
			}
		}
	}
}
