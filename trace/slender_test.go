package trace_test

import (
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
)

// TestSlenderFacets: a path that goes on from a long and narrow facet (slats and
// curved shelves consist of them) starts on the side it came from, and light
// that leaves the facet is not held back by the facet itself.
func TestSlenderFacets(t *testing.T) {
	const n = 40000
	for i, width := range []float64{1, .1, .02, .005, .002} {
		const length = 3.0
		m := newMirroredModel(t)
		// Tilted, away from the origin, as a slat of a window of 3 m.
		org := r3.Vec{X: 2, Y: .31, Z: 1.7}
		u, v := r3.Vec{X: length}, r3.Scale(width, r3.Unit(r3.Vec{Y: .8, Z: .6}))
		f := m.mirror(.9)
		m.quad(f, org, r3.Add(org, u), r3.Add(org, r3.Add(u, v)), r3.Add(org, v))
		w := m.world()
		normal := w.Normal(0)
		met, through, held := 0, 0, 0
		for k := range n {
			s := sampling.Stream4(5, 813, uint64(i), uint64(k))
			at := r3.Add(org, r3.Add(r3.Scale(s.Float64(), u), r3.Scale(s.Float64(), v)))
			b := sampling.CosineHemisphere(s.Float64(), s.Float64())
			// From 1 m away on the front.
			in := r3.Add(r3.Scale(b.Z, normal), r3.Add(r3.Scale(b.X, r3.Unit(u)), r3.Scale(b.Y, r3.Unit(v))))
			h, ok := w.Closest(r3.Add(at, in), r3.Scale(-1, in))
			if !ok {
				continue // past the edge by rounding
			}
			met++
			p := w.Offset(h.Point, h.Facing())
			if r3.Dot(r3.Sub(p, org), normal) <= 0 {
				through++
				continue
			}
			out := sampling.CosineHemisphere(s.Float64(), s.Float64())
			d := r3.Add(r3.Scale(out.Z, normal), r3.Add(r3.Scale(out.X, r3.Unit(u)), r3.Scale(out.Y, r3.Unit(v))))
			if w.Blocked(p, d, 100) {
				held++
			}
		}
		t.Logf("3 m x %g m: %d of %d hits go on behind the facet, %d of the rest are held back by it", width, through, met, held)
		// A shadow ray may still meet its own facet: the distance in single
		// precision is off where the facet is a thousand times longer than wide.
		// What that costs is bounded here; a curved mirror's facets are 5 mm
		// wide and more at the default angular error.
		most := 0
		switch {
		case width < 0.005:
			most = met / 200
		case width < 0.02:
			most = met / 5000
		}
		if through > 0 || held > most {
			t.Errorf("3 m x %g m: got %d and %d, want none and at most %d", width, through, held, most)
		}
	}
}
