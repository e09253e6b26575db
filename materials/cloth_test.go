package materials

import (
	"math"
	"testing"
)

func TestClothOpenness(t *testing.T) {
	const deg = math.Pi / 180
	plain := Cloth{Openness: 0.05, DiffuseTransmittance: 0.1, ReflectanceFront: 0.6, ReflectanceBack: 0.4}
	cut := plain
	cut.CutOffRad = 65 * deg
	for _, c := range []struct {
		cloth    Cloth
		thetaDeg float64
		want     float64
	}{
		{plain, 0, 0.05}, {plain, 80, 0.05}, // by definition: no cut-off
		{cut, 0, 0.05}, {cut, 65, 0}, {cut, 85, 0}, // by definition
		// Kotey, Wright, Collins, 2009, worked apart from this code: b = 0.6
		// cos^0.3(4.5 deg) = 0.599445; cos(90 deg x 30/65) = 0.748511; to the
		// power b 0.840599; x 0.05.
		{cut, 30, 0.0420299},
	} {
		if _, got := c.cloth.Delta(Front, math.Cos(c.thetaDeg*deg)); math.Abs(got-c.want) > 1e-7 {
			t.Errorf("cut-off %g, at %g degrees: got %.8f, want %.7f", c.cloth.CutOffRad/deg, c.thetaDeg, got, c.want)
		}
	}
	last := 1.0
	for i := 0; i <= 900; i++ {
		_, got := cut.Delta(Back, math.Cos(float64(i)*0.1*deg))
		if got > last || got < 0 {
			t.Fatalf("at %.1f degrees: %g after %g, want it to fall", float64(i)*0.1, got, last)
		}
		last = got
	}
	if rho, tau := plain.Lambert(Back); rho != 0.4 || tau != 0.1 {
		t.Errorf("back: %g, %g, want 0.4, 0.1", rho, tau)
	}
	if rho, tau := plain.Lambert(Front); rho != 0.6 || tau != 0.1 {
		t.Errorf("front: %g, %g, want 0.6, 0.1", rho, tau)
	}
}

func TestNewClothRefuses(t *testing.T) {
	for _, c := range []struct {
		cloth Cloth
		want  string
	}{
		{Cloth{Openness: 0.3, DiffuseTransmittance: 0.3, ReflectanceFront: 0.5}, "openness + diffuse_transmittance + reflectance: got 1.1, want at most 1; more light would leave than arrives: lower one of them"},
		{Cloth{Openness: 0.3, DiffuseTransmittance: 0.3, ReflectanceBack: 0.5}, "openness + diffuse_transmittance + reflectance_back: got 1.1, want at most 1; more light would leave than arrives: lower one of them"},
		{Cloth{Openness: 3}, "openness: got 3, want 0 to 1; give a share, not per cent"},
		{Cloth{CutOffRad: math.Pi}, "cut_off_deg: got 180, want 0 to 90; 0 means no cut-off"},
		{Cloth{CutOffRad: math.NaN()}, "cut_off_deg: got NaN, want 0 to 90; 0 means no cut-off"},
	} {
		if _, err := NewCloth(c.cloth); err == nil || err.Error() != c.want {
			t.Errorf("got %v, want %s", err, c.want)
		}
	}
	if _, err := NewCloth(Cloth{Openness: 0.1, DiffuseTransmittance: 0.2, ReflectanceFront: 0.7}); err != nil {
		t.Errorf("shares of just 1: %v", err)
	}
}
