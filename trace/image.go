package trace

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene/photometry"
)

// Image is the sun as one mirror shows it: the direction in which it appears
// from a point, the share of the disc's solid angle seen, and the share of its
// luminance that mirror and glass leave (mean over what is seen).
type Image struct {
	Dir             r3.Vec
	Share, Luminous float64
	Part            int32 // the mirror's
	Via             int32 // part of the first pane looked through, -1 for none
}

// discCorners is the number of corners of the polygon that stands for the disc
// where it is cut by a facet's edges; the polygon has the disc's area.
const discCorners = 48

// imageRays is the number of lines of sight to a facet's part of the disc;
// imageScramble spreads them, the same way everywhere.
const (
	imageRays     = 24
	imageScramble = 0x9e3779b9
)

// Images appends the sun's images seen from p, one for each facet that shows a
// part of the disc: one mirror, straight passage through any number of panes.
// The part of the disc that a facet covers is computed; the part of it that
// something hides is found by imageRays lines of sight spread over it. hidden
// tells directions that look at the ground or behind the horizon line. facets
// are those to look at, as MirrorsFrom finds them.
func (w *World) Images(p, sun r3.Vec, facets []int32, hidden func(dir r3.Vec) bool, out []Image) []Image {
	for _, k := range facets {
		f := &w.specular.facets[k]
		n := w.normal[f.prim]
		side := materials.Front
		cs, ce := r3.Dot(sun, n), r3.Dot(r3.Sub(p, f.centre), n)
		if cs < 0 {
			side, cs, ce = materials.Back, -cs, -ce
		}
		if ce <= 0 || cs <= 0 {
			continue // the eye looks at the other side
		}
		mirror, _ := w.tris[f.prim].bsdf.Delta(side, cs)
		if mirror <= 0 {
			continue
		}
		dir := reflect(sun, n)
		// Does the line of sight pass near enough to the facet?
		to := r3.Sub(f.centre, p)
		along := r3.Dot(to, dir)
		if along <= 0 {
			if r3.Norm(to) > f.radius {
				continue
			}
		} else if reach := f.radius + along*sunTan*1.1; r3.Norm2(to)-along*along > reach*reach {
			continue
		}
		out = w.facetImage(f, p, n, dir, hidden, out)
	}
	return out
}

// sunTan is the tangent of the sun's apparent radius.
var sunTan = math.Tan(photometry.SunDiameterRad / 2)

// facetImage adds what facet f shows of the disc, whose image stands at dir.
func (w *World) facetImage(f *facet, p, n, dir r3.Vec, hidden func(dir r3.Vec) bool, out []Image) []Image {
	frame, edge := w.edges(f, p, dir)
	var buffer [2][discCorners + 4][2]float64
	poly := cutDisc(edge, discCorners, &buffer)
	area, cx, cy := polygon(poly)
	if area <= 0 {
		return out
	}
	at := func(x, y float64) r3.Vec {
		return r3.Unit(r3.Add(dir, r3.Add(r3.Scale(x, frame.T), r3.Scale(y, frame.B))))
	}
	var seen int
	var luminous float64
	via := int32(-1)
	// Even steps of the area along a fan of triangles about the middle.
	step, next, done := area/imageRays, area/imageRays/2, 0.0
	k := 0
	for i, a := range poly {
		b := poly[(i+1)%len(poly)]
		wedge := ((a[0]-cx)*(b[1]-cy) - (b[0]-cx)*(a[1]-cy)) / 2
		for ; wedge > 0 && next <= done+wedge && k < imageRays; next += step {
			u, v := sampling.OwenSobol2(uint32(k), imageScramble)
			k++
			// The place within the wedge along the rim is set by the area so
			// far, the distance from the middle by the sequence.
			along := (next - done) / wedge
			r := math.Sqrt(math.Mod(u+v, 1))
			x := cx + r*((1-along)*(a[0]-cx)+along*(b[0]-cx))
			y := cy + r*((1-along)*(a[1]-cy)+along*(b[1]-cy))
			d := at(x, y)
			s := reflect(d, n)
			if hidden(s) {
				continue
			}
			if l, pane, ok := w.look(f.prim, p, d, s); ok {
				seen++
				luminous += l
				via = pane
			}
		}
		done += wedge
	}
	if seen == 0 || k == 0 {
		return out
	}
	whole := math.Pi * sunTan * sunTan
	return append(out, Image{
		Dir: at(cx, cy), Share: math.Min(1, area/whole) * float64(seen) / float64(k),
		Luminous: luminous / float64(seen), Part: w.tris[f.prim].part, Via: via,
	})
}

// edges are the planes through the eye p and the facet's edges, as linear
// functions of the coordinates of the tangent plane at dir, positive inside.
func (w *World) edges(f *facet, p, dir r3.Vec) (frame materials.Frame, edge [3][3]float64) {
	frame = materials.NewFrame(dir)
	v := &w.Scene.Triangles[f.prim].V
	for i := range edge {
		a, b, c := r3.Sub(v[i], p), r3.Sub(v[(i+1)%3], p), r3.Sub(v[(i+2)%3], p)
		m := r3.Cross(a, b)
		if r3.Dot(m, c) < 0 {
			m = r3.Scale(-1, m)
		}
		edge[i] = [3]float64{r3.Dot(m, frame.T), r3.Dot(m, frame.B), r3.Dot(m, dir)}
	}
	return frame, edge
}

// cutDisc cuts the polygon of n corners (at most discCorners) that stands
// for the disc by three half planes. Source: Sutherland & Hodgman 1974,
// Reentrant Polygon Clipping, CACM 17(1).
func cutDisc(edge [3][3]float64, n int, buffer *[2][discCorners + 4][2]float64) [][2]float64 {
	// A regular polygon of n corners and radius r has n/2 r^2 sin(2 pi/n).
	r := sunTan * math.Sqrt(2*math.Pi/(float64(n)*math.Sin(2*math.Pi/float64(n))))
	poly, other := buffer[0][:0], buffer[1][:0]
	for i := range n {
		s, c := math.Sincos(2 * math.Pi * (float64(i) + 0.5) / float64(n))
		poly = append(poly, [2]float64{r * c, r * s})
	}
	for _, e := range edge {
		next := other[:0]
		for i, a := range poly {
			b := poly[(i+1)%len(poly)]
			fa, fb := e[0]*a[0]+e[1]*a[1]+e[2], e[0]*b[0]+e[1]*b[1]+e[2]
			if fa >= 0 {
				next = append(next, a)
			}
			if (fa >= 0) != (fb >= 0) {
				t := fa / (fa - fb)
				next = append(next, [2]float64{a[0] + t*(b[0]-a[0]), a[1] + t*(b[1]-a[1])})
			}
		}
		if len(next) < 3 {
			return nil
		}
		poly, other = next, poly
	}
	return poly
}

// polygon is the area and the centroid of a convex polygon.
func polygon(p [][2]float64) (area, cx, cy float64) {
	for i, a := range p {
		b := p[(i+1)%len(p)]
		k := a[0]*b[1] - b[0]*a[1]
		area += k / 2
		cx += (a[0] + b[0]) * k / 6
		cy += (a[1] + b[1]) * k / 6
	}
	if area <= 0 {
		return 0, 0, 0
	}
	return area, cx / area, cy / area
}

// sameFacet is the cosine of half a degree: facets of one curved mirror that
// meet at an edge.
const sameFacet = 0.99996

// look follows a line of sight to facet prim and on to the sun's point in
// direction sun: the share of luminance that arrives.
func (w *World) look(prim int32, org, dir, sun r3.Vec) (luminous float64, via int32, ok bool) {
	tau := 1.0
	via = -1
	for range maxSpecular {
		h, hit := w.Closest(org, dir)
		if !hit {
			return 0, via, false
		}
		mirror, through := h.BSDF.Delta(h.Side, h.Cos)
		facing := h.Facing()
		// Along a shared edge rounding may hit the neighbour instead.
		if h.Prim == prim || (h.Part == w.tris[prim].part && math.Abs(r3.Dot(h.Normal, w.normal[prim])) > sameFacet) {
			tr := w.Transmittance(w.Offset(h.Point, facing), sun, math.Inf(1))
			return tau * mirror * tr, via, tr > 0 && mirror > 0
		}
		if through <= 0 {
			return 0, via, false
		}
		if via < 0 {
			via = h.Part
		}
		tau *= through
		org = w.Offset(h.Point, r3.Scale(-1, facing))
	}
	return 0, via, false
}

// reflect mirrors a direction to the sun in a plane with unit normal n: the
// direction in which its image is seen.
func reflect(d, n r3.Vec) r3.Vec { return r3.Sub(d, r3.Scale(2*r3.Dot(d, n), n)) }
