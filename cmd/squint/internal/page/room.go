package page

import (
	"maps"
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/internal/study"
	"squint/materials"
	"squint/scene"
)

// mostTriangles bounds the drawing of the room; beyond it the largest are
// kept. Own choice: 18 bytes each before packing.
const mostTriangles = 200000

// build keeps what is alike in all standings: parts and finishes by what they
// are, as each scene numbers them anew.
type build struct {
	parts    map[PartName]int
	finishes map[Finish]int
	meshes   map[string]int // of Room.Systems, by blob
}

func newBuild() *build {
	return &build{parts: map[PartName]int{}, finishes: map[Finish]int{}, meshes: map[string]int{}}
}

// addRoom packs the geometry: what always stands, and by standing what moves.
// Standings, and alternatives, share what is alike.
func (a *Archive) addRoom(r *study.Result) *build {
	s, g := r.Scene, &a.Design.Room
	b := newBuild()
	*g = Room{Min: vec(s.Bounds.Min), Max: vec(s.Bounds.Max), GroundM: s.GroundLevelM, Parts: []PartName{}, Finishes: []Finish{}, Openings: []Opening{}, Systems: []Mesh{}}
	for _, o := range s.Openings {
		c := o.Rect.Corners()
		g.Openings = append(g.Openings, Opening{o.Name, [4][3]float64{vec(c[0]), vec(c[1]), vec(c[2]), vec(c[3])}, vec(o.Rect.Outward)})
	}
	fabric, _ := split(s)
	kept := largest(fabric, mostTriangles)
	g.Fabric = a.mesh(b, s, kept)
	stood := r.Stood
	if len(stood) == 0 {
		stood = []*scene.Scene{s}
	}
	for _, s := range stood {
		_, systems := split(s)
		left, stands := len(fabric)-len(kept), []int{}
		for _, opening := range slices.Sorted(maps.Keys(systems)) {
			all := systems[opening]
			drawn := largest(all, mostTriangles/len(systems))
			left += len(all) - len(drawn)
			m := a.mesh(b, s, drawn)
			k, ok := b.meshes[m.Numbers.ID]
			if !ok || g.Systems[k].Min != m.Min || g.Systems[k].Max != m.Max {
				k = len(g.Systems)
				b.meshes[m.Numbers.ID] = k
				g.Systems = append(g.Systems, m)
			}
			stands = append(stands, k)
		}
		g.Stands, g.Left = append(g.Stands, stands), append(g.Left, left)
	}
	return b
}

// split parts what always stands from what may move, by opening.
func split(s *scene.Scene) (fabric []*scene.Triangle, systems map[int][]*scene.Triangle) {
	systems = map[int][]*scene.Triangle{}
	for i := range s.Triangles {
		t := &s.Triangles[i]
		switch p := &s.Parts[t.Part]; p.Kind {
		case scene.GroundPlane:
		case scene.System, scene.Pane:
			systems[p.Opening] = append(systems[p.Opening], t)
		default:
			fabric = append(fabric, t)
		}
	}
	return fabric, systems
}

// part is the page's number of a scene's part.
func (b *build) part(g *Room, s *scene.Scene, i int32) int {
	name := PartName{s.Parts[i].Name, int(s.Parts[i].Kind)}
	k, ok := b.parts[name]
	if !ok {
		k = len(g.Parts)
		b.parts[name], g.Parts = k, append(g.Parts, name)
	}
	return k
}

// finish is the page's number of a scene's finish.
func (b *build) finish(g *Room, s *scene.Scene, i int32) int {
	f := finish(s.Finishes[i])
	k, ok := b.finishes[f]
	if !ok {
		k = len(g.Finishes)
		b.finishes[f], g.Finishes = k, append(g.Finishes, f)
	}
	return k
}

func finish(f scene.Finish) Finish {
	front, tau := f.BSDF.Lambert(materials.Front)
	back, _ := f.BSDF.Lambert(materials.Back)
	mirrorFront, through := f.BSDF.Delta(materials.Front, 1)
	mirrorBack, _ := f.BSDF.Delta(materials.Back, 1)
	out := Finish{Name: f.Name, Diffuse: math.Max(front, back), Mirror: math.Max(mirrorFront, mirrorBack), Through: through, Veil: tau}
	glossy := f.BSDF.Gloss(materials.Front) != nil || f.BSDF.Gloss(materials.Back) != nil
	if front == back && !glossy && out.Mirror == 0 && through == 0 && tau == 0 {
		out.Matte = front
	}
	return out
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

// mesh packs triangles of a scene.
func (a *Archive) mesh(b *build, s *scene.Scene, all []*scene.Triangle) Mesh {
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
		fin = append(fin, uint16(min(b.finish(&a.Design.Room, s, t.Finish), math.MaxUint16)))
		part = append(part, uint16(min(b.part(&a.Design.Room, s, t.Part), math.MaxUint16)))
	}
	var p packer
	pack(&p, "corner", "u16", corner)
	pack(&p, "finish", "u16", fin)
	pack(&p, "part", "u16", part)
	m.Numbers = a.add(&p)
	return m
}
