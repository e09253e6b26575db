package trace

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
)

// Focus asks how strongly mirrors concentrate one sun. It is not safe for
// concurrent use.
type Focus struct {
	world  *World
	sun    r3.Vec
	hidden func(dir r3.Vec) bool
	live   []lit
	images []Image
	seen   []glimpse
}

// lit is a facet that mirrors the sun; n is its normal, dir the direction in
// which the sun's image stands.
type lit struct {
	f      *facet
	n, dir r3.Vec
	side   float64 // 1 where the sun is on the front, -1 on the back
	// stands is the number of facets that this one stands for in Rough, 0 where
	// another stands for it.
	stands float64
}

// glimpse is the part of the disc that one facet covers: its share of the
// disc, its middle, and the distance to the mirror.
type glimpse struct {
	k     int
	share float64
	dir   r3.Vec
	distM float64
}

// Concentration is the light at a point in multiples of the sun's normal
// irradiance: what arrives from the sun itself and what mirrors add. Where a
// normal is given both are on the plane square to it, else they are summed
// over all directions (fluence rate).
type Concentration struct {
	Sun, Mirrors float64
	// Part is the mirror that adds most, -1 for none; DistanceM is its mean
	// distance from the point, along the light.
	Part      int32
	DistanceM float64
}

// Total is sun and mirrors together.
func (c Concentration) Total() float64 { return c.Sun + c.Mirrors }

// Focus prepares for a sun in unit direction sun. hidden tells directions that
// look at the ground or behind the horizon line.
func (w *World) Focus(sun r3.Vec, hidden func(dir r3.Vec) bool) *Focus {
	f := &Focus{world: w, sun: sun, hidden: hidden}
	for i := range w.specular.facets {
		fc := &w.specular.facets[i]
		if !fc.sharp {
			continue
		}
		n := w.normal[fc.prim]
		side, cs, turned := materials.Front, r3.Dot(sun, n), 1.0
		if cs < 0 {
			side, cs, turned = materials.Back, -cs, -1
		}
		if cs == 0 {
			continue
		}
		if mirror, _ := w.tris[fc.prim].bsdf.Delta(side, cs); mirror > 0 {
			f.live = append(f.live, lit{f: fc, n: n, dir: reflect(sun, n), side: turned, stands: 1})
		}
	}
	f.thin()
	return f
}

// thin lets some of the small facets stand for their neighbours where there
// are more than roughFacets. The step is odd, since a mesh's triangles often
// come as the halves of quadrilaterals.
func (f *Focus) thin() {
	step := (len(f.live) + roughFacets - 1) / roughFacets
	if step <= 1 {
		return
	}
	step |= 1
	mean := 0.0
	for i := range f.live {
		mean += f.live[i].f.areaM2 / float64(len(f.live))
	}
	n := 0
	for i := range f.live {
		if f.live[i].f.areaM2 > 3*mean {
			continue
		}
		f.live[i].stands = 0
		if n%step == step/2 {
			f.live[i].stands = float64(step)
		}
		n++
	}
}

// Empty reports that no facet mirrors the sun sharply.
func (f *Focus) Empty() bool { return len(f.live) == 0 }

// Lit is the number of facets that mirror the sun sharply.
func (f *Focus) Lit() int { return len(f.live) }

// roughRays is the number of lines of sight, over all facets, that Rough
// spends on what stands in the way.
const roughRays = 32

// roughFacets is about the number of facets that Rough looks at.
const roughFacets = 1000

// roughCorners is the number of corners of the disc for Rough.
const roughCorners = 16

// At is the concentration at p, by one mirror and any number of panes: the sum
// over the sun's images seen from p of the share of the disc that is seen
// times the share of its luminance that is left. normal is zero for the
// fluence rate. The law behind it is the conservation of luminance: a mirror
// cannot make the sun brighter, only fill more of the field of view with it.
//
// Source: Welford & Winston, High Collection Nonimaging Optics, 1989, chapter
// 2 (chapter from memory).
func (f *Focus) At(p, normal r3.Vec) Concentration {
	f.look(p, false)
	f.images = f.images[:0]
	add := newSum(f, normal)
	for _, g := range f.seen {
		l := &f.live[g.k]
		f.images = f.world.facetImage(l.f, p, l.n, l.dir, f.hidden, f.images[:0])
		for _, im := range f.images {
			add.image(g, im.Dir, im.Share*im.Luminous)
		}
	}
	return add.result(p)
}

// Rough is At for searches: the parts of the disc that facets cover are
// computed as there, of fine meshes for some facets in place of all; what stands
// in the way is asked of roughRays lines of sight in all, each for its
// neighbours too.
func (f *Focus) Rough(p, normal r3.Vec) Concentration {
	f.look(p, true)
	add := newSum(f, normal)
	// A line of sight stands for the facets of one span of the list, which are
	// neighbours in the mesh.
	span := (len(f.seen) + roughRays - 1) / roughRays
	for i := 0; i < len(f.seen); i += max(span, 1) {
		group := f.seen[i:min(i+span, len(f.seen))]
		g := group[len(group)/2]
		l := &f.live[g.k]
		s := reflect(g.dir, l.n)
		if f.hidden(s) {
			continue
		}
		luminous, _, ok := f.world.look(l.f.prim, p, g.dir, s)
		if !ok {
			continue
		}
		for _, g := range group {
			add.image(g, g.dir, g.share*luminous)
		}
	}
	return add.result(p)
}

// look lists the facets that cover a part of the disc, seen from p.
func (f *Focus) look(p r3.Vec, rough bool) {
	f.seen = f.seen[:0]
	corners := discCorners
	if rough {
		corners = roughCorners
	}
	var buffer [2][discCorners + 4][2]float64
	whole := math.Pi * sunTan * sunTan
	for k := range f.live {
		l := &f.live[k]
		stands := 1.0
		if rough {
			stands = l.stands
		}
		if stands == 0 {
			continue
		}
		to := r3.Sub(l.f.centre, p)
		if l.side*r3.Dot(to, l.n) >= 0 {
			continue // behind the mirror
		}
		along := r3.Dot(to, l.dir)
		if along <= 0 {
			if r3.Norm2(to) > l.f.radius*l.f.radius {
				continue
			}
		} else if reach := l.f.radius + along*sunTan*1.1; r3.Norm2(to)-along*along > reach*reach {
			continue
		}
		frame, edge := f.world.edges(l.f, p, l.dir)
		if misses(edge) {
			continue
		}
		area, x, y := polygon(cutDisc(edge, corners, &buffer))
		if area <= 0 {
			continue
		}
		dir := r3.Unit(r3.Add(l.dir, r3.Add(r3.Scale(x, frame.T), r3.Scale(y, frame.B))))
		f.seen = append(f.seen, glimpse{k: k, share: stands * math.Min(1, area/whole), dir: dir, distM: r3.Dot(to, l.n) / r3.Dot(dir, l.n)})
	}
}

// misses reports that the disc lies wholly outside one of the edges.
func misses(edge [3][3]float64) bool {
	// The polygon of 16 corners that stands for the disc reaches 1.3 % beyond it.
	const wide = 1.02
	bound := wide * sunTan * wide * sunTan
	for _, e := range edge {
		if e[2] < 0 && e[2]*e[2] > bound*(e[0]*e[0]+e[1]*e[1]) {
			return true
		}
	}
	return false
}

// focusSum adds up images.
type focusSum struct {
	f       *Focus
	normal  r3.Vec
	plane   bool
	mirrors float64
	parts   []partSum
}

type partSum struct {
	part       int32
	sum, distM float64
}

func newSum(f *Focus, normal r3.Vec) focusSum {
	return focusSum{f: f, normal: normal, plane: r3.Norm2(normal) > 0}
}

func (a *focusSum) image(g glimpse, dir r3.Vec, x float64) {
	if a.plane {
		x *= math.Max(0, r3.Dot(dir, a.normal))
	}
	if x <= 0 {
		return
	}
	a.mirrors += x
	part := a.f.world.tris[a.f.live[g.k].f.prim].part
	for i := range a.parts {
		if a.parts[i].part == part {
			a.parts[i].sum += x
			a.parts[i].distM += x * g.distM
			return
		}
	}
	a.parts = append(a.parts, partSum{part, x, x * g.distM})
}

func (a *focusSum) result(p r3.Vec) Concentration {
	c := Concentration{Mirrors: a.mirrors, Part: -1}
	best := 0.0
	for _, q := range a.parts {
		if q.sum > best {
			best, c.Part, c.DistanceM = q.sum, q.part, q.distM/q.sum
		}
	}
	if f := a.f; !f.hidden(f.sun) {
		cos := 1.0
		if a.plane {
			cos = math.Max(0, r3.Dot(f.sun, a.normal))
		}
		if cos > 0 {
			c.Sun = cos * f.world.Transmittance(p, f.sun, math.Inf(1))
		}
	}
	return c
}
