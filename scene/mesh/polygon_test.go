package mesh

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
	"time"

	"gonum.org/v1/gonum/spatial/r3"
)

// flatRing lifts corners (u, v) into a plane that is oblique to every axis.
func flatRing(uv ...[2]float64) []r3.Vec {
	u := r3.Unit(r3.Vec{X: 3, Y: -1, Z: 2})
	n := r3.Unit(r3.Cross(u, r3.Vec{X: 1, Y: 4, Z: -2}))
	v := r3.Cross(n, u)
	pts := make([]r3.Vec, len(uv))
	for i, p := range uv {
		pts[i] = r3.Add(r3.Vec{X: 10, Y: -20, Z: 5}, r3.Add(r3.Scale(p[0], u), r3.Scale(p[1], v)))
	}
	return pts
}

func TestSplit(t *testing.T) {
	tests := []struct {
		name      string
		uv        [][2]float64
		triangles int     // of a polygon with n corners: n-2 (Meisters 1975)
		area      float64 // exact, by hand
		crossing  bool
	}{
		{"square", [][2]float64{{0, 0}, {1, 0}, {1, 1}, {0, 1}}, 2, 1, false},
		{"clockwise", [][2]float64{{0, 0}, {0, 1}, {1, 1}, {1, 0}}, 2, 1, false},
		{"dart", [][2]float64{{0, 0}, {4, 0}, {1, 1}, {0, 4}}, 2, 4, false},
		{"L", [][2]float64{{0, 0}, {2, 0}, {2, 1}, {1, 1}, {1, 2}, {0, 2}}, 4, 3, false},
		{"corner on an edge", [][2]float64{{0, 0}, {1, 0}, {2, 0}, {2, 2}, {0, 2}}, 3, 4, false},
		{"triangle with corners on edges", [][2]float64{{0, 0}, {1, 0}, {2, 0}, {3, 0}, {0, 3}, {0, 2}, {0, 1}}, 5, 4.5, false},
		{"keyhole", [][2]float64{{0, 0}, {4, 0}, {4, 4}, {0, 4}, {0, 0}, {1, 1}, {1, 3}, {3, 3}, {3, 1}, {1, 1}}, 8, 12, false},
		{"hole touching the outline", [][2]float64{{0, 0}, {4, 0}, {4, 4}, {0, 4}, {0, 2}, {2, 3}, {2, 1}, {0, 2}}, 6, 14, false},
		{"repeated corners", [][2]float64{{0, 0}, {0, 0}, {1, 0}, {1, 1}, {1, 1}, {0, 1}, {0, 0}}, 2, 1, false},
		{"spike", [][2]float64{{0, 0}, {1, 0}, {1, 1}, {1, 3}, {1, 1}, {0, 1}}, 2, 1, false},
		{"on a line", [][2]float64{{0, 0}, {1, 0}, {2, 0}, {3, 0}}, 0, 0, false},
		{"one point", [][2]float64{{1, 1}, {1, 1}, {1, 1}, {1, 1}}, 0, 0, false},
		{"there and back", [][2]float64{{0, 0}, {1, 2}, {0, 0}, {1, 2}}, 0, 0, false},
		{"bow tie without net area", [][2]float64{{0, 0}, {1, 1}, {1, 0}, {0, 1}}, 2, 0, true},
		{"bow tie", [][2]float64{{0, 0}, {3, 3}, {3, 0}, {0, 1}}, 2, 0, true},
	}
	var c clipper
	for _, tt := range tests {
		pts := flatRing(tt.uv...)
		c.split(pts)
		if len(c.tris) != tt.triangles || c.crossing != tt.crossing {
			t.Errorf("%s: got %d triangles, crossing %v; want %d, %v", tt.name, len(c.tris), c.crossing, tt.triangles, tt.crossing)
		}
		if c.offPlaneM > 1e-13 { // 50 roundings of coordinates of about 25: 50 x 25 x 2^-53
			t.Errorf("%s: got %g m off the plane, want a planar polygon", tt.name, c.offPlaneM)
		}
		if tt.crossing {
			continue
		}
		var area float64
		for _, tri := range c.tris {
			area += (&Triangle{V: [3]r3.Vec{pts[tri[0]], pts[tri[1]], pts[tri[2]]}}).Area()
		}
		if math.Abs(area-tt.area) > 1e-12 { // roundings as above, times edges up to 6
			t.Errorf("%s: triangles cover %.15g m², want %g", tt.name, area, tt.area)
		}
	}
}

// TestSplitKeepsTurn checks that triangles face the way their polygon does.
func TestSplitKeepsTurn(t *testing.T) {
	up := []r3.Vec{{}, {X: 2}, {X: 2, Y: 1}, {X: 1, Y: 1}, {X: 1, Y: 2}, {Y: 2}} // counter-clockwise from above
	var c clipper
	for _, sign := range []float64{1, -1} {
		pts := append([]r3.Vec(nil), up...)
		if sign < 0 {
			for i := range pts {
				pts[i] = up[len(up)-1-i]
			}
		}
		c.split(pts)
		for _, tri := range c.tris {
			n := r3.Cross(r3.Sub(pts[tri[1]], pts[tri[0]]), r3.Sub(pts[tri[2]], pts[tri[0]]))
			if n.Z*sign <= 0 {
				t.Errorf("turn %g: triangle %v faces %v", sign, tri, n)
			}
		}
	}
}

func TestSplitNotPlanar(t *testing.T) {
	// A unit square with two opposite corners lifted by h: its best-fit plane is
	// level, halfway up, and each corner h/2 off. Exact, by symmetry.
	const h = 0.02
	var c clipper
	c.split([]r3.Vec{{}, {X: 1, Z: h}, {X: 1, Y: 1}, {Y: 1, Z: h}})
	if math.Abs(c.offPlaneM-h/2) > 1e-15 || len(c.tris) != 2 {
		t.Errorf("got %g m off the plane and %d triangles, want %g and 2", c.offPlaneM, len(c.tris), h/2)
	}
}

// keyhole returns rings of a random plate with holes, and the same as one
// outline: each hole joined to it by a bridge that crosses nothing.
func keyhole(rng *rand.Rand) (rings [][]point2, outline []point2) {
	star := func(cu, cv, lo, hi float64, n int, turn float64) []point2 {
		ring := make([]point2, n)
		for i := range ring {
			a := turn * 2 * math.Pi * float64(i) / float64(n)
			rad := lo + (hi-lo)*rng.Float64()
			ring[i] = point2{cu + rad*math.Cos(a), cv + rad*math.Sin(a)}
		}
		return ring
	}
	rings = append(rings, star(0, 0, 10, 20, 5+rng.IntN(40), 1))
	for _, at := range [][2]float64{{-4, 0}, {3, 3}, {2, -4}} {
		if rng.IntN(4) > 0 {
			rings = append(rings, star(at[0], at[1], 0.5, 2, 3+rng.IntN(12), -1))
		}
	}
	outline = append(outline, rings[0]...)
	for h, hole := range rings[1:] {
		rest := rings[h+1:]
		o, k := 0, 0
		for tries := 0; ; tries++ {
			if tries == 100000 {
				panic("test: no bridge found")
			}
			o, k = rng.IntN(len(outline)), rng.IntN(len(hole))
			if inWedge(outline, o, hole[k]) && bridgeFree(outline[o], hole[k], outline, rest) {
				break
			}
		}
		var next []point2
		next = append(next, outline[:o+1]...)
		for i := range len(hole) + 1 {
			next = append(next, hole[(k+i)%len(hole)])
		}
		outline = append(next, outline[o:]...)
	}
	return rings, outline
}

func bridgeFree(a, b point2, outline []point2, rings [][]point2) bool {
	for _, ring := range append([][]point2{outline}, rings...) {
		for i, p := range ring {
			q := ring[(i+1)%len(ring)]
			if p == a || q == a || p == b || q == b {
				continue
			}
			if cross2(a, b, p)*cross2(a, b, q) <= 0 && cross2(p, q, a)*cross2(p, q, b) <= 0 {
				return false
			}
		}
	}
	return true
}

// inWedge reports whether p is seen from corner o between its two edges, on the
// inside. Where bridges meet, corners at one place have different wedges, and a
// bridge from the wrong one would make the outline cross itself.
func inWedge(outline []point2, o int, p point2) bool {
	n := len(outline)
	before, at, after := outline[(o+n-1)%n], outline[o], outline[(o+1)%n]
	left, right := cross2(at, after, p) > 0, cross2(before, at, p) > 0
	if cross2(before, at, after) > 0 {
		return left && right
	}
	return left || right
}

func inRing(p point2, ring []point2) bool {
	in := false
	for i, a := range ring {
		b := ring[(i+1)%len(ring)]
		if (a.v > p.v) != (b.v > p.v) && p.u < a.u+(p.v-a.v)/(b.v-a.v)*(b.u-a.u) {
			in = !in
		}
	}
	return in
}

// coverFault returns what is wrong with triangles that should cover the rings'
// inside once and nothing else, judged at random points and by area.
func coverFault(rng *rand.Rand, rings [][]point2, outline []point2, tris [][3]int) string {
	var want, got float64
	for _, ring := range rings {
		for i, p := range ring {
			want += cross2(point2{}, p, ring[(i+1)%len(ring)])
		}
	}
	for _, t := range tris {
		x := cross2(outline[t[0]], outline[t[1]], outline[t[2]])
		if x < 0 {
			return "a triangle is turned over"
		}
		got += x
	}
	if math.Abs(got-want) > 1e-9*want { // some 100 terms of up to 1000 m², each rounded by 2^-53
		return fmt.Sprintf("twice the area is %g, want %g", got, want)
	}
	for range 300 {
		p := point2{40*rng.Float64() - 20, 40*rng.Float64() - 20}
		inside := false
		for _, ring := range rings {
			inside = inside != inRing(p, ring)
		}
		n := 0
		for _, t := range tris {
			a, b, d := outline[t[0]], outline[t[1]], outline[t[2]]
			if cross2(a, b, p) > 0 && cross2(b, d, p) > 0 && cross2(d, a, p) > 0 {
				n++
			}
		}
		if inside != (n == 1) || n > 1 {
			return fmt.Sprintf("%v is in %d triangles, and in the polygon: %v", p, n, inside)
		}
	}
	return ""
}

func TestSplitRandomKeyholes(t *testing.T) {
	rounds := 400
	if testing.Short() {
		rounds = 50
	}
	rng := rand.New(rand.NewPCG(4, 1975))
	var c clipper
	caught := 0
	for round := range rounds {
		rings, outline := keyhole(rng)
		uv := make([][2]float64, len(outline))
		for i, p := range outline {
			uv[i] = [2]float64{p.u, p.v}
		}
		c.split(flatRing(uv...))
		if c.crossing || len(c.tris) != len(outline)-2 {
			t.Errorf("round %d: %d corners give %d triangles, crossing %v", round, len(outline), len(c.tris), c.crossing)
		}
		if fault := coverFault(rng, rings, outline, c.tris); fault != "" {
			t.Errorf("round %d, %d corners, %d holes: %s", round, len(outline), len(rings)-1, fault)
		}
		// Twin: a fan, right for convex polygons only, must be found out.
		var fan [][3]int
		for i := 1; i+1 < len(outline); i++ {
			fan = append(fan, [3]int{0, i, i + 1})
		}
		if coverFault(rng, rings, outline, fan) != "" {
			caught++
		}
	}
	if caught < rounds*9/10 { // some stars are seen whole from their first corner
		t.Errorf("the planted fan was found out %d times in %d, want nearly always", caught, rounds)
	}
}

// TestSplitWorstCase bounds the time for the most corners allowed: as a
// spiral, where few corners are ears, and as tangles that cross themselves.
func TestSplitWorstCase(t *testing.T) {
	n := maxCorners
	if testing.Short() {
		n = 1000
	}
	rng := rand.New(rand.NewPCG(7, 7))
	spiral := make([][2]float64, n)
	for i := range n / 2 {
		a := 2 * math.Pi * float64(i) / 50
		spiral[i] = [2]float64{(10 + a) * math.Cos(a), (10 + a) * math.Sin(a)}
		spiral[n-1-i] = [2]float64{(12 + a) * math.Cos(a), (12 + a) * math.Sin(a)}
	}
	tangle, lattice := make([][2]float64, n), make([][2]float64, n)
	for i := range n {
		tangle[i] = [2]float64{rng.Float64(), rng.Float64()}
		lattice[i] = [2]float64{float64(rng.IntN(5)), float64(rng.IntN(5))}
	}
	tests := []struct {
		name     string
		uv       [][2]float64
		crossing bool
	}{{"spiral", spiral, false}, {"tangle", tangle, true}, {"lattice", lattice, true}}
	for _, tt := range tests {
		var c clipper
		start := time.Now()
		c.split(flatRing(tt.uv...))
		took := time.Since(start)
		if c.crossing != tt.crossing || len(c.tris) > n-2 || !tt.crossing && len(c.tris) != n-2 {
			t.Errorf("%s: got %d triangles, crossing %v, want %v", tt.name, len(c.tris), c.crossing, tt.crossing)
		}
		// Quadratic: 10000² steps of a few ns, some times over, on a busy machine.
		// Cubic would be hours.
		if took > 20*time.Second {
			t.Errorf("%s: %d corners took %v, want a second or so", tt.name, n, took)
		}
		t.Logf("%s: %d corners in %v", tt.name, n, took)
	}
}
