package trace

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/system"
	"squint/trace/bvh"
)

// World is a scene made ready for tracing. It is immutable and safe for
// concurrent use.
type World struct {
	Scene *scene.Scene

	tris   []triangle
	normal []r3.Vec
	plane  []float64 // of each triangle: its points' product with the normal
	all    *bvh.Tree // every triangle: closest hits
	opaque *bvh.Tree // triangles that nothing passes straight: shadow rays
	clear  *bvh.Tree // triangles that pass light straight: panes, cloth
	// clearPrim maps a triangle of clear to its index in the scene.
	clearPrim []int32
	eps       float64
	specular  specular
	mirrors   []system.Rect // rectangles about mirrors, to aim at
}

type triangle struct {
	bsdf         materials.BSDF
	finish, part int32
}

// Hit is the nearest surface along a ray. Normal is the geometric normal of
// the front side; Side is the side that was met; Cos is the cosine between
// the incoming ray and the normal, positive.
type Hit struct {
	Point  r3.Vec
	Normal r3.Vec
	T      float64
	Cos    float64
	Prim   int32
	Part   int32
	Side   materials.Side
	BSDF   materials.BSDF
}

// Facing is the unit normal on the side that was met.
func (h *Hit) Facing() r3.Vec {
	if h.Side == materials.Back {
		return r3.Scale(-1, h.Normal)
	}
	return h.Normal
}

// Accelerate builds the search trees. workers limits the builders' threads.
func Accelerate(s *scene.Scene, workers int) *World {
	w := &World{Scene: s}
	n := len(s.Triangles)
	w.tris = make([]triangle, n)
	w.normal = make([]r3.Vec, n)
	w.plane = make([]float64, n)
	all := make([]bvh.Triangle, n)
	var opaque, clear []bvh.Triangle
	passes := make([]bool, len(s.Finishes))
	for i, f := range s.Finishes {
		passes[i] = passesStraight(f.BSDF)
	}
	extent := 1.0
	for i, t := range s.Triangles {
		e1, e2 := r3.Sub(t.V[1], t.V[0]), r3.Sub(t.V[2], t.V[0])
		w.normal[i] = r3.Unit(r3.Cross(e1, e2))
		w.plane[i] = r3.Dot(t.V[0], w.normal[i])
		w.tris[i] = triangle{bsdf: s.Finishes[t.Finish].BSDF, finish: t.Finish, part: t.Part}
		for k, v := range t.V {
			all[i][k] = [3]float32{float32(v.X), float32(v.Y), float32(v.Z)}
			extent = math.Max(extent, math.Max(math.Abs(v.X), math.Max(math.Abs(v.Y), math.Abs(v.Z))))
		}
		if passes[t.Finish] {
			clear = append(clear, all[i])
			w.clearPrim = append(w.clearPrim, int32(i))
		} else {
			opaque = append(opaque, all[i])
		}
	}
	cfg := bvh.Config{Workers: workers}
	w.all = bvh.Build(all, cfg)
	w.opaque = bvh.Build(opaque, cfg)
	w.clear = bvh.Build(clear, cfg)
	// float32 keeps 24 bits; hits on slender facets err by several units of the
	// last place. A start this far off its surface is clear of that at the
	// scene's largest coordinate (slender_test.go).
	w.eps = math.Max(2e-5, extent*math.Ldexp(1, -18))
	w.findSpecular()
	w.findMirrors()
	return w
}

// passesStraight probes a finish at several incidences, since perforation and
// cloth pass light at some only.
func passesStraight(b materials.BSDF) bool {
	for _, side := range []materials.Side{materials.Front, materials.Back} {
		for _, c := range []float64{1, 0.9, 0.7, 0.5, 0.3, 0.1} {
			if _, through := b.Delta(side, c); through > 0 {
				return true
			}
		}
	}
	return false
}

func f32(v r3.Vec) [3]float32 { return [3]float32{float32(v.X), float32(v.Y), float32(v.Z)} }

// Offset moves a point off its surface along n, far enough that float32
// rounding cannot put it on the other side.
func (w *World) Offset(p, n r3.Vec) r3.Vec { return r3.Add(p, r3.Scale(w.eps, n)) }

// Epsilon is the distance by which rays start off their surface, in metres.
func (w *World) Epsilon() float64 { return w.eps }

// Part is the part that a triangle belongs to.
func (w *World) Part(prim int32) int32 { return w.tris[prim].part }

// BSDF is the finish of a triangle.
func (w *World) BSDF(prim int32) materials.BSDF { return w.tris[prim].bsdf }

// Normal is the unit normal of a triangle's front.
func (w *World) Normal(prim int32) r3.Vec { return w.normal[prim] }

// Closest returns the first surface from org along unit dir; false when the
// ray leaves the scene.
func (w *World) Closest(org, dir r3.Vec) (Hit, bool) {
	o, d := f32(org), f32(dir)
	for tmin := float32(0); ; {
		bh := w.all.Closest(o, d, tmin, math.MaxFloat32)
		if bh.Prim < 0 {
			return Hit{}, false
		}
		h := w.hit(bh, org, dir)
		if h.T > 0 {
			return h, true
		}
		// The surface that the ray starts on, behind it.
		tmin = math.Nextafter32(bh.T, math.MaxFloat32)
	}
}

func (w *World) hit(bh bvh.Hit, org, dir r3.Vec) Hit {
	n := w.normal[bh.Prim]
	c := r3.Dot(dir, n)
	h := Hit{T: float64(bh.T), Normal: n, Prim: bh.Prim, Part: w.tris[bh.Prim].part, BSDF: w.tris[bh.Prim].bsdf}
	// The distance to the plane, in double precision: of a slender triangle,
	// such as a facet of a curved mirror, single precision makes it wrong by more
	// than the offset at which rays start. Edge-on it cannot be told.
	if math.Abs(c) > 1e-6 {
		h.T = (w.plane[bh.Prim] - r3.Dot(org, n)) / c
	}
	h.Point = r3.Add(org, r3.Scale(h.T, dir))
	if c > 0 {
		h.Side, h.Cos = materials.Back, c
	} else {
		h.Side, h.Cos = materials.Front, -c
	}
	return h
}

// Blocked reports whether something opaque stands within tmax along dir.
func (w *World) Blocked(org, dir r3.Vec, tmax float64) bool {
	return w.opaque.Occluded(f32(org), f32(dir), 0, float32(math.Min(tmax, math.MaxFloat32)))
}

// Clear reports whether no surface at all stands within tmax along dir.
func (w *World) Clear(org, dir r3.Vec, tmax float64) bool {
	return !w.all.Occluded(f32(org), f32(dir), 0, float32(tmax))
}

// Transmittance is the share of light that passes straight from org along
// unit dir over the distance tmax (math.Inf(1) for all the way): 0 behind
// anything opaque, else the product over the panes and cloths crossed.
func (w *World) Transmittance(org, dir r3.Vec, tmax float64) float64 {
	if w.Blocked(org, dir, tmax) {
		return 0
	}
	return w.Straight(org, dir, tmax)
}

// Straight is Transmittance where nothing opaque is known to stand between.
func (w *World) Straight(org, dir r3.Vec, tmax float64) float64 {
	if len(w.clearPrim) == 0 {
		return 1
	}
	tau := 1.0
	o, d := f32(org), f32(dir)
	lim := float32(math.Min(tmax, math.MaxFloat32))
	tmin := float32(0)
	for tau > 0 {
		bh := w.clear.Closest(o, d, tmin, lim)
		if bh.Prim < 0 {
			break
		}
		p := w.clearPrim[bh.Prim]
		c := r3.Dot(dir, w.normal[p])
		side := materials.Front
		if c > 0 {
			side = materials.Back
		}
		_, through := w.tris[p].bsdf.Delta(side, math.Abs(c))
		tau *= through
		// The next pane is at least this far on: the diagonal that two
		// triangles share must not count twice.
		tmin = bh.T + float32(w.eps) + bh.T*1e-6
	}
	return tau
}

// FirstPane is the part of the first pane or cloth along dir from org, -1
// where there is none or something opaque comes first.
func (w *World) FirstPane(org, dir r3.Vec) int32 {
	h, ok := w.Closest(org, dir)
	if !ok {
		return -1
	}
	if _, through := h.BSDF.Delta(h.Side, h.Cos); through > 0 {
		return h.Part
	}
	return -1
}
