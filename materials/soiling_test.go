package materials

import (
	"errors"
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

func TestSoilingFactors(t *testing.T) {
	for _, c := range []struct {
		loss   float64
		months int
		want   [12]float64 // by hand: 1 - loss x (whole months since cleaning + 1/2)
		mean   float64     // by hand, from want
	}{
		{0, 6, [12]float64{1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1}, 1},
		{0.04, 1, [12]float64{.98, .98, .98, .98, .98, .98, .98, .98, .98, .98, .98, .98}, .98},
		{0.02, 6, [12]float64{.99, .97, .95, .93, .91, .89, .99, .97, .95, .93, .91, .89}, .94},
		{0.02, 12, [12]float64{.99, .97, .95, .93, .91, .89, .87, .85, .83, .81, .79, .77}, .88},
		// January, June and November: the last interval is two months long.
		{0.02, 5, [12]float64{.99, .97, .95, .93, .91, .99, .97, .95, .93, .91, .99, .97}, 11.46 / 12},
		{0.1, 10, [12]float64{.95, .85, .75, .65, .55, .45, .35, .25, .15, .05, .95, .85}, 6.8 / 12},
	} {
		s, err := NewSoiling(c.loss, c.months)
		if err != nil {
			t.Errorf("%g, %d months: %v", c.loss, c.months, err)
			continue
		}
		const rounding = 1e-12 // a dozen float64 operations on numbers near 1
		for i, f := range s.Factors() {
			if math.Abs(f-c.want[i]) > rounding {
				t.Errorf("%g, %d months: month %d: got %g, want %g", c.loss, c.months, i+1, f, c.want[i])
			}
		}
		if got := s.Mean(); math.Abs(got-c.mean) > rounding {
			t.Errorf("%g, %d months: mean %g, want %g", c.loss, c.months, got, c.mean)
		}
	}
}

// The mean that a soiling is made for is the one it has, for every published
// factor and every interval; the ones out of reach are refused.
func TestSoilingOfMean(t *testing.T) {
	made := 0
	for slope := Vertical; slope <= Horizontal; slope++ {
		for _, want := range MaintenanceFactors[slope] {
			for months := 1; months <= 12; months++ {
				s, err := NewSoilingOfMean(want, months)
				if err != nil {
					t.Errorf("%g, %d months: %v", want, months, err)
					continue
				}
				made++
				if got := s.Mean(); math.Abs(got-want) > 1e-12 || s.CleaningMonths != months {
					t.Errorf("%g, %d months: mean %g with %+v", want, months, got, s)
				}
			}
		}
	}
	if made != 72 { // 3 slopes, 2 places, 12 intervals
		t.Errorf("made %d, want 72", made)
	}
	// By hand: 0.9 over 12 months is a mean age of 6 months, 0.1/6 a month.
	if s, err := NewSoilingOfMean(0.9, 12); err != nil || math.Abs(s.LossPerMonth-0.1/6) > 1e-15 {
		t.Errorf("0.9 over 12 months: got %+v (%v), want 0.1/6 a month", s, err)
	}
	if s, err := NewSoilingOfMean(0.5, 12); err != nil || s.LossPerMonth != 1/12. {
		t.Errorf("0.5 over 12 months: got %+v (%v), want 1/12 a month", s, err)
	}
}

func TestSoilingRefuses(t *testing.T) {
	ofLoss := func(l float64, m int) error { _, err := NewSoiling(l, m); return err }
	ofMean := func(f float64, m int) error { _, err := NewSoilingOfMean(f, m); return err }
	for _, c := range []struct {
		err  error
		want string
	}{
		{ofLoss(0.01, 0), "cleaning_months: got 0, want 1 to 12"},
		{ofLoss(0.01, 13), "cleaning_months: got 13, want 1 to 12"},
		{ofLoss(-0.01, 6), "loss_per_month: got -0.01, want 0 to 1"},
		{ofLoss(2, 1), "loss_per_month: got 2, want 0 to 1"},
		{ofLoss(math.NaN(), 6), "loss_per_month: got NaN, want 0 to 1"},
		{ofLoss(0.2, 6), "loss_per_month x cleaning_months: got 1.2, want at most 1; dirt cannot"},
		{ofMean(0.4, 12), "maintenance_factor: got 0.4, want 0.5 to 1 with cleaning_months = 12"},
		{ofMean(90, 12), "maintenance_factor: got 90, want 0 to 1"},
		{ofMean(0.9, 0), "cleaning_months: got 0"},
		{ofMean(0.9, -3), "cleaning_months: got -3"},
	} {
		var rangeErr *RangeError
		if c.err == nil || !errors.As(c.err, &rangeErr) || !strings.Contains(c.err.Error(), c.want) {
			t.Errorf("got %v, want a RangeError with %q", c.err, c.want)
		}
	}
}

// soilDefect is the largest difference between what leaves the soiled model
// and factor times what leaves the clean one, straight or scattered, on all
// sides.
func soilDefect(clean, dirty BSDF, factor float64) float64 {
	var worst float64
	off := func(got, want float64) { worst = max(worst, math.Abs(got-factor*want)/max(1, factor*want)) }
	for _, side := range []Side{Front, Back} {
		rho, tau := clean.Lambert(side)
		r, s := dirty.Lambert(side)
		off(r, rho)
		off(s, tau)
		for i := range 33 {
			m, th := clean.Delta(side, float64(i)/32)
			n, u := dirty.Delta(side, float64(i)/32)
			off(n, m)
			off(u, th)
		}
	}
	for _, wo := range viewers() {
		for _, wi := range append(viewers(), r3.Vec{X: -wo.X, Y: -wo.Y, Z: wo.Z}) {
			off(Eval(dirty, wo, wi), Eval(clean, wo, wi))
		}
	}
	return worst
}

// Every finish keeps factor of its light in every direction, stays reciprocal,
// and is left alone where nothing is lost. Glossy lobes peak at several
// thousand per steradian, hence the relative difference there.
func TestSoiledScalesEverything(t *testing.T) {
	const rounding = 1e-12 // a few dozen float64 operations
	for _, m := range models(t) {
		if Soiled(m.b, 1) != m.b {
			t.Errorf("%s: nothing lost, but another finish", m.name)
		}
		for _, factor := range []float64{0, 0.3, 0.9} {
			dirty := Soiled(m.b, factor)
			if got := soilDefect(m.b, dirty, factor); got > rounding {
				t.Errorf("%s x %g: off by %.3g", m.name, factor, got)
			}
			if got := asymmetry(newModel(m.name, dirty)); got > rounding {
				t.Errorf("%s x %g: differs by %.3g when the light goes the other way", m.name, factor, got)
			}
			// Twin: another factor is seen.
			if factor > 0 && soilDefect(m.b, Soiled(m.b, factor*1.001), factor) <= rounding {
				t.Errorf("%s x %g: planted defect not seen", m.name, factor)
			}
		}
	}
}

// What is drawn from a soiled finish fits its density and its energy, as in
// TestModels, for the kinds that have parts of each sort.
func TestSoiledSamples(t *testing.T) {
	wo := direction(35, 200)
	tried := 0
	for _, m := range models(t) {
		if m.name != "glossy 5 degrees" && m.name != "cloth" && m.name != "coated glazing" {
			continue
		}
		tried++
		e := gather(newModel(m.name, Soiled(m.b, 0.8)), wo)
		level, z := sidak(3), zOf(3)
		if p := e.fit(); p < level {
			t.Errorf("%s: chi-square p = %.3g, want at least %.3g, seed %d", m.name, p, level, testSeed)
		}
		if got := e.furnaceZ(); got > z {
			t.Errorf("%s: mean weight %.2f standard errors off, want at most %.2f, seed %d", m.name, got, z, testSeed)
		}
		if e.heavier(1.02).furnaceZ() <= z {
			t.Errorf("%s: weight x 1.02: planted defect not seen", m.name)
		}
	}
	if tried != 3 {
		t.Errorf("tried %d finishes, want 3", tried)
	}
}

// The clean finish is not touched.
func TestSoiledLeavesTheBase(t *testing.T) {
	g, err := NewGlossy(0.8, 0.5, 0.2)
	if err != nil {
		t.Fatal(err)
	}
	s := Soiled(g, 0.5)
	if got := s.Gloss(Front).Reflectance; got != 0.2 { // 0.8 x 0.5 x 0.5
		t.Errorf("soiled lobe reflects %g, want 0.2", got)
	}
	if got := g.Gloss(Front).Reflectance; got != 0.4 { // 0.8 x 0.5
		t.Errorf("clean lobe reflects %g, want 0.4", got)
	}
	if s := Soiled(Matte{0.5}, 0); s.Gloss(Back) != nil {
		t.Error("a matte finish has a lobe")
	}
	for _, bad := range []float64{-0.1, 1.1, math.NaN()} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("factor %g passes", bad)
				}
			}()
			Soiled(Matte{0.5}, bad)
		}()
	}
}
