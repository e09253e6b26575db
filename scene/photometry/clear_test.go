package photometry

import (
	"math"
	"testing"
)

// TestRayleigh holds the remembered coefficients against what else is known of
// them.
func TestRayleigh(t *testing.T) {
	// The factor 0.8662 is the old thickness over the new one at an air mass of
	// 2 (Rigollier, Bauer & Wald 2000); the old one is 1/(9.4 + 0.9 m), Kasten
	// 1980 (from memory).
	if got := 1 / (9.4 + 0.9*2) / rayleigh(2); math.Abs(got-0.8662) > 5e-5 {
		t.Errorf("old over new thickness at air mass 2: got %.5f, want 0.8662", got)
	}
	// The two branches meet at an air mass of 20, to the digits they are given
	// with: 1/24.776 and 1/24.760.
	if a, b := rayleigh(20), rayleigh(20.000001); math.Abs(a/b-1) > 1e-3 {
		t.Errorf("at air mass 20: got %g and %g, want the same", a, b)
	}
}

func TestClearDirectNormal(t *testing.T) {
	last := math.Inf(1)
	for m := 1.0; m < 38; m += 0.5 {
		e := ClearDirectNormal(SolarConstant, m, 2)
		if e <= 0 || e >= last || e >= ClearDirectNormal(SolarConstant, m, 1) {
			t.Errorf("air mass %g: got %g W/m2 after %g, want less, above 0, and below that of cleaner air", m, e, last)
		}
		last = e
	}
	if got := ClearDirectNormal(1000, 0, 2); got != 1000 {
		t.Errorf("without air: got %g, want all", got)
	}
}

// Worked by hand from the published formula, at 30 degrees: exp(-0.42) =
// 0.657047, sqrt(0.5) = 0.707107. The distance factor of 21 March (day 80) is
// 1.0064 by the simpler 1 + 0.033 cos(2 pi n / 365) (Duffie and Beckman, Solar
// Engineering of Thermal Processes, from memory), good to 0.002.
func TestClearDay(t *testing.T) {
	sun, sky := ClearDay(math.Pi/6, 80)
	if want := 127500 * 0.657047 * 1.0064; math.Abs(sun-want) > 0.002*want {
		t.Errorf("sun %.0f lx, want %.0f", sun, want)
	}
	if want := 800 + 15500*0.707107; math.Abs(sky-want) > 1 {
		t.Errorf("sky %.0f lx, want %.0f", sky, want)
	}
	for _, h := range []float64{0, -0.1} {
		if sun, sky := ClearDay(h, 80); sun != 0 || sky != 0 {
			t.Errorf("altitude %g: %g and %g lx", h, sun, sky)
		}
	}
}
