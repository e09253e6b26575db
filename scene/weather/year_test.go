package weather

import (
	"testing"
	"time"
)

func TestMoment(t *testing.T) {
	y := synthYear(Site{UTCOffsetH: -3.5}, -0.5)
	zone := time.FixedZone("", -3*3600-1800)
	for _, test := range []struct {
		i      int
		offset float64
		want   time.Time // hour h ends at h o'clock standard time
	}{
		{0, -0.5, time.Date(2022, 1, 1, 0, 30, 0, 0, zone)},
		{0, 0, time.Date(2022, 1, 1, 1, 0, 0, 0, zone)},
		{23, 0, time.Date(2022, 1, 2, 0, 0, 0, 0, zone)},
		{59*24 - 1, 0.25, time.Date(2022, 3, 1, 0, 15, 0, 0, zone)},
		{HoursPerYear - 1, 0.5, time.Date(2023, 1, 1, 0, 30, 0, 0, zone)},
		{0, -1.5, time.Date(2021, 12, 31, 23, 30, 0, 0, zone)},
	} {
		if got := y.Moment(test.i, test.offset); !got.Equal(test.want) || got.Format(time.RFC3339) != test.want.Format(time.RFC3339) {
			t.Errorf("Moment(%d, %g) = %v, want %v", test.i, test.offset, got, test.want)
		}
	}
	// No jump anywhere: months of different years must not break the sun.
	for i := 1; i < HoursPerYear; i++ {
		if d := y.Moment(i, -0.5).Sub(y.Moment(i-1, -0.5)); d != time.Hour {
			t.Fatalf("record %d is %v after the one before, want 1 h", i, d)
		}
	}
}

func TestClaimedOffset(t *testing.T) {
	for _, test := range []struct {
		comment string
		want    float64 // as written in the comment, else the rule of the format
	}{
		{"", -0.5},
		{"Irradiance Time Offset (h):-0.8239", -0.8239},
		{"made by X; irradiance time offset (h): 0.25; and more", 0.25},
		{"Irradiance Time Offset (h): soon", -0.5},
		{"Irradiance Time Offset (h): NaN", -0.5},
		{"Irradiance Time Offset (h): 1e9", -0.5},
	} {
		y := &Year{Comments: []string{"first", test.comment}}
		if got := y.ClaimedOffsetH(); got != test.want {
			t.Errorf("%q: got %g, want %g", test.comment, got, test.want)
		}
	}
}

func TestSaysInvented(t *testing.T) {
	for comment, want := range map[string]bool{
		"Invented data for the demo": true, "data (invented)": true, "INVENTED": true,
		"reinvented station": false, "measured": false, "": false,
	} {
		if got := saysInvented([]string{"x", comment}); got != want {
			t.Errorf("%q: got %t, want %t", comment, got, want)
		}
	}
}
