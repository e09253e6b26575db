package export

import (
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
)

func TestDistinct(t *testing.T) {
	for _, c := range []struct{ names, want string }{
		{"a|b|c", "a|b|c"},
		{"a|a|a", "a|a 2|a 3"},
		{"a|a|a 2", "a|a 3|a 2"},
		{"a 2|a|a", "a 2|a|a 3"},
		{"a|a 2|a 2|a", "a|a 2|a 2 2|a 3"},
		{"|", "| 2"},
	} {
		if got := strings.Join(distinct(strings.Split(c.names, "|"), " "), "|"); got != c.want {
			t.Errorf("%q: got %q, want %q", c.names, got, c.want)
		}
	}
}

// Whatever parts and finishes are called, OBJ keeps them apart: our reader
// finds each triangle under the name that was written for it.
func FuzzOBJNames(f *testing.F) {
	for _, s := range [][4]string{
		{"a", "b", "x", "y"}, {"a b", "a_b", "x", "x"}, {"", "_", "#", "\\"}, {"a\nf 1 2 3", "\u00a0", "\xff", "off"},
		{"a ", "a", "\u2028", "\x00"}, {"x\u0085", "\ufeff", "mtl\\", "\"q\""},
	} {
		f.Add(s[0], s[1], s[2], s[3])
	}
	f.Fuzz(func(t *testing.T, a, b, x, y string) {
		s := &scene.Scene{
			Parts:    []scene.Part{{Name: a, Opening: -1}, {Name: b, Opening: 3}},
			Finishes: []scene.Finish{{Name: x, BSDF: materials.Matte{}}, {Name: y, BSDF: materials.Matte{}}},
		}
		for i := range int32(4) {
			z := float64(i)
			s.Triangles = append(s.Triangles, scene.Triangle{V: [3]r3.Vec{{Z: z}, {X: 1, Z: z}, {Y: 1, Z: z}}, Part: i / 2, Finish: i % 2})
		}
		m := model(t, s, Options{})
		got := readOBJ(t, m)
		if len(got.Triangles) != 4 || len(got.Groups) != 2 || len(got.Materials) != 2 {
			t.Fatalf("%d triangles, groups %q, materials %q of parts %q, %q and finishes %q, %q", len(got.Triangles), got.Groups, got.Materials, a, b, x, y)
		}
		for i, tri := range got.Triangles {
			if tri.V[0].Z != float64(i) || got.Groups[tri.Group] != m.objPieces()[i/2] || got.Materials[tri.Material] != m.objShades()[i%2] {
				t.Errorf("triangle %d: group %q, material %q", i, got.Groups[tri.Group], got.Materials[tri.Material])
			}
		}
	})
}
