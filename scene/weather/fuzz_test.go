package weather

import (
	"errors"
	"math"
	"strings"
	"testing"
)

// fuzzRead mutates the first line of a file and one row. The two alone are
// always read; the complete year around them only if parse takes both, since
// reading it is a thousand times slower.
func fuzzRead(f *testing.F, good string, line int, parse func(header, row string) error, read func(string) (*Year, error)) {
	lines := strings.Split(good, "\n")
	f.Fuzz(func(t *testing.T, header, row string) {
		check := func(y *Year, err error) {
			t.Helper()
			if err != nil {
				var pe *ParseError
				if !errors.As(err, &pe) || pe.Do == "" || pe.Got == "" || pe.Want == "" || pe.Err == nil {
					t.Fatalf("got %v, want a complete ParseError", err)
				}
				return
			}
			checkYear(t, y)
		}
		y, err := read(header + "\n" + row)
		check(y, err)
		if err := parse(header, row); err != nil {
			check(nil, err)
			return
		}
		all := append([]string{}, lines...)
		all[0], all[line-1] = header, row
		y, err = read(strings.Join(all, "\n"))
		check(y, err)
	})
}

func checkYear(t *testing.T, y *Year) {
	t.Helper()
	if len(y.Records) != HoursPerYear {
		t.Fatalf("%d records without an error", len(y.Records))
	}
	for i, r := range y.Records {
		s, ok := slot(r.Month, r.Day, int(r.EndH))
		sum := r.GHI + r.DNI + r.DHI + r.DewPointC + r.PressurePa
		if !ok || s != i || math.IsNaN(sum) || math.IsInf(sum, 0) || r.GHI < 0 || r.DNI < 0 || r.DHI < 0 {
			t.Fatalf("record %d: %+v", i, r)
		}
	}
	var b strings.Builder
	if err := WriteEPW(&b, y); err != nil {
		t.Fatalf("cannot write what was read: %v", err)
	}
	if _, err := ReadEPW(strings.NewReader(b.String()), "again.epw"); err != nil {
		t.Fatalf("cannot read what was written: %v", err)
	}
}

func FuzzReadEPW(f *testing.F) {
	good := epwText(f, synthYear(synthSite, -0.5))
	line := rowOf(6, 10, 12)
	lines := strings.Split(good, "\n")
	f.Add(lines[0], lines[line-1])
	f.Add("LOCATION,,,,,,-90,180,14,-1000", setField(epwDNI, "-0.00")(lines[line-1]))
	f.Add("LOCATION", "DATA PERIODS,1,1")
	f.Add("location,a,b,c,d,e,1e1,0x10,1,1\nDATA PERIODS", "1,2,29,1,0,,1,1,1,1e5,1,1,1,1,1,1,1,1,1,1")
	parse := func(header, text string) error {
		if err := new(Year).epwLocation(row{"fuzz.epw", 1, strings.Split(header, ",")}); err != nil {
			return err
		}
		_, _, _, err := row{"fuzz.epw", line, strings.Split(text, ",")}.epwRecord(new(int))
		return err
	}
	fuzzRead(f, good, line, parse, func(s string) (*Year, error) { return ReadEPW(strings.NewReader(s), "fuzz.epw") })
}

func FuzzReadTMY3(f *testing.F) {
	good := tmy3Text(synthYear(synthSite, -0.5))
	const line = 3 + 160*24 + 11
	lines := strings.Split(good, "\n")
	f.Add(lines[0], lines[line-1])
	f.Add(`1,"a, b",c,-5.0,36.1,-79.95,273`, setField(3, "-9900")(lines[line-1]))
	f.Add(lines[0]+"\n"+lines[1], lines[2])
	f.Add("", "Date (MM/DD/YYYY),")
	cols, err := findTMY3Columns(row{"fuzz.csv", 2, strings.Split(lines[1], ",")})
	if err != nil {
		f.Fatal(err)
	}
	parse := func(header, text string) error {
		if err := new(Year).tmy3Station(row{"fuzz.csv", 1, strings.Split(header, ",")}); err != nil {
			return err
		}
		_, _, err := row{"fuzz.csv", line, strings.Split(text, ",")}.tmy3Record(cols, new(int))
		return err
	}
	fuzzRead(f, good, line, parse, func(s string) (*Year, error) { return ReadTMY3(strings.NewReader(s), "fuzz.csv") })
}
