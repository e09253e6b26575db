package bvh

import (
	"fmt"
	"math"
	"math/rand/v2"
	"sync"
	"testing"
)

var nan32 = float32(math.NaN())

// twins are the tree with each kernel that runs here.
func twins(t *Tree) map[string]*Tree {
	g := *t
	g.avx2 = false
	m := map[string]*Tree{"go": &g}
	if t.avx2 {
		m["avx2"] = t
	}
	return m
}

// TestPlain demands the very bits of testing every triangle in turn.
func TestPlain(t *testing.T) {
	n := 5000
	if testing.Short() {
		n = 1000
	}
	for name, tris := range soups() {
		rays := raysAt(tris, n)
		for kernel, tree := range twins(Build(tris, Config{})) {
			t.Run(name+"/"+kernel, func(t *testing.T) {
				hits := 0
				for _, r := range rays {
					want := plain(tris, r)
					if want.Prim >= 0 {
						hits++
					}
					if got := tree.Closest(r.org, r.dir, r.tmin, r.tmax); got != want || math.Signbit(float64(got.T)) {
						t.Fatalf("%v: got %v, want %v", r, got, want)
					}
					if got := tree.Occluded(r.org, r.dir, r.tmin, r.tmax); got != (want.Prim >= 0) {
						t.Fatalf("%v: occluded %v, closest %v", r, got, want)
					}
				}
				if hits < len(rays)/50 && len(tris) > 0 {
					t.Errorf("only %d of %d rays hit", hits, len(rays))
				}
			})
		}
	}
}

// TestPlain64 compares distances with float64, where edges are not near. The
// tolerance, 2e-5, is some 300 roundings of 2^-24: slivers and grazing rays
// lose digits.
func TestPlain64(t *testing.T) {
	for _, name := range []string{"random", "large", "box", "sphere", "axis-aligned"} {
		tris := soups()[name]
		tree := Build(tris, Config{})
		sure := 0
		for _, r := range raysAt(tris, 3000) {
			want, unsure := plain64(tris, r, 1e-4)
			if unsure || want < 1e-3 {
				continue
			}
			sure++
			h := tree.Closest(r.org, r.dir, r.tmin, r.tmax)
			if math.IsInf(want, 1) {
				if h.Prim >= 0 {
					t.Errorf("%s %v: got %v, want a miss", name, r, h)
				}
				continue
			}
			scale := math.Sqrt(wide64(r.dir).dot(wide64(r.dir))) // coordinates are of order 1
			if h.Prim < 0 || math.Abs(float64(h.T)-want)*scale > 2e-5*(1+scale*want) {
				t.Errorf("%s %v: got %v, want T %v", name, r, h, want)
				continue
			}
			tri := tris[h.Prim]
			at := wide64(tri[0]).mul(1 - float64(h.U) - float64(h.V)).add(wide64(tri[1]).mul(float64(h.U))).add(wide64(tri[2]).mul(float64(h.V)))
			off := at.sub(wide64(r.org).add(wide64(r.dir).mul(want)))
			if name != "large" && math.Sqrt(off.dot(off)) > 1e-4*(1+scale*want) {
				t.Errorf("%s %v: hit %v is %v off", name, r, h, off)
			}
		}
		if sure < 500 {
			t.Errorf("%s: only %d sure rays", name, sure)
		}
	}
}

func TestInvalidRays(t *testing.T) {
	tris := soups()["box"]
	ok := testRay{[3]float32{0, 0, 0}, 0, [3]float32{0, 0, 1}, 10}
	bad := map[string]testRay{}
	for _, x := range []float32{nan32, inf32, -inf32} {
		for k := range 3 {
			r := ok
			r.org[k] = x
			bad[fmt.Sprint("org ", k, x)] = r
			r = ok
			r.dir[k] = x
			bad[fmt.Sprint("dir ", k, x)] = r
		}
	}
	with := func(tmin, tmax float32) testRay { r := ok; r.tmin, r.tmax = tmin, tmax; return r }
	bad["tmin NaN"] = with(nan32, 10)
	bad["tmax NaN"] = with(0, nan32)
	bad["empty"] = with(2, 1)
	bad["negative"] = with(-2, -1)
	bad["infinite tmin"] = with(inf32, inf32)
	r := ok
	r.dir = [3]float32{}
	bad["zero"] = r
	for kernel, tree := range twins(Build(tris, Config{})) {
		if h := tree.Closest(ok.org, ok.dir, ok.tmin, ok.tmax); h.T != 1 || h.Prim < 0 {
			t.Errorf("%s: got %v, want T 1", kernel, h)
		}
		for name, r := range bad {
			if h := tree.Closest(r.org, r.dir, r.tmin, r.tmax); h != (Hit{T: inf32, Prim: -1}) {
				t.Errorf("%s %s: got %v, want a miss", kernel, name, h)
			}
			if tree.Occluded(r.org, r.dir, r.tmin, r.tmax) {
				t.Errorf("%s %s: occluded", kernel, name)
			}
		}
	}
}

// TestScale: T counts in units of dir, whatever its length.
func TestScale(t *testing.T) {
	tree := Build(soups()["random"], Config{})
	rng := rand.New(rand.NewPCG(3, 4))
	for range 2000 {
		f := func() float32 { return float32(rng.Float64()*2 - 1) }
		o, d := [3]float32{f(), f(), f()}, [3]float32{f(), f(), f()}
		want := tree.Closest(o, d, 0.1, 3)
		for _, e := range []int{-100, -40, 20, 31, 100} {
			s := float32(math.Ldexp(1, e)) // a power of two changes no digit
			got := tree.Closest(o, [3]float32{d[0] * s, d[1] * s, d[2] * s}, 0.1/s, 3/s)
			if got.Prim >= 0 {
				got.T *= s
			}
			if got != want {
				t.Fatalf("2^%d: got %v, want %v", e, got, want)
			}
		}
	}
	d := float32(math.SmallestNonzeroFloat32)
	up := Build([]Triangle{{{-1, -1, 1e-7}, {1, -1, 1e-7}, {0, 1, 1e-7}}}, Config{})
	if h := up.Closest([3]float32{}, [3]float32{0, 0, d}, 0, inf32); h.Prim != 0 {
		t.Errorf("shortest direction: got %v", h)
	}
}

func TestBounds(t *testing.T) {
	lo, hi := Build([]Triangle{{{1, 2, 3}, {-1, 5, 4}, {0, 0, 9}}, {{nan32, 9, 9}, {99, 9, 9}, {9, 9, 9}}}, Config{}).Bounds()
	if lo != [3]float32{-1, 0, 3} || hi != [3]float32{1, 5, 9} {
		t.Errorf("got %v %v", lo, hi)
	}
	if lo, hi = Build(nil, Config{}).Bounds(); lo != hi || lo != [3]float32{} {
		t.Errorf("empty: got %v %v", lo, hi)
	}
}

// TestTwins: assembly and Go twin give the same bits on rays through a room.
func TestTwins(t *testing.T) {
	tris := office(20000)
	tree := Build(tris, Config{})
	twin := twins(tree)["go"]
	n := 20000
	if testing.Short() {
		n = 4000
	}
	for kind, rays := range officeRays(tree, tris, n) {
		for _, r := range rays {
			got, want := tree.Closest(r.org, r.dir, r.tmin, r.tmax), twin.Closest(r.org, r.dir, r.tmin, r.tmax)
			if got != want {
				t.Fatalf("%s %v: got %v, twin has %v", kind, r, got, want)
			}
			a, b := tree.Occluded(r.org, r.dir, r.tmin, r.tmax), twin.Occluded(r.org, r.dir, r.tmin, r.tmax)
			if a != (want.Prim >= 0) || b != a {
				t.Fatalf("%s %v: occluded %v, twin %v, closest %v", kind, r, a, b, want)
			}
		}
	}
}

// TestConcurrent shares a tree among goroutines, for the race detector too.
func TestConcurrent(t *testing.T) {
	tris := office(5000)
	tree := Build(tris, Config{})
	rays := officeRays(tree, tris, 2000)["diffuse"]
	want := make([]Hit, len(rays))
	for i, r := range rays {
		want[i] = tree.Closest(r.org, r.dir, r.tmin, r.tmax)
	}
	var wg sync.WaitGroup
	for range 4 {
		wg.Go(func() {
			for i, r := range rays {
				if got := tree.Closest(r.org, r.dir, r.tmin, r.tmax); got != want[i] {
					t.Errorf("ray %d: got %v, want %v", i, got, want[i])
					return
				}
			}
		})
	}
	wg.Wait()
}
