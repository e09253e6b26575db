package daylight

import (
	"math"
	"strconv"
	"strings"
	"testing"
)

// Values between bounds, on the synthetic year: the share of hours from 100 to
// 3000 lx is the sum of two rows of the reference, and without an upper bound
// the share is DA.
func TestTimeWithinOnSyntheticYear(t *testing.T) {
	want := wanted(t)
	y := synthYear()
	p := Plane{E: y.e}
	hours := everyDay.Occupied()
	row := func(quantity string) []float64 {
		var v []float64
		for _, f := range strings.Fields(want[quantity]) {
			x, err := strconv.ParseFloat(f, 64)
			if err != nil {
				t.Fatal(err)
			}
			v = append(v, x)
		}
		if len(v) != 6 {
			t.Fatalf("no reference row %q", quantity)
		}
		return v
	}
	low, high := row("UDI 100-300 point 0,10,20,30,40,49"), row("UDI 300-3000 point 0,10,20,30,40,49")
	da := row("DA300 point 0,10,20,30,40,49 (fraction)")
	for i, s := range []int{0, 10, 20, 30, 40, 49} {
		b := p.TimeWithin(s, hours, 100, 3000)
		if math.Abs(b.Estimate-low[i]-high[i]) > 1e-6 || b.Surely != b.Estimate || b.Possibly != b.Estimate { // six decimals, two rows
			t.Errorf("point %d: %+v, want %.6f", s, b, low[i]+high[i])
		}
		if b := p.TimeWithin(s, hours, 300, math.Inf(1)); math.Abs(b.Estimate-da[i]) > 5e-7 {
			t.Errorf("point %d without upper bound: %.6f, want %.6f", s, b.Estimate, da[i])
		}
		// Twin: one bound moved by a tenth.
		if b := p.TimeWithin(s, hours, 110, 3000); i == 3 && math.Abs(b.Estimate-low[i]-high[i]) <= 1e-6 {
			t.Error("the lower bound does not matter")
		}
	}
	// 23 of 50 points reach 300 lx in half of the hours: the reference's sDA.
	if b := p.SensorsWithin(hours, 300, math.Inf(1), 0.5); b.Estimate != 23.0/50 {
		t.Errorf("share of points: %+v, want 23/50", b)
	}
}

func TestTimeWithinBrackets(t *testing.T) {
	nan := float32(math.NaN())
	p := Plane{E: [][]float32{{95, 100, 105, 300, 500, nan}}, SE: [][]float32{{3, 3, 3, 0, 3, 0}}, Z: 2}
	// By hand, within 100 to 400: surely 300; as computed 100, 105, 300; possibly
	// 95, 100, 105, 300 and the unknown one.
	got := p.TimeWithin(0, Hours{0, 1, 2, 3, 4, 5}, 100, 400).Scale(6)
	if got.Surely != 1 || got.Estimate != 3 || math.Abs(got.Possibly-5) > 1e-12 {
		t.Errorf("%+v, want 1, 3, 5 of 6", got)
	}
	if b := p.SensorsWithin(nil, 0, 1, 0.5); !math.IsNaN(b.Estimate) {
		t.Errorf("no hours: %+v", b)
	}
}

// London's median sky of 14,100 lx asks for 2.13 and 0.71 % at the lowest
// level, EN 17037:2018 annex A, from memory.
func TestProvideByFactor(t *testing.T) {
	df := []float64{0.030, 0.0214, 0.0212, 0.008}
	r := ProvideByFactor(df, make([]float64, 4), 3, 14100, ProvisionLevels[0])
	if r.Target.Estimate != 0.5 || r.Minimum.Estimate != 1 || math.Abs(r.MinimumDF-0.0071) > 5e-5 {
		t.Errorf("%+v, want half and all of the plane", r)
	}
	// An error of 0.0001, three wide, reaches across 0.02128 from both sides.
	r = ProvideByFactor(df, []float64{1e-4, 1e-4, 1e-4, 1e-4}, 3, 14100, ProvisionLevels[0])
	if r.Target.Surely != 0.25 || r.Target.Possibly != 0.75 {
		t.Errorf("%+v, want a bracket of one and three of four", r.Target)
	}
	roof := ProvideByFactor(df, make([]float64, 4), 3, 14100, RoofProvisionLevels[0])
	if roof.Target.Estimate != 0.5 || roof.Level.TargetShare != 0.95 || roof.Minimum.Estimate < roof.Level.MinimumShare {
		t.Errorf("roof: %+v", roof)
	}
}
