package sky

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

func TestPerez1993Coefficients(t *testing.T) {
	for i, row := range readTable(t, "03b_perez1993_sky_coefficients.csv", 8) {
		k := perez1993[i]
		for key, got := range map[string][4]float64{"a": k.a, "b": k.b, "c": k.c, "d": k.d, "e": k.e} {
			for j, want := range row.numbers(t, key+"1", key+"2", key+"3", key+"4") {
				if got[j] != want { // Perez, Seals & Michalsky (1993), table 1
					t.Errorf("class %d, %s%d: got %g, want %g", i+1, key, j+1, got[j], want)
				}
			}
		}
	}
}

func TestPerez1993Integrals(t *testing.T) {
	for _, row := range readTable(t, "03c_perez1993_checks_integrals.csv", 19) {
		v := row.numbers(t, "bin", "eps", "Delta", "sun_zenith_deg")
		sh := perezShape(int(v[0]), v[2], v[3]*degree)
		for i, got := range []float64{sh.a, sh.b, sh.c, sh.d, sh.e} {
			key := "abcde"[i : i+1]
			if want := row.number(t, key); math.Abs(got-want) > 6e-9 { // 8 decimals given
				t.Errorf("%v: %s: got %.9f, want %.8f", v, key, got, want)
			}
		}
		// 8 digits given; 1e-5 is what horizontalIntegral promises.
		if got, want := sh.horizontalIntegral(v[3]*degree), row.number(t, "I_horiz_unnormalised"); !within(got, want, 1e-5) {
			t.Errorf("%v: integral: got %.8f, want %.7f (%.1e)", v, got, want, got/want-1)
		}
		const azimuth = 200
		s, clamp := NewPerez(at(v[3], azimuth), v[1], v[2], 10000)
		if clamp != (Clamp{}) {
			t.Errorf("%v: clamped: %+v", v, clamp)
		}
		if got := s.HorizontalIlluminance(); !within(got, 10000, 1e-12) {
			t.Errorf("%v: horizontal illuminance: got %g, want 10000", v, got)
		}
		if got, want := s.ZenithLuminance()/10000, row.number(t, "Lz_over_Edv_per_sr"); !within(got, want, 1e-5) {
			t.Errorf("%v: zenith: got %.7f, want %.7f", v, got, want)
		}
		if testing.Short() {
			continue
		}
		for turn, key := range map[float64]string{0: "Ev_facing_sun_over_Edv", 90: "Ev_90deg_over_Edv", 180: "Ev_180deg_over_Edv"} {
			want := row.number(t, key)
			// Midpoint rule of half a degree: 1e-3 at the steep horizon.
			if got := illuminance(s, at(90, azimuth+turn)) / 10000; !within(got, want, 1e-3) {
				t.Errorf("%v: %s: got %.6f, want %.6f", v, key, got, want)
			}
		}
	}
}

func TestPerez1993Points(t *testing.T) {
	for _, row := range readTable(t, "03d_perez1993_checks_points.csv", 209) {
		v := row.numbers(t, "bin", "eps", "Delta", "sun_zenith_deg", "zeta_deg", "azimuth_from_sun_deg")
		const azimuth = 310
		s, clamp := NewPerez(at(v[3], azimuth), v[1], v[2], 1)
		dir := at(v[4], azimuth+v[5])
		if got, want := angleBetween(dir, s.Sun())/degree, row.number(t, "gamma_deg"); math.Abs(got-want) > 6e-6 {
			t.Errorf("%v: gamma: got %.6f, want %.5f", v, got, want)
		}
		if got, want := s.LuminanceExact(dir), row.number(t, "Lv_over_Edv_per_sr"); !within(got, want, 1e-5) || clamp.Clamped {
			t.Errorf("%v: luminance: got %.8f, want %.8f, %+v", v, got, want, clamp)
		}
		// 7 decimals given. Where the angle to the sun is 0, the other route
		// has acos(1 - 2^-52) = 2.1e-8 rad, which the slope c d turns into l.
		tolerance := 6e-8
		if v[4] == v[3] && v[5] == 0 {
			tolerance += 2.2e-8 * math.Abs(s.shape.c*s.shape.d) * s.shape.gradationAt(dir.Z)
		}
		if got, want := s.LuminanceExact(dir)/s.scale, row.number(t, "l_unnormalised"); math.Abs(got-want) > tolerance {
			t.Errorf("%v: l: got %.8f, want %.7f", v, got, want)
		}
	}
}

// TestPerez1993Clamp demands that exactly the brightnesses outside the range
// found by the scan are moved, to its border.
func TestPerez1993Clamp(t *testing.T) {
	// Class 1's clearness does not enter; one clearness stands for each class.
	clearness := [8]float64{1.03, 1.15, 1.4, 1.7, 2.4, 3.6, 5.3, 8}
	for _, row := range readTable(t, "03f_perez1993_physical_range.csv", 48) {
		v := row.numbers(t, "bin", "sun_zenith_deg", "Delta_from(l>=0,b<=0,d<=0)", "Delta_to(scan 0.01..0.60)")
		for i := 1; i <= 60; i++ {
			asked := float64(i) / 100
			s, clamp := NewPerez(at(v[1], 0), clearness[int(v[0])-1], asked, 1000)
			inside := asked > v[2]-1e-9 && asked < v[3]+1e-9
			if clamp.Clamped == inside {
				t.Errorf("class %g, sun at %g, brightness %g: clamp %+v, physical range %g to %g", v[0], v[1], asked, clamp, v[2], v[3])
			}
			if !clamp.Clamped {
				continue
			}
			border := v[2]
			if asked > v[3] {
				border = v[3]
			}
			// The scan's own step is 0.01.
			if math.Abs(clamp.To-border) > 0.01 || clamp.From != asked || clamp.Uniform {
				t.Errorf("class %g, sun at %g, brightness %g: moved to %g, want within 0.01 of %g", v[0], v[1], asked, clamp.To, border)
			}
			if f := faults(perezShape(int(v[0]), clamp.To, v[1]*degree), v[1]*degree); f != (Clamp{}) {
				t.Errorf("class %g, sun at %g, moved to %g: still unphysical: %+v", v[0], v[1], clamp.To, f)
			}
			if got := s.HorizontalIlluminance(); !within(got, 1000, 1e-12) {
				t.Errorf("illuminance after clamping: got %g, want 1000", got)
			}
		}
	}
}

// TestNewPerezEverywhere sends every corner of the domain, and beyond, through
// the model.
func TestNewPerezEverywhere(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	for _, sun := range []r3.Vec{at(0, 0), at(45, 90), at(89, 10), at(90, 0), at(95, 0), at(180, 0), {}, {X: nan}, {X: inf}} {
		for _, clearness := range []float64{-1, 0.9, 1, 1.065, 1.2, 1.4, 1.7, 2.4, 3.6, 5.3, 8, 1e9, inf, nan} {
			for _, brightness := range []float64{-1, 0, 0.001, 0.05, 0.2, 0.6, 3, inf, nan} {
				s, clamp := NewPerez(sun, clearness, brightness, 5000)
				if got := s.HorizontalIlluminance(); !within(got, 5000, 1e-9) {
					t.Fatalf("sun %v, clearness %g, brightness %g: illuminance %g, want 5000; %+v", sun, clearness, brightness, got, clamp)
				}
				if (!(brightness >= 0 && brightness <= 0.6)) != clamp.OutOfRange {
					t.Errorf("brightness %g: %+v", brightness, clamp)
				}
				for z := 0.0; z < 90; z += 8 {
					for a := 0.0; a < 360; a += 45 {
						l := s.Luminance(at(z, a))
						if !(l >= 0) || math.IsInf(l, 1) {
							t.Fatalf("sun %v, clearness %g, brightness %g: luminance %g at %g, %g", sun, clearness, brightness, l, z, a)
						}
					}
				}
			}
		}
	}
	for _, e := range []float64{0, -5, nan, inf} {
		s, _ := NewPerez(at(45, 90), 1.2, 0.2, e)
		if got := s.Luminance(r3.Vec{Z: 1}); got != 0 {
			t.Errorf("diffuse illuminance %g: luminance %g, want 0", e, got)
		}
	}
}

// year returns one made-up sky for each of 4,400 hours.
func year() (args [][3]float64) {
	for i := range 4400 {
		x := math.Mod(float64(i)*0.6180339887, 1) // golden ratio, spread evenly
		y := math.Mod(float64(i)*0.7548776662, 1)
		args = append(args, [3]float64{20 + 69*x, math.Exp(2.3 * y), 0.03 + 0.4*math.Mod(x+y, 1)})
	}
	return args
}

func BenchmarkNewPerezYear(b *testing.B) {
	args := year()
	clamped := 0
	for b.Loop() {
		clamped = 0
		for _, a := range args {
			if _, c := NewPerez(at(a[0], 135), a[1], a[2], 10000); c.Clamped {
				clamped++
			}
		}
	}
	b.ReportMetric(float64(clamped)/float64(len(args)), "clamped/sky")
}

func BenchmarkNewPerez(b *testing.B) {
	sun := at(45, 135)
	for b.Loop() {
		NewPerez(sun, 3.5, 0.2, 10000)
	}
}
