package picture

import (
	"math"
	"slices"
	"sort"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
)

// mostBright is the number of texel sides that gathered rays are aimed at: those
// that send out most, such as patches of sun. Own choice.
const mostBright = 384

// bright is a texel side that sends out much light.
type bright struct {
	side   int32 // of the transport, twice the texel and the side
	centre r3.Vec
	n      r3.Vec
	areaM2 float64
	flux   float64 // that leaves it, lm
}

// brights are those of one moment; at says by active side which, -1 for none.
type brights struct {
	list []bright
	at   []int32
}

// findBright picks them by what they reflect; e is the illuminance by active
// side. The ground and the surroundings are seen through openings, which are
// aimed at anyway.
func (s *Stage) findBright(e []float32) brights {
	b := brights{at: make([]int32, len(e))}
	var all []bright
	for i := range e {
		b.at[i] = -1
		side := s.t.Side(int32(i))
		k := side / 2
		switch s.world.Scene.Parts[s.t.Texels.Part(k)].Kind {
		case scene.GroundPlane, scene.Surroundings:
			continue
		}
		rho, _ := s.t.Texels.BSDF(k).Lambert(materials.Side(side & 1))
		area := s.t.Texels.AreaM2(k)
		if rho <= 0 || area <= 0 || s.t.Texels.Divided(k) {
			continue
		}
		x := bright{side: side, areaM2: area, flux: rho * area * float64(e[i])}
		x.centre, x.n = s.t.Texels.Sample(k, 0.5, 0.5, 0.5)
		if side&1 == int32(materials.Back) {
			x.n = r3.Scale(-1, x.n)
		}
		all = append(all, x)
	}
	slices.SortStableFunc(all, func(x, y bright) int {
		switch {
		case x.flux > y.flux:
			return -1
		case x.flux < y.flux:
			return 1
		}
		return 0
	})
	b.list = all[:min(len(all), mostBright)]
	for k := range b.list {
		b.at[s.t.Index(b.list[k].side)] = int32(k)
	}
	return b
}

// aims draws bright sides by what they send to one place.
type aims struct {
	*brights
	cum []float64 // cumulative chance, by bright side; empty where none is seen
}

// from prepares for the place p with unit normal n.
func (a *aims) from(p, n r3.Vec) {
	a.cum = a.cum[:0]
	total := 0.0
	for i := range a.list {
		x := &a.list[i]
		d := r3.Sub(x.centre, p)
		if cos, back := r3.Dot(d, n), -r3.Dot(d, x.n); cos > 0 && back > 0 {
			d2 := r3.Norm2(d)
			// Near by a side is seen from a part of it only.
			total += x.flux * cos * back / (d2 * math.Max(d2, x.areaM2))
		}
		a.cum = append(a.cum, total)
	}
	if total <= 0 {
		a.cum = a.cum[:0]
		return
	}
	for i := range a.cum {
		a.cum[i] /= total
	}
}

func (a *aims) empty() bool { return len(a.cum) == 0 }

// sample draws a side with u and a point of it with v, and returns the unit
// direction there from p.
func (a *aims) sample(s *Stage, p r3.Vec, u, v float64, r *sampling.Stream) (dir r3.Vec, k int32) {
	i := min(sort.SearchFloat64s(a.cum, u), len(a.cum)-1)
	x, _ := s.t.Texels.Sample(a.list[i].side/2, v, r.Float64(), r.Float64())
	return r3.Unit(r3.Sub(x, p)), int32(i)
}

// pdf is the density per steradian with which bright side k is drawn at distance
// d and cosine cos to its normal.
func (a *aims) pdf(k int32, d, cos float64) float64 {
	chance := a.cum[k]
	if k > 0 {
		chance -= a.cum[k-1]
	}
	if cos <= 1e-6 {
		return math.Inf(1)
	}
	return chance * d * d / (a.list[k].areaM2 * cos)
}
