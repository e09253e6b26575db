package surface

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
)

// division splits a cell that a wall runs across: floor on both sides of a
// partition is not one texel, or light would leak under the partition. Each
// group is a texel; a point belongs to the group whose witness it sees.
type division struct {
	ids     []int32 // texels, the cell's own first
	witness []r3.Vec
	points  [][]surfacePoint // by group, spread over its part of the cell
	share   []float64        // of the cell's area
	sign    float64          // the side on which the wall stands: 1 front, -1 back
}

// surfacePoint is a point with the front normal there.
type surfacePoint struct{ p, n r3.Vec }

const (
	// groupPoints stand for a group wherever a random point of it is wanted;
	// a cell is tried divideTries times to find them.
	groupPoints = 48
	// witnesses is the number of points tried in a cell.
	witnesses = 12
	// sightM is the height above the surface at which points look at each
	// other, in metres.
	sightM = 0.002
	// maxGroups bounds the texels made of one cell.
	maxGroups   = 4
	divideTries = 1024
)

// divide looks for cells whose points do not see each other.
func (t *Texels) divide() {
	t.divided = map[int32]*division{}
	n := int32(len(t.part))
	for k := range n {
		s := sampling.Stream2(streamDivide, uint64(k))
		var pts, normals [witnesses]r3.Vec
		for i := range pts {
			pts[i], normals[i] = t.sampleCell(k, s.Float64(), s.Float64(), (float64(i)+s.Float64())/witnesses)
		}
		for _, sign := range [2]float64{1, -1} {
			if d := t.split(k, pts[:], normals[:], sign); d != nil {
				t.divided[k] = d
				break
			}
		}
	}
}

// split groups the points of cell k by sight; nil where all are in one group.
func (t *Texels) split(k int32, pts, normals []r3.Vec, sign float64) *division {
	group := make([]int, len(pts))
	d := &division{sign: sign}
	for i := range pts {
		group[i] = -1
		for g := range d.witness {
			if t.sees(pts[i], normals[i], d.witness[g], sign) {
				group[i] = g
				break
			}
		}
		if group[i] < 0 && len(d.witness) < maxGroups {
			group[i] = len(d.witness)
			d.witness = append(d.witness, pts[i])
			d.share = append(d.share, 0)
		}
		if group[i] < 0 {
			group[i] = 0
		}
		d.share[group[i]] += 1 / float64(len(pts))
	}
	if len(d.witness) < 2 {
		return nil
	}
	// The shares by many more points: photons are divided by the area.
	clear(d.share)
	d.points = make([][]surfacePoint, len(d.witness))
	s := sampling.Stream3(streamDivide, uint64(k), 1)
	for range divideTries {
		p, n := t.sampleCell(k, s.Float64(), s.Float64(), s.Float64())
		g := t.groupOf(d, p, n)
		d.share[g] += 1.0 / divideTries
		if len(d.points[g]) < groupPoints {
			d.points[g] = append(d.points[g], surfacePoint{p, n})
		}
	}
	for g, w := range d.witness {
		if len(d.points[g]) == 0 {
			d.points[g] = []surfacePoint{{w, normals[0]}}
		}
	}
	for g := range d.witness {
		id := k
		if g > 0 {
			id = int32(len(t.part))
			t.part = append(t.part, t.part[k])
			t.keys = append(t.keys, t.keys[k])
			t.cellOf = append(t.cellOf, k)
			t.groupAt = append(t.groupAt, int8(g))
		}
		d.ids = append(d.ids, id)
		d.share[g] = math.Max(d.share[g], 1.0/divideTries)
	}
	return d
}

// sees reports whether nothing, glass and cloth included, stands between two
// points just above their surface: the reveal of a window goes on behind the
// glass, but not its light.
func (t *Texels) sees(p, n, q r3.Vec, sign float64) bool {
	lift := r3.Scale(sign*sightM, n)
	a, b := r3.Add(p, lift), r3.Add(q, lift)
	d := r3.Sub(b, a)
	dist := math.Sqrt(r3.Norm2(d))
	if dist < sightM {
		return true
	}
	return t.world.Clear(a, r3.Scale(1/dist, d), dist)
}

// groupOf is the group of a point: the first whose witness it sees, the
// nearest where it sees none.
func (t *Texels) groupOf(d *division, p, n r3.Vec) int {
	nearest, best := 0, math.Inf(1)
	for g, w := range d.witness {
		if t.sees(p, n, w, d.sign) {
			return g
		}
		if x := r3.Norm2(r3.Sub(w, p)); x < best {
			nearest, best = g, x
		}
	}
	return nearest
}
