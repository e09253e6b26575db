package bvh

import (
	"math"
	"math/rand/v2"
	"reflect"
	"testing"
)

// TestTree: every finite triangle is in one block, within the boxes above it;
// the tree does not depend on the workers; no tree is deeper than the stack.
func TestTree(t *testing.T) {
	sets := soups()
	sets["office"] = office(30000)
	var deep []Triangle // each a third further out than the last
	for i := range 30000 {
		x := float32(math.Pow(1.003, float64(i)) * 1e-19)
		deep = append(deep, Triangle{{x, 0, 0}, {x, x / 8, 0}, {x, 0, x / 8}})
	}
	sets["deep"] = deep
	rng := rand.New(rand.NewPCG(5, 2))
	for range 3000 { // where areas and sums overflow
		var tri Triangle
		for v := range tri {
			for k := range 3 {
				tri[v][k] = float32((rng.Float64()*2 - 1) * math.Pow(10, rng.Float64()*76-38))
			}
		}
		sets["extreme"] = append(sets["extreme"], tri)
	}
	for name, tris := range sets {
		tree := Build(tris, Config{Workers: 1})
		for _, w := range []int{2, 7} {
			if !reflect.DeepEqual(tree, Build(tris, Config{Workers: w})) {
				t.Errorf("%s: tree differs with %d workers", name, w)
			}
		}
		if tree.stack > stackSize-10 {
			t.Errorf("%s: stack of %d", name, tree.stack)
		}
		seen := make([]int, len(tris))
		var walk func(ref int32, lo, hi [3]float32)
		walk = func(ref int32, lo, hi [3]float32) {
			if ref < 0 {
				b := &tree.blocks[^ref>>3]
				for i := range ^ref&7 + 1 {
					p := b.prim[i]
					seen[p]++
					for v := range 3 {
						for k := range 3 {
							if x := b.v[v][k][i]; x != tris[p][v][k] || x < lo[k] || x > hi[k] {
								t.Errorf("%s: triangle %d out of its box", name, p)
							}
						}
					}
				}
				return
			}
			n := &tree.nodes[ref]
			for i := range width {
				a := [3]float32{n.box[0][i], n.box[2][i], n.box[4][i]}
				b := [3]float32{n.box[1][i], n.box[3][i], n.box[5][i]}
				if a[0] <= b[0] {
					walk(n.ref[i], a, b)
				}
			}
		}
		if len(tree.nodes) > 0 {
			walk(0, tree.lo, tree.hi)
		}
		for i, tri := range tris {
			want := 1
			for _, v := range tri {
				if !finite(v[0]) || !finite(v[1]) || !finite(v[2]) {
					want = 0
				}
			}
			if seen[i] != want {
				t.Fatalf("%s: triangle %d is %d times in the tree, want %d", name, i, seen[i], want)
			}
		}
	}
}

// TestBuildKernels: the assembly of the builder gives the bits of its Go form.
func TestBuildKernels(t *testing.T) {
	if !useAVX2 {
		t.Skip("the Go loops are the only ones here")
	}
	rng := rand.New(rand.NewPCG(5, 1))
	for n := 1; n < 300; n += 1 + n/8 {
		b := &builder{}
		var tris []Triangle
		for range n {
			var tri Triangle
			for v := range tri {
				for k := range 3 {
					tri[v][k] = float32(rng.IntN(40)) / 7
				}
			}
			tris = append(tris, tri)
		}
		_, mid := b.gather(tris)
		count := []int{4, binCount}[rng.IntN(2)]
		var lo, scale [4]float32
		var bs, want bins
		for k := range 3 {
			lo[k], scale[k] = mid.lo[k], binScale(&mid, k, count)
			for q := range binCount {
				bs.box[k][q], want.box[k][q] = emptySpan, emptySpan
			}
		}
		bs.fill(b.prims, &lo, &scale)
		want.fillGo(b.prims, &lo, &scale)
		for k := range 3 {
			bs.scan(k, count)
			want.scanGo(k, count)
			for q := range count {
				got := []any{bs.n[k][q], corners(&bs.box[k][q]), corners(&bs.left[q]), corners(&bs.right[q])}
				want := []any{want.n[k][q], corners(&want.box[k][q]), corners(&want.left[q]), corners(&want.right[q])}
				if !reflect.DeepEqual(got, want) {
					t.Fatalf("n %d axis %d bin %d: got %v, want %v", n, k, q, got, want)
				}
			}
			for q := range count - 1 {
				if a := []float32{bs.leftArea[q], bs.rightArea[q+1]}; bs.n[k][0] > 0 && bs.n[k][count-1] > 0 &&
					(a[0] != want.leftArea[q] || a[1] != want.rightArea[q+1]) {
					t.Fatalf("n %d axis %d bin %d: areas %v, want %v %v", n, k, q, a, want.leftArea[q], want.rightArea[q+1])
				}
			}
			c := cut{axis: int32(k), bin: int32(1 + rng.IntN(count-1)), lo: lo[k], scale: scale[k]}
			ps := append([]prim(nil), b.prims...)
			mids := [2]span{emptySpan, emptySpan}
			midsGo := mids
			got := c.partition(ps, &mids)
			psGo := append([]prim(nil), b.prims...)
			if m := c.partitionGo(psGo, &midsGo); got != m || !reflect.DeepEqual(ps, psGo) ||
				corners(&mids[0]) != corners(&midsGo[0]) || corners(&mids[1]) != corners(&midsGo[1]) {
				t.Fatalf("n %d axis %d: partition at %d, want %d", n, k, got, m)
			}
		}
	}
}

func corners(s *span) [6]float32 {
	return [6]float32{s.lo[0], s.lo[1], s.lo[2], s.nhi[0], s.nhi[1], s.nhi[2]}
}
