package photometry

import (
	"math"
	"testing"
)

const degree = math.Pi / 180

// within tells whether got is want to a relative tolerance.
func within(got, want, relative float64) bool {
	return math.Abs(got-want) <= relative*math.Abs(want)
}

func TestDiscSolidAngles(t *testing.T) {
	// Closed forms 2 pi (1 - cos(d/2)) and pi sin^2(d/2), worked out apart from
	// this code to 7 digits, hence the tolerance of 1e-7.
	for _, c := range []struct {
		diameterDeg, want float64
	}{
		{0.533, 6.796702e-5},
		{0.530, 6.720407e-5},
		{0.5242, 6.574124e-5},
		{0.5422, 7.033360e-5},
		{360, 4 * math.Pi}, // exact: the whole sphere
		{180, 2 * math.Pi}, // exact: a hemisphere
		{0, 0},
	} {
		if got := DiscSolidAngle(c.diameterDeg * degree); !within(got, c.want, 1e-7) {
			t.Errorf("DiscSolidAngle(%g deg) = %.7g, want %.7g", c.diameterDeg, got, c.want)
		}
	}
	if got := DiscProjectedSolidAngle(0.533 * degree); !within(got, 6.796666e-5, 1e-7) {
		t.Errorf("DiscProjectedSolidAngle(0.533 deg) = %.7g, want 6.796666e-05", got)
	}
	if got := DiscProjectedSolidAngle(math.Pi); !within(got, math.Pi, 1e-15) { // exact: a hemisphere
		t.Errorf("DiscProjectedSolidAngle(180 deg) = %g, want pi", got)
	}
}

func TestDiscLuminance(t *testing.T) {
	for _, c := range []struct {
		illuminance, want, relative float64
	}{
		{100e3, 1.471310e9, 5e-7}, // closed form E/(pi sin^2(d/2)), d = 0.533 deg; 7 digits
		// The next two were worked out as E/omega, 5.4e-6 less, to 6 digits.
		{127.5e3, 1.87591e9, 9e-6}, // extraterrestrial illuminance of the IES handbook
		{133.8e3, 1.96860e9, 9e-6}, // upper value of Darula, Kittler & Gueymard, Solar Energy 79, 2005, 559-565
		{0, 0, 0},
	} {
		if got := DiscLuminance(c.illuminance, SunDiameterRad); !within(got, c.want, c.relative) {
			t.Errorf("DiscLuminance(%g) = %.7g, want %.7g", c.illuminance, got, c.want)
		}
	}
	if got := DiscLuminance(1000, math.Pi); !within(got, 1000/math.Pi, 1e-15) { // exact: uniform hemisphere, E = pi L
		t.Errorf("hemisphere: got %g, want %g", got, 1000/math.Pi)
	}
	if got := DiscLuminance(1000, 0); got != 0 {
		t.Errorf("disc without size: got %g, want 0", got)
	}
}

func TestSunDiameterFollowsFromRadiusAndDistance(t *testing.T) {
	// IAU 2015 B3 and IAU 2012 B2; 0.533 is given to 3 digits.
	if want := 2 * math.Asin(695700/149597870.7); math.Abs(SunDiameterRad-want) > 0.0005*degree {
		t.Errorf("SunDiameterRad = %g deg, want %g", SunDiameterRad/degree, want/degree)
	}
}
