package glare

import (
	"math"
	"testing"

	"squint/scene/view"
)

// One small source: the table of 06c times its illuminance. A disc 0.2
// degrees wide spreads theta by 0.1 degrees either way.
func TestVeilOfSmallSource(t *testing.T) {
	f := NewField(fisheye(t, view.Equidistant, 180, 64))
	const omega = 1e-5
	lum := make([]float32, 64*64)
	for _, r := range table(t, "06c_disability_glare_CIE146.csv", 50) {
		theta := r.num("theta_deg")
		d := Disc{Dir: polar(0.7, theta*deg), OmegaSr: omega, Luminance: 1e7}
		got := VeilOf(f, lum, []Source{{Dir: d.Dir, OmegaSr: omega, MeanLuminance: 1e7, Disc: true}}, r.num("age_years"), r.num("pigmentation_p"))
		if theta < 1 || theta >= 90 {
			if got.Luminance != 0 && theta < 1 {
				t.Errorf("%g degrees: got %g, want nothing", theta, got.Luminance)
			}
			if theta < 1 && math.Abs(got.LeftOutLux-d.illuminance()) > 1e-9 {
				t.Errorf("%g degrees: %g lx left out, want %g", theta, got.LeftOutLux, d.illuminance())
			}
			continue
		}
		want := r.num("Lveil_over_Eglare_CIE_general") * d.illuminance()
		near(t, "veil", got.Luminance, want, 1e-7*want) // 8 digits printed
	}
}

// general is the general disability glare equation of CIE 146:2002 (from memory),
// for an observer of 40 years with brown eyes (p = 0.5); theta in degrees:
// 10/theta^3 + (5/theta^2 + 0.1 p/theta) (1 + (A/62.5)^4) + 0.0025 p.
func general(theta float64) float64 {
	age := 1 + math.Pow(40/62.5, 4)
	return 10/(theta*theta*theta) + (5/(theta*theta)+0.1*0.5/theta)*age + 0.0025*0.5
}

// A wide source over pixels against the closed integral over a ring: L times
// the integral of f(theta) cos theta 2 pi sin theta.
func TestVeilOfRing(t *testing.T) {
	const size = 512
	f := NewField(fisheye(t, view.Equidistant, 180, size))
	lum := make([]float32, size*size)
	for i, d := range f.Dir {
		if a := math.Acos(math.Min(d.X, 1)); f.Inside[i] && a > 20*deg && a < 40*deg {
			lum[i] = 5000
		}
	}
	r := Evaluate(f, lum, nil, Options{}, nil)
	got := VeilOf(f, lum, r.Sources, 40, 0.5)
	want, n := 0.0, 20000
	for i := range n {
		a := (20 + 20*(float64(i)+0.5)/float64(n)) * deg
		want += 5000 * general(a/deg) * math.Cos(a) * 2 * math.Pi * math.Sin(a) * 20 * deg / float64(n)
	}
	// Pixels are taken whole by their centre: the ring's edges move by at most
	// half a pixel's diagonal, each edge's integrand over it.
	h := math.Sqrt2 / 2 * math.Pi / size
	tol := 0.0
	for _, a := range []float64{20 * deg, 40 * deg} {
		tol += 5000 * general((a-h)/deg) * math.Cos(a-h) * 2 * math.Pi * math.Sin(a+h) * h
	}
	if math.Abs(got.Luminance-want) > tol || got.LeftOutLux != 0 {
		t.Errorf("got %g, want %g +- %g", got.Luminance, want, tol)
	}
	// The twin: forgetting the cosine must not pass.
	bare := *f
	bare.CosTheta = make([]float64, len(f.CosTheta))
	for i := range bare.CosTheta {
		bare.CosTheta[i] = 1
	}
	if v := VeilOf(&bare, lum, r.Sources, 40, 0.5).Luminance; math.Abs(v-want) <= tol {
		t.Errorf("without the cosine %g passed as %g +- %g", v, want, tol)
	}
}
