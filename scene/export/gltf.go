package export

import (
	"bufio"
	"io"
	"math"

	"github.com/qmuntal/gltf"
	"github.com/qmuntal/gltf/modeler"
)

// WriteGLB writes binary glTF: a node and a mesh for each piece, in it a
// primitive for each finish, in metres and y up. Surfaces show both sides; there
// are no normals, which makes faces flat. Triangles that are flat in single
// precision are left out; with nothing left the error is ErrEmpty.
//
// Source: Khronos Group, 2021, "glTF 2.0 Specification" (from memory): 3.4
// coordinate system, 3.7.2.1 flat normals, 3.9 materials.
func (m *Model) WriteGLB(w io.Writer) error {
	doc := gltf.NewDocument()
	doc.Asset.Generator = "squint"
	doc.Scenes[0].Name = m.Title
	for _, s := range m.Shades {
		doc.Materials = append(doc.Materials, material(s))
	}
	for i := range m.Pieces {
		mesh := &gltf.Mesh{Name: m.Pieces[i].Name}
		for ts := m.Pieces[i].Triangles; len(ts) > 0; {
			n := 1
			for n < len(ts) && ts[n].Shade == ts[0].Shade {
				n++
			}
			if p := primitive(doc, ts[:n]); p != nil {
				mesh.Primitives = append(mesh.Primitives, p)
			}
			ts = ts[n:]
		}
		if len(mesh.Primitives) == 0 {
			continue
		}
		doc.Meshes = append(doc.Meshes, mesh)
		doc.Nodes = append(doc.Nodes, &gltf.Node{Name: mesh.Name, Mesh: gltf.Index(len(doc.Meshes) - 1)})
		doc.Scenes[0].Nodes = append(doc.Scenes[0].Nodes, len(doc.Nodes)-1)
	}
	if len(doc.Nodes) == 0 {
		return ErrEmpty
	}
	b := bufio.NewWriter(w)
	if err := gltf.NewEncoder(b).Encode(doc); err != nil {
		return err
	}
	return b.Flush() // the encoder drops some errors; this one returns the first
}

// material shows the grey of a shade. A share that passes shows what is behind
// in its stead.
func material(s Shade) *gltf.Material {
	grey, through := s.Reflectance(), s.Transmittance()
	out := &gltf.Material{
		Name:        s.Name,
		DoubleSided: true,
		PBRMetallicRoughness: &gltf.PBRMetallicRoughness{
			BaseColorFactor: &[4]float64{grey, grey, grey, 1 - through},
			MetallicFactor:  gltf.Float(s.Metal()),
			RoughnessFactor: gltf.Float(s.Roughness),
		},
	}
	if through > 0 {
		out.AlphaMode = gltf.AlphaBlend
	}
	return out
}

// primitive writes triangles of one finish, corners in the same place once; nil
// where all are flat.
func primitive(doc *gltf.Document, ts []Triangle) *gltf.Primitive {
	var positions [][3]float32
	var indices []uint32
	known := map[[3]float32]uint32{}
	for _, t := range ts {
		v, ok := single(t.V)
		if !ok {
			continue
		}
		for _, c := range v {
			c = [3]float32{c[0], c[2], 0 - c[1]} // 0 - y, not -y: no minus zero
			k, ok := known[c]
			if !ok {
				k = uint32(len(positions))
				known[c] = k
				positions = append(positions, c)
			}
			indices = append(indices, k)
		}
	}
	if len(indices) == 0 {
		return nil
	}
	p := &gltf.Primitive{
		Attributes: gltf.PrimitiveAttributes{gltf.POSITION: modeler.WritePosition(doc, positions)},
		Material:   gltf.Index(ts[0].Shade),
	}
	// The largest index of a kind is not an index but ends a strip.
	if len(positions) <= math.MaxUint16 {
		short := make([]uint16, len(indices))
		for i, k := range indices {
			short[i] = uint16(k)
		}
		p.Indices = gltf.Index(modeler.WriteIndices(doc, short))
	} else {
		p.Indices = gltf.Index(modeler.WriteIndices(doc, indices))
	}
	return p
}
