package bvh

import "math"

const (
	signBit = 1 << 31
	infBits = 0x7f800000

	// slack is how far, in parts of the largest coordinate, boxes are held to
	// be wider than they are. Shearing a vertex (five roundings) and the slab
	// test (three) err by at most 8 x 2^-24 of the largest distance, and a
	// distance is at most twice that coordinate. Woop, Benthin and Wald 2013,
	// section 4, on conservative traversal.
	slack = 1.0 / (1 << 20)

	// Directions are rescaled until the largest component is from minDir to
	// maxDir; components below tinyDir are taken for tinyDir, so that their
	// inverse is finite and zero times it is zero. All are bits of float32.
	minDir  = (127 - 30) << 23 // 2^-30
	maxDir  = (127 + 30) << 23 // 2^30
	tinyDir = (127 - 80) << 23 // 2^-80
)

// ray is a ray fit for traversal. The assembly reads it.
type ray struct {
	org, dir   [3]uint32 // bits of float32
	tmin, tmax int32     // bits of non-negative float32
	shift      float32   // how far the origin is off for near and far planes
	kz         int32     // the axis of the longest component of dir
}

// aim fills in a ray. It reports false for one that cannot hit or is to be
// rescaled. extent is the largest absolute coordinate of the tree.
func (r *ray) aim(org, dir *[3]float32, tmin, tmax, extent float32) bool {
	ox, oy, oz := math.Float32bits(org[0]), math.Float32bits(org[1]), math.Float32bits(org[2])
	dx, dy, dz := math.Float32bits(dir[0]), math.Float32bits(dir[1]), math.Float32bits(dir[2])
	// Kept as bits and used again, so that they are copied one by one: a wide
	// load would wait for the narrow stores before it.
	r.org[0], r.org[1], r.org[2] = ox, oy, oz
	r.dir[0], r.dir[1], r.dir[2] = dx, dy, dz
	ax, ay, az := dx&^signBit, dy&^signBit, dz&^signBit
	xy := max(ax, ay)
	m := max(xy, az)
	o := max(ox&^signBit, oy&^signBit, oz&^signBit)
	if m < minDir || m > maxDir || o >= infBits || !(tmin <= tmax) || tmax < 0 {
		return false
	}
	// The axis of m without branches, which would not be foreseen.
	y := (ax - ay) >> 31
	z := (xy - az) >> 31
	r.kz = int32(z<<1 | y&^z)
	r.shift = (math.Float32frombits(o) + extent) * slack
	r.tmin = max(intBits(tmin), 0) // of a negative one, zero
	r.tmax = max(intBits(tmax), 0)
	return true
}

// rescale is aim for a ray that it refused. It also returns what the T found
// are to be multiplied by.
func (r *ray) rescale(org, dir *[3]float32, tmin, tmax, extent float32) (scale float64, ok bool) {
	var m float64
	for _, d := range dir {
		if !finite(d) {
			return 0, false
		}
		m = max(m, math.Abs(float64(d)))
	}
	if m == 0 {
		return 0, false
	}
	_, e := math.Frexp(m)
	var unit [3]float32
	for k, d := range dir {
		unit[k] = float32(math.Ldexp(float64(d), -e))
	}
	tmin = float32(math.Ldexp(float64(tmin), e))
	tmax = float32(math.Ldexp(float64(tmax), e))
	return math.Ldexp(1, -e), r.aim(org, &unit, tmin, tmax, extent)
}

func finite(x float32) bool { return x-x == 0 }

func intBits(x float32) int32     { return int32(math.Float32bits(x)) }
func fromIntBits(b int32) float32 { return math.Float32frombits(uint32(b)) }
