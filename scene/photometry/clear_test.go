package photometry

import (
	"math"
	"testing"
)

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
