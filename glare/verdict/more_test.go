package verdict

import (
	"math"
	"testing"

	"squint/glare/daylight"
)

func exactly(x float64) Bracket { return of3(x, x, x) }

// Thresholds as quoted: EN 17037:2018, "medium" of the view out in public
// summaries, the others from memory.
func TestOutlookLevels(t *testing.T) {
	minimum, _ := ViewByName("minimum")
	high, ok := ViewByName("high")
	if !ok || minimum.AreaShare != 0.75 {
		t.Fatal("levels of the view out are missing")
	}
	for _, c := range []struct {
		name      string
		l         ViewLevel
		deg, by   float64
		layers    int
		landscape bool
		want      Outcome
	}{
		// 1 m at 2 m, 28.07 degrees, and 4 m at 4 m, 53.13: just above the second
		// and just below the third level; reference sheet, section 7.
		{"1 m at 2 m", ViewLevels[1], 28.0725, 0, 2, true, Met},
		{"4 m at 4 m", high, 53.1301, 0.5, 3, true, NotMet},
		{"at the edge", high, 53.8, 0.25, 3, true, Undecided},
		{"two layers", high, 90, 0, 2, true, NotMet},
		{"sky and ground alone", minimum, 90, 0, 2, false, NotMet},
		{"landscape alone", minimum, 14, 0, 1, true, Met},
	} {
		if got := c.l.Holds(c.deg, c.by, c.layers, c.landscape); got != c.want {
			t.Errorf("%s: %s, want %s", c.name, got, c.want)
		}
	}
	if v := ViewOut("Office", minimum, exactly(0.75)); v.Outcome != Met {
		t.Errorf("75 %% of the area: %s", v.Outcome)
	}
	l, _ := SunByName("minimum")
	for hours, want := range map[float64]Outcome{1.4: NotMet, 1.49: Undecided, 1.6: Met} {
		if v := Sunlight("window 1", l, "21 March", 10, hours, 0.02); v.Outcome != want || v.Unit != "h" {
			t.Errorf("%g h: %s, want %s", hours, v.Outcome, want)
		}
	}
	if v := Sunlight("Office", l, "21 March", 10, math.NaN(), 0); v.Outcome != Undecided || v.Amount() != "none" {
		t.Errorf("without a point: %s, %s", v.Outcome, v.Amount())
	}
}

// EN 14501:2005, classes of glare control, from memory of the table; the
// transmittances are made up, one in each cell's interior or on its edge.
func TestClothClass(t *testing.T) {
	for _, c := range []struct {
		straight, scattered float64
		want                int
	}{
		{0.2, 0.01, 0}, {0.11, 0.5, 0}, {0.10, 0.03, 1}, {0.07, 0.05, 0},
		{0.05, 0.01, 3}, {0.03, 0.03, 2}, {0.03, 0.05, 1}, {0.01, 0.08, 1},
		{0, 0.01, 4}, {0, 0.02, 3}, {0, 0.04, 2}, {0, 0.3, 2},
	} {
		if got := ClothClass(c.straight, c.scattered); got != c.want {
			t.Errorf("straight %g, scattered %g: class %d, want %d", c.straight, c.scattered, got, c.want)
		}
	}
	if v := ClothProtection("window 1", 2, 2); v.Outcome != Met {
		t.Errorf("class 2 of 2: %s", v.Outcome)
	}
	if v := ClothProtection("window 1", math.NaN(), 1); v.Outcome != NotMet {
		t.Errorf("without a cloth: %s", v.Outcome)
	}
}

func TestSpatialAutonomy(t *testing.T) {
	view := func(lo, mid, hi float64) GlareHours { return GlareHours{Share: of3(lo, mid, hi)} }
	views := []GlareHours{view(0, 0.01, 0.02), view(0.05, 0.05, 0.05), view(0.04, 0.06, 0.07), view(0.2, 0.2, 0.2)}
	got := DefaultAutonomy.SpatialAutonomy(views)
	if got != of3(0.5, 0.5, 0.75) { // by hand: two surely, the third possibly
		t.Errorf("%+v, want 0.5, 0.5, 0.75", got)
	}
	if v := GlareAutonomy("all", DefaultAutonomy, DefaultAutonomy.SpatialAutonomy(nil), 0.5); v.Outcome != Undecided {
		t.Errorf("no views: %s", v.Outcome)
	}
}

func TestMoreTexts(t *testing.T) {
	factor := daylight.FactorProvision{Level: daylight.ProvisionLevels[0], MedianDiffuseLx: 14100, TargetDF: 0.0213, MinimumDF: 0.0071, Target: exactly(0.6), Minimum: of3(0.94, 0.95, 0.97)}
	roof := daylight.ProvisionResult{Level: daylight.RoofProvisionLevels[0], Target: exactly(0.96), Minimum: exactly(1)}
	own := Limit{Metric: "illuminance", Unit: " lx", Places: "sensors", Hours: "the hours in use", Low: 300, High: 2000, TimeShare: 0.5, PlaceShare: 0.8}
	series := daylight.Plane{E: [][]float32{{500, 100}, {100, 100}}}
	for _, c := range []struct {
		v    Verdict
		o    Outcome
		text string
	}{
		{ProvisionByFactor("Office", factor), Undecided,
			"Office: a daylight factor of 2.1 % on 60 % of the plane (at least 50 % asked), 0.7 % on 95 % (94 to 97) of it (at least 95 %), undecided: the limit lies within the error of the sensors."},
		{Provision("Hall", roof), Met,
			"Hall: 300 lx for 50 % of the daylight hours on 96 % of the plane (at least 95 % asked)."},
		{ClearSky("Office", []string{"9 h", "15 h"}, []Bracket{exactly(0.8), exactly(0.5)}, 300, 3000, 0.55), NotMet,
			"Office: 300 to 3,000 lx on 80 % at 9 h, on 50 % at 15 h (at least 55 % of the plane asked)."},
		{ViewOut("Office", ViewLevels[1], exactly(0.8)), Met,
			"Office: the view out is had from 80 % of the area (at least 75 % asked)."},
		{Sunlight("window 2", SunLevels[1], "21 March", 11, 2.9, 0.1), Undecided,
			"window 2: 2.9 h of sun on 21 March (at least 3 h asked), undecided: the hours are known to within some minutes only."},
		{GlareAutonomy("12 views", DefaultAutonomy, exactly(0.5), 0.6), NotMet,
			"12 views: DGP up to 0.40 in 95 % of the usage time at 50 % of the views (at least 60 % asked)."},
		{ClothProtection("window 1", 1, 2), NotMet,
			"window 1: cloth of class 1 (at least 2 asked)."},
		{own.Judge("Office", series, daylight.Hours{0, 1}), NotMet,
			"Office: illuminance of 300 to 2,000 lx in 50 % of the hours in use at 50 % of the sensors (at least 80 % asked)."},
	} {
		if c.v.Outcome != c.o || c.v.Text != c.text {
			t.Errorf("%s: %q\nwant %s: %q", c.v.Outcome, c.v.Text, c.o, c.text)
		}
		if c.v.Source == "" || c.v.Criterion == "" || c.v.Subject == "" {
			t.Errorf("%q: source, criterion or subject missing: %+v", c.text, c.v)
		}
	}
	// The moment that fails decides.
	if v := ClearSky("Office", []string{"9 h", "15 h"}, []Bracket{exactly(0.8), exactly(0.5)}, 300, 3000, 0.55); v.Estimate != 0.5 {
		t.Errorf("decides: %g", v.Estimate)
	}
}
