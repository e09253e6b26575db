package surface

import (
	"math"
	"sort"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/trace"
)

// texelKey names a cell: the part, the axis its normal is nearest to (with
// sign, so that the two faces of a thin slab stay apart) and the cell of a
// regular grid.
type texelKey struct {
	part    int32
	axis    int8
	u, v, w int32
}

// gridShift keeps the planes of the cells off round coordinates, where floors
// and walls lie; as a share of the cell.
const gridShift = 0.38196601

// Texels is the surface of a scene cut into cells.
type Texels struct {
	world *trace.World
	index map[texelKey]int32
	keys  []texelKey
	// pieces of texel k: pieces[first[k]:first[k+1]], with cumulative area.
	pieces []piece
	first  []int32
	part   []int32
	// cellOf and groupAt tell the cell that a texel is of, and which group of
	// it where a wall divides the cell.
	cellOf  []int32
	groupAt []int8
	divided map[int32]*division
	grid    []scene.Grid // by part
}

type piece struct {
	v    [3]r3.Vec
	prim int32
	cum  float64 // area up to and including this piece
}

// Cut divides the world's diffusely scattering triangles into texels with the
// cell edge that each part asks for, times coarsen (>= 1) and the part's
// factor.
func Cut(w *trace.World, coarsen float64, factor []float64) *Texels {
	s := w.Scene
	t := &Texels{world: w, index: map[texelKey]int32{}, grid: make([]scene.Grid, len(s.Parts))}
	weak := weakParts(s)
	for i, p := range s.Parts {
		f := coarsen * factor[i]
		if weak[i] {
			f *= weakCoarser
		}
		t.grid[i] = gridOf(p, f)
	}
	type owned struct {
		texel int32
		piece piece
	}
	var all []owned
	for i := range s.Triangles {
		tri := &s.Triangles[i]
		if !scatters(s.Finishes[tri.Finish].BSDF) {
			continue
		}
		grid := &t.grid[tri.Part]
		poly := []r3.Vec{local(grid, tri.V[0]), local(grid, tri.V[1]), local(grid, tri.V[2])}
		for _, cellPoly := range clipToGrid(poly, grid.EdgeM) {
			for k, v := range cellPoly {
				cellPoly[k] = world(grid, v)
			}
			key := t.key(int32(i), centroid(cellPoly))
			id, ok := t.index[key]
			if !ok {
				id = int32(len(t.part))
				t.index[key] = id
				t.part = append(t.part, tri.Part)
				t.keys = append(t.keys, key)
			}
			for k := 2; k < len(cellPoly); k++ {
				p := piece{v: [3]r3.Vec{cellPoly[0], cellPoly[k-1], cellPoly[k]}, prim: int32(i)}
				p.cum = triangleArea(p.v)
				if p.cum > 0 {
					all = append(all, owned{id, p})
				}
			}
		}
	}
	sort.SliceStable(all, func(a, b int) bool { return all[a].texel < all[b].texel })
	t.first = make([]int32, len(t.part)+1)
	t.pieces = make([]piece, len(all))
	for i, o := range all {
		t.pieces[i] = o.piece
		t.first[o.texel+1]++
	}
	for k := range t.part {
		t.first[k+1] += t.first[k]
		sum := 0.0
		for i := t.first[k]; i < t.first[k+1]; i++ {
			sum += t.pieces[i].cum
			t.pieces[i].cum = sum
		}
		t.cellOf = append(t.cellOf, int32(k))
	}
	t.groupAt = make([]int8, len(t.part))
	t.divide()
	return t
}

// gridOf is the grid of a part, its cells times coarsen.
func gridOf(p scene.Part, coarsen float64) scene.Grid {
	g := scene.Grid{Axes: [3]r3.Vec{{X: 1}, {Y: 1}, {Z: 1}}, EdgeM: [3]float64{p.TexelM, p.TexelM, p.TexelM}}
	if p.Grid != nil {
		g = *p.Grid
	}
	for i := range g.EdgeM {
		g.EdgeM[i] *= coarsen
	}
	return g
}

// local turns a vector into the grid's frame, world back.
func local(g *scene.Grid, v r3.Vec) r3.Vec {
	return r3.Vec{X: r3.Dot(v, g.Axes[0]), Y: r3.Dot(v, g.Axes[1]), Z: r3.Dot(v, g.Axes[2])}
}

func world(g *scene.Grid, v r3.Vec) r3.Vec {
	return r3.Add(r3.Scale(v.X, g.Axes[0]), r3.Add(r3.Scale(v.Y, g.Axes[1]), r3.Scale(v.Z, g.Axes[2])))
}

// scatters reports whether a finish reflects or transmits diffusely.
func scatters(b materials.BSDF) bool {
	for _, side := range []materials.Side{materials.Front, materials.Back} {
		if rho, tau := b.Lambert(side); rho > 0 || tau > 0 {
			return true
		}
	}
	return false
}

// Parts that scatter less than weakShare of what meets them, such as mirrors,
// light others an order less than paint does: their cells are weakCoarser
// times larger. Own choice, no published source.
const (
	weakShare   = 0.1
	weakCoarser = 3
)

// weakParts tells which parts have no finish that scatters weakShare.
func weakParts(s *scene.Scene) []bool {
	weak := make([]bool, len(s.Parts))
	for i := range weak {
		weak[i] = true
	}
	for i := range s.Triangles {
		b := s.Finishes[s.Triangles[i].Finish].BSDF
		for _, side := range []materials.Side{materials.Front, materials.Back} {
			if rho, tau := b.Lambert(side); rho+tau >= weakShare {
				weak[s.Triangles[i].Part] = false
			}
		}
	}
	return weak
}

// Len is the number of texels.
func (t *Texels) Len() int { return len(t.part) }

// AreaM2 is the area of texel k.
func (t *Texels) AreaM2(k int32) float64 {
	c := t.cellOf[k]
	if t.first[c+1] == t.first[c] {
		return 0
	}
	area := t.pieces[t.first[c+1]-1].cum
	if d := t.divided[c]; d != nil {
		area *= d.share[t.groupAt[k]]
	}
	return area
}

// Part is the part that texel k belongs to.
func (t *Texels) Part(k int32) int32 { return t.part[k] }

// Divided tells a texel that shares its cell with others, a wall between them;
// Sample draws from a list of its points.
func (t *Texels) Divided(k int32) bool { return t.divided[t.cellOf[k]] != nil }

// At is the texel of a point on a triangle, -1 where none was cut.
func (t *Texels) At(prim int32, p r3.Vec) int32 {
	c := t.cellAt(prim, p)
	if c < 0 {
		return c
	}
	if d := t.divided[c]; d != nil {
		return d.ids[t.groupOf(d, p, t.world.Normal(prim))]
	}
	return c
}

func (t *Texels) cellAt(prim int32, p r3.Vec) int32 {
	if id, ok := t.index[t.key(prim, p)]; ok {
		return id
	}
	// Rounding can put a hit just across a cell's edge, where this surface
	// has no texel: look at the neighbours, the nearest direction first.
	k := t.key(prim, p)
	for _, d := range neighbourCells {
		n := k
		n.u, n.v, n.w = n.u+d[0], n.v+d[1], n.w+d[2]
		if id, ok := t.index[n]; ok {
			return id
		}
	}
	return -1
}

var neighbourCells = [][3]int32{
	{-1, 0, 0}, {1, 0, 0}, {0, -1, 0}, {0, 1, 0}, {0, 0, -1}, {0, 0, 1},
	{-1, -1, 0}, {-1, 1, 0}, {1, -1, 0}, {1, 1, 0},
}

func (t *Texels) key(prim int32, p r3.Vec) texelKey {
	n := t.world.Normal(prim)
	part := t.world.Part(prim)
	grid := &t.grid[part]
	p, n = local(grid, p), local(grid, n)
	at := func(x float64, axis int) int32 { return int32(math.Floor(x/grid.EdgeM[axis] - gridShift)) }
	k := texelKey{part: part, u: at(p.X, 0), v: at(p.Y, 1), w: at(p.Z, 2)}
	ax, ay, az := math.Abs(n.X), math.Abs(n.Y), math.Abs(n.Z)
	// The small preference settles ties of 45 degree surfaces.
	switch {
	case az*1.0001 >= ax && az*1.0001 >= ay:
		k.axis = signed(3, n.Z)
	case ay*1.0001 >= ax:
		k.axis = signed(2, n.Y)
	default:
		k.axis = signed(1, n.X)
	}
	return k
}

func signed(a int8, x float64) int8 {
	if x < 0 {
		return -a
	}
	return a
}

// Sample draws a point uniform over texel k; it returns the point and the
// front normal there.
func (t *Texels) Sample(k int32, u, v, pick float64) (p, normal r3.Vec) {
	c := t.cellOf[k]
	if d := t.divided[c]; d != nil {
		points := d.points[t.groupAt[k]]
		x := points[int(pick*float64(len(points)))]
		return x.p, x.n
	}
	return t.sampleCell(c, u, v, pick)
}

func (t *Texels) sampleCell(k int32, u, v, pick float64) (p, normal r3.Vec) {
	ps := t.pieces[t.first[k]:t.first[k+1]]
	x := pick * ps[len(ps)-1].cum
	i := sort.Search(len(ps)-1, func(i int) bool { return ps[i].cum > x })
	su := math.Sqrt(u)
	a, b := 1-su, v*su
	q := &ps[i].v
	p = r3.Add(r3.Scale(a, q[0]), r3.Add(r3.Scale(b, q[1]), r3.Scale(1-a-b, q[2])))
	return p, t.world.Normal(ps[i].prim)
}

// BSDF is the finish of texel k (all its pieces share the part, and almost
// always the finish; the first piece stands for all).
func (t *Texels) BSDF(k int32) materials.BSDF {
	return t.world.BSDF(t.pieces[t.first[t.cellOf[k]]].prim)
}

func triangleArea(v [3]r3.Vec) float64 {
	return 0.5 * r3.Norm(r3.Cross(r3.Sub(v[1], v[0]), r3.Sub(v[2], v[0])))
}

func centroid(p []r3.Vec) r3.Vec {
	var c r3.Vec
	for _, v := range p {
		c = r3.Add(c, v)
	}
	return r3.Scale(1/float64(len(p)), c)
}
