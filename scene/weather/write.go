package weather

import (
	"bufio"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"
	"time"
)

// WriteEPW writes y as an EPW file: eight header lines and 8,760 rows of 35
// columns, with the missing codes of the data dictionary for everything that a
// Record does not know or holds as NaN. Irradiances and temperatures are
// rounded to 0.01, the rest to whole units. The first comment goes into the
// COMMENTS 1 line and all others into COMMENTS 2; if y.Invented is set and no
// comment says so, COMMENTS 1 begins with "invented data". The rows carry
// y.ReferenceYear.
//
// It fails when the records are not the 8,760 hours of a year in order, when a
// value cannot stand in the file, or when w fails.
//
// Source: EPW weather data dictionary, after Crawley, Hand, Lawrie 1999,
// Improving the weather information available to simulation programs.
func WriteEPW(w io.Writer, y *Year) error {
	if err := writable(y); err != nil {
		return fmt.Errorf("write EPW %s: %w", y.File, err)
	}
	b := bufio.NewWriter(w)
	writeHeader(b, y)
	for _, r := range y.Records {
		writeRow(b, y.referenceYear(), r)
	}
	// bufio.Writer keeps the first error of all the writes above.
	if err := b.Flush(); err != nil {
		return fmt.Errorf("write EPW %s: %w", y.File, err)
	}
	return nil
}

func writable(y *Year) error {
	if len(y.Records) != HoursPerYear {
		return fmt.Errorf("records: got %d, want %d: %w", len(y.Records), HoursPerYear, ErrCalendar)
	}
	if isLeap(y.referenceYear()) {
		return fmt.Errorf("reference year: got the leap year %d, want one of 365 days: %w", y.referenceYear(), ErrCalendar)
	}
	if err := checkSite(y.File, 0, y.Site); err != nil {
		return err
	}
	for i, r := range y.Records {
		hour := int(r.EndH)
		if s, ok := slot(r.Month, r.Day, hour); !ok || s != i || float64(hour) != r.EndH {
			return fmt.Errorf("record %d: got month %d day %d hour %g, want %s: %w", i, r.Month, r.Day, r.EndH, hourName(i), ErrCalendar)
		}
		for _, v := range []float64{r.GHI, r.DNI, r.DHI} {
			if v < 0 || v > maxIrradiance {
				return fmt.Errorf("record %d (%s): irradiance: got %g, want 0 to %g W/m2: %w", i, hourName(i), v, float64(maxIrradiance), ErrField)
			}
		}
		if r.DewPointC < minDewPointC || r.DewPointC > maxDewPointC {
			return fmt.Errorf("record %d (%s): dew point: got %g, want %d to %d degrees C: %w", i, hourName(i), r.DewPointC, minDewPointC, maxDewPointC, ErrField)
		}
		if r.PressurePa < minPressurePa || r.PressurePa > maxPressurePa {
			return fmt.Errorf("record %d (%s): pressure: got %g, want %d to %d Pa, or NaN: %w", i, hourName(i), r.PressurePa, minPressurePa, maxPressurePa, ErrField)
		}
	}
	return nil
}

func writeHeader(b *bufio.Writer, y *Year) {
	s := y.Site
	// LOCATION has a field each for city, region and country; a name of
	// comma-separated parts, as the readers make it, goes back into these.
	place := []string{"-", "-", "-"}
	for i, part := range strings.SplitN(s.Name, ",", 3) {
		if part = oneField(part); part != "" {
			place[i] = part
		}
	}
	fmt.Fprintf(b, "LOCATION,%s,-,-,%s,%s,%s,%s\n", strings.Join(place, ","),
		exact(s.LatitudeDeg), exact(s.LongitudeDeg), exact(s.UTCOffsetH), exact(s.ElevationM))
	fmt.Fprint(b, "DESIGN CONDITIONS,0\n")
	fmt.Fprint(b, "TYPICAL/EXTREME PERIODS,0\n")
	fmt.Fprint(b, "GROUND TEMPERATURES,0\n")
	fmt.Fprint(b, "HOLIDAYS/DAYLIGHT SAVINGS,No,0,0,0\n")
	comments := y.Comments
	if y.Invented && !saysInvented(comments) {
		comments = append([]string{"invented data"}, comments...)
	}
	first, rest := "", ""
	if len(comments) > 0 {
		first, rest = oneLine(comments[0]), oneLine(strings.Join(comments[1:], "; "))
	}
	fmt.Fprintf(b, "COMMENTS 1,%s\n", first)
	fmt.Fprintf(b, "COMMENTS 2,%s\n", rest)
	newYear := time.Date(y.referenceYear(), time.January, 1, 0, 0, 0, 0, time.UTC)
	fmt.Fprintf(b, "DATA PERIODS,1,1,Data,%s, 1/ 1,12/31\n", newYear.Weekday())
}

// Source and uncertainty marks of a row: "?9" is another source of unknown
// uncertainty (EPW weather data dictionary; from memory).
const rowFlags = "?9?9?9?9?9?9?9?9?9?9?9?9?9?9?9?9?9?9?9?9"

func writeRow(b *bufio.Writer, year int, r Record) {
	fmt.Fprintf(b, "%d,%d,%d,%d,60,%s", year, r.Month, r.Day, int(r.EndH), rowFlags)
	for _, f := range []struct {
		value    float64
		decimals int
		missing  string
	}{
		{r.DryBulbC, 2, "99.9"},
		{r.DewPointC, 2, "99.9"},
		{math.NaN(), 0, "999"}, // relative humidity
		{r.PressurePa, 0, "999999"},
		{math.NaN(), 0, "9999"}, // extraterrestrial horizontal
		{math.NaN(), 0, "9999"}, // extraterrestrial direct normal
		{math.NaN(), 0, "9999"}, // infrared from the sky
		{r.GHI, 2, "9999"},
		{r.DNI, 2, "9999"},
		{r.DHI, 2, "9999"},
		{r.GlobalLx, 0, "999999"},
		{r.DirectLx, 0, "999999"},
		{r.DiffuseLx, 0, "999999"},
		{r.ZenithCdM2, 0, "9999"},
	} {
		b.WriteByte(',')
		text := f.missing
		if !math.IsNaN(f.value) && !math.IsInf(f.value, 0) {
			text = strconv.FormatFloat(f.value+0, 'f', f.decimals, 64) // -0 + 0 is 0
		}
		b.WriteString(text)
	}
	// Wind direction and speed, total and opaque cloud, visibility, ceiling,
	// present weather (observed or not, codes), precipitable water, aerosol
	// depth, snow depth, days since snow, albedo, rain depth and duration.
	b.WriteString(",999,999,99,99,9999,99999,9,999999999,999,0.999,999,99,999,999,99\n")
}

// exact writes a number so that reading gives the same value.
func exact(v float64) string { return strconv.FormatFloat(v, 'f', -1, 64) }

// oneLine makes a text fit into a comment line.
func oneLine(s string) string {
	return strings.Join(strings.Fields(s), " ")
}

// oneField makes a text fit between two commas.
func oneField(s string) string {
	return oneLine(strings.ReplaceAll(s, ",", " "))
}
