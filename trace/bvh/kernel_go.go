//go:build !amd64 || purego

package bvh

const useAVX2 = false

func (t *Tree) closest(r *ray, h *Hit) { t.closestGo(r, h) }

func (t *Tree) occluded(r *ray) bool { return t.occludedGo(r) }

func (bs *bins) fill(ps []prim, lo, scale *[4]float32) { bs.fillGo(ps, lo, scale) }

func (bs *bins) scan(k, count int) { bs.scanGo(k, count) }

func (c *cut) partition(ps []prim, mids *[2]span) int { return c.partitionGo(ps, mids) }

// Kernel names the traversal in use: "avx2" or "go".
func Kernel() string { return "go" }
