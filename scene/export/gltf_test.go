package export

import (
	"bytes"
	"fmt"
	"math"
	"testing"

	"github.com/qmuntal/gltf"
	"github.com/qmuntal/gltf/modeler"
	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
)

func readGLB(t *testing.T, m *Model) *gltf.Document {
	t.Helper()
	doc := new(gltf.Document)
	if err := gltf.NewDecoder(bytes.NewReader(written(t, m.WriteGLB))).Decode(doc); err != nil {
		t.Fatal(err)
	}
	return doc
}

// glbTriangles turns the document back to z up: by hand, y up (x, y, z) is
// (x, -z, y). Indices must lie within their positions.
func glbTriangles(t *testing.T, doc *gltf.Document) map[string]int {
	t.Helper()
	out := map[string]int{}
	if len(doc.Scenes) != 1 || doc.Scene == nil || len(doc.Scenes[*doc.Scene].Nodes) != len(doc.Nodes) {
		t.Fatalf("not all nodes in one scene")
	}
	for _, n := range doc.Nodes {
		if n.Matrix != gltf.DefaultMatrix || n.Rotation != gltf.DefaultRotation || n.Scale != gltf.DefaultScale || n.Translation != gltf.DefaultTranslation {
			t.Errorf("node %s is moved", n.Name)
		}
		for _, p := range doc.Meshes[*n.Mesh].Primitives {
			at, err := modeler.ReadPosition(doc, doc.Accessors[p.Attributes[gltf.POSITION]], nil)
			if err != nil {
				t.Fatal(err)
			}
			index, err := modeler.ReadIndices(doc, doc.Accessors[*p.Indices], nil)
			if err != nil || len(index)%3 != 0 || p.Mode != gltf.PrimitiveTriangles {
				t.Fatalf("%v, %d indices", err, len(index))
			}
			for i := 0; i < len(index); i += 3 {
				var v [3]r3.Vec
				for k := range v {
					c := at[index[i+k]]
					v[k] = r3.Vec{X: float64(c[0]), Y: 0 - float64(c[2]), Z: float64(c[1])}
				}
				out[corners(n.Name, doc.Materials[*p.Material].Name, v)]++
			}
		}
	}
	return out
}

func wantedSingles(s *scene.Scene) map[string]int {
	out := map[string]int{}
	for _, t := range s.Triangles {
		if p := s.Parts[t.Part]; notGround(p) {
			out[corners(p.Name, s.Finishes[t.Finish].Name, rounded(t.V))]++
		}
	}
	return out
}

// glTF gives back every triangle with its part and finish in single precision.
func TestGLBRoundTrip(t *testing.T) {
	s := built(t)
	m := model(t, s, Options{})
	doc := readGLB(t, m)
	if n, first := differences(glbTriangles(t, doc), wantedSingles(s)); n > 0 {
		t.Errorf("%d triangles differ, such as %s", n, first)
	}
	// By hand: floor, walls, ceiling, pane, shelf top, underside and edge, cloth;
	// white, grey, metal, bright, clear, cloth.
	if len(doc.Nodes) != 8 || len(doc.Meshes) != 8 || len(doc.Materials) != 6 {
		t.Errorf("%d nodes, %d meshes, %d materials; want 8, 8, 6", len(doc.Nodes), len(doc.Meshes), len(doc.Materials))
	}
	// Twin: a corner off by a bit of single precision is seen.
	v := &m.Pieces[0].Triangles[0].V[0].X
	*v = float64(math.Nextafter32(float32(*v), 10))
	if n, _ := differences(glbTriangles(t, readGLB(t, m)), wantedSingles(s)); n != 2 {
		t.Errorf("a corner off by a bit: %d differences, want 2", n)
	}
}

// The accessors' bounds are those of their numbers, all finite, and together
// those of the scene.
func TestGLBBounds(t *testing.T) {
	s := built(t)
	doc := readGLB(t, model(t, s, Options{}))
	lo, hi := [3]float64{inf(), inf(), inf()}, [3]float64{-inf(), -inf(), -inf()}
	for _, mesh := range doc.Meshes {
		for _, p := range mesh.Primitives {
			a := doc.Accessors[p.Attributes[gltf.POSITION]]
			at, err := modeler.ReadPosition(doc, a, nil)
			if err != nil {
				t.Fatal(err)
			}
			own := [2][3]float64{{inf(), inf(), inf()}, {-inf(), -inf(), -inf()}}
			for _, c := range at {
				for k, x := range c {
					x := float64(x)
					if math.IsNaN(x) || math.IsInf(x, 0) || x == 0 && math.Signbit(x) {
						t.Fatalf("%s: coordinate %g", mesh.Name, x)
					}
					own[0][k], own[1][k] = min(own[0][k], x), max(own[1][k], x)
				}
			}
			if fmt.Sprint(a.Min, a.Max) != fmt.Sprint(own[0], own[1]) {
				t.Errorf("%s: bounds %v %v, the numbers' %v", mesh.Name, a.Min, a.Max, own)
			}
			for k := range 3 {
				lo[k], hi[k] = min(lo[k], own[0][k]), max(hi[k], own[1][k])
			}
		}
	}
	f := func(x float64) float64 { return float64(float32(x)) }
	b := s.Bounds // z up
	if lo != [3]float64{f(b.Min.X), f(b.Min.Z), -f(b.Max.Y)} || hi != [3]float64{f(b.Max.X), f(b.Max.Z), -f(b.Min.Y)} {
		t.Errorf("bounds %v to %v, the scene's (z up) %v", lo, hi, b)
	}
}

// More corners than 16 bits count take 32.
func TestGLBLargePrimitive(t *testing.T) {
	s := &scene.Scene{Parts: []scene.Part{{Name: "p"}}, Finishes: built(t).Finishes[:1]}
	for i := range 30000 {
		x := float64(i)
		s.Triangles = append(s.Triangles, scene.Triangle{V: [3]r3.Vec{{X: x}, {X: x, Y: 1}, {X: x, Z: 1}}})
	}
	doc := readGLB(t, model(t, s, Options{}))
	if n, first := differences(glbTriangles(t, doc), wantedSingles(s)); n > 0 {
		t.Errorf("%d triangles differ, such as %s", n, first)
	}
	if c := doc.Accessors[*doc.Meshes[0].Primitives[0].Indices].ComponentType; c != gltf.ComponentUint {
		t.Errorf("indices %v, want 32 bits", c)
	}
}

func TestGLBMaterials(t *testing.T) {
	doc := readGLB(t, model(t, built(t), Options{Ground: true}))
	if doc.Asset.Version != "2.0" || doc.Asset.Generator != "squint" {
		t.Errorf("asset %+v", doc.Asset)
	}
	byName := map[string]*gltf.Material{}
	for _, m := range doc.Materials {
		byName[m.Name] = m
		if !m.DoubleSided {
			t.Errorf("%s shows one side only", m.Name)
		}
	}
	for _, c := range []struct {
		name                          string
		grey, alpha, metal, roughness float64 // from the office's finishes; -1: not asked
	}{
		{"white wall", 0.8, 1, 0, 1},
		{"grey", 0.3, 1, 0, 1},
		{"metal", 0.85, 1, 0.8, -1},
		{"bright", 0.95, 1, 0.9 / 0.95, 0},
		{"clear", -1, 1 - 0.78, 0, 0},
		{"roller screen", 0.4, 1 - 0.05 - 0.1, 0, 1},
		{"ground", 0.2, 1, 0, 1}, // the mean of the project's months
	} {
		m := byName[c.name]
		if m == nil {
			t.Errorf("no %s in %v", c.name, byName)
			continue
		}
		p := m.PBRMetallicRoughness
		near := func(got, want float64) bool { return want == -1 || math.Abs(got-want) < 1e-9 } // the glazing's solver
		base := *p.BaseColorFactor
		if !near(base[0], c.grey) || base[1] != base[0] || base[2] != base[0] || !near(base[3], c.alpha) ||
			!near(*p.MetallicFactor, c.metal) || !near(*p.RoughnessFactor, c.roughness) {
			t.Errorf("%s: base %v, metal %g, roughness %g; want %+v", c.name, base, *p.MetallicFactor, *p.RoughnessFactor, c)
		}
		if (m.AlphaMode == gltf.AlphaBlend) != (c.alpha < 1) {
			t.Errorf("%s: alpha mode %v with alpha %g", c.name, m.AlphaMode, c.alpha)
		}
	}
	if r := *byName["metal"].PBRMetallicRoughness.RoughnessFactor; !(r > 0 && r < 1) {
		t.Errorf("metal: roughness %g, want between 0 and 1", r)
	}
}
