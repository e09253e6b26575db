package mesh

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// Triangle is one face: corners in metres, z up, counter-clockwise seen from
// its front. Group is an index into Mesh.Groups; Material is one into
// Mesh.Materials, or -1 for none.
type Triangle struct {
	V               [3]r3.Vec
	Group, Material int32
}

// Mesh is what a file holds. Every triangle has finite corners and an area
// greater than zero. Groups and Materials list the names that faces use, each
// once, in the order of first use.
type Mesh struct {
	File       string
	Unit       Unit // as stated in Options, not known from the file
	Up         Axis // likewise
	Triangles  []Triangle
	Groups     []string
	Materials  []string
	MissingMTL string   // first MTL file an OBJ asks for that is not there; "" if none
	Degenerate int      // faces or triangles dropped because their area is zero
	Notes      []string // what the user should know, one sentence each
}

// Bounds returns the smallest box (m) around all triangles, and the zero box
// for a mesh without any.
func (m *Mesh) Bounds() r3.Box {
	if len(m.Triangles) == 0 {
		return r3.Box{}
	}
	b := r3.Box{Min: m.Triangles[0].V[0], Max: m.Triangles[0].V[0]}
	for i := range m.Triangles {
		for _, v := range m.Triangles[i].V {
			b.Min = r3.Vec{X: math.Min(b.Min.X, v.X), Y: math.Min(b.Min.Y, v.Y), Z: math.Min(b.Min.Z, v.Z)}
			b.Max = r3.Vec{X: math.Max(b.Max.X, v.X), Y: math.Max(b.Max.Y, v.Y), Z: math.Max(b.Max.Z, v.Z)}
		}
	}
	return b
}

// Area returns the area of the triangle (m²).
func (t *Triangle) Area() float64 {
	return 0.5 * r3.Norm(r3.Cross(r3.Sub(t.V[1], t.V[0]), r3.Sub(t.V[2], t.V[0])))
}

// GroupAreas returns the area (m²) of each group, in the order of Groups.
func (m *Mesh) GroupAreas() []float64 {
	areas := make([]float64, len(m.Groups))
	for i := range m.Triangles {
		areas[m.Triangles[i].Group] += m.Triangles[i].Area()
	}
	return areas
}

// MaterialAreas returns the area (m²) of each material, in the order of
// Materials, and that of the faces without a material.
func (m *Mesh) MaterialAreas() (areas []float64, without float64) {
	areas = make([]float64, len(m.Materials))
	for i := range m.Triangles {
		t := &m.Triangles[i]
		if t.Material < 0 {
			without += t.Area()
			continue
		}
		areas[t.Material] += t.Area()
	}
	return areas, without
}

// GroupIndex returns the index of the group of that name, or -1.
func (m *Mesh) GroupIndex(name string) int32 { return indexOf(m.Groups, name) }

// MaterialIndex returns the index of the material of that name, or -1.
func (m *Mesh) MaterialIndex(name string) int32 { return indexOf(m.Materials, name) }

// GroupTriangles returns the corners (m) of the triangles of a group.
func (m *Mesh) GroupTriangles(group int32) [][3]r3.Vec {
	var out [][3]r3.Vec
	for i := range m.Triangles {
		if m.Triangles[i].Group == group {
			out = append(out, m.Triangles[i].V)
		}
	}
	return out
}

func indexOf(names []string, name string) int32 {
	for i, n := range names {
		if n == name {
			return int32(i)
		}
	}
	return -1
}
