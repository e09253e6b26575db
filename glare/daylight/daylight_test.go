package daylight

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

func TestCalendar(t *testing.T) {
	office := Calendar{FirstWeekday: 5, Days: [7]bool{true, true, true, true, true}, FromH: 8, ToH: 18} // 2022 begins on a Saturday
	saving := everyDay
	saving.SavingFrom, saving.SavingTo = &MonthDay{3, 27}, &MonthDay{10, 30}
	south := everyDay
	south.SavingFrom, south.SavingTo = &MonthDay{10, 2}, &MonthDay{4, 3}
	holiday := office
	holiday.Holidays = []MonthDay{{1, 3}, {2, 30}, {13, 1}} // a Monday; two days that do not exist
	late := Calendar{FirstWeekday: 0, Days: [7]bool{true}, FromH: 0, ToH: 1, SavingFrom: &MonthDay{1, 1}, SavingTo: &MonthDay{12, 31}}
	for _, c := range []struct {
		name   string
		got    Hours
		n      int
		first  int
		origin string
	}{
		{"office 2022", office.Occupied(), 260 * 10, 2*24 + 8, "exact: 2022 has 260 days Monday to Friday; the first is 3 January"},
		{"holiday", holiday.Occupied(), 259 * 10, 3*24 + 8, "exact: one day less"},
		{"clock", everyDay.Clock(8, 18), 3650, 8, "exact: IES LM-83-12, 365 * 10"},
		{"clock is not occupancy", office.Clock(8, 18), 3650, 8, "exact: all days"},
		{"saving", saving.Clock(8, 18), 3650, 8, "exact: the period moves by an hour, its length stays"},
		{"half hours", Calendar{Days: everyDay.Days, FromH: 8.5, ToH: 9.5}.Occupied(), 365, 8, "exact: the middle of 8 to 9 counts, that of 9 to 10 does not"},
		{"past midnight", late.Occupied(), 53, 6*24 + 23, "exact: Monday 0 to 1 h on clocks one ahead is Sunday 23 to 24 h, 52 times; on Monday 31 December the clock goes back and shows it again"},
	} {
		if len(c.got) != c.n || c.got[0] != c.first {
			t.Errorf("%s: %d hours from %d, want %d from %d (%s)", c.name, len(c.got), c.got[0], c.n, c.first, c.origin)
		}
		set := 0
		for i, in := range c.got.Mask(HoursPerYear) {
			if in {
				if c.got[set] != i {
					t.Fatalf("%s: hour %d in the mask only", c.name, i)
				}
				set++
			}
		}
		if set != c.n {
			t.Errorf("%s: %d hours in the mask", c.name, set)
		}
		if !slices.IsSorted(c.got) {
			t.Errorf("%s: not sorted", c.name)
		}
	}
	if got := saving.ClockShiftH(85); got != 1 { // 27 March
		t.Errorf("27 March: shift %g", got)
	}
	if got := saving.ClockShiftH(302); got != 0 { // 30 October
		t.Errorf("30 October: shift %g", got)
	}
	if south.ClockShiftH(0) != 1 || south.ClockShiftH(180) != 0 || south.ClockShiftH(300) != 1 {
		t.Error("southern summer time")
	}
	// In summer 8 h on the clock is 7 h standard time.
	if h := saving.Clock(8, 18); !slices.Contains(h, 180*24+7) || slices.Contains(h, 180*24+17) {
		t.Error("summer clock hours are not an hour earlier")
	}
}

// TestSteps: quarters of hours are in use by themselves.
func TestSteps(t *testing.T) {
	c := Calendar{PerHour: 4, FirstWeekday: 5, Days: [7]bool{6: true}, FromH: 8.5, ToH: 9.75, Holidays: []MonthDay{{1, 9}},
		SavingFrom: &MonthDay{1, 16}, SavingTo: &MonthDay{1, 17}}
	// 2 January is the first Sunday; the 9th is a holiday, and on the 16th the
	// clock is an hour ahead. From 8:30 to 9:45 there are five quarters.
	got := c.Occupied()
	var want Hours
	for _, first := range []int{4*(1*24+8) + 2, 4*(15*24+7) + 2} {
		for k := range 5 {
			want = append(want, first+k)
		}
	}
	if len(got) != 51*5 || !slices.Equal(got[:10], want) || c.InHours(len(got)) != 51*1.25 {
		t.Errorf("got %d steps, %g h, from %v; want 255 from %v", len(got), c.InHours(len(got)), got[:10], want)
	}
	if n := len(c.Clock(8, 18)); n != 4*3650 || len(got.Mask(c.Steps())) != 4*HoursPerYear {
		t.Errorf("got %d quarters from 8 to 18 h, want 14600", n)
	}
	if day, clock := c.ClockAt(4*(15*24+23) + 3); day != 16 || clock != 0.875 {
		t.Errorf("23:45 on 16 January: got day %d, %g h, want 16 and 0.875", day, clock)
	}
	for _, n := range []int{1, 4, 5} { // five steps are 5, 1.25 and 1 h
		r := ASE([][]float32{{2, 2, 2, 2, 2}}, Hours{0, 1, 2, 3, 4}, Exposure{ThresholdLx: 1, HoursLimit: 1}, n)
		if want := 5 / float64(n); r.SensorHours[0] != want || r.Hours != want || (r.Share.Estimate == 1) != (want > 1) {
			t.Errorf("%d steps an hour: got %+v, want %g h of sun, too much above 1", n, r, want)
		}
	}
}

func TestSunHighest(t *testing.T) {
	for _, c := range []struct {
		alt  []float64
		n    int
		want Hours
	}{
		{[]float64{0.1, 0.9, 0.5, 0.5, 0.5}, 3, Hours{1, 2, 3}}, // ties: the earlier
		{[]float64{0.1}, 5, Hours{0}},
		{[]float64{0.1}, -1, Hours{}},
		{nil, 3, Hours{}},
	} {
		if got := SunHighest(c.alt, c.n); !slices.Equal(got, c.want) {
			t.Errorf("%v, %d: %v, want %v", c.alt, c.n, got, c.want)
		}
	}
}

func TestHourRules(t *testing.T) {
	for metric, want := range map[string]Base{ // the sources named in HourRules
		"DA": BaseOccupied, "cDA": BaseOccupied, "UDI": BaseOccupied, "sDA": BaseClock, "ASE": BaseClock,
		"EN 17037 provision": BaseDaylight, "EN 17037 glare": BaseOccupied,
	} {
		if r, ok := RuleOf(metric); !ok || r.Base != want || r.Source == "" {
			t.Errorf("%s: %+v", metric, r)
		}
	}
	if _, ok := RuleOf("LUX"); ok {
		t.Error("an unknown metric has a rule")
	}
}

func TestThresholdsAndGaps(t *testing.T) {
	nan := float32(math.NaN())
	e := []float32{100, 300, 3000, 3001, 99, nan}
	all := Hours{0, 1, 2, 3, 4, 5}
	u := UDI(e, all, DefaultBins)
	if u != (UsefulShares{2. / 6, 1. / 6, 2. / 6, 1. / 6}) { // by hand: limits belong to the useful side
		t.Errorf("UDI %+v", u)
	}
	if s := u.FellShort + u.Useful() + u.Exceeded; math.Abs(s-1) > 1e-15 {
		t.Errorf("UDI shares add up to %g", s)
	}
	if got := DA(e, all, 300); got != 0.5 { // 300, 3000, 3001 of six
		t.Errorf("DA %g", got)
	}
	if !math.IsNaN(CDA(e, all, 300)) || !math.IsNaN(DA(e, nil, 300)) {
		t.Error("CDA of NaN and DA of no hours must be NaN")
	}
	p := Plane{E: [][]float32{e}}
	if b := p.SensorShare(nil, 300, 0.5); b.Surely == b.Surely {
		t.Errorf("share over no hours: %+v", b)
	}
	if b := (Plane{}).SensorShare(all, 300, 0.5); b.Surely == b.Surely {
		t.Errorf("share of no sensors: %+v", b)
	}
	if r := ASE([][]float32{{1000}}, Hours{0}, Exposure{ThresholdLx: 1000}, 1); r.Share.Estimate != 0 {
		t.Error("ASE counts hours at the threshold, want above it")
	}
}

func TestFactors(t *testing.T) {
	f := Factors([]float64{0.04, 0.01, 0.02, 0.01})
	want := FactorStats{Mean: 0.02, Median: 0.015, Min: 0.01, Max: 0.04, Uniformity: 0.5, Target: 0.02, Minimum: 0.01} // by hand
	if math.Abs(f.Mean-want.Mean) > 1e-15 || math.Abs(f.Median-want.Median) > 1e-15 || f.Min != want.Min || f.Max != want.Max ||
		math.Abs(f.Uniformity-want.Uniformity) > 1e-15 || f.Target != want.Target || f.Minimum != want.Minimum {
		t.Errorf("%+v, want %+v", f, want)
	}
	if !math.IsNaN(Factors(nil).Mean) {
		t.Error("factors of nothing")
	}
	if got := FactorAsked(300, 14100); math.Abs(got-0.0213) > 0.00005 { // EN 17037 annex A, London: 2.13 %; median from memory
		t.Errorf("London asks for %g", got)
	}
	if got := MedianDiffuse([]float64{5, 1, 9, 7}, Hours{0, 1, 2}); got != 5 {
		t.Errorf("median diffuse %g", got)
	}
}

// A series with a standard error common to all hours of a sensor: the true
// share must lie within the bracket. With z = 3.5 a sensor is wrong with a
// chance of 5e-4; 50 sensors in 40 years make 2,000 looks, so that a bracket
// that honestly covers fails by chance in 1 year of 40 or less; two allowed.
func TestBracketCoversTruth(t *testing.T) {
	covered := func(z float64) int {
		truth := synthYear()
		hours := everyDay.Clock(8, 18)
		want := Plane{E: truth.e}.SensorShare(hours, 300, 0.5).Estimate
		n := 0
		for seed := range uint64(40) {
			random := rand.New(rand.NewPCG(17, seed))
			noisy, se := make([][]float32, synthPoints), make([][]float32, synthPoints)
			for p := range noisy {
				noisy[p], se[p] = make([]float32, HoursPerYear), make([]float32, HoursPerYear)
				common := random.NormFloat64()
				for _, h := range hours {
					s := 0.05 * truth.e[p][h]
					noisy[p][h], se[p][h] = truth.e[p][h]+float32(common)*s, s
				}
			}
			b := Plane{E: noisy, SE: se, Z: z}.SensorShare(hours, 300, 0.5)
			if b.Surely > b.Estimate || b.Estimate > b.Possibly {
				t.Fatalf("bracket out of order: %+v", b)
			}
			if b.Surely <= want && want <= b.Possibly {
				n++
			}
		}
		return n
	}
	if got := covered(3.5); got < 38 {
		t.Errorf("z = 3.5: the truth lies within %d of 40 brackets", got)
	}
	// Twin: without the error's width the bracket must fail.
	if got := covered(0); got >= 38 {
		t.Errorf("z = 0: the truth lies within %d of 40 brackets; the test cannot fail", got)
	}
}

func TestReachedBounds(t *testing.T) {
	p := Plane{E: [][]float32{{100, 200, 300, 400}}, SE: [][]float32{{10, 10, 10, 10}}, Z: 2}
	// By hand: 300 and 400 are half of the hours; two errors are 20 lx.
	if got := p.Reached(0, Hours{0, 1, 2, 3}, 0.5); got != (Bracket{280, 300, 320}) {
		t.Errorf("%+v", got)
	}
	if got := p.TimeShare(0, Hours{0, 1, 2, 3}, 290); got != (Bracket{0.25, 0.5, 0.5}) { // by hand: 300-20 misses 290
		t.Errorf("%+v", got)
	}
	p.SE[0][3] = float32(math.NaN())
	// An unknown error: surely not, possibly yes.
	if b := p.SensorShare(Hours{2, 3}, 300, 0.5); b != (Bracket{0, 1, 1}) {
		t.Errorf("%+v", b)
	}
}

func BenchmarkProvision(b *testing.B) {
	y := synthYear()
	daylight := SunHighest(y.altitude, DaylightHoursPerYear)
	for b.Loop() {
		Provision(Plane{E: y.e, SE: y.e, Z: 2}, daylight, ProvisionLevels[0])
	}
}
