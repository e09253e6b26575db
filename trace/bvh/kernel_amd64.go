//go:build amd64 && !purego

package bvh

import "golang.org/x/sys/cpu"

//go:noescape
func closestAVX2(nodes *node, blocks *block, r *ray, h *Hit)

//go:noescape
func occludedAVX2(nodes *node, blocks *block, r *ray) bool

//go:noescape
func fillAVX2(bs *bins, ps *prim, n int, lo, scale *[4]float32)

//go:noescape
func partitionAVX2(ps *prim, n int, c *cut, mids *[2]span) int

//go:noescape
func scanAVX2(box *span, count, step int, sum *span, area *float32)

// useAVX2 is a fact about the machine, not a setting.
var useAVX2 = cpu.X86.HasAVX2 && cpu.X86.HasBMI1 && cpu.X86.HasPOPCNT

func (t *Tree) closest(r *ray, h *Hit) {
	if t.avx2 {
		closestAVX2(&t.nodes[0], &t.blocks[0], r, h)
		return
	}
	t.closestGo(r, h)
}

func (t *Tree) occluded(r *ray) bool {
	if t.avx2 {
		return occludedAVX2(&t.nodes[0], &t.blocks[0], r)
	}
	return t.occludedGo(r)
}

func (bs *bins) fill(ps []prim, lo, scale *[4]float32) {
	if useAVX2 {
		fillAVX2(bs, &ps[0], len(ps), lo, scale)
		return
	}
	bs.fillGo(ps, lo, scale)
}

func (bs *bins) scan(k, count int) {
	if !useAVX2 {
		bs.scanGo(k, count)
		return
	}
	last := count - 1
	scanAVX2(&bs.box[k][0], count, 1, &bs.left[0], &bs.leftArea[0])
	scanAVX2(&bs.box[k][last], count, -1, &bs.right[last], &bs.rightArea[last])
}

func (c *cut) partition(ps []prim, mids *[2]span) int {
	if useAVX2 {
		return partitionAVX2(&ps[0], len(ps), c, mids)
	}
	return c.partitionGo(ps, mids)
}

// Kernel names the traversal in use: "avx2" or "go".
func Kernel() string {
	if useAVX2 {
		return "avx2"
	}
	return "go"
}
