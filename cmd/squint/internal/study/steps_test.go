package study

import (
	"fmt"
	"math"
	"strings"
	"testing"
	"testing/fstest"

	"squint/glare/daylight"
	"squint/scene"
)

// allDay puts the tiny room in use from half past eight to a quarter past four.
func allDay(stepMin int) string {
	text := fmt.Sprintf(tinyProject, 0.8) + fmt.Sprintf("step_min = %d\n", stepMin)
	text = replaceOnce(text, `days = ["wed"]`, `days = ["mon", "tue", "wed", "thu", "fri", "sat", "sun"]`)
	text = replaceOnce(text, "from = \"11:00\"\nto = \"12:00\"", "from = \"08:30\"\nto = \"16:15\"")
	return replaceOnce(text, `glare = "medium"`, `glare = "none"`)
}

func allDayRoom(t *testing.T, stepMin int) *Input {
	return prepared(t, fstest.MapFS{"project.toml": {Data: []byte(allDay(stepMin))}, "room.obj": {Data: []byte(tinyRoom())}})
}

// constant makes a year of quarters whose light is that of their hour, late
// steps later; in use is what the quarters' hours are.
func constant(quarters, hourly *Input, late int) {
	used := hourly.Occupied.Mask(daylight.HoursPerYear)
	quarters.Occupied = nil
	for h, in := range used {
		for k := range 4 {
			if in {
				quarters.Occupied = append(quarters.Occupied, 4*h+k)
			}
		}
	}
	var moments []*scene.Moment
	for _, m := range hourly.Climate.Moments {
		for k := range 4 {
			c := *m
			c.Step, c.Share = 4*m.Step+k+late, 0.25
			moments = append(moments, &c)
		}
	}
	quarters.Climate.Moments, quarters.Standings[0].Moments = moments, moments
}

// TestConstantHours: where the light does not change within the hour, quarters
// give the daylight autonomy of hours. They differ in the random numbers of the
// sun alone, so that only those hours may count otherwise whose illuminance lies
// within z standard errors of the threshold; z = 6 of eight batches is passed by
// one value in 2,000 (Student's distribution), and those passing must lie right
// at the threshold too. Hours without sun are the same to the last bit.
func TestConstantHours(t *testing.T) {
	hourly := allDayRoom(t, 60)
	want := study(t, hourly, 1)
	quarters := allDayRoom(t, 15)
	constant(quarters, hourly, 0)
	got := study(t, quarters, 1)
	if a, b := len(want.Occupied), len(got.Occupied); b != 4*a {
		t.Fatalf("got %d quarters for %d hours", b, a)
	}
	close := func(s, step int, r *Result) bool {
		return math.Abs(float64(r.Planes[0].E[s][step])-daThresholdLx) <= 6*float64(r.Planes[0].StdErr[s][step])
	}
	apart := func(r *Result) (most float64, dark int) {
		for s := range want.Planes[0].E {
			bound := 0.0
			for _, h := range want.Occupied {
				for k := range 4 {
					if close(s, h, want) || close(s, 4*h+k, r) {
						bound += 0.25 / float64(len(want.Occupied))
					}
				}
			}
			most = math.Max(most, math.Abs(r.Planes[0].DA[s]-want.Planes[0].DA[s])-bound)
		}
		for _, m := range hourly.Climate.Moments {
			for k := range 4 {
				if m.SunNormalLx == 0 && r.Planes[0].E[0][4*m.Step+k] != want.Planes[0].E[0][m.Step] {
					dark++
				}
			}
		}
		return most, dark
	}
	if most, dark := apart(got); most > 1e-12 || dark > 0 {
		t.Errorf("daylight autonomy is %g further apart than the errors allow, %d quarters without sun differ", most, dark)
	}
	if want.Planes[0].DA[0] == 0 {
		t.Error("the room has no autonomy to compare")
	}
	// The twin: the light comes an hour and a half late.
	constant(quarters, hourly, 6)
	if most, dark := apart(study(t, quarters, 1)); most <= 0 && dark == 0 {
		t.Error("light that comes late passes too")
	}
}

// TestSteps: use that begins and ends within an hour is counted to the quarter,
// and series, clocks and hours go with the steps.
func TestSteps(t *testing.T) {
	in := allDayRoom(t, 15)
	r := study(t, in, 2)
	if got := r.Calendar.InHours(len(r.Occupied)); got != 365*7.75 {
		t.Errorf("got %g hours of use, want 365 times 7.75", got)
	}
	if n := len(r.Daylight); n != 4*daylight.DaylightHoursPerYear || len(r.Clock) != 4*3650 {
		t.Errorf("got %d and %d steps, want those of 4,380 and 3,650 hours", n, len(r.Clock))
	}
	v := &r.Views[0]
	for name, n := range map[string]int{"DGP": len(v.DGP), "E": len(r.Planes[0].E[0]), "standing": len(r.Standing), "sunlit": len(r.Openings[0].Sunlit)} {
		if n != 4*daylight.HoursPerYear {
			t.Errorf("%s: got %d values, want %d", name, n, 4*daylight.HoursPerYear)
		}
	}
	if h := v.Hours[0]; h.Total != 365*7.75 || r.Planes[0].SDA.Hours != 3650 {
		t.Errorf("got %g hours of glare and %g of sDA, want %g and 3650", h.Total, r.Planes[0].SDA.Hours, 365*7.75)
	}
	most := float32(0)
	for _, h := range r.Occupied {
		most = max(most, v.DGP[h])
	}
	if w := v.Worst; w == nil || float32(w.DGP) != most || v.DGP[w.Moment.Step] != most {
		t.Errorf("worst step %+v, want a DGP of %g", v.Worst, most)
	}
	sun := 0.0
	for _, s := range r.Openings[0].Seasons {
		sun += s.Hours
	}
	if sun < 40 || sun > 12*24 {
		t.Errorf("got %g hours with the sun before the window in twelve days", sun)
	}
	if got := in.Climate.PerHour(); got != 4 {
		t.Errorf("got %d steps an hour", got)
	}
	if s := stepWord(in.Climate); !strings.HasPrefix(s, "step") {
		t.Errorf("counted in %q", s)
	}
}
