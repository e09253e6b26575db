package study

import (
	"testing"

	"squint/glare/daylight"
	"squint/scene"
	"squint/scene/weather"
)

// TestSpan: the shortest run of bins that holds 70 % of the hours, the first of
// equals. Wanted values: counted by hand.
func TestSpan(t *testing.T) {
	for _, c := range []struct {
		name     string
		bins     []int
		wrap     bool
		from, to int
	}{
		{"one bin", []int{0, 0, 5, 0}, false, 2, 2},
		{"exactly 70 %", []int{3, 7, 0, 0}, false, 1, 1},
		{"a little less", []int{31, 69, 0, 0}, false, 0, 1},
		{"first of equals", []int{5, 5, 5, 5, 0}, false, 0, 2},
		{"gap inside", []int{4, 0, 4, 2, 0}, false, 0, 2},
		{"over the end", []int{4, 0, 0, 0, 1, 5}, true, 5, 0},
		{"not over the end", []int{4, 0, 0, 0, 1, 5}, false, 0, 5},
		{"all alike", []int{1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1}, true, 0, 8},
		{"single hour", []int{0, 0, 0, 1}, true, 3, 3},
		{"far apart", []int{1, 0, 0, 0, 1}, false, 0, 4},
	} {
		n := 0
		for _, b := range c.bins {
			n += b
		}
		if from, to := span(c.bins, n, c.wrap); from != c.from || to != c.to {
			t.Errorf("%s: %v: got %d to %d, want %d to %d", c.name, c.bins, from, to, c.from, c.to)
		}
	}
}

// TestWhen: the words that go with glare.
func TestWhen(t *testing.T) {
	year := &weather.Year{Records: make([]weather.Record, daylight.HoursPerYear)}
	start := [12]int{}
	day := 0
	for m, n := range [12]int{31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31} {
		start[m] = day
		for d := range n {
			for h := range 24 {
				year.Records[24*(day+d)+h].Month = m + 1
			}
		}
		day += n
	}
	// at is the record that starts at an hour of standard time on the 10th.
	at := func(month, hour int) int { return 24*(start[month-1]+9) + hour }
	type above struct{ month, hour, cause int }
	span := func(cause, hour int, months ...int) (out []above) {
		for _, m := range months {
			out = append(out, above{m, hour, cause})
		}
		return out
	}
	causes := []Cause{{Kind: SunDisc, Via: "south"}, {Kind: MirroredSun, Name: "shelf"}, {Kind: SkySeen, Via: "strip"}}
	for _, c := range []struct {
		name   string
		hours  []above
		saving bool
		want   string
	}{
		{"none", nil, false, ""},
		{"one hour", span(0, 8, 6), false, "mostly 8 to 9 h in June, by the sun's disc through south"},
		{"clocks ahead", span(0, 8, 6), true, "mostly 9 to 10 h in June, by the sun's disc through south"},
		{"clocks ahead in summer only", span(0, 8, 1), true, "mostly 8 to 9 h in January, by the sun's disc through south"},
		{"a season", span(1, 12, 2, 3, 4), false, "mostly 12 to 13 h from February to April, by the sun mirrored in shelf"},
		{"over the turn of the year", span(0, 15, 11, 12, 1, 2), false, "mostly 15 to 16 h from November to January, by the sun's disc through south"},
		{"all year", span(2, 10, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12), false, "mostly 10 to 11 h all year, by the sky through strip"},
		{"hours of a day", append(append(span(0, 8, 3), span(0, 9, 3)...), append(span(0, 10, 3), span(0, 16, 3)...)...), false, "mostly 8 to 11 h in March, by the sun's disc through south"},
		{"the commonest cause", append(span(0, 8, 3), append(span(2, 8, 4), span(2, 8, 5)...)...), false, "mostly 8 to 9 h from March to May, by the sky through strip"},
		{"cause unknown", span(-1, 8, 3), false, "mostly 8 to 9 h in March"},
		{"last hour of the day", span(0, 23, 3), true, "mostly 23 to 24 h in March, by the sun's disc through south"},
	} {
		r := &Result{Climate: &scene.Climate{Year: year}}
		if c.saving {
			r.Calendar.SavingFrom, r.Calendar.SavingTo = &daylight.MonthDay{Month: 3, Day: 31}, &daylight.MonthDay{Month: 10, Day: 27}
		}
		v := &ViewResult{DGP: make([]float32, daylight.HoursPerYear), Cause: make([]int16, daylight.HoursPerYear), Causes: causes}
		for h := range daylight.HoursPerYear {
			r.Occupied = append(r.Occupied, h)
			v.DGP[h], v.Cause[h] = .4, -1 // at the limit is not above it
		}
		for _, a := range c.hours {
			v.DGP[at(a.month, a.hour)], v.Cause[at(a.month, a.hour)] = .5, int16(a.cause)
		}
		if got := v.when(r, float64(float32(.4))); got != c.want {
			t.Errorf("%s: got %q, want %q", c.name, got, c.want)
		}
	}
}

// TestSortCauses: numbers follow the words, and hours keep their cause.
func TestSortCauses(t *testing.T) {
	v := &ViewResult{Causes: []Cause{{Kind: SkySeen}, {Kind: Surface, Name: "ceiling"}, {Kind: SunDisc}}, Cause: []int16{0, -1, 2, 1, 0}}
	words := make([]string, len(v.Cause))
	for i, c := range v.Cause {
		if c >= 0 {
			words[i] = v.Causes[c].String()
		}
	}
	v.sortCauses()
	for i, c := range v.Cause {
		if got := ""; c >= 0 {
			got = v.Causes[c].String()
			if got != words[i] {
				t.Errorf("hour %d: got %q, want %q", i, got, words[i])
			}
		} else if words[i] != got {
			t.Errorf("hour %d lost its cause %q", i, words[i])
		}
	}
	for i := 1; i < len(v.Causes); i++ {
		if v.Causes[i-1].String() > v.Causes[i].String() {
			t.Errorf("causes are out of order: %v", v.Causes)
		}
	}
}
