package glare

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"
)

// Scratch is working memory, to be reused from one evaluation to the next by
// one goroutine. The zero value is ready; it fits fields of any size and
// carries nothing from one evaluation to the next.
type Scratch struct {
	threshold float64 // cd/m2, as used
	ev        float64 // lx, pixels only

	bright  []brightPixel // in reading order
	label   []int32       // 1 + index into bright, or 0; image with a margin of one pixel
	parent  []int32       // union-find over bright
	edge    []edgePixel   // pixels on the edge of their group
	groupOf []int32       // group of each bright pixel
	groups  []group

	rest     []float32 // an image with one batch left out
	partFlux []float64 // of each group in one batch, cd/m2 sr

	// The work zone's pixels, kept while field and zone stay the same.
	zoneField  *Field
	zoneCentre r3.Vec
	zoneRadius float64
	zone       []int32
}

type brightPixel struct {
	pixel int32
	at    int32 // index into label
	core  bool
}

// edgePixel repeats what merge compares, next to each other in memory.
type edgePixel struct {
	dir    r3.Vec
	bright int32 // index into bright
	core   bool
}

// group accumulates a source.
type group struct {
	omega, flux float64 // sr, cd/m2 sr
	shrunk      float64 // integral of d(omega)/P^2
	moment      r3.Vec  // integral of L dir d(omega)
	peak        float32
	count       int32
}

func (g *group) luminance() float64 { return g.flux / g.omega }

// centroid is zero where the directions cancel.
func (g *group) centroid() r3.Vec {
	n := r3.Norm(g.moment)
	if n == 0 {
		return r3.Vec{}
	}
	return r3.Scale(1/n, g.moment)
}

func (g *group) position(rule PositionRule) float64 {
	if rule == Integrated {
		return math.Sqrt(g.omega / g.shrunk)
	}
	return PositionIndex(g.moment)
}

// contribution is L^2 omega/P^2.
func (g *group) contribution(rule PositionRule) float64 {
	p := g.position(rule)
	return g.flux * g.flux / (g.omega * p * p)
}

// group joins the bright pixels found by gather into groups.
func (s *Scratch) group(f *Field, lum []float32, o Options) {
	s.groups = s.groups[:0]
	s.groupOf = s.groupOf[:0]
	if len(s.bright) == 0 {
		return
	}
	s.touch(f)
	grouping := orDefault(o.GroupingRad, DefaultGroupingRad)
	if spare := s.spare(); grouping > 0 && spare > 0 {
		s.merge(f, grouping, spare)
	}
	for _, b := range s.bright {
		s.label[b.at] = 0
	}

	// Roots are the first pixels of their groups, so groups come in reading
	// order.
	for i, b := range s.bright {
		root := s.find(int32(i))
		g := int32(len(s.groups))
		if root == int32(i) {
			s.groups = append(s.groups, group{})
		} else {
			g = s.groupOf[root]
		}
		s.groupOf = append(s.groupOf, g)
		s.groups[g].add(f, b.pixel, lum[b.pixel])
	}
}

func (g *group) add(f *Field, pixel int32, lum float32) {
	omega := f.Omega[pixel]
	flux := float64(lum) * omega
	p := f.PositionIndex[pixel]
	d := f.Dir[pixel]
	g.omega += omega
	g.flux += flux
	g.shrunk += omega / (p * p)
	g.moment.X += flux * d.X
	g.moment.Y += flux * d.Y
	g.moment.Z += flux * d.Z
	g.peak = max(g.peak, lum)
	g.count++
}

// touch joins pixels of the same kind that touch, corners included.
func (s *Scratch) touch(f *Field) {
	stride := int32(f.Width + 2)
	if n := int(stride) * (f.Height + 2); len(s.label) < n {
		s.label = make([]int32, n)
	}
	s.parent = s.parent[:0]
	for i, b := range s.bright {
		s.parent = append(s.parent, int32(i))
		s.label[b.at] = int32(i) + 1
		// The pixel above touches the three others, which are in its group
		// already if they are bright; so does, of the rest, the one above to
		// the left with the one to the left.
		if s.join(i, b.core, b.at-stride) {
			continue
		}
		s.join(i, b.core, b.at-stride+1)
		if !s.join(i, b.core, b.at-stride-1) {
			s.join(i, b.core, b.at-1)
		}
	}
}

// join puts bright pixel i into the group of the pixel with label at, if that
// is of the same kind.
func (s *Scratch) join(i int, core bool, at int32) bool {
	j := s.label[at] - 1
	if j < 0 || s.bright[j].core != core {
		return false
	}
	s.union(int32(i), j)
	return true
}

// spare is the number of groups beside one of each kind: when so many are joined
// there is nothing left to join.
func (s *Scratch) spare() int {
	n := 0
	var kinds [2]int
	for i, p := range s.parent {
		if int32(i) == p {
			n++
			if s.bright[i].core {
				kinds[1] = 1
			} else {
				kinds[0] = 1
			}
		}
	}
	return n - kinds[0] - kinds[1]
}

// merge joins groups of the same kind with pixels at most grouping rad apart.
// The nearest pixels of two groups lie on their edges, so only those are
// compared, swept in order of height: points further apart in one coordinate
// than the chord are further apart in all.
func (s *Scratch) merge(f *Field, grouping float64, spare int) {
	stride := int32(f.Width + 2)
	s.edge = s.edge[:0]
	for i, b := range s.bright {
		for _, at := range [8]int32{
			b.at - stride - 1, b.at - stride, b.at - stride + 1, b.at - 1,
			b.at + 1, b.at + stride - 1, b.at + stride, b.at + stride + 1,
		} {
			if j := s.label[at] - 1; j < 0 || s.bright[j].core != b.core {
				s.edge = append(s.edge, edgePixel{f.Dir[b.pixel], int32(i), b.core})
				break
			}
		}
	}
	slices.SortFunc(s.edge, func(a, b edgePixel) int {
		switch {
		case a.dir.Z < b.dir.Z:
			return -1
		case a.dir.Z > b.dir.Z:
			return 1
		}
		return int(a.bright - b.bright)
	})
	chord := 2 * math.Sin(math.Min(grouping, math.Pi)/2)
	for k := range s.edge {
		a := &s.edge[k]
		for l := k + 1; l < len(s.edge); l++ {
			b := &s.edge[l]
			dx, dy, dz := a.dir.X-b.dir.X, a.dir.Y-b.dir.Y, a.dir.Z-b.dir.Z
			if -dz > chord {
				break
			}
			if dx*dx+dy*dy+dz*dz <= chord*chord && a.core == b.core && s.union(a.bright, b.bright) {
				if spare--; spare == 0 {
					return
				}
			}
		}
	}
}

// find returns the root of i, halving the path.
func (s *Scratch) find(i int32) int32 {
	for s.parent[i] != i {
		s.parent[i] = s.parent[s.parent[i]]
		i = s.parent[i]
	}
	return i
}

// union makes the smaller index the root; false where i and j were in one group
// already.
func (s *Scratch) union(i, j int32) bool {
	i, j = s.find(i), s.find(j)
	if i < j {
		s.parent[j] = i
	} else {
		s.parent[i] = j
	}
	return i != j
}
