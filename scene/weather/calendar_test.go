package weather

import (
	"errors"
	"strings"
	"testing"
	"time"
)

func TestSlotCountsTheHoursOfAYear(t *testing.T) {
	// Wanted: the standard library's calendar of a non-leap year.
	at := time.Date(2023, 1, 1, 0, 0, 0, 0, time.UTC)
	for i := 0; i < HoursPerYear; i++ {
		got, ok := slot(int(at.Month()), at.Day(), at.Hour()+1)
		if !ok || got != i {
			t.Fatalf("slot(%v) = %d, %t, want %d", at, got, ok, i)
		}
		if m, d, h := label(i); m != int(at.Month()) || d != at.Day() || h != at.Hour()+1 {
			t.Fatalf("label(%d) = %d %d %d, want %v", i, m, d, h, at)
		}
		at = at.Add(time.Hour)
	}
	for _, bad := range [][3]int{{0, 1, 1}, {13, 1, 1}, {1, 0, 1}, {1, 32, 1}, {2, 29, 1}, {4, 31, 1}, {1, 1, 0}, {1, 1, 25}} {
		if s, ok := slot(bad[0], bad[1], bad[2]); ok {
			t.Errorf("slot(%v) = %d, want none", bad, s)
		}
	}
}

// leapYear adds 24 rows of 29 February, the copies of the 28th, to an EPW of
// eight header lines.
func leapYear(epw string) string {
	lines := strings.Split(epw, "\n")
	first := 8 + 58*24 // 28 February, hour 1
	var leap []string
	for _, l := range lines[first : first+24] {
		leap = append(leap, setField(epwDay, "29")(l))
	}
	all := append([]string{}, lines[:first+24]...)
	all = append(all, leap...)
	return strings.Join(append(all, lines[first+24:]...), "\n")
}

func TestLeapDay(t *testing.T) {
	text := epwText(t, synthYear(synthSite, -0.5))
	y, err := ReadEPW(strings.NewReader(leapYear(text)), "leap.epw")
	if err != nil {
		t.Fatal(err)
	}
	if n := len(y.Records); n != HoursPerYear {
		t.Errorf("got %d records, want %d", n, HoursPerYear)
	}
	if !strings.Contains(strings.Join(y.Notes, "\n"), "24 rows of 29 February were left out") {
		t.Errorf("notes %q do not tell about 29 February", y.Notes)
	}
	if r := y.Records[59*24]; r.Month != 3 || r.Day != 1 || r.Line != 8+60*24+1 {
		t.Errorf("after the leap day: got %d/%d of line %d, want 3/1 of line %d", r.Month, r.Day, r.Line, 8+60*24+1)
	}

	// 8,760 rows of a leap year with its 29 February lack 31 December.
	lines := strings.Split(leapYear(text), "\n")
	short := strings.Join(lines[:8+HoursPerYear], "\n")
	_, err = ReadEPW(strings.NewReader(short), "leap.epw")
	if !errors.Is(err, ErrCalendar) || !strings.Contains(err.Error(), "8736 hours without 29 February") ||
		!strings.Contains(err.Error(), "31 December hour 1") {
		t.Errorf("leap year cut at 8760 rows: got %v", err)
	}
}
