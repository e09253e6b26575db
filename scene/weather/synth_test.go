package weather

import (
	"bytes"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

var synthSite = Site{Name: "Invented Hill, Region, Country", LatitudeDeg: 50, LongitudeDeg: 10, UTCOffsetH: 1, ElevationM: 120}

// synthYear makes a year of invented weather whose columns close exactly with
// the sun of the closed form at offsetH from the labels: cloudiness by day from
// a fixed sequence, direct light thinning towards the horizon.
func synthYear(site Site, offsetH float64) *Year {
	y := &Year{File: "invented.epw", Format: "EPW", Site: site, ReferenceYear: 2022, Comments: []string{"invented weather, for tests"}}
	sun := site.roughSun()
	y.Records = make([]Record, HoursPerYear)
	for i := range y.Records {
		r := &y.Records[i]
		var hour int
		r.Month, r.Day, hour = label(i)
		r.EndH = float64(hour)
		r.DryBulbC, r.DewPointC, r.PressurePa = 12, 6, 100000
		r.GlobalLx, r.DirectLx, r.DiffuseLx, r.ZenithCdM2 = math.NaN(), math.NaN(), math.NaN(), math.NaN()
		if c := sun(y.Moment(i, offsetH)); c > 0 {
			clear := math.Mod(float64(i/24)*0.618, 1) // of the day, 0 to 1
			r.DNI = 950 * clear * math.Exp(-0.15/(c+0.05))
			r.DHI = (80 + 300*(1-clear)) * c
			r.GHI = r.DHI + r.DNI*c
		}
	}
	return y
}

func epwText(t testing.TB, y *Year) string {
	t.Helper()
	var b bytes.Buffer
	if err := WriteEPW(&b, y); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

// tmy3Text writes y in the columns of a TMY3 that are read, plus some that are
// not.
func tmy3Text(y *Year) string {
	var b strings.Builder
	s := y.Site
	fmt.Fprintf(&b, "123456,\"INVENTED HILL\",XX,%.1f,%.3f,%.3f,%.0f\n", s.UTCOffsetH, s.LatitudeDeg, s.LongitudeDeg, s.ElevationM)
	b.WriteString("Date (MM/DD/YYYY),Time (HH:MM),ETR (W/m^2),GHI (W/m^2),GHI source,DNI (W/m^2),DHI (W/m^2),GH illum (lx),DN illum (lx),DH illum (lx),Zenith lum (cd/m^2),Dry-bulb (C),Dew-point (C),Pressure (mbar),Alb (unitless)\n")
	for _, r := range y.Records {
		fmt.Fprintf(&b, "%02d/%02d/2001,%02.0f:00,0,%.2f,1,%.2f,%.2f,0,0,0,0,%.1f,%.1f,%.0f,0.2\n",
			r.Month, r.Day, r.EndH, r.GHI, r.DNI, r.DHI, r.DryBulbC, r.DewPointC, r.PressurePa/100)
	}
	return b.String()
}

// editLine replaces line n (from 1) of a text by what edit makes of it; an
// empty result removes the line.
func editLine(text string, n int, edit func(string) string) string {
	lines := strings.Split(text, "\n")
	if s := edit(lines[n-1]); s != "" {
		lines[n-1] = s
	} else {
		lines = append(lines[:n-1], lines[n:]...)
	}
	return strings.Join(lines, "\n")
}

// setField replaces one field, counted from 0, of a line.
func setField(col int, value string) func(string) string {
	return func(line string) string {
		f := strings.Split(line, ",")
		f[col] = value
		return strings.Join(f, ",")
	}
}

func remove(string) string { return "" }

// sharedDir returns the directory of the real files, or skips: they do not
// belong to the project and may be absent.
func sharedDir(t testing.TB) string {
	t.Helper()
	dir, err := os.Getwd()
	if err != nil {
		t.Fatal(err)
	}
	for {
		if _, err := os.Stat(filepath.Join(dir, "go.mod")); err == nil {
			break
		}
		up := filepath.Dir(dir)
		if up == dir {
			t.Fatal("no go.mod above the package")
		}
		dir = up
	}
	shared := filepath.Join(dir, "..", "shared", "weather")
	if _, err := os.Stat(shared); err != nil {
		if os.Getenv("SQUINT_REQUIRE_SHARED") == "1" {
			t.Fatalf("SQUINT_REQUIRE_SHARED=1, but the real weather files are absent: %v", err)
		}
		t.Skipf("the real weather files, which are no part of the project, are absent: %v", err)
	}
	return shared
}
