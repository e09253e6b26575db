package bvh

import (
	"math"
)

// plain is the test of Woop, Benthin and Wald 2013 (JCGT 2(1), listing 1) for
// all triangles in turn, in float32 as the paper has it and two-sided, of
// equals the lowest index.
func plain(tris []Triangle, r testRay) Hit {
	best := Hit{T: inf32, Prim: -1}
	kz := 0
	for k := range 3 {
		if math.Abs(float64(r.dir[k])) > math.Abs(float64(r.dir[kz])) {
			kz = k
		}
	}
	kx, ky := (kz+1)%3, (kz+2)%3
	sz := 1 / r.dir[kz]
	sx, sy := r.dir[kx]*sz, r.dir[ky]*sz
	far := r.tmax
	for i, tri := range tris {
		var x, y, z [3]float32
		bad := false
		for v := range 3 {
			for _, c := range tri[v] {
				bad = bad || !finite(c)
			}
			dz := tri[v][kz] - r.org[kz]
			x[v] = tri[v][kx] - r.org[kx] - float32(sx*dz)
			y[v] = tri[v][ky] - r.org[ky] - float32(sy*dz)
			z[v] = sz * dz
		}
		u := float32(x[2]*y[1]) - float32(y[2]*x[1])
		v := float32(x[0]*y[2]) - float32(y[0]*x[2])
		w := float32(x[1]*y[0]) - float32(y[1]*x[0])
		if u == 0 || v == 0 || w == 0 {
			e := func(a, b int) float32 {
				return float32(float64(x[a])*float64(y[b]) - float64(y[a])*float64(x[b]))
			}
			u, v, w = e(2, 1), e(0, 2), e(1, 0)
		}
		neg, pos := u < 0 || v < 0 || w < 0, u > 0 || v > 0 || w > 0
		det := u + v + w
		if bad || neg && pos || det == 0 {
			continue
		}
		t := (float32(u*z[0]) + float32(v*z[1]) + float32(w*z[2])) / det
		if t >= max(r.tmin, 0) && t <= far && (best.Prim < 0 || t < far) {
			far = t
			best = Hit{t, v / det, w / det, int32(i)}
		}
	}
	return best
}

// plain64 returns the distance of the closest triangle in float64 and, so that
// rays close to an edge or to an end of the interval can be told, whether the
// answer would be another for triangles a little larger or smaller.
func plain64(tris []Triangle, r testRay, eps float64) (t float64, unsure bool) {
	o, d := wide64(r.org), wide64(r.dir)
	t = math.Inf(1)
	loose := math.Inf(1)
	for _, tri := range tris {
		a, b, c := wide64(tri[0]).sub(o), wide64(tri[1]).sub(o), wide64(tri[2]).sub(o)
		n := b.sub(a).cross(c.sub(a))
		den := n.dot(d)
		if den == 0 {
			continue
		}
		u, v, w := d.dot(c.cross(b))/-den, d.dot(a.cross(c))/-den, d.dot(b.cross(a))/-den
		h := n.dot(a) / den
		if !(h >= max(float64(r.tmin), 0)-eps && h <= float64(r.tmax)+eps) {
			continue
		}
		m := min(u, v, w)
		// a grazing ray moves further in the triangle for the same error
		eps := eps * math.Sqrt(n.dot(n)*d.dot(d)) / math.Abs(den)
		if m >= -eps {
			loose = min(loose, h)
		}
		if m >= eps && h >= max(float64(r.tmin), 0)+eps && h <= float64(r.tmax)-eps {
			t = min(t, h)
		}
	}
	return t, loose != t
}
