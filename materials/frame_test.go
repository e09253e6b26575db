package materials

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
)

func TestFrame(t *testing.T) {
	normals := []r3.Vec{{Z: 1}, {Z: -1}, {X: 1}, {Y: -1}, {X: 1e-9, Z: -math.Sqrt(1 - 1e-18)}}
	s := sampling.NewStream(testSeed, 3)
	for range 1000 {
		normals = append(normals, sampling.UniformSphere(s.Float64(), s.Float64()))
	}
	const rounding = 1e-14 // the source's own measure of its method: 1e-15 and a few roundings here
	for _, n := range normals {
		f := NewFrame(n)
		// By definition: unit, orthogonal, right-handed.
		for _, d := range []float64{r3.Norm(f.T) - 1, r3.Norm(f.B) - 1, r3.Dot(f.T, f.B), r3.Dot(f.T, n), r3.Dot(f.B, n),
			r3.Norm(r3.Sub(r3.Cross(f.T, f.B), n))} {
			if !(math.Abs(d) < rounding) {
				t.Fatalf("normal %v: frame %+v off by %g", n, f, d)
			}
		}
		w := sampling.UniformSphere(s.Float64(), s.Float64())
		if d := r3.Norm(r3.Sub(f.ToWorld(f.ToLocal(w)), w)); d > rounding {
			t.Fatalf("normal %v: %v comes back %g off", n, w, d)
		}
		if got := f.ToLocal(n); math.Abs(got.Z-1) > rounding {
			t.Fatalf("normal %v is %v in its own frame, want z", n, got)
		}
	}
}
