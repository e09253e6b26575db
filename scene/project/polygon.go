package project

import (
	"fmt"
	"math"
)

// Cell is the spacing of the sensors in metres: SpacingM, or where that is 0
// the largest cell p = 0.5 * 5^(log10 d), at most 10 m, of EN 17037:2018 (from
// memory), d being the longer side of the smallest rectangle around the
// outline, or the shorter one where their ratio is 2 or more.
func (w WorkPlane) Cell() float64 {
	if w.SpacingM > 0 {
		return w.SpacingM
	}
	long, short := sides(w.PolygonM)
	d := long
	if long >= 2*short {
		d = short
	}
	if d <= 0 {
		return minSpacingM
	}
	return min(10, 0.5*math.Pow(5, math.Log10(d)))
}

// sides of the rectangle of least area around a polygon, one of whose sides
// runs along an edge of the convex hull; trying the edges that a concave
// polygon has inside its hull too can miss it but not by a rectangle that
// does not hold the polygon.
func sides(poly [][2]float64) (long, short float64) {
	best := math.Inf(1)
	for i, p := range poly {
		for _, q := range poly[i+1:] {
			length := math.Hypot(q[0]-p[0], q[1]-p[1])
			if length == 0 {
				continue
			}
			c, s := (q[0]-p[0])/length, (q[1]-p[1])/length
			var lo, hi [2]float64
			for k, v := range poly {
				for a, x := range [2]float64{c*v[0] + s*v[1], c*v[1] - s*v[0]} {
					if k == 0 {
						lo[a], hi[a] = x, x
					}
					lo[a], hi[a] = min(lo[a], x), max(hi[a], x)
				}
			}
			w, h := hi[0]-lo[0], hi[1]-lo[1]
			if w*h < best {
				best, long, short = w*h, max(w, h), min(w, h)
			}
		}
	}
	return long, short
}

// polygonProblem says what is wrong with an outline.
func polygonProblem(poly [][2]float64) string {
	const most = 1000
	n := len(poly)
	if n < 3 || n > most {
		return fmt.Sprintf("got %s, want 3 to %d", count(n, "point"), most)
	}
	if poly[0] == poly[n-1] {
		return fmt.Sprintf("point %d: got the first point again; leave it out, the outline closes by itself", n)
	}
	area := 0.0
	for i, p := range poly {
		q := poly[(i+1)%n]
		if p == q {
			return fmt.Sprintf("point %d: got the point before it again", (i+1)%n+1)
		}
		area += (p[0]-poly[0][0])*(q[1]-poly[0][1]) - (q[0]-poly[0][0])*(p[1]-poly[0][1])
	}
	for i := range n {
		for k := i + 1; k < n; k++ {
			if k == i+1 || (k+1)%n == i {
				continue
			}
			if cross(poly[i], poly[i+1], poly[k], poly[(k+1)%n]) {
				return fmt.Sprintf("the sides from point %d and from point %d meet; want an outline that does not cross itself", i+1, k+1)
			}
		}
	}
	if area := math.Abs(area) / 2; area < 0.01 {
		return fmt.Sprintf("got an area of %.3g m2, want at least 0.01", area)
	}
	return ""
}

// cross is whether two segments have a point in common.
func cross(a, b, c, d [2]float64) bool {
	side := func(o, p, q [2]float64) float64 {
		return (p[0]-o[0])*(q[1]-o[1]) - (p[1]-o[1])*(q[0]-o[0])
	}
	within := func(p, q, x [2]float64) bool { // of x on the line of p and q
		return x[0] >= min(p[0], q[0]) && x[0] <= max(p[0], q[0]) && x[1] >= min(p[1], q[1]) && x[1] <= max(p[1], q[1])
	}
	s1, s2, s3, s4 := side(a, b, c), side(a, b, d), side(c, d, a), side(c, d, b)
	switch {
	case s1 == 0 && within(a, b, c), s2 == 0 && within(a, b, d), s3 == 0 && within(c, d, a), s4 == 0 && within(c, d, b):
		return true
	}
	return s1*s2 < 0 && s3*s4 < 0
}
