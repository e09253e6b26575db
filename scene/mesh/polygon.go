package mesh

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// clipper cuts polygons into triangles by ear clipping (G. H. Meisters,
// "Polygons Have Ears", American Mathematical Monthly 82, 1975), in the
// best-fit plane. Concave polygons and holes joined to the outline by a bridge
// walked both ways ("keyholes") are cut exactly; corners that lie on a straight
// edge stay corners of triangles, so that neighbouring faces keep meeting
// there. It is reused to save allocations.
type clipper struct {
	tris       [][3]int // result: indices into the points given, same turn as the polygon
	crossing   bool     // the outline crosses itself: the triangles are a guess
	offPlaneM  float64  // largest distance of a corner from the best-fit plane
	at         []point2
	ids        []int // indices into the points given, of each remaining corner
	prev, succ []int
	turns      []int8 // sign of the turn at each corner
	tried      []bool // corners known to be no strict ear
	eps        float64
}

type point2 struct{ u, v float64 }

// split fills tris; none means that the polygon has no area.
func (c *clipper) split(pts []r3.Vec) {
	c.tris, c.ids, c.crossing, c.offPlaneM = c.tris[:0], c.ids[:0], false, 0
	for i, p := range pts {
		if len(c.ids) == 0 || p != pts[c.ids[len(c.ids)-1]] {
			c.ids = append(c.ids, i)
		}
	}
	for len(c.ids) > 1 && pts[c.ids[len(c.ids)-1]] == pts[c.ids[0]] {
		c.ids = c.ids[:len(c.ids)-1]
	}
	switch {
	case len(c.ids) < 3:
		return
	case len(c.ids) == 3:
		c.tris = append(c.tris, [3]int{c.ids[0], c.ids[1], c.ids[2]})
		return
	}
	if !c.project(pts) {
		return
	}
	c.clip()
}

// project puts the corners into the best-fit plane. Its normal is Newell's: the
// vector whose components are the areas of the polygon's shadows (I. E.
// Sutherland, R. F. Sproull, R. A. Schumacker, "A Characterization of Ten
// Hidden-Surface Algorithms", ACM Computing Surveys 6, 1974, crediting
// M. E. Newell). It returns false if the polygon has no area.
func (c *clipper) project(pts []r3.Vec) bool {
	origin := pts[c.ids[0]]
	var normal, mean r3.Vec
	var span, reach float64
	for k, id := range c.ids {
		a := r3.Sub(pts[id], origin)
		b := r3.Sub(pts[c.ids[(k+1)%len(c.ids)]], origin)
		normal = r3.Add(normal, r3.Cross(a, b))
		mean = r3.Add(mean, a)
		span = math.Max(span, size(a))
		reach = math.Max(reach, size(pts[id]))
	}
	mean = r3.Scale(1/float64(len(c.ids)), mean)
	// A few roundings of the coordinates, as in flat.
	c.eps = 8 * 0x1p-52 * reach
	if r3.Norm(normal) <= float64(len(c.ids))*c.eps*span {
		c.fanOfNoArea(pts)
		return false
	}
	n := r3.Unit(normal)
	u := r3.Unit(r3.Cross(leastAxis(n), n))
	v := r3.Cross(n, u)
	c.at = c.at[:0]
	for _, id := range c.ids {
		d := r3.Sub(pts[id], origin)
		c.at = append(c.at, point2{r3.Dot(d, u), r3.Dot(d, v)})
		c.offPlaneM = math.Max(c.offPlaneM, math.Abs(r3.Dot(r3.Sub(d, mean), n)))
	}
	return true
}

// fanOfNoArea handles an outline whose parts cancel: either all corners are on
// one line, or it crosses itself, as a bow tie does.
func (c *clipper) fanOfNoArea(pts []r3.Vec) {
	for k := 1; k+1 < len(c.ids); k++ {
		if t := [3]int{c.ids[0], c.ids[k], c.ids[k+1]}; !flat([3]r3.Vec{pts[t[0]], pts[t[1]], pts[t[2]]}) {
			c.tris, c.crossing = append(c.tris, t), true
		}
	}
}

// leastAxis returns the axis most across n: projecting along an axis of the
// model then keeps coordinates as they are.
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

// How strictly an ear is defined; each stage is tried when the one before
// finds none.
const (
	strictEar   = iota // no corner inside or on its edges, corners found wanting before left out
	strictAgain        // the same for all corners
	flatEar            // corners without a turn, and spikes, are taken out without a triangle
	looseEar           // corners on its edges allowed
	noEar              // the outline crosses itself
)

func (c *clipper) clip() {
	n := len(c.ids)
	c.prev, c.succ, c.turns, c.tried = c.prev[:0], c.succ[:0], c.turns[:0], c.tried[:0]
	for i := range n {
		c.prev = append(c.prev, (i+n-1)%n)
		c.succ = append(c.succ, (i+1)%n)
	}
	var total, covered float64
	for i := range n {
		c.turns = append(c.turns, c.sign(c.prev[i], i, c.succ[i]))
		c.tried = append(c.tried, false)
		total += cross2(c.at[0], c.at[i], c.at[c.succ[i]])
	}
	stage, misses, again := strictEar, 0, true
	for i, left := 0, n; left >= 3; {
		if !c.ear(i, stage, left) {
			c.tried[i] = true
			i = c.succ[i]
			if misses++; misses == left {
				stage, misses = stage+1, 0
			}
			if stage == strictAgain && !again { // nothing cut since it last failed
				stage = flatEar
			}
			again = again && stage <= strictAgain
			if stage == noEar {
				c.fan(i)
				return
			}
			continue
		}
		p, s := c.prev[i], c.succ[i]
		if c.turns[i] != 0 {
			c.tris = append(c.tris, [3]int{c.ids[p], c.ids[i], c.ids[s]})
			covered += math.Abs(cross2(c.at[p], c.at[i], c.at[s]))
			c.crossing = c.crossing || c.turns[i] < 0
			again = true
		}
		c.succ[p], c.prev[s] = s, p
		left--
		c.turns[p], c.turns[s] = c.sign(c.prev[p], p, s), c.sign(p, s, c.succ[s])
		// Cutting an ear makes new ears of its neighbours only: a corner inside a
		// would-be ear does not go away. So the cost stays quadratic.
		c.tried[p], c.tried[s] = false, false
		stage, misses = strictEar, 0
		i = c.succ[s] // not s: fans of long needles are best avoided
	}
	// Ears that overlap cover more than the outline encloses.
	if covered-total > 1e-9*total {
		c.crossing = true
	}
}

// fan cuts what is left of a crossing outline from corner i: no cut is right.
func (c *clipper) fan(i int) {
	c.crossing = true
	for k := c.succ[i]; c.succ[k] != i; k = c.succ[k] {
		if c.sign(i, k, c.succ[k]) != 0 {
			c.tris = append(c.tris, [3]int{c.ids[i], c.ids[k], c.ids[c.succ[k]]})
		}
	}
}

// ear reports whether corner i may be cut off.
func (c *clipper) ear(i, stage, left int) bool {
	switch {
	case left == 3:
		return true
	case stage == flatEar:
		return c.turns[i] == 0
	case stage == strictEar && c.tried[i]:
		return false
	case c.turns[i] <= 0:
		return false
	}
	p, s := c.prev[i], c.succ[i]
	a, b, d := c.at[p], c.at[i], c.at[s]
	tol := c.eps * 2 * (math.Abs(b.u-a.u) + math.Abs(b.v-a.v) + math.Abs(d.u-a.u) + math.Abs(d.v-a.v))
	edge := -tol // from where on a corner is in the way
	if stage == looseEar {
		edge = tol
	}
	for k := c.succ[s]; k != p; k = c.succ[k] {
		// The innermost corner in an ear is never one that turns as b does.
		if c.turns[k] > 0 {
			continue
		}
		q := c.at[k]
		if q == a || q == b || q == d { // the other side of a bridge
			continue
		}
		if cross2(a, b, q) >= edge && cross2(b, d, q) >= edge && cross2(d, a, q) >= edge {
			return false
		}
	}
	return true
}

// cross2 is twice the area of the triangle, positive if it turns left.
func cross2(a, b, d point2) float64 {
	return (b.u-a.u)*(d.v-a.v) - (b.v-a.v)*(d.u-a.u)
}

// sign is that of cross2, with 0 for what rounding may have made.
func (c *clipper) sign(i, k, l int) int8 {
	a, b, d := c.at[i], c.at[k], c.at[l]
	x := cross2(a, b, d)
	tol := c.eps * (math.Abs(b.u-a.u) + math.Abs(b.v-a.v) + math.Abs(d.u-a.u) + math.Abs(d.v-a.v))
	switch {
	case x > tol:
		return 1
	case x < -tol:
		return -1
	}
	return 0
}
