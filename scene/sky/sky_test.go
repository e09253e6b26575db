package sky

import (
	"fmt"
	"maps"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/spatial/r3"
)

// manySkies covers all models and the corners of their coefficients.
func manySkies(t testing.TB) map[string]*Sky {
	t.Helper()
	skies := map[string]*Sky{}
	add := func(name string, s *Sky, err error) {
		if err != nil {
			t.Fatal(name, err)
		}
		skies[name] = s
	}
	for kind := 1; kind <= 15; kind++ {
		s, err := NewCIE(kind, at(50, 135), ByHorizontalIlluminance(10000))
		add("CIE "+string(rune('a'+kind-1)), s, err)
	}
	s, err := NewOvercastTraditional(ByZenithLuminance(5000))
	add("overcast", s, err)
	s, err = NewClearTraditional(at(30, 80), ByZenithLuminance(5000))
	add("clear", s, err)
	s, err = NewClearTraditionalPolluted(at(30, 80), ByZenithLuminance(5000))
	add("polluted", s, err)
	for i, a := range year()[:200] {
		s, _ := NewPerez(at(a[0], float64(i)), a[1], a[2], 10000)
		add("Perez "+string(rune(0x4e00+i)), s, nil)
	}
	return skies
}

// TestLuminanceTable measures the tables against the formula in random
// directions above 1 degree and around the sun, the bound being Luminance's.
func TestLuminanceTable(t *testing.T) {
	const seed = 20260601
	skies := manySkies(t)
	for i, a := range year() {
		if !testing.Short() || i%20 == 0 {
			s, _ := NewPerez(at(a[0], float64(i)), a[1], a[2], 10000)
			skies[fmt.Sprint("made-up year, hour ", i)] = s
		}
	}
	worst, worstName := 0.0, ""
	for i, name := range slices.Sorted(maps.Keys(skies)) {
		s := skies[name]
		rng := rand.New(rand.NewPCG(seed, uint64(i)))
		floor := s.HorizontalIlluminance() / math.Pi / 1000
		off := func(dir r3.Vec) {
			exact := s.LuminanceExact(dir)
			if d := math.Abs(s.Luminance(dir)-exact) / math.Max(exact, floor); d > worst {
				worst, worstName = d, name
			}
		}
		sinLow := math.Sin(degree)
		for range 60 {
			off(at(math.Acos(sinLow+rng.Float64()*(1-sinLow))/degree, 360*rng.Float64()))
			low := at(89-rng.Float64(), 360*rng.Float64())
			off(low)
			near := at(zenithOf(s.sun)/degree+10*(rng.Float64()-0.5), azimuthOf(s.sun)/degree+10*(rng.Float64()-0.5))
			if near.Z > sinLow {
				off(near)
			}
		}
		off(at(0, 0))
		off(at(89, 0))
	}
	t.Logf("largest error %.1e (%s)", worst, worstName)
	if worst > 1e-3 {
		t.Errorf("seed %d: table is off by %.2e of the formula (%s), want < 1e-3", seed, worst, worstName)
	}
}

func TestLuminanceTableKeepsTheIlluminance(t *testing.T) {
	// The last degree included: integral of the table against that of the formula,
	// both in steps of half a degree, so that only the table differs.
	for name, s := range manySkies(t) {
		if len(name) > 8 { // the Perez skies would take long
			continue
		}
		var table, formula float64
		for z := 0.25; z < 90; z += 0.5 {
			for a := 1.0; a < 360; a += 2 {
				dir := at(z, a)
				w := math.Cos(z*degree) * math.Sin(z*degree)
				table += w * s.Luminance(dir)
				formula += w * s.LuminanceExact(dir)
			}
		}
		if !within(table, formula, 1e-4) {
			t.Errorf("%s: table %g, formula %g, want within 1e-4", name, table, formula)
		}
	}
}

func TestLuminanceOutsideTheSky(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for name, s := range manySkies(t) {
		for _, dir := range []r3.Vec{{Z: -1}, {X: 1, Z: -1e-9}, {Z: nan}, {X: nan, Y: nan, Z: nan}} {
			if got := s.Luminance(dir); got != 0 {
				t.Errorf("%s: Luminance(%v) = %g, want 0", name, dir, got)
			}
			if got := s.LuminanceExact(dir); got != 0 {
				t.Errorf("%s: LuminanceExact(%v) = %g, want 0", name, dir, got)
			}
		}
		for _, dir := range []r3.Vec{{X: nan, Z: 0.5}, {Z: inf}, {X: inf, Z: 0.1}, {X: -inf, Z: 0.1}, {Z: 1e300}} {
			s.Luminance(dir) // must not panic
		}
		if got := s.Luminance(r3.Vec{X: 1}); !(got >= 0) {
			t.Errorf("%s: at the horizon: %g", name, got)
		}
	}
}

func TestGaussRule(t *testing.T) {
	x, w := make([]float64, len(gaussNodes)), make([]float64, len(gaussNodes))
	quad.Legendre{}.FixedLocations(x, w, -1, 1)
	for i := range x {
		if math.Abs(x[i]-gaussNodes[i]) > 1e-15 || math.Abs(w[i]-gaussWeights[i]) > 1e-15 {
			t.Errorf("node %d: got %g, %g, want %g, %g", i, gaussNodes[i], gaussWeights[i], x[i], w[i])
		}
	}
	for power := range 48 { // exact up to 2n-1 = 47
		var sum float64
		for i, x := range gaussNodes {
			sum += gaussWeights[i] * math.Pow(x, float64(power))
		}
		want := 0.0 // exact: integral of an odd power
		if power%2 == 0 {
			want = 2 / float64(power+1)
		}
		if math.Abs(sum-want) > 1e-14 {
			t.Errorf("power %d: got %g, want %g", power, sum, want)
		}
	}
}

// TestHorizontalIntegralBySunPosition compares the rings around the sun with a
// quadrature in zenith angle and azimuth, from zenith to below the horizon.
func TestHorizontalIntegralBySunPosition(t *testing.T) {
	for _, sunZenith := range []float64{0, 0.01, 20, 60, 89.9, 90, 90.1, 97, 130, 179.9, 180} {
		if testing.Short() && math.Mod(sunZenith, 10) != 0 {
			continue
		}
		s := newSky(perezShape(6, 0.2, math.Min(sunZenith, 90)*degree), at(sunZenith, 40), 1)
		want := illuminance(s, r3.Vec{Z: 1})
		// The midpoint rule of half a degree errs by 1e-4 at the cusp.
		if got := s.HorizontalIlluminance(); !within(got, want, 2e-4) {
			t.Errorf("sun at %g: got %.6f, want %.6f", sunZenith, got, want)
		}
	}
}

func BenchmarkLuminance(b *testing.B) {
	s, _ := NewPerez(at(45, 135), 3.5, 0.2, 10000)
	var dirs [1024]r3.Vec
	rng := rand.New(rand.NewPCG(7, 7))
	for i := range dirs {
		dirs[i] = at(90*rng.Float64(), 360*rng.Float64())
	}
	b.ResetTimer()
	var sum float64
	for i := 0; b.Loop(); i++ {
		sum += s.Luminance(dirs[i&1023])
	}
	_ = sum
}

func BenchmarkLuminanceExact(b *testing.B) {
	s, _ := NewPerez(at(45, 135), 3.5, 0.2, 10000)
	dir := at(60, 100)
	var sum float64
	for b.Loop() {
		sum += s.LuminanceExact(dir)
	}
	_ = sum
}
