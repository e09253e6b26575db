package weather

import (
	"math"
	"strings"
	"testing"
)

func TestEfficacyDecidesTheUnit(t *testing.T) {
	nan := math.NaN()
	for _, test := range []struct {
		name                        string
		lmPerW                      float64 // of the column as written
		zenith                      float64 // share of a uniform sky's luminance, as written
		global, zenithScale, median float64
		words                       string
	}{
		// Scales by construction of the row; 110 lm/W is an ordinary efficacy.
		{"lx", 110, 1, 1, 1, 110, "in lx as stated"},
		{"hundreds of lx", 1.1, 0.1, 100, 10, 110, "units of 100 lx"},
		{"klx", 0.11, 0.001, 1000, 1000, 110, "units of 1000 lx"},
		{"ten times too much", 1100, 1, 0.1, 1, 110, "units of 0.1 lx"},
		{"between the bounds", 25, 1, nan, 1, nan, "not plausible"},
		{"zero", 0, 0, nan, nan, nan, "not plausible"},
		{"missing", nan, nan, nan, nan, nan, "no illuminance columns"},
	} {
		y := synthYear(synthSite, -0.5)
		for i := range y.Records {
			r := &y.Records[i]
			r.GlobalLx, r.DirectLx, r.DiffuseLx = test.lmPerW*r.GHI, test.lmPerW*r.DNI, test.lmPerW*r.DHI
			r.ZenithCdM2 = test.zenith * 110 * r.DHI / math.Pi
		}
		e := y.Efficacy()
		for _, p := range [][2]float64{{e.GlobalScale, test.global}, {e.DirectScale, test.global}, {e.DiffuseScale, test.global},
			{e.ZenithScale, test.zenithScale}, {e.GlobalLmPerW, test.median}} {
			if math.IsNaN(p[0]) != math.IsNaN(p[1]) || math.Abs(p[0]-p[1]) > 1e-9*math.Abs(p[1]) {
				t.Errorf("%s: got %+v", test.name, e)
				break
			}
		}
		if !strings.Contains(e.Text, test.words) {
			t.Errorf("%s: %q, want %q in it", test.name, e.Text, test.words)
		}
	}
}
