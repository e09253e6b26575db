package main

import (
	"bytes"
	"math"
	"testing"
	"time"

	"squint/scene/photometry"
	"squint/scene/sky"
	"squint/scene/weather"
)

func TestFormulas(t *testing.T) {
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"Haurwitz, sun in the zenith", haurwitz(1), 1098 * math.Exp(-0.059)}, // exact: the formula at cosZ = 1
		{"Haurwitz, sun set", haurwitz(-0.1), 0},
		{"Kasten and Czeplak, no cloud", cloudTransmission(0), 1},
		{"Kasten and Czeplak, overcast", cloudTransmission(1), 0.25},   // exact: 1 - 0.75
		{"Erbs, kt 0", diffuseFraction(0), 1},                          // exact
		{"Erbs, kt 0.22", diffuseFraction(0.22), 0.9802},               // exact: 1 - 0.09*0.22
		{"Erbs, kt 0.5", diffuseFraction(0.5), 0.65915},                // exact: the polynomial by hand
		{"Erbs, kt 0.9", diffuseFraction(0.9), 0.165},                  // exact
		{"month, mid January", monthly([12]float64{5: 1}, 0), 0},       // exact
		{"month, mid June", monthly([12]float64{5: 1}, 8760*11/24), 1}, // exact
	} {
		if math.Abs(c.got-c.want) > 1e-12 {
			t.Errorf("%s: %.15g, want %.15g", c.name, c.got, c.want)
		}
	}
	// The branches of Erbs, Klein and Duffie meet within the rounding of their
	// published coefficients: 0.001 at 0.22 and 0.80.
	for _, kt := range []float64{0.22, 0.80} {
		if a, b := diffuseFraction(kt), diffuseFraction(kt+1e-9); math.Abs(a-b) > 0.001 {
			t.Errorf("Erbs at kt %g: %g below and %g above", kt, a, b)
		}
	}
}

// read gives the year as a user gets it, from the file's text.
func read(t *testing.T) *weather.Year {
	t.Helper()
	data, err := inventedEPW()
	if err != nil {
		t.Fatal(err)
	}
	y, err := weather.ReadEPW(bytes.NewReader(data), "skerrow.epw")
	if err != nil {
		t.Fatal(err)
	}
	return y
}

func cosZ(t *testing.T) func(time.Time) float64 {
	return func(at time.Time) float64 {
		s, err := sky.SunAt(sky.Site{LatitudeDeg: latitudeDeg, LongitudeDeg: longitudeDeg, ElevationM: elevationM}, at)
		if err != nil {
			t.Fatal(err)
		}
		return s.Direction.Z
	}
}

// The file is marked as invented and closes for the sun at mid-interval.
func TestYearIsClosedAndMarked(t *testing.T) {
	y := read(t)
	if !y.Invented {
		t.Error("the file does not say that it is invented")
	}
	cz := cosZ(t)
	lit := 0
	for i, r := range y.Records {
		c, share := sunlit(y, i, cz)
		if r.GHI > 0 {
			lit++
		}
		if share == 0 && (r.GHI != 0 || r.DHI != 0 || r.DNI != 0) {
			t.Fatalf("record %d: light in the dark: %+v", i, r)
		}
		if share == 1 {
			// The whole hour is sunlit: its middle is the moment.
			c = cz(y.Moment(i, weather.IntervalOffsetH))
		}
		// The file rounds the global to 0.01: half of that, and 1e-6 for the
		// rounding of the sunrise.
		if d := math.Abs(r.GHI - r.DHI - r.DNI*c); share > 0 && d > 0.005+1e-6 {
			t.Fatalf("record %d: GHI %g, DHI %g, DNI %g, cosZ %g: open by %g", i, r.GHI, r.DHI, r.DNI, c, d)
		}
		if r.DNI > photometry.ExtraterrestrialNormal(i/24+1) {
			t.Fatalf("record %d: direct %g above that outside the air", i, r.DNI)
		}
		if !(r.DewPointC < r.DryBulbC) {
			t.Fatalf("record %d: dew point %g not below %g", i, r.DewPointC, r.DryBulbC)
		}
	}
	// Half of the year and the hours that hold a sunrise or sunset: 4380 to
	// 4380 + 2*365/2 and a little, since up to two part hours a day count.
	if lit < 4380 || lit > 4380+400 {
		t.Errorf("%d hours with light", lit)
	}
}

func TestFittedMoment(t *testing.T) {
	y := read(t)
	fit := y.FitMoment(cosZ(t))
	// The closure is exact but for the file's rounding of 0.01 W/m2, which
	// at a slope of some 100 W/m2 per hour moves the moment by 0.0001 h; the
	// search stops at 0.001 h. Part hours above 50 W/m2 stand for their sunlit
	// part and pull a little.
	if math.Abs(fit.OffsetH-weather.IntervalOffsetH) > 0.01 {
		t.Errorf("fitted moment %g h after the label, want %g", fit.OffsetH, weather.IntervalOffsetH)
	}
	if fit.Contradicts {
		t.Errorf("the fit contradicts the file: %s", fit.Text)
	}
}

// Cloud cover has the monthly means asked for, within z standard errors of an
// hourly series correlated as it is.
func TestCloudMeans(t *testing.T) {
	meansHold := func(cover []float64, means [12]float64) bool {
		for m := range 12 {
			sum, want := 0.0, 0.0
			from, to := m*730, (m+1)*730
			for i := from; i < to; i++ {
				if cover[i] < 0 || cover[i] > 1 {
					return false
				}
				sum += cover[i]
				want += monthly(means, i)
			}
			mean := want / 730
			// Standard deviation of the beta distribution, and the number of
			// independent hours of a series of correlation r: n (1-r)/(1+r).
			sd := math.Sqrt(mean * (1 - mean) / (1 + cloudWidth))
			n := 730 * (1 - cloudCorrelation) / (1 + cloudCorrelation)
			const z = 3.5 // 12 months two-sided: 0.6 % to fail by chance
			if math.Abs(sum-want)/730 > z*sd/math.Sqrt(n) {
				return false
			}
		}
		return true
	}
	cover := cloudCover()
	if !meansHold(cover, monthlyCloud) {
		t.Error("monthly means of cloud cover are off")
	}
	// Twin: the sky of another climate must be told apart.
	clear := monthlyCloud
	for m := range clear {
		clear[m] /= 3
	}
	if meansHold(cover, clear) {
		t.Error("the test does not tell a third of the cloud from all of it")
	}
}
