package weather

import (
	"fmt"
	"io"
	"math"
	"strings"
)

// Columns of an EPW row, counted from 0.
// Source: EPW weather data dictionary, after Crawley, Hand, Lawrie 1999,
// Improving the weather information available to simulation programs.
const (
	epwYear       = 0
	epwMonth      = 1
	epwDay        = 2
	epwHour       = 3
	epwMinute     = 4
	epwDryBulb    = 6
	epwDewPoint   = 7
	epwPressure   = 9
	epwGHI        = 13
	epwDNI        = 14
	epwDHI        = 15
	epwGlobalLx   = 16
	epwDirectLx   = 17
	epwDiffuseLx  = 18
	epwZenithCdM2 = 19

	epwColumns = 35
	// Old files lack the last columns (albedo, rain); nothing here needs them.
	epwFewestColumns = 20
)

// ReadEPW reads an EPW file; name is used in messages. Errors about the
// content are *ParseError. A year of 8,784 hours is accepted without its 29
// February.
func ReadEPW(r io.Reader, name string) (*Year, error) {
	t, err := readText(r, name)
	if err != nil {
		return nil, err
	}
	return parseEPW(t)
}

func parseEPW(t *text) (*Year, error) {
	y := &Year{File: t.name, Format: "EPW", Notes: t.notes}
	if !t.isEPW() {
		return nil, &ParseError{File: t.name, Line: 1, Key: "header", Got: quote(t.first()), Want: "LOCATION,...",
			Do: "restore the eight header lines of the EPW, LOCATION to DATA PERIODS", Err: ErrFormat}
	}
	if err := y.epwLocation(row{t.name, 1, strings.Split(t.first(), ",")}); err != nil {
		return nil, err
	}
	data, err := y.epwHeader(t)
	if err != nil {
		return nil, err
	}
	y.Invented = saysInvented(y.Comments)

	c := newCalendar(t.name)
	var negative, noPressure, noDryBulb, oddMinutes, last int
	for i := data; i < len(t.lines); i++ {
		if strings.TrimSpace(t.lines[i]) == "" {
			continue
		}
		last = i + 1
		rw := row{t.name, i + 1, strings.Split(t.lines[i], ",")}
		year, minute, r, err := rw.epwRecord(&negative)
		if err != nil {
			return nil, err
		}
		if minute != 0 && minute != 60 {
			oddMinutes++
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
	if oddMinutes > 0 {
		y.Notes = append(y.Notes, fmt.Sprintf("%d rows carry a minute other than 0 or 60; the hour's label alone was used.", oddMinutes))
	}
	if h, ok := y.commentOffsetH(); ok {
		y.Claim = fmt.Sprintf("a comment states that the irradiances are taken %s", offsetWords(h))
	} else {
		y.Claim = "EPW rule: means over the hour that ends at the label, the sun at mid-hour"
	}
	return finishYear(y, c, last, negative, noPressure, noDryBulb)
}

// epwLocation reads LOCATION,city,region,country,source,station,latitude,
// longitude,time zone,elevation.
func (y *Year) epwLocation(rw row) error {
	if len(rw.fields) < 10 {
		return rw.fail("LOCATION", fmt.Sprintf("%d fields", len(rw.fields)), "10",
			"give city, region, country, source, station, latitude, longitude, time zone, elevation", ErrFormat)
	}
	for _, f := range []struct {
		col int
		key string
		to  *float64
	}{
		{6, "latitude", &y.Site.LatitudeDeg},
		{7, "longitude", &y.Site.LongitudeDeg},
		{8, "time zone", &y.Site.UTCOffsetH},
		{9, "elevation", &y.Site.ElevationM},
	} {
		v, err := rw.number(f.col, f.key)
		if err != nil {
			return err
		}
		*f.to = v
	}
	y.nameSite(rw.fields[1:4])
	return checkSite(rw.file, rw.line, y.Site)
}

// nameSite joins the known parts of the name, or names the coordinates.
func (y *Year) nameSite(parts []string) {
	var known []string
	for _, p := range parts {
		p = oneLine(strings.Trim(strings.TrimSpace(p), `"`))
		if p != "" && p != "-" && !strings.EqualFold(p, "unknown") {
			known = append(known, p)
		}
	}
	if y.Site.Name = strings.Join(known, ", "); y.Site.Name != "" {
		return
	}
	ns, ew := "N", "E"
	if y.Site.LatitudeDeg < 0 {
		ns = "S"
	}
	if y.Site.LongitudeDeg < 0 {
		ew = "W"
	}
	y.Site.Name = fmt.Sprintf("%.2f %s %.2f %s", math.Abs(y.Site.LatitudeDeg), ns, math.Abs(y.Site.LongitudeDeg), ew)
	y.Notes = append(y.Notes, "The file does not name its place; its coordinates are used.")
}

// epwHeader reads the lines after LOCATION and returns the index of the first
// row of data.
func (y *Year) epwHeader(t *text) (int, error) {
	for i := 1; i < len(t.lines); i++ {
		key := strings.ToUpper(firstField(t.lines[i]))
		_, rest, _ := strings.Cut(t.lines[i], ",")
		switch {
		case strings.HasPrefix(key, "COMMENTS"):
			if c := oneLine(rest); c != "" {
				y.Comments = append(y.Comments, c)
			}
		case key == "DATA PERIODS":
			return i + 1, y.epwPeriods(row{t.name, i + 1, strings.Split(t.lines[i], ",")})
		case key != "" && key[0] >= '0' && key[0] <= '9':
			return 0, &ParseError{File: t.name, Line: i + 1, Key: "header", Got: quote(t.lines[i]), Want: "DATA PERIODS before the first row",
				Do: "restore the eight header lines of the EPW, LOCATION to DATA PERIODS", Err: ErrFormat}
		}
	}
	return 0, &ParseError{File: t.name, Line: len(t.lines), Key: "header", Got: "the end of the file", Want: "DATA PERIODS and 8760 rows",
		Do: "the file seems to be cut off: download or copy it again", Err: ErrFormat}
}

// epwPeriods refuses files of more than one row an hour.
func (y *Year) epwPeriods(rw row) error {
	if len(rw.fields) < 3 {
		return nil // the rows themselves will tell
	}
	perHour, err := rw.whole(2, "records per hour")
	if err != nil {
		return err
	}
	if perHour != 1 {
		return rw.fail("DATA PERIODS: records per hour", fmt.Sprintf("%d", perHour), "1", "give hourly means", ErrFormat)
	}
	return nil
}

// epwRecord reads one row. Missing pressure and dry-bulb temperature are NaN.
func (rw row) epwRecord(negative *int) (year, minute int, r Record, err error) {
	if len(rw.fields) < epwFewestColumns {
		return 0, 0, r, rw.fail("row", fmt.Sprintf("%d columns", len(rw.fields)), fmt.Sprintf("%d", epwColumns),
			"the row is cut off: download or copy the file again", ErrFormat)
	}
	r.Line = rw.line
	var hour int
	for _, f := range []struct {
		col int
		key string
		to  *int
	}{{epwYear, "year", &year}, {epwMonth, "month", &r.Month}, {epwDay, "day", &r.Day}, {epwHour, "hour", &hour}, {epwMinute, "minute", &minute}} {
		if *f.to, err = rw.whole(f.col, f.key); err != nil {
			return 0, 0, r, err
		}
	}
	r.EndH = float64(hour)
	missing := func(v float64) bool { return v >= 9999 } // data dictionary: "missing if >= 9999"
	for _, f := range []struct {
		col int
		key string
		to  *float64
	}{{epwGHI, "global horizontal irradiance", &r.GHI}, {epwDNI, "direct normal irradiance", &r.DNI}, {epwDHI, "diffuse horizontal irradiance", &r.DHI}} {
		if *f.to, err = rw.irradiance(f.col, f.key, missing, negative); err != nil {
			return 0, 0, r, err
		}
	}
	for _, f := range []struct {
		col     int
		key     string
		to      *float64
		missing float64 // and above
	}{
		{epwDryBulb, "dry-bulb temperature", &r.DryBulbC, 99.9},
		{epwDewPoint, "dew-point temperature", &r.DewPointC, 99.9},
		{epwPressure, "pressure", &r.PressurePa, 999999},
		{epwGlobalLx, "global horizontal illuminance", &r.GlobalLx, 999900},
		{epwDirectLx, "direct normal illuminance", &r.DirectLx, 999900},
		{epwDiffuseLx, "diffuse horizontal illuminance", &r.DiffuseLx, 999900},
		{epwZenithCdM2, "zenith luminance", &r.ZenithCdM2, 9999},
	} {
		v, err := rw.number(f.col, f.key)
		if err != nil {
			return 0, 0, r, err
		}
		// The dictionary's "zenith luminance missing if >= 9999" would drop real
		// values, which reach several 10 kcd/m2: only the codes themselves count.
		if v >= f.missing && (f.col != epwZenithCdM2 || isNines(v)) {
			v = math.NaN()
		}
		*f.to = v
	}
	return year, minute, r, rw.checkAir(r, epwDewPoint, epwPressure)
}

// isNines tells the codes 9999, 99999, ...
func isNines(v float64) bool {
	return v == 9999 || v == 99999 || v == 999999 || v == 999900
}
