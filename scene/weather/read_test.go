package weather

import (
	"errors"
	"io/fs"
	"strings"
	"testing"
	"testing/fstest"
	"testing/iotest"
)

func TestReadTellsFormatsApart(t *testing.T) {
	y := synthYear(synthSite, -0.5)
	epw := epwText(t, y)
	fsys := fstest.MapFS{
		"a.epw":    {Data: []byte(epw)},
		"a.csv":    {Data: []byte(tmy3Text(y))},
		"crlf.txt": {Data: []byte("\xef\xbb\xbf" + strings.ReplaceAll(epw, "\n", "\r\n"))},
		"latin1":   {Data: []byte(strings.Replace(epw, "Invented Hill", "Orl\xe9ans", 1))},
	}
	for name, want := range map[string][2]string{
		"a.epw":    {"EPW", "Invented Hill, Region, Country"},
		"a.csv":    {"TMY3", "INVENTED HILL, XX"},
		"crlf.txt": {"EPW", "Invented Hill, Region, Country"},
		"latin1":   {"EPW", "Orléans, Region, Country"},
	} {
		got, err := Read(fsys, name)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if got.Format != want[0] || got.Site.Name != want[1] || got.File != name || len(got.Records) != HoursPerYear {
			t.Errorf("%s: got %s %q of %s with %d records, want %v", name, got.Format, got.Site.Name, got.File, len(got.Records), want)
		}
	}
}

func TestReadRefusesOtherContent(t *testing.T) {
	for name, test := range map[string]struct{ content, words string }{
		"empty":  {"", "an empty file"},
		"blank":  {"\n \r\n\t", "an empty file"},
		"zip":    {"PK\x03\x04rest", "unpack it"},
		"gzip":   {"\x1f\x8brest", "unpack it"},
		"binary": {"LOCATION,a\x00b", "binary data"},
		"utf16":  {"\xff\xfeL\x00O\x00", "UTF-16"},
		"prose":  {"Dear Sir,\nplease find", "want LOCATION (EPW)"},
	} {
		_, err := Read(fstest.MapFS{"f": {Data: []byte(test.content)}}, "f")
		var pe *ParseError
		if !errors.As(err, &pe) || !errors.Is(err, ErrFormat) || pe.File != "f" || pe.Do == "" || !strings.Contains(err.Error(), test.words) {
			t.Errorf("%s: got %v, want %q", name, err, test.words)
		}
	}
	if _, err := Read(fstest.MapFS{}, "absent"); !errors.Is(err, fs.ErrNotExist) {
		t.Errorf("absent file: got %v", err)
	}
	if _, err := ReadEPW(iotest.ErrReader(fs.ErrPermission), "f"); !errors.Is(err, fs.ErrPermission) {
		t.Errorf("failing reader: got %v", err)
	}
}

func TestParseErrorWording(t *testing.T) {
	e := &ParseError{File: "a.epw", Line: 14, Key: "latitude", Got: "95", Want: "-90 to 90", Do: "give degrees", Err: ErrField}
	if got, want := e.Error(), "a.epw:14: latitude: got 95, want -90 to 90; give degrees"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}
