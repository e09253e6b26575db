package main

import (
	"bytes"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"
	"time"

	"github.com/chromedp/chromedp"

	"squint/cmd/squint/internal/page"
	"squint/cmd/squint/internal/study"
	"squint/glare/daylight"
	"squint/glare/verdict"
	"squint/scene"
)

// A year of half hours: all that the page says and draws of a record goes by its
// own time, to the minute, and hours are counted as hours. The year is made up:
// each hour of the small project's climate twice, a quarter of an hour before and
// after its moment, and clocks are put forward in summer.
func TestPageOfHalfHours(t *testing.T) {
	if testing.Short() {
		t.Skip("starts a browser")
	}
	const n = 2
	dir := t.TempDir()
	r, w, inside := madeUpYear(t, dir, 24)
	r.Calendar.SavingFrom, r.Calendar.SavingTo = &daylight.MonthDay{Month: 3, Day: 27}, &daylight.MonthDay{Month: 10, Day: 30}
	used := r.Calendar.Occupied().Mask(daylight.HoursPerYear)
	c := *r.Climate
	c.Moments, r.Occupied, r.Standing = nil, nil, make([]int16, n*daylight.HoursPerYear)
	for i := range r.Standing {
		r.Standing[i] = -1
	}
	for _, m := range r.Climate.Moments {
		for k := range n {
			half := *m
			half.Step, half.Time, half.Occupied = n*m.Step+k, m.Time.Add(time.Duration(30*k-15)*time.Minute), used[m.Step]
			c.Moments = append(c.Moments, &half)
			r.Standing[half.Step] = 0
			if half.Occupied {
				r.Occupied = append(r.Occupied, half.Step)
			}
		}
	}
	c.SinAltitude, c.DiffuseLx = repeated(c.SinAltitude, n), repeated(c.DiffuseLx, n)
	r.Climate, r.Calendar.PerHour = &c, n
	r.Views = append(r.Views, floorView(r, 0, w, inside, 8, n))
	tab := openPage(t, dir, r)
	if got := eval[string](t, tab, "document.getElementById('pick-hour').max"); got != "47" {
		t.Errorf("the hour's slider ends at %s, want 47", got)
	}
	when := func(m *scene.Moment) string {
		return m.Time.Add(time.Duration(r.Calendar.ClockShiftH(m.Step/24/n)) * time.Hour).Format("2 January, 15:04 h")
	}
	minutes := map[string]bool{}
	for _, i := range []int{40, 41, 500, 501, 801} {
		m := c.Moments[i]
		eval[bool](t, tab, fmt.Sprintf("squint.show({record:%d}),true", m.Step))
		tab.settle(t)
		for _, id := range []string{"now", "r-year", "r-eye", "r-room"} {
			if got := eval[string](t, tab, "document.getElementById('"+id+"').textContent"); len(got) < len(when(m)) || got[:len(when(m))] != when(m) {
				t.Errorf("record %d, %s: got %q, want it to begin with %q", m.Step, id, got, when(m))
			}
		}
		minutes[when(m)[len(when(m))-4:]] = true
		// A click on the record's place in the chart chooses it and not its neighbour.
		at := eval[[]float64](t, tab, fmt.Sprintf("(()=>{squint.show({record:0}); const [x,z]=squint.pointOf(%d); const c=document.getElementById('c-year'); c.scrollIntoView({block:'center',behavior:'instant'}); const q=c.getBoundingClientRect(); return [q.left+x,q.top+z]})()", m.Step))
		tab.do(t, chromedp.MouseClickXY(at[0], at[1]))
		tab.settle(t)
		if got := eval[int](t, tab, "squint.state.record"); got != m.Step {
			t.Errorf("a click at the place of record %d chose %d", m.Step, got)
		}
	}
	if len(minutes) < 2 {
		t.Fatalf("all moments have the minutes %v: the test sees nothing", minutes)
	}
	readPictures(t, tab, r.Views[0].Shots)
	// After midnight of a summer's evening it is the next day: 1 July, 23:45 by
	// standard time is 2 July, 00:45.
	eval[bool](t, tab, fmt.Sprintf("squint.show({record:%d}),true", (181*24+23)*n+1))
	tab.settle(t)
	if got := eval[string](t, tab, "document.getElementById('now').textContent"); got != "2 July, 00:45 h" {
		t.Errorf("late on 1 July: got %q, want 2 July, 00:45 h", got)
	}
	for key, want := range map[string]int{"ArrowUp": 8001, "ArrowDown": 7999, "ArrowRight": 8048, "ArrowLeft": 7952} {
		eval[bool](t, tab, "squint.show({record:8000}),true")
		eval[bool](t, tab, fmt.Sprintf("document.getElementById('c-year').dispatchEvent(new KeyboardEvent('keydown',{key:%q,bubbles:true,cancelable:true}))||true", key))
		if got := eval[int](t, tab, "squint.state.record"); got != want {
			t.Errorf("%s: got record %d, want %d", key, got, want)
		}
	}
	// The table and the sentence on causes count hours.
	over, limit := 0, float32(0)
	for _, l := range verdict.ProtectionLevels {
		if l.Name == r.Project.Criteria.Glare {
			limit = float32(l.DGP)
		}
	}
	for _, h := range r.Occupied {
		if v := r.Views[0].DGP[h]; v > limit {
			over++
		}
	}
	sum := eval[float64](t, tab, "[...document.querySelectorAll('#t-year td')].reduce((s,e)=>s+Number(e.textContent),0)")
	if want := float64(over) / n; sum != want || over == 0 {
		t.Errorf("the table counts %g hours over the limit, want %g", sum, want)
	}
	text := eval[string](t, tab, "document.getElementById('causes').textContent")
	if m := regexp.MustCompile(`Of the ([0-9.]+) hours over`).FindStringSubmatch(text); m == nil || number(t, m[1]) != float64(over)/n {
		t.Errorf("causes: got %q, want %g hours", text, float64(over)/n)
	}
	if len(tab.complaints) > 0 {
		t.Errorf("the browser complained: %q", tab.complaints)
	}
	shot, err := chromedp.Run(tab.ctx, chromedp.FullScreenshot(100))
	if err != nil {
		t.Fatal(err)
	}
	keep(t, "page-half-hours.png", shot)
}

// openPage opens the page of a year that was made up.
func openPage(t *testing.T, dir string, r *study.Result) *tab {
	t.Helper()
	var b bytes.Buffer
	if err := page.Write(&b, []*page.Archive{page.Build(r, page.Words{Title: "Made up", Outcome: "not met"})}, page.Options{}); err != nil {
		t.Fatal(err)
	}
	file := filepath.Join(dir, "page.html")
	if err := os.WriteFile(file, b.Bytes(), 0o666); err != nil {
		t.Fatal(err)
	}
	return openTab(t, file)
}

// repeated has each value n times in a row.
func repeated(v []float64, n int) (out []float64) {
	for _, x := range v {
		for range n {
			out = append(out, x)
		}
	}
	return out
}

// Steps of five minutes are more than 16 bits count: late in the year too a
// picture is that of its record.
func TestPageOfFiveMinutes(t *testing.T) {
	if testing.Short() {
		t.Skip("starts a browser")
	}
	const n = 12
	dir := t.TempDir()
	r, w, inside := madeUpYear(t, dir, 24)
	c := *r.Climate
	c.Moments, r.Occupied, r.Standing = nil, nil, make([]int16, n*daylight.HoursPerYear)
	for _, m := range r.Climate.Moments {
		if !m.Occupied || m.Step*n < 1<<16 {
			continue
		}
		for k := range n {
			part := *m
			part.Step, part.Time = n*m.Step+k, m.Time.Add(time.Duration(300*k-1650)*time.Second)
			c.Moments, r.Occupied = append(c.Moments, &part), append(r.Occupied, part.Step)
		}
	}
	c.SinAltitude, c.DiffuseLx = repeated(c.SinAltitude, n), repeated(c.DiffuseLx, n)
	r.Climate, r.Calendar.PerHour = &c, n
	r.Views = append(r.Views, floorView(r, 0, w, inside, 8, n))
	if first := r.Views[0].Shots.Records[0]; first < 1<<16 {
		t.Fatalf("the first picture is of record %d: the test sees nothing", first)
	}
	readPictures(t, openPage(t, dir, r), r.Views[0].Shots)
}

// readPictures reads luminances off the picture of the hour by keyboard, and wants
// those of the film, sunlit pixels among them. Readings have two digits: 5 % of
// the least first digits.
func readPictures(t *testing.T, tab *tab, s *study.Shots) {
	t.Helper()
	out := make([]float64, s.Film.Points)
	x, y, lit, all := 12, 12, 0, 0
	isLit := func(frame, p int) bool {
		return s.Film.Lit[frame*((s.Film.Points+7)/8)+p>>3]>>(p&7)&1 != 0
	}
	// Two hours with the sun on what is looked at, and two without.
	var frames []int
	for _, want := range []bool{true, false} {
		n := 0
		for frame := 7; frame < s.Film.Frames && n < 2; frame += 5 {
			if isLit(frame, slices.Index(s.Inside, int32(13*s.View.Width+12))) == want {
				frames = append(frames, frame)
				n++
			}
		}
	}
	for _, frame := range frames {
		eval[bool](t, tab, fmt.Sprintf("squint.show({record:%d}),true", s.Records[frame]))
		tab.settle(t)
		s.Film.At(frame, out)
		for _, key := range []string{"ArrowDown", "ArrowRight", "ArrowDown", "ArrowLeft"} {
			x, y = x+map[string]int{"ArrowRight": 1, "ArrowLeft": -1}[key], y+map[string]int{"ArrowDown": 1}[key]
			eval[bool](t, tab, fmt.Sprintf("document.getElementById('c-eye').dispatchEvent(new KeyboardEvent('keydown',{key:%q,bubbles:true,cancelable:true}))||true", key))
			text := eval[string](t, tab, "document.getElementById('r-eye').textContent")
			m := regexp.MustCompile(`^About ([0-9\x{202f}]+) cd/m`).FindStringSubmatch(text)
			p := slices.Index(s.Inside, int32(y*s.View.Width+x))
			if m == nil || p < 0 {
				t.Fatalf("pixel %d, %d: got %q", x, y, text)
			}
			if got := number(t, strings.ReplaceAll(m[1], "\u202f", "")); math.Abs(got-out[p])/out[p] > 0.051 {
				t.Errorf("frame %d, pixel %d, %d: got %g cd/m2, want %.1f", frame, x, y, got, out[p])
			}
			all++
			if isLit(frame, p) {
				lit++
			}
		}
		for y > 12 {
			eval[bool](t, tab, "document.getElementById('c-eye').dispatchEvent(new KeyboardEvent('keydown',{key:'ArrowUp',bubbles:true,cancelable:true}))||true")
			y--
		}
	}
	if lit == 0 || lit == all {
		t.Errorf("%d of %d pixels are sunlit: the test sees half of it", lit, all)
	}
}
