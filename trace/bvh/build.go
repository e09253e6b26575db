package bvh

import (
	"runtime"
	"sync"
)

const (
	// sahDepth is the depth of the binary tree from which on splits halve the
	// number of triangles. With at most 2^28 triangles its depth stays under
	// sahDepth+28, and the stack of a traversal under stackSize.
	sahDepth = 40
	// splitStop is the number of triangles that are no longer split.
	splitStop = 3
	// parallelMin is the smallest part worth a goroutine.
	parallelMin = 4096
)

// prim is the box of one triangle, laid out as a span.
type prim struct {
	lo  [3]float32
	idx int32
	nhi [3]float32
	_   float32
}

// pair is a node of the binary tree. Its left child follows it.
type pair struct {
	box      span
	first, n int32 // its triangles in builder.prims
	right    int32 // 0: not split
	plan
}

type builder struct {
	prims []prim
	pairs []pair
	spare chan struct{} // one token for each goroutine that may be started
}

// Build makes a tree of the triangles, which it copies. No triangles make a
// tree that nothing hits. It takes at most 2^28 triangles; further ones are
// ignored.
func Build(tris []Triangle, cfg Config) *Tree {
	workers := cfg.Workers
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	tris = tris[:min(len(tris), 1<<28)]
	b := &builder{spare: make(chan struct{}, workers-1)}
	for range workers - 1 {
		b.spare <- struct{}{}
	}
	box, mid := b.gather(tris)
	if len(b.prims) == 0 {
		return &Tree{}
	}
	b.pairs = make([]pair, 2*len(b.prims)-1)
	b.split(new(bins), 0, 0, len(b.prims), 0, &box, &mid)
	return b.emit(tris)
}

// gather fills prims with the boxes of the finite triangles and returns the
// box around them and the box around their doubled middles.
func (b *builder) gather(tris []Triangle) (box, mid span) {
	box, mid = emptySpan, emptySpan
	b.prims = make([]prim, 0, len(tris))
	for i := range tris {
		t := &tris[i]
		p := prim{idx: int32(i)}
		sum := float32(0)
		for k := range 3 {
			x, y, z := t[0][k], t[1][k], t[2][k]
			sum += (x - x) + (y - y) + (z - z) // NaN if one is not finite
			lo, hi := x, x
			if y < lo {
				lo = y
			}
			if y > hi {
				hi = y
			}
			if z < lo {
				lo = z
			}
			if z > hi {
				hi = z
			}
			p.lo[k], p.nhi[k] = lo, -hi
		}
		if sum != 0 {
			continue
		}
		b.prims = append(b.prims, p)
		box.grow(&p)
		mid.growMid(&p)
	}
	return box, mid
}

// split builds the binary tree over prims[i:j], whose box and box of doubled
// middles are given, at pairs[self:]. It may write pairs[self:self+2*(j-i)-1].
func (b *builder) split(bs *bins, self, i, j, depth int, box, mid *span) {
	n := j - i
	p := &b.pairs[self]
	p.box, p.first, p.n = *box, int32(i), int32(n)
	if n <= splitStop {
		p.planLeaf()
		return
	}
	var c cut
	if depth < sahDepth {
		bs.bestCut(b.prims[i:j], mid, &c)
	}
	var m int
	mids := [2]span{emptySpan, emptySpan}
	if c.found {
		m = i + c.partition(b.prims[i:j], &mids)
	} else {
		m = (i + j) / 2
		c.boxes = [2]span{emptySpan, emptySpan}
		for q := i; q < j; q++ {
			s := 0
			if q >= m {
				s = 1
			}
			c.boxes[s].grow(&b.prims[q])
			mids[s].growMid(&b.prims[q])
		}
	}
	right := self + 2*(m-i)
	p.right = int32(right)
	if n >= parallelMin && b.acquire() {
		b.fork(self+1, i, m, depth+1, c.boxes[0], mids[0], func() {
			b.split(bs, right, m, j, depth+1, &c.boxes[1], &mids[1])
		})
	} else {
		b.split(bs, self+1, i, m, depth+1, &c.boxes[0], &mids[0])
		b.split(bs, right, m, j, depth+1, &c.boxes[1], &mids[1])
	}
	p.planInner(&b.pairs[self+1], &b.pairs[right])
}

// fork splits in a goroutine of its own while other runs.
func (b *builder) fork(self, i, j, depth int, box, mid span, other func()) {
	var wg sync.WaitGroup
	wg.Go(func() {
		b.split(new(bins), self, i, j, depth, &box, &mid)
		b.spare <- struct{}{}
	})
	other()
	wg.Wait()
}

func (b *builder) acquire() bool {
	select {
	case <-b.spare:
		return true
	default:
		return false
	}
}
