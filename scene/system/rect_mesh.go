package system

import (
	"cmp"
	"errors"
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"
)

// The share of its bounding rectangle that a mesh group must cover to count
// as rectangular. Common practice, no published source: rounded coordinates
// stay within 2 %, a chamfered or arched pane does not.
const minCover, maxCover = 0.98, 1.02

// RectFromTriangles is the smallest rectangle around the triangles of a plane
// mesh group, metres. Triangles may be wound either way round; one that
// repeats another, as where both sides of a pane are modelled, counts once.
// The outward side is found as by RectFromCorners, but of a zero hint it is up
// where the group faces up or down by more than 45 degrees, and an error
// elsewhere. Where no edge of the rectangle rises, Across runs along the
// longer one.
//
// The group must be plane within 0.5 % of the rectangle's diagonal, and its
// area between 98 and 102 % of the rectangle's; errors give the numbers.
func RectFromTriangles(tris [][3]r3.Vec, outward r3.Vec) (Rect, error) {
	tris, area, largest, err := distinct(tris)
	if err != nil {
		return Rect{}, err
	}
	// Each triangle's normal counts by its area, turned to the side of the
	// largest one.
	var sum, mid r3.Vec
	for _, t := range tris {
		n := twiceArea(t)
		sum = r3.Add(sum, r3.Scale(sign(r3.Dot(n, largest)), n))
		centre := r3.Scale(1./3, r3.Add(t[0], r3.Add(t[1], t[2])))
		mid = r3.Add(mid, r3.Scale(r3.Norm(n)/2/area, centre))
	}
	normal := r3.Unit(sum)
	e1 := r3.Unit(r3.Cross(normal, leastAxis(normal)))
	e2 := r3.Cross(normal, e1)
	var flat [][2]float64
	off := 0.0
	for _, t := range tris {
		for _, v := range t {
			d := r3.Sub(v, mid)
			flat = append(flat, [2]float64{r3.Dot(d, e1), r3.Dot(d, e2)})
			off = max(off, math.Abs(r3.Dot(d, normal)))
		}
	}
	box := smallestBox(hull(flat))
	diagonal := math.Hypot(box.w, box.h)
	if off > maxOffPlane*diagonal {
		return Rect{}, fmt.Errorf("not plane: a corner lies %.4g m off the plane of the others, want at most %.4g m (0.5 %% of the diagonal); name a group that holds one plane pane", off, maxOffPlane*diagonal)
	}
	if min(box.w, box.h) < minSideM {
		return Rect{}, fmt.Errorf("too narrow: %.4g m by %.4g m, want sides of at least %g m", box.w, box.h, minSideM)
	}
	switch cover := area / (box.w * box.h); {
	case cover < minCover:
		return Rect{}, fmt.Errorf("not rectangular: its %.4g m2 are %.1f %% of the rectangle around it, %.4g m by %.4g m, want at least 98 %%; name a group that holds one rectangular pane", area, 100*cover, box.w, box.h)
	case cover > maxCover:
		return Rect{}, fmt.Errorf("overlapping: its %.4g m2 are %.1f %% of the rectangle around it, %.4g m by %.4g m, want at most 102 %%; keep one face of the glass", area, 100*cover, box.w, box.h)
	}
	along := r3.Add(r3.Scale(box.cos, e1), r3.Scale(box.sin, e2))
	beside := r3.Cross(normal, along)
	mid = r3.Add(mid, r3.Add(r3.Scale(box.mid[0], along), r3.Scale(box.mid[1], beside)))
	a, b := r3.Scale(box.w, along), r3.Scale(box.h, beside)
	if box.h > box.w {
		a, b = b, r3.Scale(-1, a) // right-handed about normal, as before
	}
	if outward == (r3.Vec{}) {
		if math.Abs(normal.Z) < math.Sqrt2/2 {
			return Rect{}, errors.New("outward: cannot tell which side of the group is outdoors; give the azimuth to which the opening faces")
		}
		outward = r3.Vec{Z: 1}
	}
	return orient(mid, a, b, outward, normal)
}

// distinct drops triangles without area and repeated ones, and returns the
// area of the rest and the cross product of the largest one's edges.
func distinct(tris [][3]r3.Vec) (kept [][3]r3.Vec, area float64, largest r3.Vec, err error) {
	seen := make(map[[3]r3.Vec]bool, len(tris))
	for i, t := range tris {
		for _, v := range t {
			if !usable(v) {
				return nil, 0, r3.Vec{}, fmt.Errorf("triangle %d: got %s, want coordinates within %g m of the origin", i+1, point(v), maxCoordM)
			}
		}
		key := t
		slices.SortFunc(key[:], func(a, b r3.Vec) int {
			return cmp.Or(cmp.Compare(a.X, b.X), cmp.Compare(a.Y, b.Y), cmp.Compare(a.Z, b.Z))
		})
		n := twiceArea(t)
		if seen[key] || r3.Norm(n) == 0 {
			continue
		}
		seen[key] = true
		kept = append(kept, t)
		area += r3.Norm(n) / 2
		if r3.Norm(n) > r3.Norm(largest) {
			largest = n
		}
	}
	if area < 1e-9 {
		return nil, 0, r3.Vec{}, errors.New("no area: the group holds no triangle that covers anything")
	}
	return kept, area, largest, nil
}

func twiceArea(t [3]r3.Vec) r3.Vec { return r3.Cross(r3.Sub(t[1], t[0]), r3.Sub(t[2], t[0])) }

// leastAxis is the coordinate axis furthest from n.
func leastAxis(n r3.Vec) r3.Vec {
	x, y, z := math.Abs(n.X), math.Abs(n.Y), math.Abs(n.Z)
	switch {
	case x <= y && x <= z:
		return r3.Vec{X: 1}
	case y <= z:
		return r3.Vec{Y: 1}
	}
	return r3.Vec{Z: 1}
}

// hull is the convex hull, counter-clockwise (Andrew 1979, "Another efficient
// algorithm for convex hulls in two dimensions", from memory).
func hull(points [][2]float64) [][2]float64 {
	slices.SortFunc(points, func(a, b [2]float64) int {
		return cmp.Or(cmp.Compare(a[0], b[0]), cmp.Compare(a[1], b[1]))
	})
	turn := func(o, a, b [2]float64) float64 {
		return (a[0]-o[0])*(b[1]-o[1]) - (a[1]-o[1])*(b[0]-o[0])
	}
	var h [][2]float64
	chain := func(p [2]float64, start int) {
		for len(h) >= start+2 && turn(h[len(h)-2], h[len(h)-1], p) <= 0 {
			h = h[:len(h)-1]
		}
		h = append(h, p)
	}
	for _, p := range points {
		chain(p, 0)
	}
	start := len(h) - 1
	for i := len(points) - 2; i >= 0; i-- {
		chain(points[i], start)
	}
	return h[:len(h)-1]
}

// box is a rectangle turned by an angle; mid is in its own turned axes.
type box struct {
	cos, sin, w, h float64
	mid            [2]float64
}

// smallestBox is the bounding rectangle of least area: one of its sides runs
// along an edge of the hull (Freeman and Shapira 1975, "Determining the
// minimum-area encasing rectangle for an arbitrary closed curve", from memory).
func smallestBox(h [][2]float64) box {
	best := box{w: math.Inf(1), h: math.Inf(1)}
	for i, p := range h {
		q := h[(i+1)%len(h)]
		length := math.Hypot(q[0]-p[0], q[1]-p[1])
		if length == 0 {
			continue
		}
		b := box{cos: (q[0] - p[0]) / length, sin: (q[1] - p[1]) / length}
		lo, hi := [2]float64{math.Inf(1), math.Inf(1)}, [2]float64{math.Inf(-1), math.Inf(-1)}
		for _, v := range h {
			for k, x := range [2]float64{b.cos*v[0] + b.sin*v[1], b.cos*v[1] - b.sin*v[0]} {
				lo[k], hi[k] = min(lo[k], x), max(hi[k], x)
			}
		}
		b.w, b.h = hi[0]-lo[0], hi[1]-lo[1]
		b.mid = [2]float64{(lo[0] + hi[0]) / 2, (lo[1] + hi[1]) / 2}
		if b.w*b.h < best.w*best.h {
			best = b
		}
	}
	return best
}
