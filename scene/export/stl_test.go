package export

import (
	"bytes"
	"errors"
	"io"
	"math"
	"testing"
	"testing/fstest"

	"github.com/hschendel/stl"
	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/scene/mesh"
)

func writers(m *Model) map[string]func(io.Writer) error {
	return map[string]func(io.Writer) error{
		"obj": func(w io.Writer) error { return m.WriteOBJ(w, "x.mtl") },
		"mtl": m.WriteMTL, "stl": m.WriteSTL, "glb": m.WriteGLB,
	}
}

func written(t testing.TB, write func(io.Writer) error) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := write(&b); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// rounded is a scene's own triangle as single precision holds it.
func rounded(v [3]r3.Vec) [3]r3.Vec {
	for i, c := range v {
		v[i] = r3.Vec{X: float64(float32(c.X)), Y: float64(float32(c.Y)), Z: float64(float32(c.Z))}
	}
	return v
}

func singles(s *scene.Scene) map[string]int {
	out := map[string]int{}
	for _, t := range s.Triangles {
		if notGround(s.Parts[t.Part]) {
			out[corners("", "", rounded(t.V))]++
		}
	}
	return out
}

// STL gives back every triangle in single precision, and its area.
func TestSTLRoundTrip(t *testing.T) {
	s := built(t)
	m := model(t, s, Options{})
	data := written(t, m.WriteSTL)
	got, err := mesh.Read(fstest.MapFS{"x.stl": {Data: data}}, "x.stl", mesh.Options{Unit: mesh.Metre, Up: mesh.Z})
	if err != nil || got.Degenerate > 0 || len(got.Notes) > 0 {
		t.Fatalf("%v, %d dropped, notes %q", err, got.Degenerate, got.Notes)
	}
	read := map[string]int{}
	for _, tri := range got.Triangles {
		read[corners("", "", tri.V)]++
	}
	want := singles(s)
	if n, first := differences(read, want); n > 0 {
		t.Errorf("%d of %d triangles differ, such as %s", n, len(want), first)
	}
	var area float64
	for _, a := range partAreas(s) {
		area += a
	}
	// A corner moves by at most 2^-24 of the largest coordinate, 6 m, on each
	// axis; the area of a triangle by half its perimeter times twice that. Sides
	// are at most 7 m: 40 triangles x 10.5 x 2 x sqrt(3) x 6 x 2^-24 m2.
	bound := 40 * 10.5 * 2 * math.Sqrt(3) * 6 * 0x1p-24
	if diff := math.Abs(got.GroupAreas()[0] - area); diff > bound {
		t.Errorf("area off by %g m2, want at most %g", diff, bound)
	}
	if m.RoundingM <= 0 || m.RoundingM > 6*0x1p-24 {
		t.Errorf("rounding %g m, want above 0 and at most %g", m.RoundingM, 6*0x1p-24)
	}
}

// The file is binary, says its unit, and its normals point to the front.
func TestSTLFile(t *testing.T) {
	data := written(t, model(t, built(t), Options{SystemsOnly: true}).WriteSTL)
	if want := 84 + 50*26; len(data) != want { // 3D Systems 1989: 84 bytes and 50 a triangle
		t.Errorf("%d bytes, want %d", len(data), want)
	}
	if !bytes.HasPrefix(data, []byte(stlComment)) || bytes.HasPrefix(data, []byte("solid")) || len(stlComment) > 80 {
		t.Errorf("begins %q", data[:80])
	}
	got, err := stl.ReadAll(bytes.NewReader(data))
	if err != nil || got.IsAscii || len(got.Triangles) != 26 {
		t.Fatalf("%v, %+v", err, got)
	}
	for i, tri := range got.Triangles {
		var v [3]r3.Vec
		for k, c := range tri.Vertices {
			v[k] = r3.Vec{X: float64(c[0]), Y: float64(c[1]), Z: float64(c[2])}
		}
		n := r3.Unit(r3.Cross(r3.Sub(v[1], v[0]), r3.Sub(v[2], v[0])))
		d := r3.Sub(n, r3.Vec{X: float64(tri.Normal[0]), Y: float64(tri.Normal[1]), Z: float64(tri.Normal[2])})
		if !(r3.Norm(d) <= 2*0x1p-24) { // rounding of three numbers up to 1
			t.Errorf("triangle %d: normal %v, want %v", i, tri.Normal, n)
		}
	}
}

// Triangles that single precision flattens are counted and left out.
func TestFlatIsLeftOut(t *testing.T) {
	m := model(t, strange(t), Options{})
	if m.Flat != 1 || m.RoundingM < 1e-5 || m.RoundingM > 5001*0x1p-24 {
		t.Errorf("flat %d, rounding %g m; want 1, and 1e-5 to 3e-4", m.Flat, m.RoundingM)
	}
	got, err := stl.ReadAll(bytes.NewReader(written(t, m.WriteSTL)))
	if err != nil || len(got.Triangles) != 13 {
		t.Errorf("%v, %d triangles, want 13", err, len(got.Triangles))
	}
	for i := range m.Pieces {
		for k := range m.Pieces[i].Triangles {
			v := &m.Pieces[i].Triangles[k].V
			v[2] = v[1]
		}
	}
	m.Flat = m.Triangles()
	for _, name := range []string{"stl", "glb"} {
		if err := writers(m)[name](io.Discard); !errors.Is(err, ErrEmpty) {
			t.Errorf("%s of flat triangles alone: got %v, want ErrEmpty", name, err)
		}
	}
}

// The same scene, built again, gives the same bytes; another does not.
func TestSameBytes(t *testing.T) {
	a, b := writers(model(t, built(t), Options{})), writers(model(t, built(t), Options{}))
	s := built(t)
	s.Triangles[0].V[0].X += 0.001
	s.Finishes[0].Name = "other"
	c := writers(model(t, s, Options{}))
	for name := range a {
		first := written(t, a[name])
		for range 3 {
			if !bytes.Equal(first, written(t, b[name])) {
				t.Errorf("%s: bytes differ", name)
			}
		}
		if bytes.Equal(first, written(t, c[name])) {
			t.Errorf("%s: another scene has the same bytes", name)
		}
	}
}

func BenchmarkWrite(b *testing.B) {
	s := &scene.Scene{Parts: []scene.Part{{Name: "p"}}, Finishes: built(b).Finishes[:1]}
	const edge = 300
	for i := range edge {
		for k := range edge {
			x, y := 0.1*float64(i), 0.1*float64(k)
			a, c := r3.Vec{X: x, Y: y}, r3.Vec{X: x + 0.1, Y: y + 0.1}
			s.Triangles = append(s.Triangles, scene.Triangle{V: [3]r3.Vec{a, {X: c.X, Y: a.Y}, c}}, scene.Triangle{V: [3]r3.Vec{a, c, {X: a.X, Y: c.Y}}})
		}
	}
	m := model(b, s, Options{})
	for name, write := range writers(m) {
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				if err := write(io.Discard); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
