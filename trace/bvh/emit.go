package bvh

import (
	"slices"
)

const (
	width     = 8   // children of a node, triangles of a block
	stackSize = 512 // see sahDepth
)

// node is a node of the wide tree. Unused children have an empty box.
type node struct {
	// box holds the children's low x, high x, low y, high y, low z, high z.
	box [6][width]float32
	// ref is the index of a node, or ^(block<<3 | triangles-1).
	ref [width]int32
	// order holds, for each octant of directions, the children from near to
	// far, four bits each. Bit k of the octant is set where axis k runs down.
	order [8]uint32
}

// block holds up to eight triangles; the first fills unused places.
type block struct {
	v    [3][3][width]float32 // vertex, axis
	prim [width]int32
}

// Tree is a set of triangles ready for rays. It is immutable and safe for
// concurrent use.
type Tree struct {
	nodes  []node
	blocks []block
	lo, hi [3]float32
	avx2   bool    // take the assembly, not its twin
	extent float32 // largest absolute coordinate
	stack  int     // most entries that a traversal may stack
}

// child is a subtree chosen for a node.
type child struct {
	pair int32
	leaf bool
	area float32
}

// emit makes the wide tree that the plans ask for.
func (b *builder) emit(tris []Triangle) *Tree {
	t := &Tree{avx2: useAVX2}
	root := &b.pairs[0]
	for k := range 3 {
		t.lo[k], t.hi[k] = root.box.lo[k], -root.box.nhi[k]
		t.extent = max(t.extent, -t.lo[k], t.hi[k])
	}
	t.nodes = make([]node, 1, 1+len(b.prims)/8)
	t.blocks = make([]block, 0, 1+len(b.prims)/4)
	depth := b.emitNode(t, tris, 0, 0)
	t.stack = depth*(width-1) + 1
	return t
}

// emitNode fills nodes[at] with the children of pair p, or p itself if it is
// a leaf, and returns the depth of the tree from there.
func (b *builder) emitNode(t *Tree, tris []Triangle, at int, p int32) int {
	var buf [width]child
	cs := buf[:0]
	if b.pairs[p].leaf {
		cs = append(cs, b.child(p))
	} else {
		cs = b.children(cs, p, width)
	}
	// Occluded takes leaves first, then the largest.
	slices.SortStableFunc(cs, func(x, y child) int {
		switch {
		case x.leaf != y.leaf:
			if x.leaf {
				return -1
			}
			return 1
		case x.area > y.area:
			return -1
		case x.area < y.area:
			return 1
		}
		return 0
	})
	next := len(t.nodes)
	var n node
	for i := range width {
		if i >= len(cs) {
			for k := range 3 {
				n.box[2*k][i], n.box[2*k+1][i] = inf32, -inf32
			}
			continue
		}
		q := &b.pairs[cs[i].pair]
		for k := range 3 {
			n.box[2*k][i], n.box[2*k+1][i] = q.box.lo[k], -q.box.nhi[k]
		}
		if cs[i].leaf {
			n.ref[i] = ^(int32(len(t.blocks))<<3 | (q.n - 1))
			t.blocks = append(t.blocks, b.block(tris, q))
			continue
		}
		n.ref[i] = int32(len(t.nodes))
		t.nodes = append(t.nodes, node{})
	}
	b.orders(&n, cs)
	t.nodes[at] = n
	depth := 0
	for i := range cs {
		if !cs[i].leaf {
			depth = max(depth, b.emitNode(t, tris, next, cs[i].pair))
			next++
		}
	}
	return depth + 1
}

func (b *builder) child(p int32) child {
	q := &b.pairs[p]
	return child{p, q.leaf, q.box.area()}
}

// children appends the n subtrees that pair p is made into.
func (b *builder) children(cs []child, p int32, n int) []child {
	q := &b.pairs[p]
	for n > 1 && n < width && q.left[n] == 0 {
		n--
	}
	if n == 1 {
		return append(cs, b.child(p))
	}
	l := int(q.left[n])
	cs = b.children(cs, p+1, l)
	return b.children(cs, q.right, n-l)
}

// block copies the triangles of q, in the order of their indices.
func (b *builder) block(tris []Triangle, q *pair) block {
	var ids [width]int32
	n := int(q.n)
	for i := range n {
		ids[i] = b.prims[int(q.first)+i].idx
	}
	slices.Sort(ids[:n])
	for i := n; i < width; i++ {
		ids[i] = ids[0]
	}
	bl := block{prim: ids}
	for i, id := range ids {
		t := &tris[id]
		for v := range 3 {
			for k := range 3 {
				bl.v[v][k][i] = t[v][k]
			}
		}
	}
	return bl
}

// orders fills in the children's order for each octant, by the middles of
// their boxes along its diagonal. Unused places come last.
func (b *builder) orders(n *node, cs []child) {
	var key [width]float32
	for o := range 4 {
		var idx [width]uint32
		for i := range idx {
			idx[i] = uint32(i)
		}
		for i := range cs {
			box := &b.pairs[cs[i].pair].box
			var s float32
			for k := range 3 {
				c := box.lo[k] - box.nhi[k]
				if o>>k&1 != 0 {
					c = -c
				}
				s += c
			}
			key[i] = s
			j := i
			for j > 0 && key[idx[j-1]] > s {
				idx[j] = idx[j-1]
				j--
			}
			idx[j] = uint32(i)
		}
		var up, down uint32
		for i := range width {
			up |= idx[i] << (4 * i)
			back := idx[i]
			if i < len(cs) {
				back = idx[len(cs)-1-i]
			}
			down |= back << (4 * i)
		}
		n.order[o], n.order[7-o] = up, down
	}
}
