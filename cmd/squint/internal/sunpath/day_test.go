package sunpath

import (
	"fmt"
	"math"
	"testing"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/scene/sky"
)

// checkRiseAndSet holds the first and last sun of some days at an unobstructed
// point against an almanac.
func checkRiseAndSet(t *testing.T, sunAt func(site sky.Site, at time.Time) (r3.Vec, error)) error {
	site := sky.Site{LatitudeDeg: 39, LongitudeDeg: -105}
	zone := time.FixedZone("", -7*3600)
	in := newModel(t).input(r3.Vec{})
	in.Sun = func(at time.Time) (r3.Vec, error) { return sunAt(site, at) }
	in.Year, in.Zone = 2015, zone
	// want: tables of the US Naval Observatory for 39 N, 105 W, to the minute, as
	// the test suite of pvlib-python quotes them (tests/test_spa.py).
	for _, c := range []struct {
		month     time.Month
		rise, set string
	}{
		{time.January, "07:19", "16:49"},
		{time.April, "05:43", "18:24"},
		{time.August, "05:01", "19:10"},
		{time.December, "07:01", "16:38"},
	} {
		day := time.Date(2015, c.month, 2, 0, 0, 0, 0, zone)
		samples, err := in.day(day.YearDay()-1, 1)
		if err != nil {
			return err
		}
		var first, last time.Time
		for _, s := range samples {
			if s.Direct() {
				if first.IsZero() {
					first = s.Time
				}
				last = s.Time
			}
		}
		for _, e := range []struct {
			what string
			got  time.Time
			want string
		}{{"rise", first, c.rise}, {"set", last, c.set}} {
			hm, err := time.Parse("15:04", e.want)
			if err != nil {
				return err
			}
			want := day.Add(time.Duration(hm.Hour())*time.Hour + time.Duration(hm.Minute())*time.Minute)
			// Half a minute of the table, half a minute of our step, and the
			// outermost line of sight at most 0.03 degrees within the limb, 0.2 min
			// on these paths.
			if e.got.Sub(want).Abs() > 72*time.Second {
				return fmt.Errorf("2 %s, %s: got %s, want %s", c.month, e.what, e.got.Format("15:04:05"), e.want)
			}
		}
	}
	return nil
}

func TestRiseAndSet(t *testing.T) {
	if err := checkRiseAndSet(t, func(site sky.Site, at time.Time) (r3.Vec, error) { return scene.SunAt(site, 0, at) }); err != nil {
		t.Error(err)
	}
	// Without air the sun rises some three minutes later.
	airless := func(site sky.Site, at time.Time) (r3.Vec, error) {
		s, err := sky.SunAt(site, at)
		return s.Direction, err
	}
	if checkRiseAndSet(t, airless) == nil {
		t.Error("a sun without refraction passes as well")
	}
}

// dayHours is the time in hours for which a sun of declination delta stands
// above altitude h at latitude phi. Source: the altitude's equation, sin h =
// sin phi sin delta + cos phi cos delta cos H, solved for the hour angle;
// Meeus, Astronomical Algorithms, 2nd edition 1998, chapter 15 (from memory).
func dayHours(phi, delta, h float64) float64 {
	c := (math.Sin(h) - math.Sin(phi)*math.Sin(delta)) / (math.Cos(phi) * math.Cos(delta))
	return 2 * math.Acos(math.Max(-1, math.Min(1, c))) * 12 / math.Pi
}

// TestYearOfDays: hours of sun at an unobstructed point over a year.
func TestYearOfDays(t *testing.T) {
	y := compute(t, newModel(t).input(r3.Vec{}))
	sum := func(horizon float64) (all float64) {
		for n := 1; n <= 365; n++ {
			// Source: Spencer, Fourier series representation of the position of the
			// sun, Search 2(5), 1971, 172 (from memory); good to 0.035 degrees.
			g := 2 * math.Pi * float64(n-1) / 365
			delta := 0.006918 - 0.399912*math.Cos(g) + 0.070257*math.Sin(g) - 0.006758*math.Cos(2*g) + 0.000907*math.Sin(2*g) - 0.002697*math.Cos(3*g) + 0.00148*math.Sin(3*g)
			all += dayHours(degrees(testSite.LatitudeDeg), delta, horizon)
		}
		return all
	}
	// Each of 146 risings and settings is found to ten minutes, evenly, and stands
	// for five: a standard error of 5 x 10/sqrt(12) x sqrt(146) min = 2.9 h, taken
	// 4 times. Bounds: 0.035 degrees of declination and 0.03 of the limb move
	// each of 730 by 0.3 min: 3.7 h.
	const tolerance = 4*2.9 + 3.7
	// Upper limb and refraction: 16' and 34'. Source: Meeus, as above.
	want := sum(degrees(-50.0 / 60))
	if off := math.Abs(y.Direct.All - want); off > tolerance {
		t.Errorf("got %.1f h, want %.1f within %.1f", y.Direct.All, want, tolerance)
	}
	if off := math.Abs(y.Direct.All - sum(0)); off <= tolerance {
		t.Errorf("without limb and refraction, %.1f h pass as well", sum(0))
	}
	if y.Mirrored.All != 0 {
		t.Errorf("got %.1f h of mirrored sun without a mirror", y.Mirrored.All)
	}
}

// TestHoursAboveSkyline: hours for which the sun stands above a skyline.
func TestHoursAboveSkyline(t *testing.T) {
	for _, c := range []struct {
		lat, delta, skyline, want float64
	}{
		// want: the equation of dayHours for the declinations of the days between
		// which EN 17037 asks for sunlight, worked out apart from this program.
		{50, -17.3, 0, 9.0948}, {50, -17.3, 10, 6.5527},
		{50, -10.9, 0, 10.2310}, {50, -10.9, 10, 7.9593},
		{50, 0, 0, 12}, {50, 0, 10, 9.9103},
		{59.33, -17.3, 10, 3.7528}, {59.33, -10.9, 10, 6.3767}, {59.33, 0, 10, 9.3463},
	} {
		above := func(skyline float64) (hours float64) {
			m := newModel(t)
			h, err := sky.NewHorizon([]sky.HorizonPoint{{AltitudeRad: degrees(skyline)}, {AzimuthRad: math.Pi, AltitudeRad: degrees(skyline)}})
			if err != nil {
				t.Fatal(err)
			}
			m.s.Horizon, m.s.HasHorizon = h, true
			in := m.input(r3.Vec{})
			in.Sun = func(at time.Time) (r3.Vec, error) {
				angle := (float64(at.Hour()*3600+at.Minute()*60+at.Second())/3600 - 12) * math.Pi / 12
				sp, cp := math.Sincos(degrees(c.lat))
				sd, cd := math.Sincos(degrees(c.delta))
				return r3.Vec{X: -cd * math.Sin(angle), Y: cp*sd - sp*cd*math.Cos(angle), Z: sp*sd + cp*cd*math.Cos(angle)}, nil
			}
			samples, err := in.day(0, 1)
			if err != nil {
				t.Fatal(err)
			}
			for _, s := range samples {
				hours += s.Free / 60
			}
			return hours
		}
		// Of a disc that is cut in half at the closed form's moment the share is
		// free; rising takes 3 min and more, so that a sum over minutes errs by
		// less than half a minute at each end.
		const tolerance = 1.0 / 60
		if got := above(c.skyline); math.Abs(got-c.want) > tolerance {
			t.Errorf("latitude %g, declination %g, skyline %g: got %.4f h, want %.4f", c.lat, c.delta, c.skyline, got, c.want)
		}
		if got := above(c.skyline + 1); math.Abs(got-c.want) <= tolerance {
			t.Errorf("latitude %g, declination %g: a skyline a degree higher passes as well", c.lat, c.delta)
		}
	}
}
