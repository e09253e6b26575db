package picture

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/trace"
	"squint/trace/surface"
)

// deepest is the number of gathered rays in a row that end nearer than a texel's
// edge before the solution is read all the same. Own choice.
const deepest = 3

// nearest bounds the distance that a gathered ray counts with in the mean that
// the filter uses, m. Own choice.
const nearest = 0.02

// walker holds one goroutine's scratch.
type walker struct {
	*Light
	batch   int
	rays    *surface.SunRays
	photons *photonMap
	s       sampling.Stream
	// found is by depth: 0 the line of sight, then gathered rays.
	found [deepest + 2]trace.Found
	// shared is what is aimed at from the pixel's reference, own that from
	// another surface.
	shared, own aim
}

// aim is what gathered rays from one place are aimed at.
type aim struct {
	portals trace.Portals
	bright  aims
}

// Shares of the gathered rays that aim at openings and at bright sides, where
// there are any. Own choice, measured on the demo.
const (
	portalShare = 0.35
	brightShare = 0.3
)

func (w *walker) hidden(dir r3.Vec) bool { return w.stage.t.Hidden(dir) }

// outside is the luminance seen where a path leaves the scene.
func (w *walker) outside(dir r3.Vec) float64 {
	if w.hidden(dir) {
		return w.below
	}
	return w.moment.Sky.Luminance(dir)
}

// factor is what a side's light is multiplied by: its reflectance or
// transmittance m, on the ground that of the month.
func (w *walker) factor(h *trace.Hit, m float64) float64 {
	if w.world.Scene.Parts[h.Part].Kind == scene.GroundPlane {
		return w.ground
	}
	return m
}

// sunOn samples the direct sun at p on the plane with unit normal n, lx.
func (w *walker) sunOn(p, n r3.Vec) float64 {
	if w.rays.NormalLx <= 0 {
		return 0
	}
	dir, ok := w.rays.Draw(w.s.Uint64())
	if !ok {
		return 0
	}
	cos := r3.Dot(dir, n)
	if cos <= 0 {
		return 0
	}
	return w.rays.NormalLx * cos * w.world.Transmittance(w.world.Offset(p, n), dir, math.Inf(1))
}

// shine is the luminance that a glossy surface shows of the sun.
func (w *walker) shine(x *trace.Shine) float64 {
	if w.rays.NormalLx <= 0 {
		return 0
	}
	dir, ok := w.rays.Draw(w.s.Uint64())
	if !ok {
		return 0
	}
	facing := x.Hit.Facing()
	f := trace.Shining(x.Hit.BSDF.Gloss(x.Hit.Side), facing, x.Wo, dir)
	if f <= 0 {
		return 0
	}
	return w.rays.NormalLx * f * w.world.Transmittance(w.world.Offset(x.Hit.Point, facing), dir, math.Inf(1))
}

// gather is one sample of the illuminance at p on the plane with unit normal n
// without the sun that comes straight or by mirrors, lx; u and v in 0 to 1
// choose the direction. inverse is 1/distance of the first surface along it,
// its mean that of the rays not aimed at bright sides.
// Cosine, openings and bright sides are sampled together (one-sample balance
// heuristic, Veach & Guibas 1995, as for trace.Portals). A ray aimed at a bright
// side counts only where it lands there, straight.
func (w *walker) gather(p, n r3.Vec, a *aim, u, v float64, depth int) (e, inverse float64) {
	toPortals, toBright := 0.0, 0.0
	if !a.portals.Empty() {
		toPortals = portalShare
	}
	if !a.bright.empty() {
		toBright = brightShare
	}
	toCosine := 1 - toPortals - toBright
	var dir r3.Vec
	aimed := int32(-1)
	switch {
	case u < toCosine:
		dir = trace.CosineDirection(n, u/toCosine, v)
	case u < toCosine+toPortals:
		dir = a.portals.Sample(p, (u-toCosine)/toPortals, v)
	default:
		dir, aimed = a.bright.sample(w.stage, p, (u-toCosine-toPortals)/toBright, v, &w.s)
	}
	cos := r3.Dot(dir, n)
	if cos <= 0 {
		return 0, 0
	}
	density := toCosine * cos / math.Pi
	if toPortals > 0 {
		density += toPortals * a.portals.PDF(p, dir)
	}
	f := &w.found[depth]
	f.Reset()
	w.world.Walk(w.world.Offset(p, n), dir, 1, 0, &w.s, f)
	if aimed < 0 {
		for i := range f.Exits {
			e += f.Exits[i].Weight * w.outside(f.Exits[i].Dir) * cos / density
		}
	}
	for i := range f.Landings {
		l := f.Landings[i]
		inverse = math.Max(inverse, 1/math.Max(nearest, l.Hit.T))
		for side, m := range sides(&l.Hit) {
			hit := l.Hit
			hit.Side = side
			k := w.stage.t.Index(w.stage.t.SideAt(&hit))
			d := density
			if seen := w.brightSeen(a, k, &l, side); seen >= 0 {
				d += toBright * a.bright.pdf(seen, r3.Norm(r3.Sub(l.Hit.Point, p)), l.Hit.Cos)
				if aimed >= 0 && aimed != seen {
					continue
				}
			} else if aimed >= 0 {
				continue
			}
			e += l.Weight * w.factor(&l.Hit, m) / math.Pi * w.lightOn(&l.Hit, side, k, a, depth) * cos / d
		}
	}
	if aimed >= 0 {
		return e, 0
	}
	return e, inverse / (1 - toBright)
}

// brightSeen is the bright side that a straight path landed on, -1 where none.
func (w *walker) brightSeen(a *aim, k int32, l *trace.Landing, side materials.Side) int32 {
	if a.bright.empty() || k < 0 || l.Mirrored || side != l.Hit.Side {
		return -1
	}
	return a.bright.at[k]
}

// lightOn is the illuminance on a side, of dense index i, of a surface that a
// gathered ray met. Rays from there are aimed at what the first surface sees:
// the two are near each other.
func (w *walker) lightOn(h *trace.Hit, side materials.Side, i int32, a *aim, depth int) float64 {
	n := normalOn(h, side)
	if depth <= deepest && h.T < w.stage.edgeM[h.Part] {
		e, _ := w.gather(h.Point, n, a, w.s.Float64(), w.s.Float64(), depth+1)
		return e + w.sunOn(h.Point, n) + w.photons.illuminance(h.Point, n)
	}
	if i < 0 {
		return 0 // carries next to nothing, see surface's dropDark
	}
	e := float64(w.rest[w.batch][i])
	if w.lit[i] {
		e += w.sunOn(h.Point, n)
	}
	return e
}
