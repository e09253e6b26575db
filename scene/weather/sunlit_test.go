package weather

import (
	"math"
	"testing"
	"time"
)

// daySun is up between two clock hours (UTC) of every day, with a smooth
// cosine that is zero at both, by construction.
func daySun(riseH, setH float64) CosZenith {
	noon, half := (riseH+setH)/2, (setH-riseH)/2
	shift := math.Cos(half * math.Pi / 12)
	return func(t time.Time) float64 {
		h := t.Sub(t.Truncate(24 * time.Hour)).Hours()
		return math.Cos((h-noon)*math.Pi/12) - shift
	}
}

func TestSunlitMoment(t *testing.T) {
	y := synthYear(Site{}, -0.5) // UTC
	for _, test := range []struct {
		name      string
		rise, set float64
		hour      int // labelled
		offset    float64
		wantH     float64 // clock hour; from the rise and set of the row
		wantShare float64
	}{
		{"sunrise before mid-hour", 6.2, 18, 7, -0.5, 6.6, 0.8},
		{"sunrise after mid-hour", 6.8, 18, 7, -0.5, 6.9, 0.2},
		{"fit not quite mid-hour", 6.8, 18, 7, -0.48, 6.9, 0.2},
		{"sunset", 6, 18.3, 19, -0.5, 18.15, 0.3},
		{"noon", 6, 18, 12, -0.5, 11.5, 1},
		{"first whole hour", 6, 18, 7, -0.5, 6.5, 1},
		{"night", 6, 18, 2, -0.5, 1.5, 0},
		{"just before sunrise", 6.01, 18, 6, -0.5, 5.5, 0},
		{"short polar day within the hour", 11.2, 11.9, 12, -0.5, 11.55, 0.7},
		{"label at the hour's start", 6.8, 18, 6, 0.5, 6.9, 0.2},
		{"instant, up", 6.8, 18, 7, 0, 7, 1},
		{"instant, down", 7.1, 18, 7, 0, 7, 0},
		{"instant off mid-hour", 6.8, 18, 7, -0.25, 6.75, 0},
	} {
		i := 100*24 + test.hour - 1
		got, share := y.SunlitMoment(i, test.offset, daySun(test.rise, test.set))
		gotH := got.Sub(got.Truncate(24 * time.Hour)).Hours()
		// Sunrise and sunset are each found to 1 s: the middle between them is
		// known to 1 s, their distance to 2 s.
		if math.Abs(gotH-test.wantH) > 1.0/3600 || math.Abs(share-test.wantShare) > 2.0/3600 {
			t.Errorf("%s: got %.5f h, share %.5f, want %.5f, %.5f", test.name, gotH, share, test.wantH, test.wantShare)
		}
	}
}

func TestSunlitMomentTwoParts(t *testing.T) {
	y := synthYear(Site{}, -0.5)
	// Midnight sun that dips below the horizon from 0:24 to 0:48.
	sun := func(at time.Time) float64 {
		h := at.Sub(at.Truncate(24 * time.Hour)).Hours()
		return (h - 0.4) * (h - 0.8)
	}
	got, share := y.SunlitMoment(0, -0.5, sun)
	if gotH := got.Sub(got.Truncate(24 * time.Hour)).Hours(); math.Abs(gotH-0.2) > 1.0/3600 || math.Abs(share-0.6) > 2.0/3600 {
		t.Errorf("got %.5f h, share %.5f, want 0.2 (middle of the longer part), 0.6", gotH, share)
	}
}

func TestSunlitMomentIsLitWheneverItsShareSaysSo(t *testing.T) {
	for _, site := range []Site{synthSite, {LatitudeDeg: 69.6, LongitudeDeg: 19, UTCOffsetH: 1}, {LatitudeDeg: -90}} {
		y := synthYear(site, -0.5)
		sun := site.roughSun()
		for i := range y.Records {
			at, share := y.SunlitMoment(i, -0.5, sun)
			lit := sun(at) > 0
			if lit != (share > 0) || share < 0 || share > 1 {
				t.Fatalf("latitude %g, record %d: share %g, but cos Z = %g", site.LatitudeDeg, i, share, sun(at))
			}
			// The shortcut for a sun far from the horizon must not change the share.
			sampled := 0.0
			for k := 0; k < 60; k++ {
				if sun(y.Moment(i, -1+(float64(k)+0.5)/60)) > 0 {
					sampled += 1.0 / 60
				}
			}
			// Sampling each minute errs by half a minute at both ends; a part
			// shorter than half an hour between the three instants looked at can
			// only occur near the poles and is not claimed.
			if math.Abs(sampled-share) > 1.1/60 && math.Abs(site.LatitudeDeg) < 60 {
				t.Fatalf("latitude %g, record %d: share %g, sampled by minutes %g", site.LatitudeDeg, i, share, sampled)
			}
		}
	}
}

func BenchmarkSunlitMoment(b *testing.B) {
	y := synthYear(synthSite, -0.5)
	sun := synthSite.roughSun()
	i := 0
	for b.Loop() {
		y.SunlitMoment(i, -0.5, sun)
		i = (i + 1) % HoursPerYear
	}
}
