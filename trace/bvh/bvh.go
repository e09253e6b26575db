package bvh

// Triangle holds three vertices. A triangle with a vertex that is NaN or
// infinite is never hit.
type Triangle [3][3]float32

// Hit is where a ray meets a triangle: at org + T*dir, which is
// (1-U-V)*v0 + U*v1 + V*v2 of triangle Prim.
type Hit struct {
	T    float32 // in units of dir; +Inf for a miss
	U, V float32 // barycentric coordinates of v1 and v2
	Prim int32   // index into the triangles given to Build; -1 for a miss
}

// Config steers Build. The zero value is the default.
type Config struct {
	// Workers is the largest number of goroutines used by Build. Zero and
	// less mean runtime.GOMAXPROCS(0). The tree does not depend on it.
	Workers int
}

// Bounds returns the box around all finite triangles; zero for an empty tree.
func (t *Tree) Bounds() (lo, hi [3]float32) { return t.lo, t.hi }

// Closest returns the hit with the smallest T in [tmin, tmax], of equals the
// one with the lowest Prim. A negative tmin counts as zero. A ray hits nothing
// if its origin or direction is NaN or infinite, its direction zero, or its
// interval NaN or empty. For directions so short that T exceeds float32, T is
// +Inf.
func (t *Tree) Closest(org, dir [3]float32, tmin, tmax float32) Hit {
	hit := Hit{T: inf32, Prim: -1}
	if len(t.nodes) == 0 {
		return hit
	}
	var r ray
	if r.aim(&org, &dir, tmin, tmax, t.extent) {
		t.closest(&r, &hit)
	} else if scale, ok := r.rescale(&org, &dir, tmin, tmax, t.extent); ok {
		t.closest(&r, &hit)
		hit.T = float32(float64(hit.T) * scale)
	}
	return hit
}

// Occluded reports whether any triangle is hit at T in [tmin, tmax], by the
// rules of Closest.
func (t *Tree) Occluded(org, dir [3]float32, tmin, tmax float32) bool {
	if len(t.nodes) == 0 {
		return false
	}
	var r ray
	if !r.aim(&org, &dir, tmin, tmax, t.extent) {
		if _, ok := r.rescale(&org, &dir, tmin, tmax, t.extent); !ok {
			return false
		}
	}
	return t.occluded(&r)
}
