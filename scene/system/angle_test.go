package system

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// sunAt is the direction to a sun at a bearing from straight before the glass
// of an opening that faces azimuth.
func sunAt(altRad, azimuthRad float64) r3.Vec {
	sinAlt, cosAlt := math.Sincos(altRad)
	sinAz, cosAz := math.Sincos(azimuthRad)
	return r3.Vec{X: cosAlt * sinAz, Y: cosAlt * cosAz, Z: sinAlt}
}

// TestProfileAngle by tan(altitude)/cos(azimuth difference), ISO 15099:2003
// (from memory), the values computed by hand calculator.
func TestProfileAngle(t *testing.T) {
	rng := rand.New(rand.NewPCG(8, 1))
	for _, c := range []struct{ alt, off, want float64 }{{30, 0, 30}, {30, 30, 33.6901}, {45, 45, 54.7356}, {20, 60, 36.0524}, {-20, -60, -36.0524}} {
		for range 20 {
			facade := rng.Float64() * 2 * math.Pi
			got, ok := ProfileAngle(sunAt(c.alt*rad, facade+c.off*rad), facing(facade, 0, 0, 2, 1))
			if !ok || math.Abs(deg(got)-c.want) > 5e-5 {
				t.Errorf("altitude %g, %g beside: got %.5f, want %.4f", c.alt, c.off, deg(got), c.want)
			}
			// Leaning back by b turns the sun down by b in the opening's frame
			// where it stands straight before it.
			if lean := (rng.Float64() - 0.5) * rad * 40; c.off == 0 {
				if got, _ := ProfileAngle(sunAt(c.alt*rad, facade), facing(facade, lean, 0, 2, 1)); math.Abs(got-(c.alt*rad-lean)) > near {
					t.Errorf("lean %g: got %g degrees, want %g less", deg(lean), deg(got), deg(lean))
				}
			}
		}
	}
	r := facing(1, 0, 0, 2, 1)
	for _, sun := range []r3.Vec{sunAt(0.5, 1+math.Pi), sunAt(0.5, 1+91*rad), r3.Scale(-1, r.Outward), {}} {
		if _, ok := ProfileAngle(sun, r); ok {
			t.Errorf("sun %v behind the glass has a profile angle", sun)
		}
	}
}

// TestCutOffTilt against the table, whose tilts count the inner edge up.
func TestCutOffTilt(t *testing.T) {
	for _, row := range checkRows(t, "11c_cutoff_angles.csv") {
		got, ok := CutOffTilt(row[1]*rad, 0.02*row[0], 0.02)
		if want := -row[2]; !ok || math.Abs(deg(got)-want) > 5e-6*1.01 { // half the table's last digit, and rounding
			t.Errorf("width/pitch %g, profile %g: got %.6f degrees, want %.5f", row[0], row[1], deg(got), want)
		}
	}
	for _, c := range []struct{ profile, width, pitch float64 }{{0, 0.02, 0.025}, {0.1, 0, 0.02}, {0.1, -1, 1}, {math.NaN(), 1, 1}, {0, 1, math.NaN()}} {
		if got, ok := CutOffTilt(c.profile, c.width, c.pitch); ok {
			t.Errorf("%+v: got %g, want none", c, got)
		}
	}
}

// TestRedirectTilt mirrors rays by vectors (law of reflection), for slats of
// openings of any orientation, and reads where they meet the ceiling.
func TestRedirectTilt(t *testing.T) {
	// By hand: an overhead sun, 0.5 m over 3 m: (90 - 9.46232)/2 = 40.26884.
	// Common practice, no published source, says about 40.
	if got := deg(RedirectTilt(math.Pi/2, 0.5, 3)); math.Abs(got-40.26884) > 1e-5 {
		t.Errorf("overhead sun: got %.5f degrees, want 40.26884", got)
	}
	rng := rand.New(rand.NewPCG(9, 1))
	for range 200 {
		facade := rng.Float64() * 2 * math.Pi
		r := facing(facade, 0, 0, 2, 1)
		rise, depth := 0.2+rng.Float64(), 2+4*rng.Float64()
		sun := sunAt((5+80*rng.Float64())*rad, facade+(rng.Float64()-0.5)*160*rad)
		profile, _ := ProfileAngle(sun, r)
		tilt := RedirectTilt(profile, rise, depth)
		// The slats' normal: up, turned toward indoors where the outer edge is up.
		normal := r3.Sub(r3.Scale(math.Cos(tilt), r.Up), r3.Scale(math.Sin(tilt), r.Outward))
		away := r3.Sub(r3.Scale(2*r3.Dot(sun, normal), normal), sun)
		inward := -r3.Dot(away, r.Outward)
		if got := r3.Dot(away, r.Up) / inward; inward <= 0 || math.Abs(got-rise/depth) > near {
			t.Errorf("profile %g degrees: the ray rises by %g, want %g over %g", deg(profile), got, rise, depth)
		}
	}
}
