package trace

import (
	"math"
	"sort"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
)

// A part of at least curvedFacets facets is looked for by curvedRays lines of
// sight before its facets are tried sun by sun: the inside of a duct has
// thousands that a desk never sees. A part of which less than a hundredth is
// in sight is missed with a chance of 0.99^256 = 8 %; what its images could
// add is as small.
const (
	curvedFacets = 64
	curvedRays   = 256
)

// MirrorsFrom lists the facets that mirror sharply and may be seen from p,
// straight or through glass, for Images.
func (w *World) MirrorsFrom(p r3.Vec) []int32 {
	byPart := map[int32][]int32{}
	var order []int32
	for k := range w.specular.facets {
		f := &w.specular.facets[k]
		if !f.sharp {
			continue
		}
		part := w.tris[f.prim].part
		if byPart[part] == nil {
			order = append(order, part)
		}
		byPart[part] = append(byPart[part], int32(k))
	}
	var out []int32
	for _, part := range order {
		if facets := byPart[part]; len(facets) < curvedFacets || w.glimpses(p, facets) {
			out = append(out, facets...)
		}
	}
	return out
}

// glimpses is whether one of curvedRays lines from p to points spread evenly
// over the facets is clear.
func (w *World) glimpses(p r3.Vec, facets []int32) bool {
	cum := make([]float64, len(facets))
	total := 0.0
	for i, k := range facets {
		total += w.specular.facets[k].areaM2
		cum[i] = total
	}
	for i := range curvedRays {
		u, v := sampling.OwenSobol2(uint32(i), imageScramble)
		x := (float64(i) + 0.5) / curvedRays * total
		k := min(sort.SearchFloat64s(cum, x), len(facets)-1)
		c := &w.Scene.Triangles[w.specular.facets[facets[k]].prim].V
		su := math.Sqrt(u)
		q := r3.Add(r3.Scale(1-su, c[0]), r3.Add(r3.Scale(su*(1-v), c[1]), r3.Scale(su*v, c[2])))
		d := r3.Sub(q, p)
		// Short of the facet by a thousandth: the facet itself is no obstacle.
		if l := r3.Norm(d); l > 0 && w.Transmittance(p, r3.Scale(1/l, d), l*0.999) > 0 {
			return true
		}
	}
	return false
}
