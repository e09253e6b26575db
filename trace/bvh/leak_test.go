package bvh

import (
	"math"
	"math/rand/v2"
	"os"
	"sync"
	"sync/atomic"
	"testing"
)

// closedRoom is a room of about 100,000 triangles that share their edges:
// wavy walls between flat edges.
func closedRoom() []Triangle {
	lo, hi := vec{0.1, -2.3, 0}, vec{7.3, 3.1, 2.9}
	tris := boxPatches(nil, lo, hi, 91)
	for i := range tris {
		for v := range 3 {
			p := wide64(tris[i][v])
			// the inside of a wall moves outward by up to 0.3 m; the move is a
			// function of the vertex alone, so that edges stay shared
			for k := range 3 {
				side := 0.0
				switch tris[i][v][k] {
				case float32(lo[k]):
					side = -1
				case float32(hi[k]):
					side = 1
				default:
					continue
				}
				a, b := (k+1)%3, (k+2)%3
				ua, ub := (p[a]-lo[a])/(hi[a]-lo[a]), (p[b]-lo[b])/(hi[b]-lo[b])
				w := ua * (1 - ua) * ub * (1 - ub)
				if w < 1e-6 {
					continue // on an edge of the room
				}
				p[k] += side * 0.3 * 16 * w * math.Pow(math.Sin(40*ua)*math.Sin(30*ub), 2)
				break
			}
			tris[i][v] = p.f32()
		}
	}
	return tris
}

// leaks shoots n rays from inside and counts those that hit nothing: a third
// at random, a third at vertices, a third at points of edges.
func leaks(tree *Tree, tris []Triangle, lo, hi vec, n int, seed uint64) int {
	const batch = 1 << 16
	var found, next atomic.Int64
	var wg sync.WaitGroup
	for range 2 {
		wg.Go(func() {
			for {
				b := int(next.Add(1)) - 1
				if b*batch >= n {
					return
				}
				rng := rand.New(rand.NewPCG(seed, uint64(b)))
				for i := b * batch; i < min(n, (b+1)*batch); i++ {
					var org, dir [3]float32
					for k := range 3 {
						org[k] = float32(lo[k] + rng.Float64()*(hi[k]-lo[k]))
						dir[k] = float32(rng.NormFloat64())
					}
					if i%3 > 0 {
						t := &tris[rng.IntN(len(tris))]
						a := float32(0)
						if i%3 == 2 {
							a = rng.Float32()
						}
						for k := range 3 {
							dir[k] = t[0][k] + a*(t[1][k]-t[0][k]) - org[k]
						}
					}
					if i%64 == 0 {
						dir[rng.IntN(3)] = 0
					}
					if dir == [3]float32{} {
						continue
					}
					if h := tree.Closest(org, dir, 0, inf32); h.Prim < 0 {
						found.Add(1)
					} else if !tree.Occluded(org, dir, 0, inf32) {
						found.Add(1)
					}
				}
			}
		})
	}
	wg.Wait()
	return int(found.Load())
}

// TestLeaks: no ray leaves a closed surface that it starts inside. Origins keep
// off the surface itself, where T is zero but for rounding. With a triangle taken out, rays
// must be found that do.
func TestLeaks(t *testing.T) {
	n := 1_000_000
	switch {
	case os.Getenv("SQUINT_LONG") == "1":
		n = 100_000_000
	case testing.Short():
		n = 100_000
	}
	cube := boxPatches(nil, vec{-1, -1, -1}, vec{1, 1, 1}, 1)
	far := boxPatches(nil, vec{5000, 7000, 100}, vec{5010, 7008, 103}, 4)
	for _, c := range []struct {
		name   string
		tris   []Triangle
		lo, hi vec // of the origins
	}{
		{"box", cube, vec{-0.999, -0.999, -0.999}, vec{0.999, 0.999, 0.999}},
		{"box far out", far, vec{5000.01, 7000.01, 100.01}, vec{5009.99, 7007.99, 102.99}},
		{"sphere", sphere(nil, vec{0.3, 0.1, -2}, 1.7, 60), vec{-0.5, -0.7, -2.8}, vec{1.1, 0.9, -1.2}},
		{"room", closedRoom(), vec{0.101, -2.299, 0.001}, vec{7.299, 3.099, 2.899}},
	} {
		t.Run(c.name, func(t *testing.T) {
			for kernel, tree := range twins(Build(c.tris, Config{})) {
				n := n
				if kernel == "go" {
					n /= 10
				}
				if got := leaks(tree, c.tris, c.lo, c.hi, n, 11); got != 0 {
					t.Errorf("%s: %d of %d rays leak from %d triangles", kernel, got, n, len(c.tris))
				}
			}
			holed := append([]Triangle(nil), c.tris...)
			holed[len(holed)*5/9+1] = Triangle{} // not one at a pole
			if leaks(Build(holed, Config{}), c.tris, c.lo, c.hi, 1_000_000, 12) == 0 {
				t.Error("a missing triangle was not found")
			}
		})
	}
}
