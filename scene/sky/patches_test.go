package sky

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

func TestTregenzaPatches(t *testing.T) {
	p := NewPatches(1)
	i := 0
	for _, row := range readTable(t, "05_tregenza_patches.csv", 8) {
		n := int(row.number(t, "patches_in_row"))
		for k := range n {
			if got, want := p.SolidAngle(i), row.number(t, "solid_angle_per_patch_sr"); math.Abs(got-want) > 6e-9 {
				t.Errorf("patch %d: solid angle: got %.9f, want %.8f", i, got, want)
			}
			if got, want := p.ProjectedSolidAngle(i), row.number(t, "projected_solid_angle_per_patch_sr(int sin h dw)"); math.Abs(got-want) > 6e-9 {
				t.Errorf("patch %d: projected solid angle: got %.9f, want %.8f", i, got, want)
			}
			// First centre on north, then clockwise.
			want := at(90-row.number(t, "centre_altitude_deg"), float64(k)*row.number(t, "azimuth_width_deg"))
			if got := p.Centre(i); r3.Norm(r3.Sub(got, want)) > 1e-12 {
				t.Errorf("patch %d: centre: got %v, want %v", i, got, want)
			}
			i++
		}
	}
	if p.Count() != i {
		t.Errorf("got %d patches, want %d", p.Count(), i)
	}
}

func TestPatchSums(t *testing.T) {
	for factor, want := range map[int]int{1: 145, 2: 577, 3: 1297, 4: 2305, 5: 3601, 6: 5185} { // 144 m^2 + 1, Bourgeois, Reinhart & Ward (2008)
		p := NewPatches(factor)
		if p.Count() != want {
			t.Errorf("factor %d: got %d patches, want %d", factor, p.Count(), want)
		}
		var solid, projected float64
		for i := range p.Count() {
			solid += p.SolidAngle(i)
			projected += p.ProjectedSolidAngle(i)
			if got := p.Index(p.Centre(i)); got != i {
				t.Errorf("factor %d: centre of patch %d lies in %d", factor, i, got)
			}
		}
		if !within(solid, 2*math.Pi, 1e-12) || !within(projected, math.Pi, 1e-12) { // exact
			t.Errorf("factor %d: sums %.15f, %.15f, want 2 pi and pi", factor, solid, projected)
		}
	}
}

// TestPatchIndex counts evenly spread directions per patch: the counts must be in
// proportion to the solid angles. Chi-square at z = 4 of its normal
// approximation (mean n-1, variance 2(n-1)). The twin with two patches merged
// must be rejected.
func TestPatchIndex(t *testing.T) {
	const seed, n = 20260602, 200000
	for _, factor := range []int{1, 2} {
		p := NewPatches(factor)
		chiSquare := func(merge bool) float64 {
			rng := rand.New(rand.NewPCG(seed, uint64(factor)))
			counts := make([]float64, p.Count())
			for range n {
				i := p.Index(at(math.Acos(rng.Float64())/degree, 360*rng.Float64()))
				if merge && i == 17 {
					i = 18
				}
				counts[i]++
			}
			var sum float64
			for i, got := range counts {
				want := n * p.SolidAngle(i) / (2 * math.Pi)
				sum += (got - want) * (got - want) / want
			}
			return sum
		}
		dof := float64(p.Count() - 1)
		limit := dof + 4*math.Sqrt(2*dof)
		if got := chiSquare(false); got > limit {
			t.Errorf("factor %d, seed %d: chi-square %.1f of %g degrees of freedom, limit %.1f", factor, seed, got, dof, limit)
		}
		if got := chiSquare(true); got <= limit {
			t.Errorf("factor %d: the planted defect passes: chi-square %.1f", factor, got)
		}
	}
}

func TestPatchesNest(t *testing.T) {
	coarse := NewPatches(1)
	for _, factor := range []int{2, 3, 4} {
		fine := NewPatches(factor)
		sums := make([]float64, coarse.Count())
		for i := range fine.Count() {
			sums[coarse.Index(fine.Centre(i))] += fine.SolidAngle(i)
		}
		for i, got := range sums {
			if !within(got, coarse.SolidAngle(i), 1e-12) {
				t.Errorf("factor %d: patches in patch %d sum to %g, want %g", factor, i, got, coarse.SolidAngle(i))
			}
		}
	}
}

func TestPatchIndexEdges(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for _, factor := range []int{1, 2, 3, 7, 16} {
		p := NewPatches(factor)
		for _, dir := range []r3.Vec{{Z: -1}, {X: 1, Z: -1e-9}, {Z: nan}, {X: nan, Z: 1}, {Y: inf, Z: 1}, {Z: inf}} {
			if got := p.Index(dir); got != -1 {
				t.Errorf("factor %d: Index(%v) = %d, want -1", factor, dir, got)
			}
		}
		for _, dir := range []r3.Vec{{}, {Z: 1}, {X: 1}, {Y: 1}, {X: -1e-300, Y: 1}, {X: -1e-17, Y: 1}, at(90-78, 359.9999999), at(6, 0), at(6.0000000001, 354)} {
			if got := p.Index(dir); got < 0 || got >= p.Count() {
				t.Errorf("factor %d: Index(%v) = %d, want 0 to %d", factor, dir, got, p.Count()-1)
			}
		}
		// Just west and east of north: different patches only where north is an edge.
		west, east := p.Index(at(80, -0.001)), p.Index(at(80, 0.001))
		if (west == east) != (factor%2 == 1) {
			t.Errorf("factor %d: patches at north: %d, %d", factor, west, east)
		}
	}
}

// What Average states for factors 1, 2 and 4.
const averageLimit1, averageLimit2, averageLimit4 = 0.04, 0.01, 0.003

// TestPatchAverage compares the sum of mean luminance and projected solid angle
// with the horizontal illuminance: the CIE skies and the all-weather skies of the
// published checks. The difference is the spread of luminance along the height of
// a patch and shrinks with the factor; the limits are those that Average states.
func TestPatchAverage(t *testing.T) {
	skies := manySkies(t)
	for name := range skies {
		if strings.HasPrefix(name, "Perez") {
			delete(skies, name)
		}
	}
	for _, row := range readTable(t, "03c_perez1993_checks_integrals.csv", 19) {
		v := row.numbers(t, "bin", "eps", "Delta", "sun_zenith_deg")
		skies[fmt.Sprint("Perez ", v)], _ = NewPerez(at(v[3], 200), v[1], v[2], 10000)
	}
	for factor, limit := range map[int]float64{1: averageLimit1, 2: averageLimit2, 4: averageLimit4} {
		p := NewPatches(factor)
		out := make([]float64, p.Count())
		worst, worstName := 0.0, ""
		for name, s := range skies {
			p.Average(s, out)
			var sum float64
			for i, l := range out {
				sum += l * p.ProjectedSolidAngle(i)
			}
			if d := math.Abs(sum/s.HorizontalIlluminance() - 1); d > worst {
				worst, worstName = d, name
			}
		}
		t.Logf("factor %d: largest difference %.5f (%s)", factor, worst, worstName)
		if worst > limit {
			t.Errorf("factor %d: patch sum is off by %.4f (%s), want at most %g", factor, worst, worstName, limit)
		}
	}
}

func TestPatchAverageOfOnePatch(t *testing.T) {
	p := NewPatches(1)
	out := make([]float64, p.Count())
	uniform, err := NewCIE(5, r3.Vec{Z: 1}, ByZenithLuminance(1234))
	if err != nil {
		t.Fatal(err)
	}
	p.Average(uniform, out)
	for i, l := range out {
		if !within(l, 1234, 1e-6) { // exact but for float32
			t.Errorf("uniform sky, patch %d: got %g, want 1234", i, l)
		}
	}
	// A single patch against a fine quadrature of the formula: where luminance is
	// steepest, around the sun.
	s, _ := NewPerez(at(50, 133), 8, 0.1, 10000)
	p.Average(s, out)
	i := p.Index(s.Sun())
	var sum, weight float64
	for z := 0.05; z < 90; z += 0.1 {
		for a := 90.05; a < 180; a += 0.1 {
			if dir := at(z, a); p.Index(dir) == i {
				sum += math.Sin(z*degree) * s.LuminanceExact(dir)
				weight += math.Sin(z * degree)
			}
		}
	}
	if want := sum / weight; !within(out[i], want, 0.01) {
		t.Errorf("patch of the sun: got %g, want %g within 1 %%", out[i], want)
	}
}

func BenchmarkAverage145(b *testing.B) {
	p := NewPatches(1)
	s, _ := NewPerez(at(45, 135), 3.5, 0.2, 10000)
	out := make([]float64, p.Count())
	for b.Loop() {
		p.Average(s, out)
	}
}
