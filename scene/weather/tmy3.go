package weather

import (
	"fmt"
	"io"
	"math"
	"strings"
)

// tmy3Date begins the second line of a TMY3 file.
const tmy3Date = "Date (MM/DD/YYYY)"

// tmy3Missing is the code for a missing value.
// Source: Wilcox, Marion 2008, Users Manual for TMY3 Data Sets,
// NREL/TP-581-43156.
const tmy3Missing = -9900

// tmy3Columns are the headings of the columns that are read.
// Source: Wilcox, Marion 2008, table 1-2 (table number from memory).
type tmy3Columns struct {
	date, time, ghi, dni, dhi              int
	dryBulb, dewPoint, pressure            int
	globalLx, directLx, diffuseLx, zenithL int // -1 where the file has none
	most                                   int // the highest of all
}

// ReadTMY3 reads a TMY3 file; name is used in messages. Errors about the
// content are *ParseError. A year of 8,784 hours is accepted without its 29
// February.
func ReadTMY3(r io.Reader, name string) (*Year, error) {
	t, err := readText(r, name)
	if err != nil {
		return nil, err
	}
	return parseTMY3(t)
}

func parseTMY3(t *text) (*Year, error) {
	y := &Year{File: t.name, Format: "TMY3", Notes: t.notes,
		Claim: "TMY3 rule: means over the hour that ends at the label, the sun at mid-hour"}
	if !t.isTMY3() {
		got := "the end of the file"
		if len(t.lines) > 1 {
			got = quote(t.lines[1])
		}
		return nil, &ParseError{File: t.name, Line: 2, Key: "header", Got: got, Want: tmy3Date + ",...",
			Do: "restore the two header lines of the TMY3: station and column names", Err: ErrFormat}
	}
	if err := y.tmy3Station(row{t.name, 1, strings.Split(t.first(), ",")}); err != nil {
		return nil, err
	}
	cols, err := findTMY3Columns(row{t.name, 2, strings.Split(t.lines[1], ",")})
	if err != nil {
		return nil, err
	}
	c := newCalendar(t.name)
	var negative, noPressure, noDryBulb int
	last := 2
	for i := 2; i < len(t.lines); i++ {
		if strings.TrimSpace(t.lines[i]) == "" {
			continue
		}
		last = i + 1
		rw := row{t.name, i + 1, strings.Split(t.lines[i], ",")}
		year, r, err := rw.tmy3Record(cols, &negative)
		if err != nil {
			return nil, err
		}
		if math.IsNaN(r.PressurePa) {
			r.PressurePa = standardPressurePa(y.Site.ElevationM)
			noPressure++
		}
		if math.IsNaN(r.DryBulbC) {
			noDryBulb++
		}
		if err := c.add(year, r); err != nil {
			return nil, err
		}
	}
	return finishYear(y, c, last, negative, noPressure, noDryBulb)
}

// tmy3Station reads number,"name",state,time zone,latitude,longitude,elevation.
// A name may itself contain commas: the last five fields are counted from the
// end.
func (y *Year) tmy3Station(rw row) error {
	for len(rw.fields) > 7 && strings.TrimSpace(rw.fields[len(rw.fields)-1]) == "" {
		rw.fields = rw.fields[:len(rw.fields)-1]
	}
	n := len(rw.fields)
	if n < 7 {
		return rw.fail("station", fmt.Sprintf("%d fields", n), "7",
			"give station number, name, state, time zone, latitude, longitude, elevation", ErrFormat)
	}
	for _, f := range []struct {
		col int
		key string
		to  *float64
	}{
		{n - 4, "time zone", &y.Site.UTCOffsetH},
		{n - 3, "latitude", &y.Site.LatitudeDeg},
		{n - 2, "longitude", &y.Site.LongitudeDeg},
		{n - 1, "elevation", &y.Site.ElevationM},
	} {
		v, err := rw.number(f.col, f.key)
		if err != nil {
			return err
		}
		*f.to = v
	}
	y.nameSite(rw.fields[1 : n-4])
	return checkSite(rw.file, rw.line, y.Site)
}

func findTMY3Columns(rw row) (tmy3Columns, error) {
	var c tmy3Columns
	for _, f := range []struct {
		heading string
		needed  bool
		to      *int
	}{
		{tmy3Date, true, &c.date},
		{"Time (HH:MM)", true, &c.time},
		{"GHI (W/m^2)", true, &c.ghi},
		{"DNI (W/m^2)", true, &c.dni},
		{"DHI (W/m^2)", true, &c.dhi},
		{"Dry-bulb (C)", true, &c.dryBulb},
		{"Dew-point (C)", true, &c.dewPoint},
		{"Pressure (mbar)", true, &c.pressure},
		{"GH illum (lx)", false, &c.globalLx},
		{"DN illum (lx)", false, &c.directLx},
		{"DH illum (lx)", false, &c.diffuseLx},
		{"Zenith lum (cd/m^2)", false, &c.zenithL},
	} {
		*f.to = -1
		for i, h := range rw.fields {
			if strings.EqualFold(oneLine(h), f.heading) {
				*f.to = i
			}
		}
		if *f.to < 0 && f.needed {
			return c, rw.fail("header", "no column "+f.heading, "the column names of the TMY3 manual",
				"restore the second header line", ErrFormat)
		}
		c.most = max(c.most, *f.to)
	}
	return c, nil
}

// tmy3Record reads one row. Missing pressure and dry-bulb temperature are NaN.
func (rw row) tmy3Record(c tmy3Columns, negative *int) (year int, r Record, err error) {
	if len(rw.fields) <= c.most {
		return 0, r, rw.fail("row", fmt.Sprintf("%d columns", len(rw.fields)), fmt.Sprintf("at least %d", c.most+1),
			"the row is cut off: download or copy the file again", ErrFormat)
	}
	r.Line = rw.line
	if year, r.Month, r.Day, err = rw.tmy3Day(c.date); err != nil {
		return 0, r, err
	}
	if r.EndH, err = rw.tmy3Hour(c.time); err != nil {
		return 0, r, err
	}
	missing := func(v float64) bool { return v == tmy3Missing }
	for _, f := range []struct {
		col int
		key string
		to  *float64
	}{{c.ghi, "global horizontal irradiance", &r.GHI}, {c.dni, "direct normal irradiance", &r.DNI}, {c.dhi, "diffuse horizontal irradiance", &r.DHI}} {
		if *f.to, err = rw.irradiance(f.col, f.key, missing, negative); err != nil {
			return 0, r, err
		}
	}
	for _, f := range []struct {
		col   int
		key   string
		to    *float64
		scale float64
	}{
		{c.dryBulb, "dry-bulb temperature", &r.DryBulbC, 1},
		{c.dewPoint, "dew-point temperature", &r.DewPointC, 1},
		{c.pressure, "pressure", &r.PressurePa, 100}, // mbar
		{c.globalLx, "global horizontal illuminance", &r.GlobalLx, 1},
		{c.directLx, "direct normal illuminance", &r.DirectLx, 1},
		{c.diffuseLx, "diffuse horizontal illuminance", &r.DiffuseLx, 1},
		{c.zenithL, "zenith luminance", &r.ZenithCdM2, 1},
	} {
		*f.to = math.NaN()
		if f.col < 0 {
			continue
		}
		v, err := rw.number(f.col, f.key)
		if err != nil {
			return 0, r, err
		}
		if v != tmy3Missing {
			*f.to = v * f.scale
		}
	}
	return year, r, rw.checkAir(r, c.dewPoint, c.pressure)
}

// tmy3Day reads MM/DD/YYYY.
func (rw row) tmy3Day(col int) (year, month, day int, err error) {
	s := strings.TrimSpace(rw.fields[col])
	parts := row{rw.file, rw.line, strings.Split(s, "/")}
	if len(parts.fields) != 3 {
		return 0, 0, 0, rw.fail("date", quote(s), "MM/DD/YYYY", "correct the field", ErrField)
	}
	if month, err = parts.whole(0, "date"); err == nil {
		if day, err = parts.whole(1, "date"); err == nil {
			year, err = parts.whole(2, "date")
		}
	}
	if err != nil {
		return 0, 0, 0, rw.fail("date", quote(s), "MM/DD/YYYY", "correct the field", ErrField)
	}
	return year, month, day, nil
}

// tmy3Hour reads HH:MM, 01:00 to 24:00.
func (rw row) tmy3Hour(col int) (float64, error) {
	s := strings.TrimSpace(rw.fields[col])
	h, m, ok := strings.Cut(s, ":")
	parts := row{rw.file, rw.line, []string{h, m}}
	var hour, minute int
	var err error
	if ok {
		if hour, err = parts.whole(0, "time"); err == nil {
			minute, err = parts.whole(1, "time")
		}
	}
	if !ok || err != nil || hour < 1 || hour > 24 || minute != 0 {
		return 0, rw.fail("time", quote(s), "01:00 to 24:00, whole hours",
			"give hourly rows labelled at the end of the hour", ErrField)
	}
	return float64(hour), nil
}
