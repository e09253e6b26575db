package materials

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
)

// albedoError bounds how far the directional reflectance of a lobe departs
// from its Reflectance, relative: TestGlossKeepsItsReflectance measures it.
const albedoError = 1e-3

// lobeAlbedo integrates a lobe by its own sampling with many Sobol points.
func lobeAlbedo(g *Gloss, cos float64, eval func(wo, wi r3.Vec) float64) float64 {
	const n = 1 << 14
	wo := r3.Vec{X: math.Sqrt(1 - cos*cos), Z: cos}
	var sum float64
	for i := range uint32(n) {
		u, v := sampling.OwenSobol2(i, testSeed)
		if wi, ok := g.Sample(wo, u, v); ok {
			sum += eval(wo, wi) * wi.Z / g.PDF(wo, wi)
		}
	}
	return sum / n
}

func TestGlossKeepsItsReflectance(t *testing.T) {
	var worst float64
	for _, spreadDeg := range []float64{0.5, 1, 2, 5, 10, 20, 40, 60} {
		g := newGloss(1, spreadDeg*math.Pi/180)
		for _, cos := range []float64{0.001, 0.003, 0.01, 0.03, 0.06, 0.1, 0.2, 0.35, 0.6, 0.8, 0.97, 1} {
			got := lobeAlbedo(g, cos, g.Eval)
			worst = max(worst, math.Abs(got-1))
			if math.Abs(got-1) > albedoError { // exact: 1, Kulla, Conty, 2017
				t.Errorf("spread %g degrees, cosine %g: %.5f leaves, want 1 within %g", spreadDeg, cos, got, albedoError)
			}
		}
	}
	t.Logf("largest error %.2g", worst)
	// The twin: the part between facets left out.
	g := newGloss(1, 0.35)
	once := func(wo, wi r3.Vec) float64 {
		rest := (1 - g.once.at(wo.Z)) * (1 - g.once.at(wi.Z)) / (math.Pi * (1 - g.once.mean))
		return g.Eval(wo, wi) - rest
	}
	if got := lobeAlbedo(g, 0.6, once); math.Abs(got-1) <= albedoError {
		t.Errorf("single reflections alone: planted defect not seen, %.5f", got)
	}
}

// The projected area of the facets is that of the surface.
// Source: Walter et al., 2007, equation 4: integral of D(m) m.z = 1.
func TestFacetsCoverTheSurface(t *testing.T) {
	for _, alpha := range []float64{0.07, 0.3, 0.8} {
		area := func(alphaOfD float64) float64 {
			g := Gloss{Alpha: alphaOfD}
			return total(integrate(lobeNodes, func(m r3.Vec) float64 {
				if m.Z <= 0 {
					return 0
				}
				return g.normals(m) * m.Z
			}))
		}
		const truncation = 1e-6 // Gauss-Legendre, lobe wider than a third of a cell
		if got := area(alpha); math.Abs(got-1) > truncation {
			t.Errorf("alpha %g: area %.8f, want 1", alpha, got)
		}
		if got := area(alpha) * 1.05; math.Abs(got-1) <= truncation {
			t.Errorf("alpha %g: planted defect not seen", alpha)
		}
	}
}

// The half-width of a narrow lobe is the stated spread.
func TestSpreadIsHalfWidth(t *testing.T) {
	for _, spreadDeg := range []float64{0.5, 2, 5, 10} {
		g := newGloss(1, spreadDeg*math.Pi/180)
		up := r3.Vec{Z: 1}
		peak := g.Eval(up, up)
		got := g.Eval(up, direction(spreadDeg, 40)) / peak
		// By definition 1/2 for the density of facets. The cosine below the
		// lobe, masking and the part between facets shift it by the order of
		// 1/cos(spread), 1.5 % at 10 degrees.
		tolerance := 0.5*(1/math.Cos(spreadDeg*math.Pi/180)-1) + 0.006
		if math.Abs(got-0.5) > tolerance {
			t.Errorf("spread %g degrees: luminance falls to %.4f of its peak, want 0.5 within %.4f", spreadDeg, got, tolerance)
		}
	}
}

func TestNewGlossyRefuses(t *testing.T) {
	for _, c := range []struct {
		total, share, spread float64
		want                 string
	}{
		{1.2, 0.5, 0.1, "reflectance: got 1.2, want 0 to 1; give a share, not per cent"},
		{0.8, -0.1, 0.1, "specular_share: got -0.1, want 0 to 1; give a share, not per cent"},
		{0.8, 0.5, 0, "spread_deg: got 0, want 0.5 to 60; use a mirror for sharper reflection, a matte finish for softer"},
		{0.8, math.NaN(), 0.1, "specular_share: got NaN, want 0 to 1; give a share, not per cent"},
	} {
		if _, err := NewGlossy(c.total, c.share, c.spread); err == nil || err.Error() != c.want {
			t.Errorf("NewGlossy(%g, %g, %g): got %v, want %s", c.total, c.share, c.spread, err, c.want)
		}
	}
	if g, err := NewGlossy(0.8, 0, 0.1); err != nil || g.Gloss(Front) != nil {
		t.Errorf("no specular share: got a lobe or %v, want neither", err)
	}
}

func BenchmarkNewGlossy(b *testing.B) {
	for b.Loop() {
		g, err := NewGlossy(0.85, 0.7, 0.1)
		if err != nil {
			b.Fatal(err)
		}
		sink = g.TotalReflectance
	}
}
