package bvh

// The loops of this file are those of kernel_amd64.s in Go: the fallback, and
// what the assembly is tested against. They compare floats as int32: among
// non-negative ones the order is the same, and negative ones are below them,
// which is all that the slab test needs. Conversions around products keep the
// compiler from fusing them with sums.

// entry is a child still to be visited and the bits of the T at which the ray
// enters its box.
type entry struct{ ref, near int32 }

// smallStack serves most trees; a larger one costs time to clear. One entry
// above those in use is overwritten.
const smallStack = 96

func (t *Tree) closestGo(r *ray, h *Hit) {
	var q query
	q.set(r)
	if t.stack < smallStack {
		var s [smallStack]entry
		t.walkClosest(&q, h, s[:])
		return
	}
	var s [stackSize]entry
	t.walkClosest(&q, h, s[:])
}

func (t *Tree) occludedGo(r *ray) bool {
	var q query
	q.set(r)
	if t.stack < smallStack {
		var s [smallStack]int32
		return t.walkOccluded(&q, s[:])
	}
	var s [stackSize]int32
	return t.walkOccluded(&q, s[:])
}

// slabs is the slab test of a node's children: the bits of the T at which the
// ray enters each box, and a mask of the boxes that it meets before tmax.
func (q *query) slabs(n *node, near *[width]int32) uint32 {
	ox, oy, oz := q.near[0], q.near[1], q.near[2]
	rx, ry, rz := q.nrdir[0], q.nrdir[1], q.nrdir[2]
	tmin, tmax := q.tmin, q.tmax
	dx, dy, dz := q.down[0]&1, q.down[1]&1, q.down[2]&1
	x, y, z := &n.box[dx], &n.box[2+dy], &n.box[4+dz]
	for i := range near {
		near[i] = max(intBits((ox-x[i])*rx), intBits((oy-y[i])*ry), intBits((oz-z[i])*rz), tmin)
	}
	fx, fy, fz := q.far[0], q.far[1], q.far[2]
	u, v, w := &n.box[1-dx], &n.box[3-dy], &n.box[5-dz]
	missed := uint32(0)
	for i := range near {
		far := min(intBits((fx-u[i])*rx), intBits((fy-v[i])*ry), intBits((fz-w[i])*rz), tmax)
		missed |= uint32(uint64(int64(far)-int64(near[i]))>>63) << (i & 7)
	}
	return ^missed
}

func (t *Tree) walkClosest(q *query, h *Hit, stack []entry) {
	ref, sp := int32(0), 0
	var near [width]int32
	for {
		if ref >= 0 {
			n := &t.nodes[ref]
			hits := q.slabs(n, &near)
			order := n.order[q.octant&7]
			for range width { // from far to near
				i := order >> 28 & 7
				order <<= 4
				stack[sp] = entry{n.ref[i], near[i]}
				sp += int(hits >> i & 1)
			}
		} else {
			closestBlock(&t.blocks[^ref>>3], int(^ref&7), q, h)
		}
		for {
			sp--
			if sp < 0 {
				return
			}
			if stack[sp].near <= q.tmax {
				break
			}
		}
		ref = stack[sp].ref
	}
}

func (t *Tree) walkOccluded(q *query, stack []int32) bool {
	ref, sp := int32(0), 0
	var near [width]int32
	for {
		if ref >= 0 {
			n := &t.nodes[ref]
			hits := q.slabs(n, &near)
			for i := width - 1; i >= 0; i-- {
				stack[sp] = n.ref[i]
				sp += int(hits >> (i & 7) & 1)
			}
		} else {
			h := Hit{Prim: -1}
			closestBlock(&t.blocks[^ref>>3], int(^ref&7), q, &h)
			if h.Prim >= 0 {
				return true
			}
		}
		sp--
		if sp < 0 {
			return false
		}
		ref = stack[sp]
	}
}

// closestBlock tests triangles 0 to last of a block and keeps the closest in h
// and q.tmax.
//
// It is the watertight test of Woop, Benthin and Wald 2013, "Watertight
// Ray/Triangle Intersection", JCGT 2(1). Positions are counted from the vertex
// to the origin, which changes no sign of a product.
func closestBlock(b *block, last int, q *query, h *Hit) {
	kx, ky, kz := q.kx, q.ky, q.kz
	x0, x1, x2 := &b.v[0][kx], &b.v[1][kx], &b.v[2][kx]
	y0, y1, y2 := &b.v[0][ky], &b.v[1][ky], &b.v[2][ky]
	z0, z1, z2 := &b.v[0][kz], &b.v[1][kz], &b.v[2][kz]
	ox, oy, oz := q.org[0], q.org[1], q.org[2]
	sx, sy := q.sx, q.sy
	for i := 0; i <= last; i++ {
		i := i & (width - 1)
		az, bz, cz := oz-z0[i], oz-z1[i], oz-z2[i]
		ax := ox - x0[i] - float32(sx*az)
		bx := ox - x1[i] - float32(sx*bz)
		cx := ox - x2[i] - float32(sx*cz)
		ay := oy - y0[i] - float32(sy*az)
		by := oy - y1[i] - float32(sy*bz)
		cy := oy - y2[i] - float32(sy*cz)
		u := float32(cx*by) - float32(cy*bx)
		v := float32(ax*cy) - float32(ay*cx)
		w := float32(bx*ay) - float32(by*ax)
		if mixed(u, v, w) {
			continue
		}
		if u == 0 || v == 0 || w == 0 {
			u = cross64(cx, by, cy, bx)
			v = cross64(ax, cy, ay, cx)
			w = cross64(bx, ay, by, ax)
			if mixed(u, v, w) {
				continue
			}
		}
		det := u + v + w
		d := (float32(u*(q.nsz*az)) + float32(v*(q.nsz*bz)) + float32(w*(q.nsz*cz))) / det
		d += 0 // -0 to 0
		if !(d >= fromIntBits(q.tmin) && d <= fromIntBits(q.tmax)) {
			continue
		}
		if intBits(d) == q.tmax && h.Prim >= 0 && h.Prim < b.prim[i] {
			continue
		}
		q.tmax = intBits(d)
		*h = Hit{T: d, U: v / det, V: w / det, Prim: b.prim[i]}
	}
}

// cross64 is a*b - c*d of the right sign, zero only if it is.
func cross64(a, b, c, d float32) float32 {
	return float32(float64(a)*float64(b) - float64(c)*float64(d))
}

// mixed tells whether one of u, v, w is negative and one positive. Adding zero
// makes -0 zero.
func mixed(u, v, w float32) bool {
	a, b, c := intBits(u+0), intBits(v+0), intBits(w+0)
	return min(a, b, c)&-max(a, b, c) < 0
}
