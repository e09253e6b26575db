package system

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// TestDepthAt puts triangles around points that are known.
func TestDepthAt(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 1))
	for range 500 {
		r := facing(rng.Float64()*2*math.Pi, (rng.Float64()-0.5)*60*rad, 0, 2, 1.5)
		x, y, out := rng.Float64()*2, rng.Float64()*1.5, rng.Float64()*4-2
		at := r.Point(x, y, out)
		if l := r.Local(at); apart(l, r3.Vec{X: x, Y: y, Z: out}) > near {
			t.Fatalf("Local: got %v, want %g %g %g", l, x, y, out)
		}
		// The point is the middle of the triangle, and its reflection at any
		// corner is outside.
		var tri, local [3]r3.Vec
		for k := range 2 {
			tri[k] = r.Point(x+rng.NormFloat64(), y+rng.NormFloat64(), out+rng.NormFloat64())
		}
		tri[2] = r3.Sub(r3.Scale(3, at), r3.Add(tri[0], tri[1]))
		for k := range local {
			local[k] = r.Local(tri[k])
		}
		area := math.Abs((local[1].X-local[0].X)*(local[2].Y-local[0].Y) - (local[2].X-local[0].X)*(local[1].Y-local[0].Y))
		if area < 1e-3 {
			continue // seen nearly edge on
		}
		if r.Beside(local) {
			t.Fatalf("a triangle around a point of the glass is beside it: %v", local)
		}
		// rounding grows by the slope, 1/area
		if got, ok := DepthAt(local, x, y); !ok || math.Abs(got-out) > near/area {
			t.Fatalf("got %g, %v, want %g", got, ok, out)
		}
		if _, ok := DepthAt(local, 2*local[0].X-x, 2*local[0].Y-y); ok {
			t.Fatal("a point beyond a corner is met")
		}
	}
	edge := [3]r3.Vec{{X: 1, Y: 0, Z: 0}, {X: 1, Y: 1, Z: 0}, {X: 1, Y: 1, Z: 1}}
	if _, ok := DepthAt(edge, 1, 0.5); ok {
		t.Error("a triangle seen edge on is met")
	}
	if r := facing(0, 0, 0, 2, 1.5); !r.Beside([3]r3.Vec{{X: 2.1}, {X: 3}, {X: 2.1, Y: 1}}) {
		t.Error("a triangle to the right is not beside")
	}
}
