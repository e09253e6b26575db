package mesh

import (
	"bytes"
	"fmt"
	"testing"
)

// benchGrid is the number of cells along each side of a square surface, two
// triangles in each.
const benchGrid = 316 // 199,712 triangles

func height(i, j int) float64 { return 0.1 * float64((i*7+j*13)%11) }

func BenchmarkReadOBJ(b *testing.B) {
	var buf bytes.Buffer
	for i := range benchGrid + 1 {
		for j := range benchGrid + 1 {
			fmt.Fprintf(&buf, "v %.6f %.6f %.6f\nvn 0.000000 0.000000 1.000000\n", 0.1*float64(i), 0.1*float64(j), height(i, j))
		}
	}
	for i := range benchGrid {
		for j := range benchGrid {
			a := i*(benchGrid+1) + j + 1
			c := a + benchGrid + 1
			fmt.Fprintf(&buf, "f %d//%d %d//%d %d//%d\nf %d//%d %d//%d %d//%d\n", a, a, c, c, c+1, c+1, a, a, c+1, c+1, a+1, a+1)
		}
	}
	benchRead(b, "a.obj", buf.String())
}

// BenchmarkReadOBJQuads is the same surface, to be cut into triangles.
func BenchmarkReadOBJQuads(b *testing.B) {
	var buf bytes.Buffer
	for i := range benchGrid + 1 {
		for j := range benchGrid + 1 {
			fmt.Fprintf(&buf, "v %.6f %.6f %.6f\n", 0.1*float64(i), 0.1*float64(j), height(i, j))
		}
	}
	for i := range benchGrid {
		for j := range benchGrid {
			a := i*(benchGrid+1) + j + 1
			c := a + benchGrid + 1
			fmt.Fprintf(&buf, "f %d %d %d %d\n", a, c, c+1, a+1)
		}
	}
	benchRead(b, "a.obj", buf.String())
}

func benchFacets() [][9]float32 {
	var facets [][9]float32
	for i := range benchGrid {
		for j := range benchGrid {
			p := func(i, j int) [3]float32 {
				return [3]float32{0.1 * float32(i), 0.1 * float32(j), float32(height(i, j))}
			}
			a, c, d, e := p(i, j), p(i+1, j), p(i+1, j+1), p(i, j+1)
			facets = append(facets,
				[9]float32{a[0], a[1], a[2], c[0], c[1], c[2], d[0], d[1], d[2]},
				[9]float32{a[0], a[1], a[2], d[0], d[1], d[2], e[0], e[1], e[2]})
		}
	}
	return facets
}

func BenchmarkReadBinarySTL(b *testing.B) {
	facets := benchFacets()
	benchRead(b, "a.stl", string(binarySTL("", uint32(len(facets)), facets...)))
}

func BenchmarkReadASCIISTL(b *testing.B) {
	var buf bytes.Buffer
	buf.WriteString("solid grid\n")
	for _, f := range benchFacets() {
		fmt.Fprintf(&buf, "facet normal 0 0 1\n outer loop\n  vertex %g %g %g\n  vertex %g %g %g\n  vertex %g %g %g\n endloop\nendfacet\n",
			f[0], f[1], f[2], f[3], f[4], f[5], f[6], f[7], f[8])
	}
	buf.WriteString("endsolid grid\n")
	benchRead(b, "a.stl", buf.String())
}

func benchRead(b *testing.B, name, text string) {
	fsys := files(name, text)
	b.SetBytes(int64(len(text)))
	b.ReportAllocs()
	b.ResetTimer()
	for b.Loop() {
		m, err := Read(fsys, name, metresZ)
		if err != nil || len(m.Triangles) != 2*benchGrid*benchGrid {
			b.Fatalf("got %v, %v", m, err)
		}
	}
}
