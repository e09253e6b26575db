package trace

import (
	"sort"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
)

// A part of at least curvedFacets facets is looked for by lines of sight before
// its facets are tried sun by sun: the inside of a duct has thousands that a
// desk never sees. The lines go to points spread evenly over its area, raysPerFacet
// for each facet and curvedRays at least. A part of which a share p is in sight
// is missed with a chance of (1-p)^n at most, n lines: 0.6 % for half a hundredth
// in sight and 1024 lines. The sun's image in what is missed has the luminance
// that it has in all of the part, so that a miss takes a whole image of the sun
// away and not a share p of one. Own choice.
const (
	curvedFacets = 64
	raysPerFacet = 8
	curvedRays   = 1024
)

// mirrorPart is what mirrors sharply of one part.
type mirrorPart struct {
	facets []int32
	cum    []float64 // area up to each facet and with it, m2
}

// MirrorsFrom lists the facets that mirror sharply and may be seen from p,
// straight or through glass, for Images.
func (w *World) MirrorsFrom(p r3.Vec) []int32 {
	var out []int32
	for i := range w.specular.parts {
		if m := &w.specular.parts[i]; len(m.facets) < curvedFacets || w.glimpses(p, m) {
			out = append(out, m.facets...)
		}
	}
	return out
}

// glimpses is whether one of the lines from p to points of a curved part is
// clear.
func (w *World) glimpses(p r3.Vec, m *mirrorPart) bool {
	total := m.cum[len(m.cum)-1]
	var u [3]float64
	for i := range max(curvedRays, raysPerFacet*len(m.facets)) {
		sampling.OwenSobolInto(u[:], uint32(i), imageScramble)
		k := min(sort.SearchFloat64s(m.cum, u[0]*total), len(m.cum)-1)
		c := &w.Scene.Triangles[w.specular.facets[m.facets[k]].prim].V
		d := r3.Sub(sampling.Triangle(u[1], u[2], c[0], c[1], c[2]), p)
		// Short of the facet by a thousandth: the facet itself is no obstacle.
		if l := r3.Norm(d); l > 0 && w.Transmittance(p, r3.Scale(1/l, d), l*0.999) > 0 {
			return true
		}
	}
	return false
}
