package trace

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/scene/system"
)

// Portals draws directions towards openings, the places light comes from, so
// that surfaces deep in a room do not wait for a cosine ray to find a window.
// It is used beside cosine sampling with the balance heuristic (Veach & Guibas
// 1995, Optimally Combining Sampling Techniques for Monte Carlo Rendering),
// so an opening it leaves out costs noise, never bias.
type Portals struct {
	rects []system.Rect
	share []float64
	total float64
}

// portalMinDistance is the distance from an opening below which its solid
// angle is so large that cosine sampling does better. Own choice, by trial.
const portalMinDistance = 0.4

// PortalsSeen selects the openings that a surface element at p with unit
// normal n looks out of, weighted by their estimated form factor.
func (w *World) PortalsSeen(p, n r3.Vec) Portals {
	var ps Portals
	w.seePortals(p, n, nil, &ps)
	return ps
}

// SeeMirrors is PortalsSeen with the mirrors seen from p beside the openings, into
// a value that is used again: a small mirror that shows the sky is as hard to
// find as a window.
func (w *World) SeeMirrors(p, n r3.Vec, ps *Portals) { w.seePortals(p, n, w.mirrors, ps) }

func (w *World) seePortals(p, n r3.Vec, mirrors []system.Rect, ps *Portals) {
	ps.clear()
	for i := range w.Scene.Openings {
		ps.add(&w.Scene.Openings[i].Rect, p, n)
	}
	for i := range mirrors {
		ps.add(&mirrors[i], p, n)
	}
	ps.finish()
}

func (ps *Portals) clear() { ps.rects, ps.share, ps.total = ps.rects[:0], ps.share[:0], 0 }

// add takes a rectangle that is seen from its inner side.
func (ps *Portals) add(r *system.Rect, p, n r3.Vec) {
	area := r.WidthM * r.HeightM
	if area <= 0 {
		return
	}
	var f float64
	near := math.Inf(1)
	for _, c := range [5][2]float64{{.5, .5}, {.1, .1}, {.9, .1}, {.1, .9}, {.9, .9}} {
		q := r3.Add(r.Origin, r3.Add(r3.Scale(c[0]*r.WidthM, r.Across), r3.Scale(c[1]*r.HeightM, r.Up)))
		d := r3.Sub(q, p)
		d2 := r3.Norm2(d)
		near = math.Min(near, d2)
		co, cn := r3.Dot(d, r.Outward), r3.Dot(d, n)
		if co > 0 && cn > 0 && d2 > 0 {
			f += co * cn / (d2 * d2)
		}
	}
	f *= area / (5 * math.Pi)
	if f <= 1e-6 || near < portalMinDistance*portalMinDistance {
		return
	}
	ps.rects = append(ps.rects, *r)
	ps.share = append(ps.share, math.Min(f, 1))
	ps.total += math.Min(f, 1)
}

func (ps *Portals) finish() {
	for i := range ps.share {
		ps.share[i] /= ps.total
	}
}

// Empty reports that no opening is worth sampling.
func (ps *Portals) Empty() bool { return len(ps.rects) == 0 }

// Sample maps the unit square to unit directions from p through the openings:
// u picks the opening and the place across it, v the height, so that
// stratified u and v give stratified directions.
func (ps *Portals) Sample(p r3.Vec, u, v float64) r3.Vec {
	k := 0
	for k < len(ps.share)-1 && u >= ps.share[k] {
		u -= ps.share[k]
		k++
	}
	r := &ps.rects[k]
	a, b := math.Min(u/ps.share[k], 1)*r.WidthM, v*r.HeightM
	q := r3.Add(r.Origin, r3.Add(r3.Scale(a, r.Across), r3.Scale(b, r.Up)))
	return unit(r3.Sub(q, p))
}

// PDF is the density of Sample per steradian at unit dir from p.
func (ps *Portals) PDF(p, dir r3.Vec) float64 {
	var pdf float64
	for k := range ps.rects {
		r := &ps.rects[k]
		co := r3.Dot(dir, r.Outward)
		if co <= 0 {
			continue
		}
		t := r3.Dot(r3.Sub(r.Origin, p), r.Outward) / co
		if t <= 0 {
			continue
		}
		q := r3.Sub(r3.Add(p, r3.Scale(t, dir)), r.Origin)
		a, b := r3.Dot(q, r.Across), r3.Dot(q, r.Up)
		if a < 0 || b < 0 || a > r.WidthM || b > r.HeightM {
			continue
		}
		pdf += ps.share[k] * t * t / (r.WidthM * r.HeightM * co)
	}
	return pdf
}

// golden is the fractional part of the golden ratio.
const golden = 0.6180339887498949

func frac(x float64) float64 { return x - math.Floor(x) }

// unit is r3.Unit without its guard against overflow, which costs a hypot.
func unit(v r3.Vec) r3.Vec { return r3.Scale(1/math.Sqrt(r3.Norm2(v)), v) }

// Gather draws nCos cosine-distributed and nPortal portal directions from the
// element at p with unit normal n and walks each. The sum over the found
// luminances times weights estimates the element's illuminance:
// E = sum weight x L, weights in sr (cosine included).
func (w *World) Gather(p, n r3.Vec, ps *Portals, nCos, nPortal int, s *sampling.Stream, out *Found) {
	if ps.Empty() {
		nCos, nPortal = nCos+nPortal, 0
	}
	org := w.Offset(p, n)
	rotCos, rotPortal := s.Float64(), s.Float64()
	for i := 0; i < nCos+nPortal; i++ {
		// Stratified along one axis, a golden-ratio rotation on the other.
		var dir r3.Vec
		if i < nCos {
			u := (float64(i) + s.Float64()) / float64(nCos)
			dir = CosineDirection(n, u, frac(rotCos+float64(i)*golden))
		} else {
			k := float64(i - nCos)
			u := (k + s.Float64()) / float64(nPortal)
			dir = ps.Sample(p, u, frac(rotPortal+k*golden))
		}
		cos := r3.Dot(dir, n)
		if cos <= 0 {
			continue
		}
		density := float64(nCos) * cos / math.Pi
		if nPortal > 0 {
			density += float64(nPortal) * ps.PDF(p, dir)
		}
		w.Walk(org, dir, cos/density, 0, s, out)
	}
}
