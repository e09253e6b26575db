package page

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
)

// mostTriangles bounds the drawing of the room; beyond it the largest are
// kept. Own choice: 18 bytes each before packing.
const mostTriangles = 200000

// addRoom packs the geometry: what stands in all alternatives apart from the
// systems, so that alternatives share it.
func (a *Archive) addRoom(s *scene.Scene) {
	g := &a.Design.Room
	*g = Room{Min: vec(s.Bounds.Min), Max: vec(s.Bounds.Max), GroundM: s.GroundLevelM, Parts: []PartName{}, Finishes: []Finish{}, Openings: []Opening{}}
	for _, p := range s.Parts {
		g.Parts = append(g.Parts, PartName{p.Name, int(p.Kind)})
	}
	for _, f := range s.Finishes {
		g.Finishes = append(g.Finishes, finish(f))
	}
	for _, o := range s.Openings {
		c := o.Rect.Corners()
		g.Openings = append(g.Openings, Opening{o.Name, [4][3]float64{vec(c[0]), vec(c[1]), vec(c[2]), vec(c[3])}, vec(o.Rect.Outward)})
	}
	var fabric, systems []*scene.Triangle
	for i := range s.Triangles {
		t := &s.Triangles[i]
		switch s.Parts[t.Part].Kind {
		case scene.GroundPlane:
		case scene.System, scene.Pane:
			systems = append(systems, t)
		default:
			fabric = append(fabric, t)
		}
	}
	g.Triangles = len(fabric) + len(systems)
	kept := largest(fabric, mostTriangles)
	g.Left = len(fabric) - len(kept)
	g.Fabric, g.Systems = a.mesh(kept), a.mesh(largest(systems, mostTriangles))
}

func finish(f scene.Finish) Finish {
	front, tau := f.BSDF.Lambert(materials.Front)
	back, _ := f.BSDF.Lambert(materials.Back)
	mirrorFront, through := f.BSDF.Delta(materials.Front, 1)
	mirrorBack, _ := f.BSDF.Delta(materials.Back, 1)
	return Finish{f.Name, math.Max(front, back), math.Max(mirrorFront, mirrorBack), through, tau}
}

// largest keeps n triangles in their order.
func largest(all []*scene.Triangle, n int) []*scene.Triangle {
	if len(all) <= n {
		return all
	}
	area := func(t *scene.Triangle) float64 {
		return r3.Norm(r3.Cross(r3.Sub(t.V[1], t.V[0]), r3.Sub(t.V[2], t.V[0])))
	}
	areas := make([]float64, len(all))
	for i, t := range all {
		areas[i] = area(t)
	}
	slices.Sort(areas)
	bound := areas[len(areas)-n]
	var out []*scene.Triangle
	for _, t := range all {
		if area(t) >= bound && len(out) < n {
			out = append(out, t)
		}
	}
	return out
}

func (a *Archive) mesh(all []*scene.Triangle) Mesh {
	var m Mesh
	if len(all) == 0 {
		var p packer
		pack(&p, "corner", "u16", []uint16{})
		pack(&p, "finish", "u16", []uint16{})
		pack(&p, "part", "u16", []uint16{})
		m.Numbers = a.add(&p)
		return m
	}
	m.Min, m.Max = vec(all[0].V[0]), vec(all[0].V[0])
	for _, t := range all {
		for _, v := range t.V {
			for k, x := range vec(v) {
				m.Min[k], m.Max[k] = math.Min(m.Min[k], x), math.Max(m.Max[k], x)
			}
		}
	}
	var corner, fin, part []uint16
	for _, t := range all {
		for _, v := range t.V {
			for k, x := range vec(v) {
				corner = append(corner, uint16(math.Round((x-m.Min[k])/math.Max(m.Max[k]-m.Min[k], 1e-9)*65535)))
			}
		}
		fin = append(fin, uint16(t.Finish))
		part = append(part, uint16(min(t.Part, math.MaxUint16)))
	}
	var p packer
	pack(&p, "corner", "u16", corner)
	pack(&p, "finish", "u16", fin)
	pack(&p, "part", "u16", part)
	m.Numbers = a.add(&p)
	return m
}
