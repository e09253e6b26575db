package weather

import (
	"errors"
	"math"
	"strings"
	"testing"
	"time"
)

func TestSwappedColumnsAreFound(t *testing.T) {
	swap := func(f func(g, b, d float64) (float64, float64, float64)) func(*Year) {
		return func(y *Year) {
			for i := range y.Records {
				r := &y.Records[i]
				r.GHI, r.DNI, r.DHI = f(r.GHI, r.DNI, r.DHI)
			}
		}
	}
	for _, test := range []struct {
		name  string
		spoil func(*Year)
		words string // from the way the row spoils the year
	}{
		{"DHI first", swap(func(g, b, d float64) (float64, float64, float64) { return d, b, g }), "hold DHI, DNI and GHI"},
		{"DNI first", swap(func(g, b, d float64) (float64, float64, float64) { return b, g, d }), "hold DNI, GHI and DHI"},
		{"DNI and DHI", swap(func(g, b, d float64) (float64, float64, float64) { return g, d, b }), "hold GHI, DHI and DNI"},
		{"turned left", swap(func(g, b, d float64) (float64, float64, float64) { return b, d, g }), "hold DNI, DHI and GHI"},
		{"turned right", swap(func(g, b, d float64) (float64, float64, float64) { return d, g, b }), "hold DHI, GHI and DNI"},
		{"direct horizontal", swap(func(g, b, d float64) (float64, float64, float64) { return g, g - d, d }), "hold GHI, direct on the horizontal"},
		{"sign of the longitude", func(y *Year) { y.Site.LongitudeDeg = -75 }, "check the signs of longitude and time zone"},
		{"all dark", swap(func(_, _, _ float64) (float64, float64, float64) { return 0, 0, 0 }), "none above 50 W/m2"},
		{"noise", func(y *Year) {
			for i := range y.Records { // no column has to do with the sun
				y.Records[i].GHI, y.Records[i].DHI = math.Mod(float64(i)*377, 900), math.Mod(float64(i)*233, 400)
			}
		}, "GHI = DHI + DNI cos Z"},
	} {
		latitudes := []float64{50, 5, -35}
		if testing.Short() {
			latitudes = latitudes[:1]
		}
		for _, lat := range latitudes {
			y := synthYear(Site{Name: "x", LatitudeDeg: lat, LongitudeDeg: 75, UTCOffsetH: 5}, -0.5)
			test.spoil(y)
			_, err := ReadEPW(strings.NewReader(epwText(t, y)), "swapped.epw")
			if !errors.Is(err, ErrImplausible) || !strings.Contains(err.Error(), test.words) {
				t.Errorf("%s at latitude %g: got %v, want %q", test.name, lat, err, test.words)
			}
		}
	}
}

func TestHonestYearsAreNotRefused(t *testing.T) {
	for _, lat := range []float64{78, 50, 5, 0, -35} {
		for _, offset := range []float64{-0.5, 0, 0.5, -1.5} {
			y := synthYear(Site{Name: "x", LatitudeDeg: lat, LongitudeDeg: 75, UTCOffsetH: 5}, offset)
			for i := range y.Records { // rounded, and 4 % off in turn, as models are
				r := &y.Records[i]
				r.GHI = math.Round(r.GHI * (1 + 0.04*float64(i%3-1)))
			}
			if _, err := ReadEPW(strings.NewReader(epwText(t, y)), "honest.epw"); err != nil {
				t.Errorf("latitude %g, offset %g: %v", lat, offset, err)
			}
		}
	}
}

func TestRoughSun(t *testing.T) {
	// Wanted: airless zenith angles from astropy 5.2.1 (ERFA, topocentric), in
	// the project's collection of check values, section 1.2; the first is the
	// example of Reda, Andreas 2004, Solar Energy 76(5).
	for _, test := range []struct {
		utc              string
		lat, lon, zenith float64
	}{
		{"2003-10-17 19:30:30", 39.742476, -105.1786, 50.12796},
		{"2021-06-21 11:00:00", 59.3293, 18.0686, 35.94099},
		{"2021-12-21 11:00:00", 59.3293, 18.0686, 82.82050},
		{"2022-02-01 15:30:00", 48.8566, 2.3522, 80.09471},
		{"2022-03-21 07:00:00", 48.8566, 2.3522, 79.65150},
		{"2023-09-23 04:30:00", -33.8688, 151.2093, 50.92409},
		{"2023-12-22 01:00:00", -33.8688, 151.2093, 15.65330},
		{"2025-06-21 22:00:00", 69.6492, 18.9553, 86.54746},
		{"2030-11-05 13:15:00", -22.9068, -43.1729, 20.42521},
	} {
		at, err := time.Parse(time.DateTime, test.utc)
		if err != nil {
			t.Fatal(err)
		}
		got := math.Acos(Site{LatitudeDeg: test.lat, LongitudeDeg: test.lon}.roughSun()(at)) * 180 / math.Pi
		// Spencer's stated errors, 0.034 and 0.14 degrees, plus the drift of the
		// date within the leap cycle, 0.75 day of at most 0.4 degrees: 0.47.
		if math.Abs(got-test.zenith) > 0.47 {
			t.Errorf("%s: zenith angle %.3f, want %.3f", test.utc, got, test.zenith)
		}
	}
}
