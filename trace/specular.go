package trace

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
)

// specular lists the facets that mirror, sharply or as a narrow lobe: mirrors,
// glossy surfaces and panes. Light goes by their geometric normals; a curved
// mirror is a fine mesh.
type specular struct {
	facets []facet
	parts  []mirrorPart // of the sharp ones, in the order of their first facets
}

type facet struct {
	prim   int32
	areaM2 float64
	centre r3.Vec
	radius float64 // of the sphere about centre that holds the facet
	sharp  bool
	gloss  bool
	pane   bool // passes light straight as well
}

func (w *World) findSpecular() {
	sp := &w.specular
	kinds := map[int32][2]bool{}
	at := map[int32]int{} // index into parts, by part
	for i := range w.tris {
		kind, ok := kinds[w.tris[i].finish]
		if !ok {
			kind = mirrors(w.tris[i].bsdf)
			kinds[w.tris[i].finish] = kind
		}
		sharp, gloss := kind[0], kind[1]
		if !sharp && !gloss {
			continue
		}
		v := &w.Scene.Triangles[i].V
		area := 0.5 * r3.Norm(r3.Cross(r3.Sub(v[1], v[0]), r3.Sub(v[2], v[0])))
		centre := r3.Scale(1.0/3, r3.Add(v[0], r3.Add(v[1], v[2])))
		radius := 0.0
		for _, c := range v {
			radius = math.Max(radius, r3.Norm(r3.Sub(c, centre)))
		}
		sp.facets = append(sp.facets, facet{prim: int32(i), areaM2: area, centre: centre, radius: radius, sharp: sharp, gloss: gloss, pane: passesStraight(w.tris[i].bsdf)})
		if !sharp {
			continue
		}
		k, seen := at[w.tris[i].part]
		if !seen {
			k = len(sp.parts)
			at[w.tris[i].part], sp.parts = k, append(sp.parts, mirrorPart{})
		}
		m := &sp.parts[k]
		m.facets = append(m.facets, int32(len(sp.facets)-1))
		m.cum = append(m.cum, area)
		if n := len(m.cum); n > 1 {
			m.cum[n-1] += m.cum[n-2]
		}
	}
}

func mirrors(b materials.BSDF) (kind [2]bool) {
	for _, side := range []materials.Side{materials.Front, materials.Back} {
		if m, _ := b.Delta(side, 0.7); m > 0 {
			kind[0] = true
		}
		if b.Gloss(side) != nil {
			kind[1] = true
		}
	}
	return kind
}

// Mirrors reports whether anything other than a pane mirrors or shines.
func (w *World) Mirrors() bool {
	for _, f := range w.specular.facets {
		if !f.pane {
			return true
		}
	}
	return false
}

// Photons is the light of one moment's sun that mirrors throw on, shot as n
// stratified photons. Aim prepares it; it is then shot by Shoot.
type Photons struct {
	world *World
	sun   r3.Vec
	cum   []float64 // cumulative weight by facet
	live  []int32   // facets facing the sun
	sides []materials.Side
}

// Aim weighs the facets by what they mirror of a sun in unit direction sun:
// projected area times reflectance.
func (w *World) Aim(sun r3.Vec) *Photons {
	p := &Photons{world: w, sun: sun}
	total := 0.0
	for i := range w.specular.facets {
		f := &w.specular.facets[i]
		c := r3.Dot(sun, w.normal[f.prim])
		for _, side := range [2]materials.Side{materials.Front, materials.Back} {
			cos := c
			if side == materials.Back {
				cos = -c
			}
			// A facet edge-on to the disc's centre is lit by a part of it.
			if cos <= -sunTan {
				continue
			}
			share, _ := w.tris[f.prim].bsdf.Delta(side, math.Max(cos, 0))
			if f.gloss && w.tris[f.prim].bsdf.Gloss(side) != nil {
				share += 0.5
			}
			if weight := f.areaM2 * math.Max(cos, 0.3*sunTan) * share; weight > 0 {
				total += weight
				p.cum = append(p.cum, total)
				p.live = append(p.live, int32(i))
				p.sides = append(p.sides, side)
			}
		}
	}
	return p
}

// Empty reports that no facet mirrors the sun.
func (p *Photons) Empty() bool { return len(p.live) == 0 }

// Shoot sends n photons for a sun of normalLx, each from a random point of a
// facet that sees the sun; draw gives directions to points of the disc and
// whether they are above the horizon. Every diffuse surface that a photon
// arrives at is reported with the photon's flux in lm; photons go on through
// glass and by further mirrors, but end at the first diffuse surface, whose
// exchange with others the surface solution knows.
//
// Source: stratified light tracing after Arvo 1986, Backward ray tracing,
// SIGGRAPH course notes; roulette after Arvo & Kirk 1990, Particle transport
// and image synthesis, SIGGRAPH.
func (p *Photons) Shoot(normalLx float64, n int, draw func(bits uint64) (r3.Vec, bool), s *sampling.Stream, deposit func(h *Hit, flux float64)) {
	p.Beams(n, draw, s, func(b *Beam) {
		if b.Hit == nil {
			return
		}
		if rho, tau := b.Hit.BSDF.Lambert(b.Hit.Side); rho > 0 || tau > 0 {
			deposit(b.Hit, normalLx*b.FluxM2)
		}
	})
}
