package control

import (
	"slices"
	"strings"
	"testing"

	"squint/glare/daylight"
)

// hourly are the steps of that many days, from 1 January, which is that day of
// the week, in use from 8 to 18 h.
func hourly(days, weekday int) []Step {
	var list []Step
	for d := range days {
		for h := range 24 {
			list = append(list, Step{At: d*24 + h, Day: d, Weekday: (weekday + d) % 7, ClockH: float64(h) + 0.5, Share: 1, Occupied: h >= 8 && h < 18})
		}
	}
	return list
}

// roller has two states, and blind three.
var (
	roller = Unit{Name: "roller", Group: "south", States: []string{"raised", "drawn"}}
	blind  = Unit{Name: "blind", Group: "south", States: []string{"raised", "open", "shut"}}
)

// chosen are the indices of the steps in which a law does not choose state 0.
func chosen(t *testing.T, u Unit, l Law, steps []Step, f Facts) (hours []int, states []int) {
	t.Helper()
	states, err := l.Choose(&u, steps, f)
	if err != nil {
		t.Fatal(err)
	}
	for i, s := range states {
		if s > 0 {
			hours = append(hours, i)
		}
	}
	return hours, states
}

func TestTimetable(t *testing.T) {
	every := [7]bool{true, true, true, true, true, true, true}
	weekend := [7]bool{5: true, 6: true}
	year := Period{Days: every, ToH: 24, LastDay: 364, State: 1}
	with := func(change func(p *Period)) Timetable {
		p := year
		change(&p)
		return Timetable{Periods: []Period{p}}
	}
	// Two days from a Friday on; wanted hours by reading the period.
	for _, c := range []struct {
		name string
		law  Timetable
		want []int
	}{
		{"noon", with(func(p *Period) { p.FromH, p.ToH = 12, 13.5 }), []int{12, 36}}, // 13.5 itself is out
		{"over midnight", with(func(p *Period) { p.FromH, p.ToH = 22, 1 }), []int{0, 22, 23, 24, 46, 47}},
		{"Saturday evening", with(func(p *Period) { p.Days, p.FromH = weekend, 22 }), []int{46, 47}},
		{"second of January", with(func(p *Period) { p.FromH, p.FirstDay, p.LastDay = 22, 1, 1 }), []int{46, 47}},
		{"over the new year", with(func(p *Period) { p.FromH, p.FirstDay, p.LastDay = 22, 300, 0 }), []int{22, 23}},
		{"first one counts", Timetable{Periods: []Period{{Days: every, ToH: 23, LastDay: 364}, year}}, []int{23, 47}},
	} {
		if got, _ := chosen(t, roller, c.law, hourly(2, 4), Facts{}); !slices.Equal(got, c.want) {
			t.Errorf("%s: got %v, want %v", c.name, got, c.want)
		}
	}
	if got, _ := chosen(t, roller, Timetable{State: 1}, hourly(1, 0), Facts{}); len(got) != 24 {
		t.Errorf("outside of all periods: got %d hours in state 1, want 24", len(got))
	}
}

func TestFacadeSun(t *testing.T) {
	//                        6    7    8    9    10   11   12   13   14 h
	day := map[int]float64{6: 90, 7: 201, 8: 200, 9: 160, 10: 150, 11: 140, 12: 300, 13: 100, 14: 90, 23: 500}
	facts := Facts{FacadeWm2: func(i int) float64 { return day[i%24] }}
	for _, c := range []struct {
		name string
		law  FacadeSun
		want []int
	}{
		{"one threshold", FacadeSun{CloseWm2: 200, ReopenWm2: 200, Closed: 1}, []int{7, 12, 23}},
		{"two thresholds", FacadeSun{CloseWm2: 200, ReopenWm2: 150, Closed: 1}, []int{7, 8, 9, 12, 23}},
		{"two hours later", FacadeSun{CloseWm2: 200, ReopenWm2: 150, DelayH: 2, Closed: 1}, []int{7, 8, 9, 10, 12, 13, 23}},
		{"longer than the lull", FacadeSun{CloseWm2: 200, ReopenWm2: 150, DelayH: 3, Closed: 1}, []int{7, 8, 9, 10, 11, 12, 13, 14, 23}},
	} {
		steps := hourly(2, 0)
		want := slices.Clone(c.want)
		for _, h := range c.want {
			want = append(want, 24+h) // the second day starts open, whatever the evening before was
		}
		if got, _ := chosen(t, roller, c.law, steps, facts); !slices.Equal(got, want) {
			t.Errorf("%s: got %v, want %v", c.name, got, want)
		}
	}
	if _, states := chosen(t, blind, FacadeSun{CloseWm2: 200, ReopenWm2: 200, Open: 1, Closed: 2}, hourly(1, 0), facts); states[6] != 1 || states[7] != 2 {
		t.Errorf("states by name: got %d and %d, want 1 and 2", states[6], states[7])
	}
}

// TestFacadeSunDelay: the delay ends with the step that completes it, however
// times between steps of 10 minutes are rounded.
func TestFacadeSunDelay(t *testing.T) {
	var steps []Step
	for i := range 24 * 6 {
		steps = append(steps, Step{At: i, ClockH: float64(i/6) + (float64(i%6)+0.5)/6, Share: 1. / 6})
	}
	for last := range 24*6 - 5 {
		facts := Facts{FacadeWm2: func(i int) float64 {
			if i == last {
				return 300
			}
			return 0
		}}
		want := []int{last, last + 1, last + 2} // half an hour
		if got, _ := chosen(t, roller, FacadeSun{CloseWm2: 200, ReopenWm2: 200, DelayH: 0.5, Closed: 1}, steps, facts); !slices.Equal(got, want) {
			t.Errorf("sun in step %d: got %v closed, want %v", last, got, want)
		}
	}
}

func TestWorkPlaneSun(t *testing.T) {
	// Of 100 sensors, as many as the hour are struck; by 999 lx before noon.
	facts := Facts{DirectLx: func(i int) []float32 {
		list := make([]float32, 100)
		for s := range i {
			list[s] = 1000
			if i < 6 && s > 0 {
				list[s] = 999
			}
		}
		return list
	}}
	got, _ := chosen(t, roller, WorkPlaneSun{Rule: daylight.DefaultBlindRule, Closed: 1}, hourly(1, 0), facts)
	var want []int
	for h := 6; h < 24; h++ { // more than 2 of 100, IES LM-83-12
		want = append(want, h)
	}
	if !slices.Equal(got, want) {
		t.Errorf("got %v, want %v", got, want)
	}
	two := Facts{DirectLx: func(i int) []float32 { return append(make([]float32, 98), 1000, 1000) }}
	if got, _ := chosen(t, roller, WorkPlaneSun{Rule: daylight.DefaultBlindRule, Closed: 1}, hourly(1, 0), two); got != nil {
		t.Errorf("2 of 100 sensors: got %v closed, want none: that is not more than 2 %%", got)
	}
}

func TestActive(t *testing.T) {
	sun := map[int]float64{3: 200, 8: 50, 10: 51, 15: 10, 24 + 20: 300, 48 + 9: 60}
	facts := Facts{DeskWm2: func(i int) []float64 { return []float64{0, sun[i]} }}
	steps := hourly(4, 0)
	for i := range steps {
		if steps[i].Day == 3 {
			steps[i].Occupied = false
		}
	}
	// Closed by the sun of 10 h, over night, open on arrival; not closed by the
	// sun of the night or of 20 h, when nobody is there; closed at 9 h of the
	// third day and through the fourth, a holiday.
	var want []int
	for i := range steps {
		if i >= 10 && i < 24+8 || i >= 48+9 {
			want = append(want, i)
		}
	}
	if got, _ := chosen(t, roller, Active{CloseWm2: 50, Closed: 1}, steps, facts); !slices.Equal(got, want) {
		t.Errorf("got %v, want %v", got, want)
	}
}

func TestFollow(t *testing.T) {
	names := []string{"shut", "raised", "open"}
	got, err := Follow{}.Choose(&blind, hourly(1, 0)[:3], Facts{Following: func(i int) string { return names[i] }})
	if err != nil || !slices.Equal(got, []int{2, 0, 1}) {
		t.Errorf("got %v, %v, want [2 0 1]", got, err)
	}
	if _, err := (Follow{}).Choose(&blind, hourly(1, 0), Facts{Following: func(int) string { return "ajar" }}); err == nil || !strings.Contains(err.Error(), `got the state "ajar" to follow the sun, want one of ["raised" "open" "shut"]`) {
		t.Errorf("unknown state: got %v", err)
	}
}

func TestFactsThatLack(t *testing.T) {
	for _, l := range []Law{Follow{}, FacadeSun{}, WorkPlaneSun{}, Active{}} {
		if _, err := l.Choose(&roller, hourly(1, 0), Facts{}); err == nil || !strings.Contains(err.Error(), `"roller": its law asks for`) {
			t.Errorf("%T without facts: got %v", l, err)
		}
	}
}
