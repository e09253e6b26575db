package materials

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
)

// evidence is what one run of a model for one viewer shows.
type evidence struct {
	m         model
	wo        r3.Vec
	run       tally
	densities []float64 // integral of the density over each cell
	albedo    float64   // by quadrature
}

func gather(m model, wo r3.Vec) evidence {
	return evidence{m: m, wo: wo, run: m.draw(wo), densities: m.densities(wo), albedo: m.albedo(wo)}
}

// denser plants a defect: a density too large.
func (e evidence) denser(by float64) evidence {
	e.densities = append([]float64(nil), e.densities...)
	for i := range e.densities {
		e.densities[i] *= by
	}
	return e
}

// heavier plants a defect: weights too large.
func (e evidence) heavier(by float64) evidence {
	e.run.mean *= by
	e.run.stdErr *= by
	return e
}

// fit is the p of the draws against the density.
func (e evidence) fit() float64 {
	p, _, _ := chiSquare(e.run.cells, e.m.expected(e.wo, e.densities))
	return p
}

// scatteredShare is the share of draws that are neither mirrored, passing nor
// lost.
func (e evidence) scatteredShare() float64 {
	rest := 0
	for _, c := range e.run.cells[thetaCells*phiCells:] {
		rest += c
	}
	return 1 - float64(rest)/draws
}

// pdfZ compares the integral of the density with the scattered share, in
// standard errors; infinite where there is no chance in it and the two differ
// by more than the quadrature's 1e-9.
func (e evidence) pdfZ() float64 {
	share := e.scatteredShare()
	gap := math.Abs(total(e.densities) - share)
	if se := math.Sqrt(share * (1 - share) / draws); se > 0 {
		return gap / se
	}
	if gap > 1e-9 {
		return math.Inf(1)
	}
	return 0
}

// furnaceZ compares the mean weight with the integral of the BSDF, in standard
// errors beyond what the quadrature leaves.
func (e evidence) furnaceZ() float64 {
	// Against twice the nodes the integrals change by 2.1e-6 at most.
	const truncation = 1e-5
	gap := max(0, math.Abs(e.run.mean-e.albedo)-truncation)
	if gap == 0 {
		return 0
	}
	return gap / e.run.stdErr
}

// TestModels runs every finish for every viewer: chi-square of Sample against
// PDF, integral of the PDF, energy, white furnace, each with its twin.
func TestModels(t *testing.T) {
	all, wos := models(t), viewers()
	if testing.Short() {
		wos = wos[2:4]
	}
	level, z := sidak(len(all)*len(wos)), zOf(len(all)*len(wos))
	for _, m := range all {
		for i, wo := range wos {
			e := gather(m, wo)
			at := fmt.Sprintf("%s, viewer %d, seed %d", m.name, i, testSeed)
			if p, x, k := chiSquare(e.run.cells, m.expected(wo, e.densities)); p < level {
				t.Errorf("%s: chi-square %.1f with %d degrees of freedom, p = %.3g, want at least %.3g", at, x, k, p, level)
			}
			if !e.run.exact {
				t.Errorf("%s: a mirrored or passing direction is not exact", at)
			}
			if got := e.pdfZ(); got > z {
				t.Errorf("%s: PDF integrates to %.6f, want %.6f: %.2f standard errors, want at most %.2f",
					at, total(e.densities), e.scatteredShare(), got, z)
			}
			if !(e.albedo >= 0 && e.albedo <= 1+albedoError) {
				t.Errorf("%s: %.6f of the light leaves, want at most 1", at, e.albedo)
			}
			if got := e.furnaceZ(); got > z {
				t.Errorf("%s: mean weight %.6f, integral %.6f: %.2f standard errors, want at most %.2f",
					at, e.run.mean, e.albedo, got, z)
			}

			// Twins. A density 5 % off cannot be told from chance where little
			// is scattered: ask where the power is .998 or more.
			share := e.scatteredShare()
			if se := math.Sqrt(share * (1 - share) / draws); share > 0 && 0.05*share >= (z+3)*se {
				if e.denser(1.05).pdfZ() <= z {
					t.Errorf("%s: density x 1.05: planted defect not seen in the integral", at)
				}
				if share > 0.5 && e.denser(1.05).fit() >= level {
					t.Errorf("%s: density x 1.05: planted defect not seen in the chi-square", at)
				}
			}
			if e.heavier(1.02).furnaceZ() <= z {
				t.Errorf("%s: weight x 1.02: planted defect not seen", at)
			}
		}
	}
}

// Twins that need a model of their own.
func TestModelTwins(t *testing.T) {
	const level = 1e-4 // as TestModels, whose family is larger
	wo := direction(35, 0)
	flat := newModel("cosine dropped", Matte{0.5})
	flat.sample = func(wo r3.Vec, _, u2, u3 float64) (Scattered, bool) {
		return Scattered{Wi: sampling.UniformHemisphere(u2, u3), Weight: 0.5}, true
	}
	if p := gather(flat, wo).fit(); p >= level {
		t.Errorf("cosine dropped: planted defect not seen, p = %.3g", p)
	}
	bright := newModel("too bright", Matte{0.99})
	bright.eval = func(wo, wi r3.Vec) float64 { return 1.05 * Eval(bright.b, wo, wi) }
	if got := bright.albedo(wo); got <= 1+albedoError {
		t.Errorf("5 %% more light: planted defect not seen, %.6f", got)
	}
}

// asymmetry returns the largest relative difference when the light goes the
// other way.
func asymmetry(m model) float64 {
	var worst float64
	s := sampling.NewStream(testSeed, 1)
	differ := func(a, b float64) {
		if a != b {
			worst = max(worst, math.Abs(a-b)/max(a, b))
		}
	}
	for range 2000 {
		wo := sampling.UniformSphere(s.Float64(), s.Float64())
		wi := sampling.UniformSphere(s.Float64(), s.Float64())
		differ(m.eval(wo, wi), m.eval(wi, wo))
		_, a := m.b.Delta(Front, math.Abs(wo.Z))
		_, b := m.b.Delta(Back, math.Abs(wo.Z))
		differ(a, b)
	}
	return worst
}

func TestReciprocity(t *testing.T) {
	const rounding = 1e-12 // sums and products of a few dozen float64 operations
	for _, m := range models(t) {
		if got := asymmetry(m); got > rounding {
			t.Errorf("%s: differs by %.3g when the light goes the other way", m.name, got)
		}
	}
	m := newModel("twin", Matte{0.5})
	m.eval = func(wo, wi r3.Vec) float64 { return Eval(m.b, wo, wi) * (1 + 1e-6*wo.Z) }
	if got := asymmetry(m); got <= rounding {
		t.Errorf("one-way factor: planted defect not seen, %.3g", got)
	}
	if got := asymmetry(newModel("twin", &TwoSided{Diffuser{0.2, 0.4}, Diffuser{0.3, 0.4}})); got <= rounding {
		t.Errorf("unequal sides: planted defect not seen, %.3g", got)
	}
}

// Finishes that absorb nothing must return all the light of an even sky.
func TestNothingIsLost(t *testing.T) {
	mirror, err := NewMirror(0.7, 0.3)
	if err != nil {
		t.Fatal(err)
	}
	cases := map[string]BSDF{"mirror": mirror}
	for _, m := range models(t) {
		if m.name == "white matte" || m.name == "diffuser" || strings.Contains(m.name, "white") || strings.Contains(m.name, "clear") {
			cases[m.name] = m.b
		}
	}
	if len(cases) != 5 {
		t.Fatalf("%d finishes without absorption, want 5", len(cases))
	}
	for name, b := range cases {
		for i, wo := range viewers() {
			// Exact: 1; the lobe's table and the quadrature stated as albedoError.
			if got := newModel(name, b).albedo(wo); math.Abs(got-1) > albedoError {
				t.Errorf("%s, viewer %d: %.6f of the light leaves, want 1", name, i, got)
			}
		}
	}
	if got := newModel("twin", Matte{0.99}).albedo(r3.Vec{Z: 1}); math.Abs(got-1) <= albedoError {
		t.Error("1 % absorbed: planted defect not seen")
	}
}
