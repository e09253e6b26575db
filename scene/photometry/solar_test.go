package photometry

import (
	"math"
	"testing"
)

func TestDistanceFactor(t *testing.T) {
	// Spencer's series (1971) worked out apart from this code, 6 decimals.
	for _, c := range []struct {
		day  int
		want float64
	}{{1, 1.035050}, {80, 1.007900}, {172, 0.967443}, {266, 0.993046}, {355, 1.034118}} {
		if got := DistanceFactor(c.day); math.Abs(got-c.want) > 6e-7 {
			t.Errorf("DistanceFactor(%d) = %.7f, want %.6f", c.day, got, c.want)
		}
		if got := ExtraterrestrialNormal(c.day); !within(got, 1360.8*c.want, 1e-6) { // Kopp & Lean (2011)
			t.Errorf("ExtraterrestrialNormal(%d) = %g, want %g", c.day, got, 1360.8*c.want)
		}
	}
}

func TestAirMassKastenYoung1989(t *testing.T) {
	// Kasten & Young's formula (1989) worked out apart from this code, 5 decimals.
	for _, c := range []struct{ zenithDeg, want float64 }{
		{0, 0.99971}, {30, 1.15399}, {60, 1.99429}, {75, 3.81291},
		{80, 5.58604}, {85, 10.30579}, {88, 19.43325}, {90, 37.91961},
		{95, 37.91961},         // beyond the horizon: as documented
		{math.NaN(), 37.91961}, // not a number: as documented
		{-60, 1.99429},         // by its size: as documented
	} {
		if got := AirMassKastenYoung1989(c.zenithDeg * degree); math.Abs(got-c.want) > 6e-6 {
			t.Errorf("AirMassKastenYoung1989(%g deg) = %.6f, want %.5f", c.zenithDeg, got, c.want)
		}
	}
}
