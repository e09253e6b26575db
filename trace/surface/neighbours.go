package surface

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// neighbours knows, for every active side, the sides next to it and the sky it
// may see, to spare shadow rays that cannot reach the sun.
type neighbours struct {
	start []int32
	list  []int32
	// sees is a bit set of sky patches by side, stride words each.
	sees    []uint64
	stride  int
	looksUp []bool // side sees any sky at all
}

// maySee reports whether the sun in a patch may fall on side i: whether any
// ray of the side or of its neighbours, in any batch, went to that patch or to
// one next to it. With several hundred rays a side, a third of them aimed at
// the openings, what this misses is a sliver of sky below about a thousandth
// of the side's view.
func (n *neighbours) maySee(i, patch int) bool {
	return n.sees[i*n.stride+patch/64]&(1<<(patch%64)) != 0
}

// of lists side i and the sides next to it.
func (n *neighbours) of(i int) []int32 { return n.list[n.start[i]:n.start[i+1]] }

func (t *Transport) findNeighbours() neighbours {
	count := t.Patches.Count()
	n := neighbours{start: []int32{0}, stride: (count + 63) / 64}
	own := make([]uint64, len(t.sides)*n.stride)
	for i, side := range t.sides {
		key := t.Texels.keys[side/2]
		for du := int32(-1); du <= 1; du++ {
			for dv := int32(-1); dv <= 1; dv++ {
				for dw := int32(-1); dw <= 1; dw++ {
					k := key
					k.u, k.v, k.w = k.u+du, k.v+dv, k.w+dw
					if id, ok := t.Texels.index[k]; ok {
						n.list = t.appendActive(n.list, id, side&1)
					}
				}
			}
		}
		n.start = append(n.start, int32(len(n.list)))
		for b := range t.rows {
			r := &t.rows[b]
			for _, p := range r.patches[r.patchStart[i]:r.patchStart[i+1]] {
				own[i*n.stride+int(p.Side)/64] |= 1 << (p.Side % 64)
			}
		}
	}
	next := t.adjacentPatches(n.stride)
	wide := make([]uint64, len(own))
	for i := range t.sides {
		w := wide[i*n.stride : (i+1)*n.stride]
		for p := range count {
			if own[i*n.stride+p/64]&(1<<(p%64)) != 0 {
				for k, bits := range next[p*n.stride : (p+1)*n.stride] {
					w[k] |= bits
				}
			}
		}
	}
	n.sees = make([]uint64, len(own))
	n.looksUp = make([]bool, len(t.sides))
	for i := range t.sides {
		for _, j := range n.of(i) {
			for k := range n.stride {
				n.sees[i*n.stride+k] |= wide[int(j)*n.stride+k]
			}
		}
		for k := range n.stride {
			n.looksUp[i] = n.looksUp[i] || n.sees[i*n.stride+k] != 0
		}
	}
	return n
}

// appendActive adds the active sides of a cell, all groups of it.
func (t *Transport) appendActive(list []int32, cell, side int32) []int32 {
	ids := []int32{cell}
	if d := t.Texels.divided[cell]; d != nil {
		ids = d.ids
	}
	for _, id := range ids {
		if j := t.active[2*id+side]; j > 0 {
			list = append(list, j-1)
		}
	}
	return list
}

// adjacentPatches holds, by patch, the set of patches that touch it (itself
// included): those whose centres are nearer than the two patches' sizes allow.
func (t *Transport) adjacentPatches(stride int) []uint64 {
	count := t.Patches.Count()
	out := make([]uint64, count*stride)
	for p := range count {
		for q := range count {
			reach := 0.8 * (math.Sqrt(t.Patches.SolidAngle(p)) + math.Sqrt(t.Patches.SolidAngle(q)))
			if r3.Dot(t.Patches.Centre(p), t.Patches.Centre(q)) >= math.Cos(reach) {
				out[p*stride+q/64] |= 1 << (q % 64)
			}
		}
	}
	return out
}

// LitNear returns, by active side, the moments of a block at which the sun
// fell on the side or one next to it in any of the lights.
func (t *Transport) LitNear(lights []Light) []uint64 {
	any := make([]uint64, len(t.sides))
	for b := range lights {
		for i, m := range lights[b].Lit {
			any[i] |= m
		}
	}
	out := make([]uint64, len(t.sides))
	for i := range t.sides {
		for _, j := range t.near.of(i) {
			out[i] |= any[j]
		}
	}
	return out
}
