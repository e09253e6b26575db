package bvh

import "math"

// query is what the Go loops need of a ray.
type query struct {
	near, far  [3]float32 // origin shifted for near and far planes
	nrdir      [3]float32 // -1/dir
	tmin, tmax int32      // bits of non-negative float32
	org        [3]float32 // in the order kx, ky, kz
	sx, sy     float32    // shear
	nsz        float32    // -1/dir[kz]
	kx, ky, kz uint8
	down       [3]uint8 // 1 where dir is negative
	octant     uint8    // bit k is down[k]
}

// axisAfter[k] is the axis after k.
var axisAfter = [4]uint8{1, 2, 0, 1}

func (q *query) set(r *ray) {
	var org, dir [3]float32
	for k := range 3 {
		d := r.dir[k]
		org[k], dir[k] = math.Float32frombits(r.org[k]), math.Float32frombits(d)
		shift := math.Float32frombits(math.Float32bits(r.shift) | d&signBit)
		q.near[k], q.far[k] = org[k]+shift, org[k]-shift
		q.nrdir[k] = -1 / math.Float32frombits(max(d&^signBit, tinyDir)|d&signBit)
		q.down[k] = uint8(d >> 31)
	}
	q.octant = q.down[0] | q.down[1]<<1 | q.down[2]<<2
	q.tmin, q.tmax = r.tmin, r.tmax
	q.kz = uint8(r.kz)
	q.kx, q.ky = axisAfter[q.kz], axisAfter[q.kz+1]
	q.org = [3]float32{org[q.kx], org[q.ky], org[q.kz]}
	q.nsz = q.nrdir[q.kz]
	q.sx, q.sy = dir[q.kx]*-q.nsz, dir[q.ky]*-q.nsz
}
