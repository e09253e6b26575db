package materials

import (
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
)

func TestKindsFollowShares(t *testing.T) {
	for _, m := range models(t) {
		for _, wo := range viewers() {
			rho, _ := m.b.Lambert(SideOf(wo))
			_, tau := m.b.Lambert(SideOf(wo).Opposite())
			mirror, through := deltaShares(m.b, wo)
			has := map[Kind]bool{KindDiffuse: rho > 0, KindDiffuseThrough: tau > 0, KindMirror: mirror > 0,
				KindThrough: through > 0, KindGlossy: m.b.Gloss(SideOf(wo)) != nil}
			seen := map[Kind]bool{}
			s := sampling.NewStream(testSeed, 2)
			for range 5000 {
				x, ok := m.sample(wo, s.Float64(), s.Float64(), s.Float64())
				if !ok {
					continue
				}
				seen[x.Kind] = true
				if !has[x.Kind] {
					t.Fatalf("%s: drew kind %d, which the finish does not have", m.name, x.Kind)
				}
				through := x.Kind == KindDiffuseThrough || x.Kind == KindThrough
				if (SideOf(x.Wi) != SideOf(wo)) != through {
					t.Fatalf("%s: kind %d on the wrong side", m.name, x.Kind)
				}
				if x.Kind.IsDelta() {
					continue
				}
				if p := m.pdf(wo, x.Wi); math.Abs(p-x.PDF) > 1e-12*p {
					t.Fatalf("%s: sample says density %g, PDF %g", m.name, x.PDF, p)
				}
				if w := m.eval(wo, x.Wi) * math.Abs(x.Wi.Z) / x.PDF; math.Abs(w-x.Weight) > 1e-9*w {
					t.Fatalf("%s: weight %g, Eval x cosine / PDF %g", m.name, x.Weight, w)
				}
			}
			for k, h := range has {
				// The rarest part here is 3 % of the light: missed by chance
				// with probability below 1e-60.
				if h && !seen[k] {
					t.Errorf("%s: kind %d never drawn", m.name, k)
				}
			}
		}
	}
}

func TestBlackAndEdge(t *testing.T) {
	if _, ok := Sample(Matte{0}, r3.Vec{Z: 1}, 0.5, 0.5, 0.5); ok {
		t.Error("a black finish sends light")
	}
	if _, ok := Sample(Matte{0.5}, r3.Vec{X: 1}, 0.5, 0.5, 0.5); ok {
		t.Error("a viewer in the plane of the surface sees light")
	}
	if Eval(Matte{0.5}, r3.Vec{X: 1}, r3.Vec{Z: 1}) != 0 || PDF(Matte{0}, r3.Vec{Z: 1}, r3.Vec{Z: 1}) != 0 {
		t.Error("light at the edge or from black, want none")
	}
}

func FuzzSample(f *testing.F) {
	all := models(f)
	f.Add(uint8(0), 0.5, 0.5, 0.5, 0.3, 0.1)
	f.Add(uint8(9), 1e-9, 0.0, 0.999999, 0.0, 0.999999)
	f.Add(uint8(8), -1e-300, 1.0, 0.9, 1.0, 1.0)
	f.Fuzz(func(t *testing.T, which uint8, z, phi, u1, u2, u3 float64) {
		for _, x := range []float64{z, phi, u1, u2, u3} {
			if math.IsNaN(x) || math.Abs(x) > 1 || x < 0 && x != z {
				t.Skip("not a viewer and three random numbers")
			}
		}
		sp, cp := math.Sincos(2 * math.Pi * phi)
		r := math.Sqrt(1 - z*z)
		m := all[int(which)%len(all)]
		s, ok := m.sample(r3.Vec{X: r * cp, Y: r * sp, Z: z}, u1, u2, u3)
		if !ok {
			return
		}
		if n := r3.Norm(s.Wi); !(math.Abs(n-1) < 1e-9) {
			t.Errorf("%s: direction %v has length %g", m.name, s.Wi, n)
		}
		if !(s.Weight >= 0 && s.Weight < 100) || !(s.PDF >= 0) || math.IsInf(s.PDF, 0) {
			t.Errorf("%s: weight %g, density %g", m.name, s.Weight, s.PDF)
		}
	})
}

func BenchmarkSample(b *testing.B) {
	for _, m := range models(b) {
		b.Run(strings.ReplaceAll(m.name, " ", "_"), func(b *testing.B) {
			b.ReportAllocs()
			wo := direction(60, 17)
			s := sampling.NewStream(1)
			var sum float64
			for b.Loop() {
				x, _ := Sample(m.b, wo, s.Float64(), s.Float64(), s.Float64())
				sum += x.Weight
			}
			sink = sum
		})
	}
}

func BenchmarkDelta(b *testing.B) {
	for _, m := range models(b) {
		b.Run(strings.ReplaceAll(m.name, " ", "_"), func(b *testing.B) {
			s := sampling.NewStream(1)
			var sum float64
			for b.Loop() {
				x, y := m.b.Delta(Front, s.Float64())
				sum += x + y
			}
			sink = sum
		})
	}
}

var sink float64
