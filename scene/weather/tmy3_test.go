package weather

import (
	"errors"
	"math"
	"strings"
	"testing"
)

func TestReadTMY3(t *testing.T) {
	want := synthYear(synthSite, -0.5)
	y, err := ReadTMY3(strings.NewReader(tmy3Text(want)), "a.csv")
	if err != nil {
		t.Fatal(err)
	}
	if s := y.Site; s.LatitudeDeg != 50 || s.LongitudeDeg != 10 || s.UTCOffsetH != 1 || s.ElevationM != 120 {
		t.Errorf("site %+v", s)
	}
	if y.ReferenceYear != 2001 || y.Invented || y.ClaimedOffsetH() != -0.5 || !strings.Contains(y.Claim, "mid-hour") {
		t.Errorf("year %d, invented %t, claim %q", y.ReferenceYear, y.Invented, y.Claim)
	}
	for i, r := range y.Records {
		w := want.Records[i]
		// 0.005: half of the last digit that tmy3Text writes.
		if r.Line != i+3 || r.Month != w.Month || r.Day != w.Day || r.EndH != w.EndH || r.PressurePa != 100000 || r.DewPointC != 6 ||
			math.Abs(r.GHI-w.GHI) > 0.0051 || math.Abs(r.DNI-w.DNI) > 0.0051 || math.Abs(r.DHI-w.DHI) > 0.0051 {
			t.Fatalf("record %d: got %+v, want %+v", i, r, w)
		}
	}
}

func TestReadTMY3NameWithCommas(t *testing.T) {
	text := editLine(tmy3Text(synthYear(synthSite, -0.5)), 1, func(string) string {
		return `123456,"HILL, INVENTED",XX,1.0,50,10,120,,`
	})
	y, err := ReadTMY3(strings.NewReader(text), "a.csv")
	if err != nil || y.Site.Name != "HILL, INVENTED, XX" || y.Site.ElevationM != 120 {
		t.Errorf("got %+v, %v", y, err)
	}
}

func TestReadTMY3Refuses(t *testing.T) {
	text := tmy3Text(synthYear(synthSite, -0.5))
	const noon = 3 + 160*24 + 11 // 10 June, 12:00
	for _, test := range []struct {
		name  string
		line  int
		edit  func(string) string
		at    int
		cause error
		words string
	}{
		{"missing hour", noon, remove, noon, ErrCalendar, "10 June hour 12 is missing"},
		{"not increasing", noon, setField(1, "11:00"), noon, ErrCalendar, "do not increase"},
		{"00:00", noon, setField(1, "00:00"), noon, ErrField, "01:00 to 24:00"},
		{"half hour", noon, setField(1, "11:30"), noon, ErrField, "whole hours"},
		{"no colon", noon, setField(1, "12"), noon, ErrField, "01:00 to 24:00"},
		{"date", noon, setField(0, "2001-06-10"), noon, ErrField, "MM/DD/YYYY"},
		{"date in words", noon, setField(0, "06/tenth/2001"), noon, ErrField, "MM/DD/YYYY"},
		{"GHI missing", noon, setField(3, "-9900"), noon, ErrMissing, "global horizontal irradiance (column 4)"},
		{"dew point missing", noon, setField(12, "-9900"), noon, ErrMissing, "dew-point temperature (column 13)"},
		{"negative", noon, setField(5, "-99"), noon, ErrImplausible, "direct normal irradiance (column 6): got -99"},
		{"text", noon, setField(6, "?"), noon, ErrField, `got "?"`},
		{"cut off", noon, func(l string) string { return l[:20] }, noon, ErrFormat, "columns"},
		{"no column names", 2, remove, 2, ErrFormat, "want Date (MM/DD/YYYY)"},
		{"no DNI column", 2, setField(5, "something"), 2, ErrFormat, "no column DNI (W/m^2)"},
		{"short station", 1, func(string) string { return "1,a,b,1,50" }, 1, ErrFormat, "got 5 fields, want 7"},
		{"latitude", 1, setField(4, "-95"), 1, ErrField, "latitude: got -95"},
	} {
		_, err := ReadTMY3(strings.NewReader(editLine(text, test.line, test.edit)), "bad.csv")
		var pe *ParseError
		if !errors.As(err, &pe) {
			t.Errorf("%s: got %v, want a ParseError", test.name, err)
			continue
		}
		if pe.File != "bad.csv" || pe.Line != test.at || !errors.Is(err, test.cause) || !strings.Contains(err.Error(), test.words) || pe.Do == "" {
			t.Errorf("%s: got %q (cause %v), want line %d, %v and %q", test.name, err, pe.Err, test.at, test.cause, test.words)
		}
	}
}

func TestReadTMY3MissingValues(t *testing.T) {
	const noon = 3 + 160*24 + 11
	text := tmy3Text(synthYear(synthSite, -0.5))
	for _, col := range []int{7, 8, 9, 10, 11, 13} {
		text = editLine(text, noon, setField(col, "-9900"))
	}
	y, err := ReadTMY3(strings.NewReader(text), "a.csv")
	if err != nil {
		t.Fatal(err)
	}
	r := y.Records[noon-3]
	for _, v := range []float64{r.GlobalLx, r.DirectLx, r.DiffuseLx, r.ZenithCdM2, r.DryBulbC} {
		if !math.IsNaN(v) {
			t.Errorf("got %+v, want NaN in the missing columns", r)
			break
		}
	}
	if math.Abs(r.PressurePa-standardPressurePa(120)) > 1e-9 {
		t.Errorf("pressure %g, want the standard atmosphere", r.PressurePa)
	}
}
