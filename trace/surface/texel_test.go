package surface

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/trace"
)

// soup is a mesh of n random triangles in a cube of 4 m, of three parts.
func soup(t testing.TB, n int, seed uint64, edge float64) *trace.World {
	r := newRoom(t)
	s := sampling.NewStream(seed, 1)
	f := r.matte(.5)
	parts := []int32{r.part("a", .2), r.part("b", .07), r.part("c", 1)}
	at := func(scale float64) r3.Vec {
		return r3.Vec{X: scale * (s.Float64() - .5), Y: scale * (s.Float64() - .5), Z: scale * (s.Float64() - .5)}
	}
	for i := range n {
		c := at(4)
		r.tri(parts[i%3], f, r3.Add(c, at(edge)), r3.Add(c, at(edge)), r3.Add(c, at(edge)))
	}
	return r.world()
}

func ones(n int) []float64 {
	out := make([]float64, n)
	for i := range out {
		out[i] = 1
	}
	return out
}

func cut(w *trace.World, coarsen float64) *Texels { return Cut(w, coarsen, ones(len(w.Scene.Parts))) }

// TestTexelAreas: the texels' areas sum to that of the triangles, by part, to
// rounding: every one of a few thousand pieces adds some 1e-16 m2 and its
// cut's rounding of 1e-15 of an edge.
func TestTexelAreas(t *testing.T) {
	for name, w := range map[string]*trace.World{
		"soup of large": soup(t, 60, 1, 3), "soup of small": soup(t, 2000, 2, .1), "room": facadeRoom(t, .2, true).world(),
	} {
		for _, coarsen := range []float64{1, 1.7} {
			x := cut(w, coarsen)
			want, got := make([]float64, len(w.Scene.Parts)), make([]float64, len(w.Scene.Parts))
			for i := range w.Scene.Triangles {
				tri := &w.Scene.Triangles[i]
				want[tri.Part] += triangleArea(tri.V)
			}
			for k := range x.Len() {
				got[x.Part(int32(k))] += x.AreaM2(int32(k))
			}
			for p := range want {
				if math.Abs(got[p]-want[p]) > 1e-10*want[p] {
					t.Errorf("%s, part %d, coarsened %g: got %.12g m2, want %.12g (sum of the triangles)", name, p, coarsen, got[p], want[p])
				}
			}
		}
	}
}

// TestClipCovers: the parts that a grid cuts a polygon into lie in one cell
// each, share no area and cover the polygon: areas add up, and every random
// point of the polygon lies in exactly one.
func TestClipCovers(t *testing.T) {
	s := sampling.NewStream(3, 1)
	for range 200 {
		at := func() r3.Vec { return r3.Vec{X: 3 * s.Float64(), Y: 3 * s.Float64(), Z: 3 * s.Float64()} }
		tri := [3]r3.Vec{at(), at(), at()}
		cell := .2 + s.Float64()
		parts := clipToGrid(tri[:], [3]float64{cell, cell, cell})
		var area float64
		for _, p := range parts {
			for k := 2; k < len(p); k++ {
				area += triangleArea([3]r3.Vec{p[0], p[k-1], p[k]})
			}
			c := centroid(p)
			for _, v := range p {
				for axis := range 3 {
					lo := (math.Floor(coord(c, axis)/cell-gridShift) + gridShift) * cell
					if x := coord(v, axis); x < lo-1e-9 || x > lo+cell+1e-9 {
						t.Fatalf("corner %v lies outside the cell of its part, %g to %g", v, lo, lo+cell)
					}
				}
			}
		}
		if want := triangleArea(tri); math.Abs(area-want) > 1e-10 {
			t.Fatalf("parts of %v, cell %g: got an area of %.12g, want %.12g", tri, cell, area, want)
		}
		n := r3.Unit(r3.Cross(r3.Sub(tri[1], tri[0]), r3.Sub(tri[2], tri[0])))
		for range 20 {
			q := sampling.Triangle(s.Float64(), s.Float64(), tri[0], tri[1], tri[2])
			if got := holders(parts, q, n); got != 1 {
				t.Fatalf("point %v lies in %d parts, want 1", q, got)
			}
		}
	}
}

// holders counts the convex polygons about normal n that hold q.
func holders(parts [][]r3.Vec, q, n r3.Vec) int {
	count := 0
	for _, p := range parts {
		in := true
		for i, a := range p {
			b := p[(i+1)%len(p)]
			in = in && r3.Dot(r3.Cross(r3.Sub(b, a), r3.Sub(q, a)), n) >= 0
		}
		if in {
			count++
		}
	}
	return count
}

// TestHitsFindTexels: a random ray's hit finds a texel of its own part. Hits
// are held in float32 and may land just across the edge of a cell where the
// surface has no texel. The share of misses is printed; more than 1e-5 of the
// hits would take away light that could be seen in a mean.
func TestHitsFindTexels(t *testing.T) {
	rays := 400000
	if testing.Short() {
		rays = 60000
	}
	for name, w := range map[string]*trace.World{
		"soup of large": soup(t, 60, 4, 3), "soup of small": soup(t, 3000, 5, .1), "room": facadeRoom(t, .2, true).world(),
	} {
		x := cut(w, 1)
		s := sampling.NewStream(6, 1)
		hits, misses, other, far, lost := 0, 0, 0, 0, 0
		for range rays {
			org := r3.Vec{X: 3.6 * s.Float64(), Y: 4 * s.Float64(), Z: 2.8 * s.Float64()}
			if name != "room" {
				org = r3.Sub(org, r3.Vec{X: 2, Y: 2, Z: 1})
			}
			h, ok := w.Closest(org, sampling.UniformSphere(s.Float64(), s.Float64()))
			if !ok {
				continue
			}
			hits++
			k := x.At(h.Prim, h.Point)
			if x.At(h.Prim, r3.Add(h.Point, r3.Scale(3*x.grid[h.Part].EdgeM[0], h.Normal))) < 0 {
				lost++
			}
			switch {
			case k < 0:
				misses++
			case x.Part(k) != h.Part:
				other++
			default:
				if distanceTo(x, k, h.Point) > 1e-4 {
					far++
				}
			}
		}
		t.Logf("%s: %d hits, %d without a texel (%.2g), %d of another part, %d more than 0.1 mm from their texel", name, hits, misses, float64(misses)/float64(hits), other, far)
		if float64(misses) > 1e-5*float64(hits) || other > 0 {
			t.Errorf("%s: got %d misses and %d hits of another part of %d, want at most %.0f and 0", name, misses, other, hits, 1e-5*float64(hits))
		}
		if lost == 0 {
			t.Errorf("%s: twin: points lifted off their surface by three cells all found a texel", name)
		}
	}
}

// distanceTo bounds the distance from p to texel k by its corners' box.
func distanceTo(x *Texels, k int32, p r3.Vec) float64 {
	lo, hi := r3.Vec{X: math.Inf(1), Y: math.Inf(1), Z: math.Inf(1)}, r3.Vec{X: math.Inf(-1), Y: math.Inf(-1), Z: math.Inf(-1)}
	for i := x.first[x.cellOf[k]]; i < x.first[x.cellOf[k]+1]; i++ {
		for _, v := range x.pieces[i].v {
			lo = r3.Vec{X: math.Min(lo.X, v.X), Y: math.Min(lo.Y, v.Y), Z: math.Min(lo.Z, v.Z)}
			hi = r3.Vec{X: math.Max(hi.X, v.X), Y: math.Max(hi.Y, v.Y), Z: math.Max(hi.Z, v.Z)}
		}
	}
	out := func(x, a, b float64) float64 { return math.Max(0, math.Max(a-x, x-b)) }
	return r3.Norm(r3.Vec{X: out(p.X, lo.X, hi.X), Y: out(p.Y, lo.Y, hi.Y), Z: out(p.Z, lo.Z, hi.Z)})
}

// TestTexelSamples: points drawn on a texel lie on its triangles, and their
// mean is its centroid within 5 standard errors.
func TestTexelSamples(t *testing.T) {
	w := soup(t, 60, 7, 2)
	x := cut(w, 3)
	s := sampling.NewStream(8, 1)
	for k := int32(0); k < int32(x.Len()); k += 17 {
		if x.divided[x.cellOf[k]] != nil {
			continue // a part of its cell; see TestDividedCell
		}
		var want r3.Vec
		prev := 0.0
		for i := x.first[x.cellOf[k]]; i < x.first[x.cellOf[k]+1]; i++ {
			want = r3.Add(want, r3.Scale(x.pieces[i].cum-prev, centroid(x.pieces[i].v[:])))
			prev = x.pieces[i].cum
		}
		want = r3.Scale(1/prev, want)
		const n = 400
		var sum, square r3.Vec
		for range n {
			p, _ := x.Sample(k, s.Float64(), s.Float64(), s.Float64())
			if d := distanceTo(x, k, p); d > 1e-9 {
				t.Fatalf("texel %d: sample %v lies %g m off its pieces", k, p, d)
			}
			d := r3.Sub(p, want)
			sum, square = r3.Add(sum, d), r3.Add(square, r3.Vec{X: d.X * d.X, Y: d.Y * d.Y, Z: d.Z * d.Z})
		}
		for axis := range 3 {
			m, v := coord(sum, axis)/n, coord(square, axis)/n
			if se := math.Sqrt(v / n); math.Abs(m) > 5*se+1e-12 {
				t.Errorf("texel %d, axis %d: mean of samples is %g off the centroid, want within 5 x %g", k, axis, m, se)
			}
		}
	}
}

// TestDividedCell: a partition without thickness divides the floor's cells
// beneath it; the two groups' points lie on their own sides, in shares of the
// cell's area that add up to it.
func TestDividedCell(t *testing.T) {
	// A floor of 4 x 4 m, and a sheet that stands on it off the grid's planes.
	const partitionX = 2.07
	r := newRoom(t)
	grey := r.matte(0.5)
	r.rect(r.part("floor", 0.25), grey, r3.Vec{}, r3.Vec{X: 4}, r3.Vec{Y: 4})
	r.rect(r.part("partition", 0.25), grey, r3.Vec{X: partitionX}, r3.Vec{Y: 4}, r3.Vec{Z: 2.5})
	x := cut(r.world(), 1)
	s := sampling.NewStream(9, 1)
	divided := 0
	for c, d := range x.divided {
		if len(d.ids) != 2 {
			continue
		}
		divided++
		var area float64
		side := map[int]float64{}
		for g, id := range d.ids {
			area += x.AreaM2(id)
			for range 50 {
				p, _ := x.Sample(id, s.Float64(), s.Float64(), s.Float64())
				at := math.Copysign(1, p.X-partitionX)
				if side[g] != 0 && side[g] != at {
					t.Fatalf("cell %d: group %d has points on both sides of the partition", c, g)
				}
				side[g] = at
			}
		}
		whole := x.pieces[x.first[c+1]-1].cum
		if math.Abs(area/whole-1) > 1e-9 {
			t.Errorf("cell %d: areas of the groups add up to %g, want %g", c, area, whole)
		}
	}
	if divided == 0 {
		t.Error("no cell is divided by the partition")
	}
}
