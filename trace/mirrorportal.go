package trace

import (
	"cmp"
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene/system"
)

// mostMirrors is the number of flat mirrors aimed at, the largest; what is left
// out costs noise, never bias. Own choice.
const mostMirrors = 32

// findMirrors lists rectangles about the flat mirrors of the scene, panes left
// out: openings have those. Outward points away from those who see the mirror.
func (w *World) findMirrors() {
	type plane struct {
		part    int32
		x, y, z int32 // of the normal, in steps
		offset  int32 // from the origin, in offsetM
	}
	// Own choices: what bends or stands off by less is one flat mirror.
	const (
		steps   = 1 << 10 // of a normal's component: 0.06 degrees
		offsetM = 0.01
	)
	groups := map[plane][]int32{}
	var order []plane
	for _, f := range w.specular.facets {
		if f.pane {
			continue
		}
		n := w.normal[f.prim]
		k := plane{w.tris[f.prim].part, int32(math.Round(n.X * steps)), int32(math.Round(n.Y * steps)), int32(math.Round(n.Z * steps)), int32(math.Round(w.plane[f.prim] / offsetM))}
		if groups[k] == nil {
			order = append(order, k)
		}
		groups[k] = append(groups[k], f.prim)
	}
	for _, k := range order {
		prims := groups[k]
		b := w.tris[prims[0]].bsdf
		for _, side := range []materials.Side{materials.Front, materials.Back} {
			if m, _ := b.Delta(side, 0.7); m <= 0 && b.Gloss(side) == nil {
				continue
			}
			r := w.rectAbout(prims)
			if side == materials.Front {
				r.Outward = r3.Scale(-1, r.Outward)
			}
			w.mirrors = append(w.mirrors, r)
		}
	}
	slices.SortStableFunc(w.mirrors, func(a, b system.Rect) int {
		return cmp.Compare(b.WidthM*b.HeightM, a.WidthM*a.HeightM)
	})
	w.mirrors = w.mirrors[:min(len(w.mirrors), mostMirrors)]
}

// rectAbout is the rectangle about coplanar triangles, along the shortest edge
// of the first, which of a divided rectangle is one of its sides. Outward is the
// first's normal.
func (w *World) rectAbout(prims []int32) system.Rect {
	v := &w.Scene.Triangles[prims[0]].V
	edge := r3.Sub(v[1], v[0])
	for _, e := range []r3.Vec{r3.Sub(v[2], v[1]), r3.Sub(v[0], v[2])} {
		if r3.Norm2(e) < r3.Norm2(edge) {
			edge = e
		}
	}
	n := w.normal[prims[0]]
	across := r3.Unit(edge)
	up := r3.Cross(n, across)
	lo, hi := [2]float64{math.Inf(1), math.Inf(1)}, [2]float64{math.Inf(-1), math.Inf(-1)}
	for _, p := range prims {
		for _, q := range w.Scene.Triangles[p].V {
			d := r3.Sub(q, v[0])
			for i, x := range [2]float64{r3.Dot(d, across), r3.Dot(d, up)} {
				lo[i], hi[i] = math.Min(lo[i], x), math.Max(hi[i], x)
			}
		}
	}
	return system.Rect{
		Origin: r3.Add(v[0], r3.Add(r3.Scale(lo[0], across), r3.Scale(lo[1], up))),
		Across: across, Up: up, Outward: n, WidthM: hi[0] - lo[0], HeightM: hi[1] - lo[1],
	}
}
