package weather

import (
	"errors"
	"math"
	"strings"
	"testing"
)

// rowOf is the line of a labelled hour in the EPW that WriteEPW makes.
func rowOf(month, day, hour int) int {
	s, _ := slot(month, day, hour)
	return 9 + s
}

func TestReadEPWRefuses(t *testing.T) {
	text := epwText(t, synthYear(synthSite, -0.5))
	noon := rowOf(6, 10, 12)
	for _, test := range []struct {
		name  string
		line  int // edited
		edit  func(string) string
		at    int // line of the error
		cause error
		words string
	}{
		{"missing hour", rowOf(3, 2, 4), remove, rowOf(3, 2, 4), ErrCalendar, "got 2 March hour 5, want 2 March hour 4; 2 March hour 4 is missing"},
		{"missing first hour", 9, remove, 9, ErrCalendar, "want 1 January hour 1"},
		{"missing last hour", rowOf(12, 31, 24), remove, rowOf(12, 31, 23), ErrCalendar, "got 8759 hours, want 8760; 31 December hour 24 is missing"},
		{"repeated hour", noon, setField(epwHour, "11"), noon, ErrCalendar, "do not increase"},
		{"hour 0", noon, setField(epwHour, "0"), noon, ErrCalendar, "hour from 1 to 24"},
		{"31 June", noon, setField(epwDay, "31"), noon, ErrCalendar, "a date of the calendar"},
		{"29 February in June", noon, func(l string) string { return setField(epwMonth, "2")(setField(epwDay, "29")(l)) }, noon, ErrCalendar, "got 29 February hour 12, want 10 June hour 12"},
		{"huge month", noon, setField(epwMonth, "999999"), noon, ErrCalendar, "month 999999"},
		{"row too many", rowOf(12, 31, 24), func(l string) string { return l + "\n" + l }, rowOf(12, 31, 24) + 1, ErrCalendar, "the end of the file"},
		{"half hours", 8, setField(2, "2"), 8, ErrFormat, "records per hour: got 2, want 1"},
		{"GHI missing", noon, setField(epwGHI, "9999"), noon, ErrMissing, "global horizontal irradiance (column 14): got 9999 (the code"},
		{"DNI missing", noon, setField(epwDNI, "9999.00"), noon, ErrMissing, "direct normal irradiance (column 15)"},
		{"DHI missing", noon, setField(epwDHI, "99999"), noon, ErrMissing, "diffuse horizontal irradiance (column 16)"},
		{"dew point missing", noon, setField(epwDewPoint, "99.90"), noon, ErrMissing, "dew-point temperature (column 8)"},
		{"GHI too high", noon, setField(epwGHI, "1700"), noon, ErrImplausible, "got 1700, want 0 to 1600 W/m2"},
		{"GHI negative", noon, setField(epwGHI, "-40"), noon, ErrImplausible, "got -40, want 0 to 1600 W/m2"},
		{"dew point in kelvin shifted", noon, setField(epwDewPoint, "-273"), noon, ErrImplausible, "dew-point"},
		{"pressure in hPa", noon, setField(epwPressure, "1013"), noon, ErrImplausible, "got 1013 Pa"},
		{"text for a number", noon, setField(epwDNI, "n/a"), noon, ErrField, `got "n/a", want a number`},
		{"not a number", noon, setField(epwDHI, "NaN"), noon, ErrField, `got "NaN"`},
		{"infinite", noon, setField(epwDHI, "+Inf"), noon, ErrField, `got "+Inf"`},
		{"bad illuminance", noon, setField(epwGlobalLx, "x"), noon, ErrField, "illuminance"},
		{"part of an hour", noon, setField(epwHour, "11.5"), noon, ErrField, "a whole number"},
		{"row cut off", noon, func(l string) string { return l[:60] }, noon, ErrFormat, "columns"},
		{"no LOCATION", 1, remove, 1, ErrFormat, "want LOCATION"},
		{"no DATA PERIODS", 8, remove, 8, ErrFormat, "want DATA PERIODS before the first row"},
		{"short LOCATION", 1, func(string) string { return "LOCATION,a,b,c,d,e,50" }, 1, ErrFormat, "got 7 fields, want 10"},
		{"latitude", 1, setField(6, "95"), 1, ErrField, "latitude: got 95, want -90 to 90"},
		{"longitude", 1, setField(7, "-190"), 1, ErrField, "longitude: got -190"},
		{"time zone", 1, setField(8, "60"), 1, ErrField, "time zone: got 60"},
		{"elevation", 1, setField(9, "12000"), 1, ErrField, "elevation: got 12000"},
		{"latitude with N", 1, setField(6, "50N"), 1, ErrField, `latitude (column 7): got "50N"`},
	} {
		_, err := ReadEPW(strings.NewReader(editLine(text, test.line, test.edit)), "bad.epw")
		var pe *ParseError
		if !errors.As(err, &pe) {
			t.Errorf("%s: got %v, want a ParseError", test.name, err)
			continue
		}
		if pe.File != "bad.epw" || pe.Line != test.at || !errors.Is(err, test.cause) || !strings.Contains(err.Error(), test.words) || pe.Do == "" {
			t.Errorf("%s: got %q (cause %v), want line %d, %v and %q", test.name, err, pe.Err, test.at, test.cause, test.words)
		}
	}
	for name, cut := range map[string]int{"header only": 8, "half a header": 3} {
		short := strings.Join(strings.Split(text, "\n")[:cut], "\n")
		if _, err := ReadEPW(strings.NewReader(short), "bad.epw"); err == nil {
			t.Errorf("%s: no error", name)
		}
	}
}

func TestReadEPWTolerates(t *testing.T) {
	text := epwText(t, synthYear(synthSite, -0.5))
	night, noon := rowOf(6, 10, 1), rowOf(6, 10, 12)
	for _, test := range []struct {
		name  string
		line  int
		edit  func(string) string
		check func(y *Year, r Record) bool
		note  string
	}{
		{"-0.00", night, setField(epwDNI, "-0.00"), func(_ *Year, r Record) bool { return r.DNI == 0 && !math.Signbit(r.DNI) }, ""},
		{"instrument offset", night, setField(epwGHI, "-2.5"), func(_ *Year, r Record) bool { return r.GHI == 0 }, "1 small negative irradiances"},
		{"no pressure", noon, setField(epwPressure, "999999"),
			// ISO 2533 at 120 m: 101325 Pa * exp(5.25588 ln 0.9972931) = 99891.7 Pa, by hand.
			func(_ *Year, r Record) bool { return math.Abs(r.PressurePa-99891.7) < 0.1 }, "1 hours lack the pressure"},
		{"no dry bulb", noon, setField(epwDryBulb, "99.9"), func(_ *Year, r Record) bool { return math.IsNaN(r.DryBulbC) }, "1 hours lack the air temperature"},
		{"illuminance 999900", noon, setField(epwDirectLx, "999900"), func(_ *Year, r Record) bool { return math.IsNaN(r.DirectLx) }, ""},
		{"bright zenith", noon, setField(epwZenithCdM2, "12000"), func(_ *Year, r Record) bool { return r.ZenithCdM2 == 12000 }, ""},
		{"odd minute", noon, setField(epwMinute, "30"), func(_ *Year, r Record) bool { return r.EndH == 12 }, "1 rows carry a minute"},
		{"spaces", noon, setField(epwGHI, " 300.5 "), func(_ *Year, r Record) bool { return r.GHI == 300.5 }, ""},
		{"real hour", noon, setField(epwHour, "12.0"), func(_ *Year, r Record) bool { return r.EndH == 12 }, ""},
		{"fewer columns", noon, func(l string) string { return strings.Join(strings.Split(l, ",")[:32], ",") }, func(*Year, Record) bool { return true }, ""},
		{"blank line", noon, func(l string) string { return l + "\n" }, func(y *Year, _ Record) bool { return len(y.Records) == HoursPerYear }, ""},
		{"other year", noon, setField(epwYear, "1999"), func(y *Year, _ Record) bool { return y.ReferenceYear == DefaultReferenceYear }, "come from 2 different years"},
		{"nameless", 1, setField(1, "unknown"), func(y *Year, _ Record) bool { return y.Site.Name == "Region, Country" }, ""},
	} {
		y, err := ReadEPW(strings.NewReader(editLine(text, test.line, test.edit)), "odd.epw")
		if err != nil {
			t.Errorf("%s: %v", test.name, err)
			continue
		}
		if r := y.Records[max(0, test.line-9)]; !test.check(y, r) {
			t.Errorf("%s: got %+v", test.name, r)
		}
		if !strings.Contains(strings.Join(y.Notes, "\n"), test.note) {
			t.Errorf("%s: notes %q, want %q", test.name, y.Notes, test.note)
		}
	}
}
