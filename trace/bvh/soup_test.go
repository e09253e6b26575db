package bvh

import (
	"math"
	"math/rand/v2"
)

// soups are the sets of triangles of the tests.
func soups() map[string][]Triangle {
	rng := rand.New(rand.NewPCG(3, 1))
	f := func() float32 { return float32(rng.Float64()*2 - 1) }
	point := func(s float32) [3]float32 { return [3]float32{f() * s, f() * s, f() * s} }
	near := func(p [3]float32, s float32) [3]float32 {
		q := point(s)
		return [3]float32{p[0] + q[0], p[1] + q[1], p[2] + q[2]}
	}
	m := map[string][]Triangle{
		"empty":  nil,
		"single": {{{-0.5, -0.5, 0}, {0.5, -0.5, 0.1}, {0, 0.5, 0}}},
		"box":    boxPatches(nil, vec{-1, -1, -1}, vec{1, 1, 1}, 3),
		"sphere": sphere(nil, vec{}, 1, 12),
	}
	for range 500 {
		p := point(1)
		m["random"] = append(m["random"], Triangle{p, near(p, 0.2), near(p, 0.2)})
		m["large"] = append(m["large"], Triangle{point(1), point(1), point(1)})
		p = point(1)
		q := near(p, 1)
		m["sliver"] = append(m["sliver"], Triangle{p, q, near(q, 1e-5)})

		s := float32(math.Pow(10, rng.Float64()*9-6)) // 1e-6 to 1e3
		p = point(s)
		m["huge and tiny"] = append(m["huge and tiny"], Triangle{p, near(p, s), near(p, s)})

		// corners on a grid, so that edges and planes coincide
		g := func() float32 { return float32(rng.IntN(9)-4) / 4 }
		k := rng.IntN(3)
		var a, b, c [3]float32
		a[k], b[k], c[k] = g(), 0, 0
		b[k], c[k] = a[k], a[k]
		k1, k2 := (k+1)%3, (k+2)%3
		a[k1], b[k1], c[k1] = g(), g(), g()
		a[k2], b[k2], c[k2] = g(), g(), g()
		m["axis-aligned"] = append(m["axis-aligned"], Triangle{a, b, c})

		a[k], b[k], c[k] = 0.5, 0.5, 0.5
		if k != 2 {
			a[k], b[k], c[k] = a[2], b[2], c[2]
		}
		a[2], b[2], c[2] = 0.5, 0.5, 0.5
		m["coplanar"] = append(m["coplanar"], Triangle{a, b, c})
		m["same"] = append(m["same"], Triangle{{-1, -1, 0}, {1, -1, 0}, {0, 1, 0}})

		p, q = point(1), point(1)
		switch rng.IntN(6) {
		case 0:
			m["degenerate"] = append(m["degenerate"], Triangle{p, p, p})
		case 1:
			m["degenerate"] = append(m["degenerate"], Triangle{p, q, p})
		case 2:
			mid := [3]float32{(p[0] + q[0]) / 2, (p[1] + q[1]) / 2, (p[2] + q[2]) / 2}
			m["degenerate"] = append(m["degenerate"], Triangle{p, mid, q})
		case 3:
			p[rng.IntN(3)] = []float32{nan32, inf32, -inf32}[rng.IntN(3)]
			m["degenerate"] = append(m["degenerate"], Triangle{q, near(q, 1), p})
		default:
			m["degenerate"] = append(m["degenerate"], Triangle{p, near(p, 0.3), near(p, 0.3)})
		}
	}
	return m
}

// raysAt makes rays for a soup: at random, along axes, through vertices and
// edges, from vertices, with short and long directions and short intervals.
func raysAt(tris []Triangle, n int) []testRay {
	rng := rand.New(rand.NewPCG(3, 2))
	f := func() float32 { return float32(rng.Float64()*2 - 1) }
	var rays []testRay
	for i := range n {
		r := testRay{[3]float32{f() * 1.5, f() * 1.5, f() * 1.5}, 0, [3]float32{f(), f(), f()}, inf32}
		var p [3]float32
		if len(tris) > 0 {
			t := tris[rng.IntN(len(tris))]
			a := float32(rng.IntN(5)) / 4
			for k := range p {
				p[k] = t[0][k] + a*(t[1][k]-t[0][k])
			}
		}
		if wide64(p).dot(wide64(p)) < 1e20 { // false for NaN
			switch i % 4 {
			case 1: // aim at it
				r.dir = [3]float32{p[0] - r.org[0], p[1] - r.org[1], p[2] - r.org[2]}
			case 2: // start at it
				r.org = p
			}
		}
		if rng.IntN(3) == 0 { // on the planes of a grid
			for k := range 3 {
				r.org[k] = float32(math.Round(float64(r.org[k])*4) / 4)
			}
		}
		switch rng.IntN(4) {
		case 0:
			r.dir[rng.IntN(3)] = 0
		case 1:
			k := rng.IntN(3)
			d := r.dir[k]
			r.dir = [3]float32{}
			if rng.IntN(2) == 0 {
				r.dir = [3]float32{float32(math.Copysign(0, -1)), 0, float32(math.Copysign(0, -1))}
			}
			r.dir[k] = d
		}
		if rng.IntN(4) == 0 {
			r.tmin = f() * 0.2
			r.tmax = r.tmin + float32(rng.Float64())
		}
		if r.dir != [3]float32{} {
			rays = append(rays, r)
		}
	}
	return rays
}
