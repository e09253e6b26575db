package bvh

import (
	"math"
	"math/rand/v2"
)

// vec helpers for the tests, in float64.
type vec [3]float64

func (a vec) add(b vec) vec     { return vec{a[0] + b[0], a[1] + b[1], a[2] + b[2]} }
func (a vec) sub(b vec) vec     { return vec{a[0] - b[0], a[1] - b[1], a[2] - b[2]} }
func (a vec) mul(s float64) vec { return vec{a[0] * s, a[1] * s, a[2] * s} }
func (a vec) dot(b vec) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }
func (a vec) unit() vec         { return a.mul(1 / math.Sqrt(a.dot(a))) }
func (a vec) f32() [3]float32   { return [3]float32{float32(a[0]), float32(a[1]), float32(a[2])} }
func wide64(a [3]float32) vec   { return vec{float64(a[0]), float64(a[1]), float64(a[2])} }
func (a vec) cross(b vec) vec {
	return vec{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}

// patch tessellates f over the unit square into 2*nu*nv triangles that share
// bit-equal vertices.
func patch(dst []Triangle, nu, nv int, f func(u, v float64) vec) []Triangle {
	at := func(i, j int) [3]float32 { return f(float64(i)/float64(nu), float64(j)/float64(nv)).f32() }
	for i := range nu {
		for j := range nv {
			a, b, c, d := at(i, j), at(i+1, j), at(i+1, j+1), at(i, j+1)
			dst = append(dst, Triangle{a, b, c}, Triangle{a, c, d})
		}
	}
	return dst
}

// boxPatches tessellates the six sides of a box, n x n squares each.
func boxPatches(dst []Triangle, lo, hi vec, n int) []Triangle {
	d := hi.sub(lo)
	for k := range 3 {
		for _, s := range []float64{0, 1} {
			dst = patch(dst, n, n, func(u, v float64) vec {
				p := vec{}
				p[k], p[(k+1)%3], p[(k+2)%3] = s, u, v
				// hi itself, not lo+d, where a coordinate is one, so that
				// sides share their edges exactly
				for a := range 3 {
					if p[a] == 1 {
						p[a] = hi[a]
					} else {
						p[a] = lo[a] + p[a]*d[a]
					}
				}
				return p
			})
		}
	}
	return dst
}

// sphere tessellates a sphere whose poles and seam are closed exactly.
func sphere(dst []Triangle, c vec, r float64, n int) []Triangle {
	return patch(dst, 2*n, n, func(u, v float64) vec {
		if u == 1 {
			u = 0
		}
		sp, cp := math.Sincos(2 * math.Pi * u)
		st, ct := math.Sincos(math.Pi * v)
		if v == 0 || v == 1 {
			st = 0
		}
		return c.add(vec{r * st * cp, r * st * sp, r * ct})
	})
}

// office makes a closed room of about n triangles: walls, desks, curved slats
// before a window wall, lamps and leafy plants.
func office(n int) []Triangle {
	rng := rand.New(rand.NewPCG(7, 1))
	var t []Triangle
	wall := max(1, int(math.Sqrt(float64(n)/200)))
	t = boxPatches(t, vec{0, 0, 0}, vec{8, 5, 3}, wall)
	for i := range 6 {
		x, y := 1+float64(i%3)*2.4, 1+float64(i/3)*2
		t = boxPatches(t, vec{x, y, 0.71}, vec{x + 1.6, y + 0.8, 0.74}, max(1, wall/4))
		for l := range 4 {
			a, b := x+float64(l%2)*1.55, y+float64(l/2)*0.75
			t = boxPatches(t, vec{a, b, 0}, vec{a + 0.05, b + 0.05, 0.71}, 1)
		}
	}
	seg := max(6, n/1200)
	for s := range 60 {
		z := 0.3 + float64(s)*0.04
		t = patch(t, 3, seg/3, func(u, v float64) vec {
			a := (u - 0.5) * 1.2
			return vec{0.3 + v*7.4, 0.1 + 0.05*math.Sin(a+0.6), z + 0.05*math.Cos(a+0.6)}
		})
	}
	ball := max(4, int(math.Sqrt(float64(n)/160)))
	for i := range 8 {
		t = sphere(t, vec{1 + float64(i%4)*2, 1.5 + float64(i/4)*2, 2.5}, 0.2, ball)
	}
	for len(t) < n {
		plant := vec{0.6 + 6.8*rng.Float64(), 4 + 0.7*rng.Float64(), 0.4}
		for range 400 {
			p := plant.add(vec{rng.NormFloat64() * 0.15, rng.NormFloat64() * 0.15, rng.Float64() * 1.1})
			a := vec{rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()}.unit()
			b := a.cross(vec{rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()}.unit())
			t = patch(t, 2, 2, func(u, v float64) vec {
				return p.add(a.mul(0.06 * u)).add(b.mul(0.03 * v * (1 - u*u))).add(vec{0, 0, -0.02 * u * u})
			})
		}
	}
	return t
}

// testRay is a ray of a .ray file: origin, tmin, direction, tmax.
type testRay struct {
	org  [3]float32
	tmin float32
	dir  [3]float32
	tmax float32
}

// officeRays makes n rays of each kind: from an eye, cosine-weighted from
// what it sees, and from there to points on the window wall.
func officeRays(t *Tree, tris []Triangle, n int) map[string][]testRay {
	rng := rand.New(rand.NewPCG(7, 2))
	out := map[string][]testRay{}
	inf := float32(math.Inf(1))
	eye := vec{4.1, 3.1, 1.2}
	for len(out["diffuse"]) < n {
		d := vec{rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()}.unit()
		r := testRay{eye.f32(), 0, d.f32(), inf}
		if rng.IntN(3) > 0 && len(out["diffuse"]) > 0 { // deeper bounces too
			r = out["diffuse"][rng.IntN(len(out["diffuse"]))]
		} else {
			out["primary"] = append(out["primary"], r)
		}
		h := t.Closest(r.org, r.dir, r.tmin, r.tmax)
		if h.Prim < 0 {
			continue
		}
		v := tris[h.Prim]
		p := wide64(r.org).add(wide64(r.dir).mul(float64(h.T)))
		nrm := wide64(v[1]).sub(wide64(v[0])).cross(wide64(v[2]).sub(wide64(v[0])))
		if nrm.dot(nrm) == 0 {
			continue
		}
		nrm = nrm.unit()
		if nrm.dot(wide64(r.dir)) > 0 {
			nrm = nrm.mul(-1)
		}
		p = p.add(nrm.mul(1e-4))
		b := nrm.add(vec{rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()}.unit())
		out["diffuse"] = append(out["diffuse"], testRay{p.f32(), 1e-4, b.unit().f32(), inf})
		s := vec{8 * rng.Float64(), 0.02, 0.3 + 2.5*rng.Float64()}.sub(p)
		out["shadow"] = append(out["shadow"], testRay{p.f32(), 1e-4, s.f32(), 1})
	}
	for len(out["primary"]) < n {
		d := vec{rng.NormFloat64(), rng.NormFloat64(), rng.NormFloat64()}.unit()
		out["primary"] = append(out["primary"], testRay{eye.f32(), 0, d.f32(), inf})
	}
	return out
}
