package weather

import (
	"bytes"
	"fmt"
	"io"
	"io/fs"
	"math"
	"strconv"
	"strings"
	"unicode/utf8"
)

// maxFileBytes bounds what is read into memory: hourly files of both formats
// take about 2 MB.
const maxFileBytes = 64 << 20

// Read reads the weather file name of fsys, an EPW or a TMY3, told apart by
// content. Errors about the content are *ParseError.
//
// Like ReadEPW and ReadTMY3 it refuses missing values where they are needed
// (irradiances, dew point), years that are not 8,760 hours in order, and
// irradiances that do not fit together at any moment within two hours of the
// label, as when columns are swapped or the longitude has the wrong sign.
func Read(fsys fs.FS, name string) (*Year, error) {
	f, err := fsys.Open(name)
	if err != nil {
		return nil, fmt.Errorf("weather file: %w", err)
	}
	defer f.Close()
	t, err := readText(f, name)
	if err != nil {
		return nil, err
	}
	switch {
	case t.isEPW():
		return parseEPW(t)
	case t.isTMY3():
		return parseTMY3(t)
	}
	return nil, &ParseError{File: name, Line: 1, Key: "format", Got: quote(t.first()),
		Want: "LOCATION (EPW), or a second line with " + tmy3Date + " (TMY3)",
		Do:   "give an hourly EPW or TMY3 file", Err: ErrFormat}
}

// text is a file cut into lines.
type text struct {
	name  string
	lines []string // lines[i] is line i+1, without its end
	notes []string
}

// readText reads everything and refuses what is no text.
func readText(r io.Reader, name string) (*text, error) {
	b, err := io.ReadAll(io.LimitReader(r, maxFileBytes+1))
	if err != nil {
		return nil, fmt.Errorf("weather file %s: %w", name, err)
	}
	bad := func(got, do string) error {
		return &ParseError{File: name, Key: "content", Got: got, Want: "the text of an EPW or TMY3 file", Do: do, Err: ErrFormat}
	}
	b = bytes.TrimPrefix(b, []byte("\xef\xbb\xbf"))
	switch {
	case len(b) > maxFileBytes:
		return nil, bad(fmt.Sprintf("more than %d MiB", maxFileBytes>>20), "give one hourly year")
	case len(bytes.TrimSpace(b)) == 0:
		return nil, bad("an empty file", "download or copy it again")
	case bytes.HasPrefix(b, []byte("PK\x03\x04")), bytes.HasPrefix(b, []byte("\x1f\x8b")):
		return nil, bad("a compressed archive", "unpack it and give the weather file inside")
	case bytes.HasPrefix(b, []byte("\xff\xfe")), bytes.HasPrefix(b, []byte("\xfe\xff")):
		return nil, bad("UTF-16 text", "save it as plain text (UTF-8)")
	case bytes.IndexByte(b, 0) >= 0:
		return nil, bad("binary data", "check that it is the right file")
	}
	t := &text{name: name}
	s := string(b)
	if !utf8.ValidString(s) {
		// Latin-1, common in older files: every byte is the rune of that number.
		runes := make([]rune, len(b))
		for i, c := range b {
			runes[i] = rune(c)
		}
		s = string(runes)
		t.notes = append(t.notes, "The file is not UTF-8 and was read as Latin-1.")
	}
	s = strings.ReplaceAll(s, "\r\n", "\n")
	s = strings.ReplaceAll(s, "\r", "\n")
	t.lines = strings.Split(s, "\n")
	return t, nil
}

func (t *text) first() string { return t.lines[0] }

func (t *text) isEPW() bool {
	return strings.EqualFold(firstField(t.first()), "LOCATION")
}

func (t *text) isTMY3() bool {
	return len(t.lines) > 1 && strings.HasPrefix(strings.TrimSpace(t.lines[1]), tmy3Date)
}

func firstField(line string) string {
	f, _, _ := strings.Cut(line, ",")
	return strings.TrimSpace(f)
}

// row is one line cut at its commas, with the parsing of its fields.
type row struct {
	file   string
	line   int
	fields []string
}

func (r row) fail(key, got, want, do string, cause error) error {
	return &ParseError{File: r.file, Line: r.line, Key: key, Got: got, Want: want, Do: do, Err: cause}
}

// number parses a finite number; -0 becomes 0.
func (r row) number(col int, key string) (float64, error) {
	s := strings.TrimSpace(r.fields[col])
	v, err := strconv.ParseFloat(s, 64)
	if err != nil || math.IsNaN(v) || math.IsInf(v, 0) {
		return 0, r.fail(fmt.Sprintf("%s (column %d)", key, col+1), quote(s), "a number",
			"correct the field or check that no column was added or removed", ErrField)
	}
	if v == 0 {
		v = 0 // the files know "-0.00"
	}
	return v, nil
}

// whole parses an integer; some programs write 1.0 for 1.
func (r row) whole(col int, key string) (int, error) {
	v, err := r.number(col, key)
	if err != nil {
		return 0, err
	}
	if v != math.Trunc(v) || math.Abs(v) > 1e6 {
		return 0, r.fail(fmt.Sprintf("%s (column %d)", key, col+1), quote(strings.TrimSpace(r.fields[col])),
			"a whole number", "give hourly rows with whole hours", ErrField)
	}
	return int(v), nil
}

// irradiance parses a needed irradiance, in W/m². The zero offset of good
// thermopile instruments at night, down to -7 W/m² (class A of ISO 9060:2018,
// from memory), becomes 0 and is counted.
func (r row) irradiance(col int, key string, missing func(float64) bool, negative *int) (float64, error) {
	v, err := r.number(col, key)
	if err != nil {
		return 0, err
	}
	column := fmt.Sprintf("%s (column %d)", key, col+1)
	switch {
	case missing(v):
		return 0, r.fail(column, strings.TrimSpace(r.fields[col])+" (the code for a missing value)", "W/m2",
			"fill the gap from a neighbouring hour or take another file", ErrMissing)
	case v < -7 || v > maxIrradiance:
		return 0, r.fail(column, fmt.Sprintf("%g", v), fmt.Sprintf("0 to %d W/m2", maxIrradiance),
			"check the order and the units of the columns", ErrImplausible)
	case v < 0:
		*negative++
		v = 0
	}
	return v, nil
}

// quote shortens a found text for a message.
func quote(s string) string {
	const most = 40
	if len(s) > most {
		cut := most
		for cut > 0 && !utf8.RuneStart(s[cut]) {
			cut--
		}
		s = s[:cut] + "..."
	}
	return strconv.Quote(s)
}

// finishYear fills in what both formats have in common and checks that the
// columns agree with each other and with the place.
func finishYear(y *Year, c *calendar, lastLine, negative, noPressure, noDryBulb int) (*Year, error) {
	records, referenceYear, notes, err := c.finish(lastLine)
	if err != nil {
		return nil, err
	}
	y.Records, y.ReferenceYear = records, referenceYear
	y.Notes = append(y.Notes, notes...)
	if negative > 0 {
		y.Notes = append(y.Notes, fmt.Sprintf("%d small negative irradiances (instrument offset) were taken as 0.", negative))
	}
	if noPressure > 0 {
		y.Notes = append(y.Notes, fmt.Sprintf("%d hours lack the pressure; the standard atmosphere at %g m was taken.", noPressure, y.Site.ElevationM))
	}
	if noDryBulb > 0 {
		y.Notes = append(y.Notes, fmt.Sprintf("%d hours lack the air temperature.", noDryBulb))
	}
	if err := y.checkColumns(); err != nil {
		return nil, err
	}
	return y, nil
}
