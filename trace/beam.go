package trace

import (
	"math"
	"sort"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
)

// Beam is one straight piece of a photon's way after its first mirror.
type Beam struct {
	From, Dir r3.Vec
	// LengthM ends at Hit; infinite where Hit is nil.
	LengthM float64
	Hit     *Hit
	// FluxM2 is the photon's flux per unit of the sun's normal irradiance.
	FluxM2 float64
	// Mirrors counts the reflections so far, Glossy those of them in a lobe,
	// Panes the surfaces passed straight.
	Mirrors, Glossy, Panes int
	// Source is the first mirror's part, SourceBack whether light came to its
	// back.
	Source     int32
	SourceBack bool

	at Hit // what Hit points to
}

// Only keeps the panes alone among the facets aimed at, or all but those.
func (p *Photons) Only(panes bool) *Photons {
	q := &Photons{world: p.world, sun: p.sun}
	total, before := 0.0, 0.0
	for i, k := range p.live {
		weight := p.cum[i] - before
		before = p.cum[i]
		if p.world.specular.facets[k].pane != panes {
			continue
		}
		total += weight
		q.cum = append(q.cum, total)
		q.live = append(q.live, k)
		q.sides = append(q.sides, p.sides[i])
	}
	return q
}

// WeightM2 is the sum of projected area times reflectance of the facets aimed
// at, a lobe counted as one half.
func (p *Photons) WeightM2() float64 {
	if p.Empty() {
		return 0
	}
	return p.cum[len(p.cum)-1]
}

// Beams sends n photons, each from a random point of a facet that sees the sun,
// and reports every piece of their ways between the first mirror and the first
// surface that neither mirrors, shines nor lets them through. At each surface
// the share that goes on does so by roulette. What report gets is used again.
func (p *Photons) Beams(n int, draw func(bits uint64) (r3.Vec, bool), s *sampling.Stream, report func(b *Beam)) {
	if p.Empty() || n <= 0 {
		return
	}
	w := p.world
	total := p.cum[len(p.cum)-1]
	shift := s.Float64()
	var b Beam
	var h Hit
	for i := range n {
		x := (float64(i) + shift) / float64(n) * total
		k := min(sort.SearchFloat64s(p.cum, x), len(p.cum)-1)
		f := &w.specular.facets[p.live[k]]
		chance := p.cum[k]
		if k > 0 {
			chance -= p.cum[k-1]
		}
		chance /= total
		dir, up := draw(s.Uint64())
		v := &w.Scene.Triangles[f.prim].V
		pos := sampling.Triangle(s.Float64(), s.Float64(), v[0], v[1], v[2])
		facing := w.normal[f.prim]
		back := p.sides[k] == materials.Back
		if back {
			facing = r3.Scale(-1, facing)
		}
		cos := r3.Dot(dir, facing)
		if !up || cos <= 0 {
			continue
		}
		tr := w.Transmittance(w.Offset(pos, facing), dir, math.Inf(1))
		if tr <= 0 {
			continue
		}
		h = Hit{Point: pos, Normal: w.normal[f.prim], Cos: cos, Prim: f.prim, Part: w.tris[f.prim].part, Side: p.sides[k], BSDF: w.tris[f.prim].bsdf}
		b = Beam{Dir: r3.Scale(-1, dir), FluxM2: tr * f.areaM2 * cos / (float64(n) * chance), Source: h.Part, SourceBack: back}
		w.goOn(&h, &b, s, report)
	}
}

// goOn carries a photon on from h, where it arrives along b.Dir.
func (w *World) goOn(h *Hit, b *Beam, s *sampling.Stream, report func(b *Beam)) {
	for first := true; ; first = false {
		if b.Mirrors+b.Panes >= maxSpecular {
			return
		}
		mirror, through := h.BSDF.Delta(h.Side, h.Cos)
		if first {
			through = 0
		}
		facing := h.Facing()
		gloss := 0.0
		var glossDir r3.Vec
		if g := h.BSDF.Gloss(h.Side); g != nil {
			if next, share, ok := glossBounce(g, facing, b.Dir, s); ok {
				glossDir, gloss = next, share
			}
		}
		sum := mirror + through + gloss
		if sum <= 0 {
			return
		}
		// The first facet was chosen by what it mirrors: its share weighs the
		// flux; after that roulette keeps the flux as it is wherever it can.
		keep := 1.0
		if !first {
			keep = math.Min(1, sum)
		}
		u := s.Float64()
		if u >= keep {
			return
		}
		b.FluxM2 *= sum / keep
		switch u *= sum / keep; {
		case u < mirror:
			b.Dir = r3.Add(b.Dir, r3.Scale(2*h.Cos, facing))
			b.Mirrors++
			b.From = w.Offset(h.Point, facing)
		case u < mirror+through:
			b.Panes++
			b.From = w.Offset(h.Point, r3.Scale(-1, facing))
		default:
			b.Dir = glossDir
			b.Mirrors++
			b.Glossy++
			b.From = w.Offset(h.Point, facing)
		}
		next, ok := w.Closest(b.From, b.Dir)
		b.Hit, b.LengthM = nil, math.Inf(1)
		if ok {
			b.at = next
			b.Hit, b.LengthM = &b.at, next.T
		}
		report(b)
		if !ok {
			return
		}
		*h = next
	}
}
