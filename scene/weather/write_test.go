package weather

import (
	"errors"
	"io"
	"math"
	"strings"
	"testing"
)

func TestWriteEPWRoundTrip(t *testing.T) {
	y := synthYear(synthSite, -0.5)
	y.Comments = []string{"invented weather, with a comma", "second", "third"}
	y.Records[4000].GlobalLx, y.Records[4000].ZenithCdM2 = 61234, 12345
	y.Records[7].DryBulbC = math.NaN()
	text := epwText(t, y)
	got, err := ReadEPW(strings.NewReader(text), "again.epw")
	if err != nil {
		t.Fatal(err)
	}
	if got.Site != y.Site {
		t.Errorf("site: got %+v, want %+v", got.Site, y.Site)
	}
	if !got.Invented || got.ReferenceYear != 2022 || got.Format != "EPW" {
		t.Errorf("invented %t, year %d, format %s", got.Invented, got.ReferenceYear, got.Format)
	}
	if len(got.Comments) != 2 || got.Comments[0] != y.Comments[0] || got.Comments[1] != "second; third" {
		t.Errorf("comments %q", got.Comments)
	}
	for i, r := range y.Records {
		g := got.Records[i]
		if g.Line != 9+i || g.Month != r.Month || g.Day != r.Day || g.EndH != r.EndH {
			t.Fatalf("record %d: got %+v, want %+v", i, g, r)
		}
		for _, p := range [][3]float64{ // got, want, half of the last written digit
			{g.GHI, r.GHI, 0.005}, {g.DNI, r.DNI, 0.005}, {g.DHI, r.DHI, 0.005},
			{g.DryBulbC, r.DryBulbC, 0.005}, {g.DewPointC, r.DewPointC, 0.005}, {g.PressurePa, r.PressurePa, 0.5},
			{g.GlobalLx, r.GlobalLx, 0.5}, {g.DirectLx, r.DirectLx, 0.5}, {g.DiffuseLx, r.DiffuseLx, 0.5}, {g.ZenithCdM2, r.ZenithCdM2, 0.5},
		} {
			if math.IsNaN(p[0]) != math.IsNaN(p[1]) || math.Abs(p[0]-p[1]) > p[2]*(1+1e-9) {
				t.Fatalf("record %d: got %+v, want %+v", i, g, r)
			}
		}
	}
	if again := epwText(t, got); again != text {
		t.Error("writing what was read does not give the same text")
	}
}

func TestWriteEPWColumnsAndCodes(t *testing.T) {
	lines := strings.Split(strings.TrimSuffix(epwText(t, synthYear(synthSite, -0.5)), "\n"), "\n")
	if n := len(lines); n != 8+HoursPerYear {
		t.Fatalf("got %d lines, want %d", n, 8+HoursPerYear)
	}
	for i, key := range []string{"LOCATION", "DESIGN CONDITIONS", "TYPICAL/EXTREME PERIODS", "GROUND TEMPERATURES",
		"HOLIDAYS/DAYLIGHT SAVINGS", "COMMENTS 1", "COMMENTS 2", "DATA PERIODS"} { // EPW data dictionary
		if firstField(lines[i]) != key {
			t.Errorf("line %d begins with %q, want %q", i+1, firstField(lines[i]), key)
		}
	}
	if want := "DATA PERIODS,1,1,Data,Saturday, 1/ 1,12/31"; lines[7] != want { // 1 January 2022 was a Saturday
		t.Errorf("got %q, want %q", lines[7], want)
	}
	// Missing codes: EPW data dictionary.
	codes := map[int]string{8: "999", 10: "9999", 11: "9999", 12: "9999", 16: "999999", 17: "999999", 18: "999999", 19: "9999",
		20: "999", 21: "999", 22: "99", 23: "99", 24: "9999", 25: "99999", 26: "9", 27: "999999999", 28: "999",
		29: "0.999", 30: "999", 31: "99", 32: "999", 33: "999", 34: "99"}
	for i, l := range lines[8:] {
		f := strings.Split(l, ",")
		if len(f) != 35 { // EPW data dictionary
			t.Fatalf("line %d has %d columns, want 35", i+9, len(f))
		}
		for col, code := range codes {
			if f[col] != code {
				t.Fatalf("line %d column %d: got %q, want %q", i+9, col+1, f[col], code)
			}
		}
	}
}

func TestWriteEPWSaysInvented(t *testing.T) {
	y := synthYear(synthSite, -0.5)
	y.Comments, y.Invented = nil, true
	got, err := ReadEPW(strings.NewReader(epwText(t, y)), "x.epw")
	if err != nil {
		t.Fatal(err)
	}
	if !got.Invented || got.Comments[0] != "invented data" {
		t.Errorf("invented %t, comments %q", got.Invented, got.Comments)
	}
	y.Invented = false
	if got, err = ReadEPW(strings.NewReader(epwText(t, y)), "x.epw"); err != nil || got.Invented {
		t.Errorf("a year that is not invented: %v, invented %t", err, got.Invented)
	}
}

type fullDisk struct{}

func (fullDisk) Write([]byte) (int, error) { return 0, io.ErrShortWrite }

func TestWriteEPWRefuses(t *testing.T) {
	for name, test := range map[string]struct {
		spoil func(*Year)
		want  error
	}{
		"short":      {func(y *Year) { y.Records = y.Records[:8759] }, ErrCalendar},
		"order":      {func(y *Year) { y.Records[3], y.Records[4] = y.Records[4], y.Records[3] }, ErrCalendar},
		"part-hour":  {func(y *Year) { y.Records[3].EndH = 4.5 }, ErrCalendar},
		"leap year":  {func(y *Year) { y.ReferenceYear = 2024 }, ErrCalendar},
		"negative":   {func(y *Year) { y.Records[3].DNI = -1 }, ErrField},
		"no air":     {func(y *Year) { y.Records[3].PressurePa = 0 }, ErrField},
		"dew point":  {func(y *Year) { y.Records[3].DewPointC = 99.9 }, ErrField},
		"off earth":  {func(y *Year) { y.Site.LatitudeDeg = 91 }, ErrField},
		"NaN degree": {func(y *Year) { y.Site.LongitudeDeg = math.NaN() }, ErrField},
	} {
		y := synthYear(synthSite, -0.5)
		test.spoil(y)
		if err := WriteEPW(io.Discard, y); !errors.Is(err, test.want) {
			t.Errorf("%s: got %v, want %v", name, err, test.want)
		}
	}
	if err := WriteEPW(fullDisk{}, synthYear(synthSite, -0.5)); !errors.Is(err, io.ErrShortWrite) {
		t.Errorf("full disk: got %v", err)
	}
}
