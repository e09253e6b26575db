package sampling

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"
)

// sidak returns the significance of each of n tests of a family whose joint
// significance is 0.01.
// Source: Šidák, 1967, "Rectangular confidence regions for the means of
// multivariate normal distributions", JASA 62.
func sidak(n int) float64 { return 1 - math.Pow(1-0.01, 1/float64(n)) }

// chiSquare returns Pearson's p of observed counts against expected ones.
// Cells expecting fewer than 5 are pooled (Cochran's rule).
func chiSquare(observed []int, expected []float64) (p, statistic float64, degrees int) {
	var poolO, poolE float64
	cells := 0
	for i, e := range expected {
		if e < 5 {
			poolO += float64(observed[i])
			poolE += e
			continue
		}
		d := float64(observed[i]) - e
		statistic += d * d / e
		cells++
	}
	if poolE >= 5 {
		statistic += (poolO - poolE) * (poolO - poolE) / poolE
		cells++
	} else if poolO > poolE+10*math.Sqrt(poolE+1) {
		return 0, math.Inf(1), cells // counts where hardly any can be
	}
	degrees = cells - 1
	return distuv.ChiSquared{K: float64(degrees)}.Survival(statistic), statistic, degrees
}

// even returns the expected counts of n draws over equally likely cells.
func even(cells, n int) []float64 {
	e := make([]float64, cells)
	for i := range e {
		e[i] = float64(n) / float64(cells)
	}
	return e
}

// mustFit demands that counts fit, mustNotFit that they do not.
func mustFit(t *testing.T, name string, level float64, observed []int, expected []float64) {
	t.Helper()
	if p, x, k := chiSquare(observed, expected); p < level {
		t.Errorf("%s: chi-square %.1f with %d degrees of freedom, p = %.3g, want at least %.3g", name, x, k, p, level)
	}
}

func mustNotFit(t *testing.T, name string, level float64, observed []int, expected []float64) {
	t.Helper()
	if p, x, k := chiSquare(observed, expected); p >= level {
		t.Errorf("%s: planted defect not seen: chi-square %.1f with %d degrees of freedom, p = %.3g", name, x, k, p)
	}
}

func TestSidak(t *testing.T) {
	if got := sidak(1); math.Abs(got-0.01) > 1e-15 {
		t.Errorf("sidak(1) = %g, want 0.01", got) // exact: one test keeps the level
	}
}
