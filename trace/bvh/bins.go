package bvh

const binCount = 32

// cut is a plane between two bins of one axis.
type cut struct {
	boxes     [2]span
	axis      int32
	bin       int32 // the first bin of the right side
	lo, scale float32
	found     bool
}

// bins counts the triangles of each slab of each axis and bounds them.
type bins struct {
	box [3][binCount]span
	n   [3][binCount]int32
	// Boxes around the bins up to and from each, and their areas.
	left, right         [binCount]span
	leftArea, rightArea [binCount]float32
}

// binScale returns the factor from a doubled middle to one of count bins, zero
// where the middles do not differ.
func binScale(mid *span, k int, count int) float32 {
	w := -mid.nhi[k] - mid.lo[k]
	if !(w > 0) || !finite(w) {
		return 0
	}
	s := float32(count) * 0.9999 / w
	if !finite(s) {
		return 0
	}
	return s
}

// bestCut finds the cut of least surface area heuristic over binned middles:
// Wald 2007, "On fast construction of SAH-based bounding volume
// hierarchies", section 3.
func (bs *bins) bestCut(ps []prim, mid *span, best *cut) {
	count := binCount
	if len(ps) < 64 {
		count = 8
	}
	var lo, scale [4]float32
	for k := range 3 {
		lo[k], scale[k] = mid.lo[k], binScale(mid, k, count)
		for q := range count {
			bs.box[k][q] = emptySpan
			bs.n[k][q] = 0
		}
	}
	bs.fill(ps, &lo, &scale)
	bestCost := inf32
	for k := range 3 {
		if scale[k] == 0 {
			continue
		}
		bs.scan(k, count)
		n, all := int32(0), int32(len(ps))
		for q := 1; q < count; q++ {
			m := bs.n[k][q-1]
			if m == 0 {
				continue
			}
			n += m
			if n == all {
				break
			}
			c := bs.leftArea[q-1]*float32(n) + bs.rightArea[q]*float32(all-n)
			if !best.found || c < bestCost {
				bestCost = c
				best.found, best.axis, best.bin = true, int32(k), int32(q)
				best.lo, best.scale = lo[k], scale[k]
				best.boxes[0], best.boxes[1] = bs.left[q-1], bs.right[q]
			}
		}
	}
}

// fillGo adds the triangles to the bins.
func (bs *bins) fillGo(ps []prim, lo, scale *[4]float32) {
	for i := range ps {
		p := &ps[i]
		for k := range 3 {
			q := int32((p.lo[k]-p.nhi[k]-lo[k])*scale[k]) & (binCount - 1)
			bs.n[k][q]++
			bs.box[k][q].grow(p)
		}
	}
}

// scanGo fills in the boxes around the bins of axis k from either side. The
// areas of empty boxes are of no use.
func (bs *bins) scanGo(k, count int) {
	s := emptySpan
	for q := range count {
		s.add(&bs.box[k][q])
		bs.left[q], bs.leftArea[q] = s, s.area()
	}
	s = emptySpan
	for q := count - 1; q >= 0; q-- {
		s.add(&bs.box[k][q])
		bs.right[q], bs.rightArea[q] = s, s.area()
	}
}

// partitionGo moves the left triangles before the right ones, returns their
// number and adds their doubled middles to mids.
func (c *cut) partitionGo(ps []prim, mids *[2]span) int {
	k, lo, scale, bin := c.axis, c.lo, c.scale, c.bin
	first := 0
	for i := range ps {
		p := ps[i]
		ps[i] = ps[first]
		ps[first] = p
		if int32((p.lo[k]-p.nhi[k]-lo)*scale) < bin {
			mids[0].growMid(&p)
			first++
		} else {
			mids[1].growMid(&p)
		}
	}
	return first
}
