package bvh

// Costs of visiting a node and of testing a block of triangles. Rooms of up to
// 100,000 triangles are traced as fast at 0.5 to 1.2, one of a million faster
// below 0.9, for it has fewer blocks to fetch (BenchmarkClosest, BenchmarkOccluded).
const (
	nodeCost  = 1
	blockCost = 0.7
)

// plan holds the cheapest ways to make a subtree of the binary tree into at
// most 1 to 7 subtrees of the wide tree: Ylitie, Karras and Laine 2017,
// "Efficient Incoherent Ray Traversal on GPUs Through Compressed Wide BVHs",
// section 3.1, with blocks of triangles for leaves.
type plan struct {
	cost [width]float32 // cost[i]: at most i subtrees, 1 <= i < width
	// left[i] is how many of i subtrees the left child gets; 0: as for i-1.
	left [width + 1]uint8
	leaf bool
}

func (p *pair) planLeaf() {
	c := p.box.area() * blockCost
	p.leaf = true
	for i := range p.cost {
		p.cost[i] = c
	}
}

func (p *pair) planInner(l, r *pair) {
	area := p.box.area()
	best, k := spread(l, r, width)
	p.left[width] = k
	inner := area*nodeCost + best
	p.cost[1] = inner
	if p.n <= width {
		if c := area * blockCost; !(inner < c) {
			p.leaf = true
			p.cost[1] = c
		}
	}
	for i := 2; i < width; i++ {
		p.cost[i] = p.cost[i-1]
		if c, k := spread(l, r, i); c < p.cost[i] {
			p.cost[i], p.left[i] = c, k
		}
	}
}

// spread returns the least cost of n subtrees shared by l and r and the share
// of l.
func spread(l, r *pair, n int) (float32, uint8) {
	best, k := l.cost[1]+r.cost[n-1], 1
	for i := 2; i < n; i++ {
		if c := l.cost[i] + r.cost[n-i]; c < best {
			best, k = c, i
		}
	}
	return best, uint8(k)
}
