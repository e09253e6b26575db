package trace

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
)

// Landing is a diffusely scattering surface met by a path traced backwards.
// Weight is the share of its luminance that reaches the path's start.
type Landing struct {
	Hit    Hit
	Weight float64
	// Via is the part of the first pane or cloth the path went through, -1
	// where none; Mirrored says that a mirror turned the path.
	Via      int32
	Mirrored bool
}

// Exit is a direction in which a path left the scene, upwards to the sky or
// downwards to the endless ground.
type Exit struct {
	Dir      r3.Vec
	Weight   float64
	Via      int32
	Mirrored bool
}

// Shine is a glossy surface met by a path. The path goes on along the lobe to
// whatever it finds but the sun's disc, which is too small to be met by chance:
// what the lobe shows of the sun is for the caller to add, see Shining.
// Weight is as in Landing; Wo points back along the path.
type Shine struct {
	Hit    Hit
	Wo     r3.Vec
	Weight float64
}

// Found collects what one or more paths met. Reset before reuse.
type Found struct {
	Landings []Landing
	Exits    []Exit
	Shines   []Shine
}

// Reset empties f and keeps its memory.
func (f *Found) Reset() {
	f.Landings, f.Exits, f.Shines = f.Landings[:0], f.Exits[:0], f.Shines[:0]
}

// maxSpecular ends chains between facing mirrors; by then roulette has
// reduced their weight to nothing unless a mirror reflects everything.
const maxSpecular = 256

// Walk follows the straight, mirrored and glossy parts of light backwards from
// org along unit dir and appends every diffuse surface and exit to out, each
// with its weight, starting from weight. Where a surface both mirrors and
// passes light, the first split surfaces follow both ways, later ones one at
// random, so that glass in view adds little noise. Unbiased: a path ends only
// by roulette with compensated weight.
func (w *World) Walk(org, dir r3.Vec, weight float64, split int, s *sampling.Stream, out *Found) {
	w.walk(org, dir, weight, split, 0, -1, false, s, out)
}

func (w *World) walk(org, dir r3.Vec, weight float64, split, depth int, via int32, mirrored bool, s *sampling.Stream, out *Found) {
	for ; depth < maxSpecular; depth++ {
		h, ok := w.Closest(org, dir)
		if !ok {
			out.Exits = append(out.Exits, Exit{Dir: dir, Weight: weight, Via: via, Mirrored: mirrored})
			return
		}
		rho, tau := h.BSDF.Lambert(h.Side)
		if rho > 0 || tau > 0 || w.reflectsBehind(&h) {
			out.Landings = append(out.Landings, Landing{Hit: h, Weight: weight, Via: via, Mirrored: mirrored})
		}
		mirror, through := h.BSDF.Delta(h.Side, h.Cos)
		facing := h.Facing()
		if g := h.BSDF.Gloss(h.Side); g != nil {
			out.Shines = append(out.Shines, Shine{Hit: h, Wo: r3.Scale(-1, dir), Weight: weight})
			// A glossy lobe is followed like a mirror, one sample of it.
			if next, share, ok := glossBounce(g, facing, dir, s); ok && weight*share > 0 {
				if mirror+through <= 0 {
					weight *= share
					weight, ok = survive(weight, share, depth, s)
					if !ok {
						return
					}
					org, dir, mirrored = w.Offset(h.Point, facing), next, true
					continue
				}
				w.walk(w.Offset(h.Point, facing), next, weight*share, 0, depth+1, via, true, s, out)
			}
		}
		if mirror+through <= 0 {
			return
		}
		pass := through > 0
		if mirror > 0 && through > 0 {
			if split > 0 {
				split--
				reflected := r3.Add(dir, r3.Scale(2*h.Cos, facing))
				w.walk(w.Offset(h.Point, facing), reflected, weight*mirror, split, depth+1, via, true, s, out)
				mirror = 0
			} else {
				pass = s.Float64()*(mirror+through) < through
			}
		}
		share := mirror + through
		if pass {
			if mirror == 0 {
				share = through
			}
			if via < 0 {
				via = h.Part
			}
			org = w.Offset(h.Point, r3.Scale(-1, facing))
		} else {
			dir = r3.Add(dir, r3.Scale(2*h.Cos, facing))
			org = w.Offset(h.Point, facing)
			mirrored = true
		}
		var ok2 bool
		weight, ok2 = survive(weight*share, share, depth, s)
		if !ok2 {
			return
		}
	}
}

// reflectsBehind reports whether light on the far side comes through to the
// side that was met: such a surface shines although it reflects nothing.
func (w *World) reflectsBehind(h *Hit) bool {
	_, tau := h.BSDF.Lambert(1 - h.Side)
	return tau > 0
}

// survive plays roulette from the fifth specular event on.
func survive(weight, share float64, depth int, s *sampling.Stream) (float64, bool) {
	if depth < 4 {
		return weight, weight > 0
	}
	p := math.Min(1, share)
	if p <= 0 || s.Float64() >= p {
		return 0, false
	}
	return weight / p, true
}

// glossBounce samples the glossy lobe around facing for light that leaves
// against dir; share is BSDF x cosine over the sampled density.
func glossBounce(g *materials.Gloss, facing, dir r3.Vec, s *sampling.Stream) (next r3.Vec, share float64, ok bool) {
	frame := materials.NewFrame(facing)
	wo := frame.ToLocal(r3.Scale(-1, dir))
	wi, ok := g.Sample(wo, s.Float64(), s.Float64())
	if !ok || wi.Z <= 0 {
		return r3.Vec{}, 0, false
	}
	pdf := g.PDF(wo, wi)
	if pdf <= 0 {
		return r3.Vec{}, 0, false
	}
	return r3.Unit(frame.ToWorld(wi)), g.Eval(wo, wi) * wi.Z / pdf, true
}

// Shining is the luminance per unit of normal illuminance that a glossy lobe
// shows of a sun in unit direction sun, in 1/sr: BSDF times cosine. facing is
// the unit normal on the viewer's side, wo points to the viewer. Shadows and
// panes between surface and sun are not in it.
func Shining(g *materials.Gloss, facing, wo, sun r3.Vec) float64 {
	frame := materials.NewFrame(facing)
	wi := frame.ToLocal(sun)
	if wi.Z <= 0 {
		return 0
	}
	return g.Eval(frame.ToLocal(wo), wi) * wi.Z
}

// CosineDirection draws a direction around unit n with density cos/pi.
func CosineDirection(n r3.Vec, u, v float64) r3.Vec {
	frame := materials.NewFrame(n)
	return frame.ToWorld(sampling.CosineHemisphere(u, v))
}

// ConeDirection draws a direction uniform in solid angle within half-angle
// alpha of unit axis.
func ConeDirection(axis r3.Vec, alpha, u, v float64) r3.Vec {
	frame := materials.NewFrame(axis)
	return frame.ToWorld(sampling.Cone(u, v, alpha))
}
