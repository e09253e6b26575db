package bvh

import "math"

const (
	signBit = 1 << 31
	infBits = 0x7f800000
	row     = 4 * width // bytes of a row of a node's box or of a block's vertex

	// slack is how far, in parts of the largest coordinate, boxes are held to
	// be wider than they are. Shearing a vertex (five roundings) and the slab
	// test (three) err by at most 8 x 2^-24 of the largest distance, and a
	// distance is at most twice that coordinate. Woop, Benthin and Wald 2013,
	// section 4, on conservative traversal.
	slack = 1.0 / (1 << 20)

	// Directions are rescaled until the largest component is from minDir to
	// maxDir; components below tinyDir are taken for tinyDir, so that their
	// inverse is finite and zero times it is zero.
	minDir  = (127 - 30) << 23 // bits of 2^-30
	maxDir  = (127 + 30) << 23 // bits of 2^30
	tinyDir = (127 - 80) << 23 // bits of 2^-80
)

// axisAfter[k] is the axis after k.
var axisAfter = [4]uint8{1, 2, 0, 1}

// query is a ray made ready for traversal. The assembly reads it.
type query struct {
	near, far [3]float32 // origin shifted for near and far planes
	nrdir     [3]float32 // -1/direction
	tmin      int32      // bits of a non-negative float32
	tmax      int32
	org       [3]float32 // in the order kx, ky, kz
	sx, sy    float32    // shear
	nsz       float32    // -1/dir[kz]
	kx, ky    int32      // offsets of the axes in a block's vertex, bytes
	kz        int32      // that of the longest component of the direction
	nearX     int32      // offsets of the near planes in a node's box, bytes
	nearY     int32
	nearZ     int32
	octant    int32 // offset in a node's order, bytes
}

func finite(x float32) bool { return x-x == 0 }

// set prepares a ray. It returns what the T found are to be multiplied by, or
// zero for a ray that cannot hit: NaN or infinite origin or direction, zero
// direction, NaN or empty interval. extent is the largest absolute coordinate
// of the tree.
func (q *query) set(org, dir *[3]float32, tmin, tmax, extent float32) float64 {
	dx, dy, dz := math.Float32bits(dir[0]), math.Float32bits(dir[1]), math.Float32bits(dir[2])
	kz, m := uint32(0), dx&^signBit
	if a := dy &^ signBit; a > m {
		kz, m = 1, a
	}
	if a := dz &^ signBit; a > m {
		kz, m = 2, a
	}
	if m < minDir || m > maxDir {
		return q.setScaled(org, dir, tmin, tmax, extent)
	}
	o := max(math.Float32bits(org[0])&^signBit, math.Float32bits(org[1])&^signBit, math.Float32bits(org[2])&^signBit)
	if o >= infBits || !(tmin <= tmax) || tmax < 0 {
		return 0
	}
	q.tmin = max(intBits(tmin), 0) // of a negative one, zero
	q.tmax = max(intBits(tmax), 0)

	s := math.Float32bits((math.Float32frombits(o) + extent) * slack)
	sx := math.Float32frombits(s | dx&signBit)
	sy := math.Float32frombits(s | dy&signBit)
	sz := math.Float32frombits(s | dz&signBit)
	q.near[0], q.far[0] = org[0]+sx, org[0]-sx
	q.near[1], q.far[1] = org[1]+sy, org[1]-sy
	q.near[2], q.far[2] = org[2]+sz, org[2]-sz
	q.nrdir[0] = negInverse(dx)
	q.nrdir[1] = negInverse(dy)
	q.nrdir[2] = negInverse(dz)
	q.nearX = int32(dx >> 31 * row)
	q.nearY = int32(dy >> 31 * row)
	q.nearZ = int32(dz >> 31 * row)
	q.octant = int32((dx>>31 | dy>>31<<1 | dz>>31<<2) * 4)

	kx, ky := axisAfter[kz], axisAfter[kz+1]
	q.kx, q.ky, q.kz = int32(kx)*row, int32(ky)*row, int32(kz)*row
	q.org[0], q.org[1], q.org[2] = org[kx], org[ky], org[kz]
	q.nsz = q.nrdir[kz]
	q.sx, q.sy = dir[kx]*-q.nsz, dir[ky]*-q.nsz
	return 1
}

// negInverse is -1/d for the bits of d, whose size is at least tinyDir.
func negInverse(d uint32) float32 {
	return -1 / math.Float32frombits(max(d&^signBit, tinyDir)|d&signBit)
}

// setScaled is set for a direction whose largest component is not from minDir
// to maxDir.
func (q *query) setScaled(org, dir *[3]float32, tmin, tmax, extent float32) float64 {
	var m float64
	for _, d := range dir {
		if !finite(d) {
			return 0
		}
		m = max(m, math.Abs(float64(d)))
	}
	if m == 0 {
		return 0
	}
	_, e := math.Frexp(m)
	var unit [3]float32
	for k, d := range dir {
		unit[k] = float32(math.Ldexp(float64(d), -e))
	}
	tmin = float32(math.Ldexp(float64(tmin), e))
	tmax = float32(math.Ldexp(float64(tmax), e))
	if q.set(org, &unit, tmin, tmax, extent) == 0 {
		return 0
	}
	return math.Ldexp(1, -e)
}
