package control

import (
	"reflect"
	"strings"
	"testing"
	"testing/fstest"

	"squint/glare/daylight"
	"squint/scene"
	"squint/scene/project"
)

// office has one of each system that moves, at two openings of one group and
// one of another.
const office = `weather.file = "a.epw"
mesh = [{ file = "a.stl", unit = "m", up = "z", finish = "white" }]
finish = [
  { name = "white", type = "matte", reflectance = 0.7 },
  { name = "clear", type = "glazing", transmittance = 0.8 },
]
opening = [
  { name = "left", group = "facade", corners_m = [[0, 0, 1], [2, 0, 1], [2, 0, 3], [0, 0, 3]], glazing = "clear" },
  { name = "right", group = "facade", corners_m = [[3, 0, 1], [5, 0, 1], [5, 0, 3], [3, 0, 3]], glazing = "clear" },
  { name = "strip", corners_m = [[0, 0, 3.2], [5, 0, 3.2], [5, 0, 3.8], [0, 0, 3.8]], glazing = "clear" },
]
viewpoint = [
  { name = "desk 1", position_m = [1, 2, 1.2], azimuth_deg = 180 },
  { name = "desk 2", position_m = [2, 2, 1.2], azimuth_deg = 180 },
]
roller = [
  { name = "cloth", opening = "left", openness = 0.05, diffuse_transmittance = 0.1, reflectance = 0.5 },
]
[[blind]]
name = "slats"
opening = "right"
slat_width_mm = 80
pitch_mm = 72
upper = "white"
states = [{ name = "open", tilt_deg = 0 }, { name = "shut", tilt_deg = -60 }]
[[louvres]]
name = "sun"
opening = "strip"
slat_width_mm = 80
pitch_mm = 72
upper = "white"
follow = "cut-off"
steps = 3
`

func units(t *testing.T, controls string) []Unit {
	t.Helper()
	p, err := project.Load(fstest.MapFS{"p.toml": {Data: []byte(office + controls)}}, "p.toml")
	if err != nil {
		t.Fatal(err)
	}
	return Units(p)
}

// TestUnitsWithoutControls wants everything to stand as the file says, and
// what follows the sun to follow it.
func TestUnitsWithoutControls(t *testing.T) {
	list := units(t, "")
	want := []Unit{
		{Name: "cloth", Opening: "left", Group: "facade", States: []string{"raised", "drawn"}, Law: Always{1}},
		{Name: "slats", Opening: "right", Group: "facade", States: []string{"raised", "open", "shut"}, Law: Always{1}},
		{Name: "sun", Opening: "strip", Group: "strip", Law: Follow{}},
	}
	if len(list) != 3 || len(list[2].States) < 3 {
		t.Fatalf("got %+v", list)
	}
	list[2].States = nil
	if !reflect.DeepEqual(list, want) {
		t.Errorf("\n got %+v\nwant %+v", list, want)
	}
}

// TestUnitsOfRules reads each rule for the slats, whose states are raised, open
// and shut.
func TestUnitsOfRules(t *testing.T) {
	every := [7]bool{true, true, true, true, true, true, true}
	for _, c := range []struct {
		rule  string
		law   Law
		glare *Glare
	}{
		{"rule = \"always\"\nstate = \"shut\"", Always{2}, nil},
		{"rule = \"timetable\"\nopen = \"open\"\ntimetable = [{ from = \"20:00\", to = \"06:30\", state = \"shut\", days = [\"sun\"], first_day = \"02-29\", last_day = \"03-01\" }, { state = \"raised\" }]",
			Timetable{State: 1, Periods: []Period{{Days: [7]bool{6: true}, FromH: 20, ToH: 6.5, FirstDay: 58, LastDay: 59, State: 2}, {Days: every, ToH: 24, LastDay: 364}}}, nil},
		{"rule = \"facade sun\"\nfacade_wm2 = 200\nreopen_delay_min = 30", FacadeSun{200, 200, 0.5, 0, 2}, nil},
		{"rule = \"facade sun\"\nreopen_wm2 = 100\nopen = \"open\"", FacadeSun{300, 100, 0, 1, 2}, nil},
		{"rule = \"work plane sun\"", WorkPlaneSun{daylight.DefaultBlindRule, 0, 2}, nil},
		{"rule = \"work plane sun\"\ndgp_limit = 0.35\nviewpoints = [\"desk 2\"]", WorkPlaneSun{daylight.DefaultBlindRule, 0, 2}, &Glare{0.35, 0.05, ByHysteresis, []int{1}}},
		{"rule = \"glare\"", Always{0}, &Glare{0.4, 0.05, ByHysteresis, nil}},
		{"rule = \"glare\"\nopen = \"open\"\nreopen = \"next morning\"", Always{1}, &Glare{0.4, 0, NextMorning, nil}},
		{"rule = \"manual\"", Active{50, 0, 2}, nil},
		{"rule = \"manual\"\nuser = \"passive\"\nclosed = \"open\"", Always{1}, nil},
	} {
		list := units(t, "[[control]]\nname = \"c\"\nsystems = [\"slats\"]\n"+c.rule+"\n")
		if u := list[1]; !reflect.DeepEqual(u.Law, c.law) || !reflect.DeepEqual(u.Glare, c.glare) {
			t.Errorf("%s:\n got %+v, %+v\nwant %+v, %+v", c.rule, u.Law, u.Glare, c.law, c.glare)
		}
	}
	list := units(t, "[[control]]\nname = \"c\"\nopenings = [\"left\", \"right\"]\nrule = \"manual\"\n[[control]]\nname = \"d\"\nsystems = [\"sun\"]\nrule = \"follow\"\ndgp_limit = 0.4\n")
	if list[0].Law != (Active{50, 0, 1}) || list[1].Law != (Active{50, 0, 2}) || list[2].Law != (Follow{}) || list[2].Glare == nil {
		t.Errorf("by openings: got %+v", list)
	}
	ordered := units(t, "[[control]]\nname = \"c\"\nsystems = [\"slats\"]\nrule = \"glare\"\norder = [\"open\", \"shut\"]\n")[1]
	if ordered.Law != (Always{0}) || strings.Join(ordered.States, " ") != "open shut" {
		t.Errorf("by order: got %+v", ordered)
	}
}

// TestSteps wants clock time and the clock's day, over summer time, parts of
// hours, midnight and the new year.
func TestSteps(t *testing.T) {
	c := daylight.Calendar{PerHour: 4, FirstWeekday: 5, SavingFrom: &daylight.MonthDay{Month: 1, Day: 2}, SavingTo: &daylight.MonthDay{Month: 1, Day: 1}}
	list := Steps([]*scene.Moment{
		{Step: 4 * 12, Share: 0.25, Occupied: true},
		{Step: 4*(24+12) + 1, Share: 0.25},
		{Step: 4 * (24 + 23), Share: 0.25},
		{Step: 4*8760 - 1, Share: 0.25},
	}, c)
	want := []Step{
		{48, 0, 5, 12.125, 0.25, true},
		{145, 1, 6, 13.375, 0.25, false}, // 12:15 to 12:30, one hour on
		{188, 2, 0, 0.125, 0.25, false},
		{35039, 0, 5, 0.875, 0.25, false},
	}
	if !reflect.DeepEqual(list, want) {
		t.Errorf("\n got %+v\nwant %+v", list, want)
	}
}
