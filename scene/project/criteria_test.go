package project

import (
	"reflect"
	"testing"
)

func TestCriteria(t *testing.T) {
	p, err := load(t, minimal+`
[[work_plane]]
name = "p"
polygon_m = [[0, 0], [4, 0], [4, 4], [0, 4]]
[criteria]
sunlight = "minimum"
sunlight_day = "02-28"
sunlight_altitude_deg = 11
cloth_class = 2
sda_at_least = 0.55

[[limit]]
name = "screens"
metric = "illuminance"
at_least = 300
at_most = 2000
time_share = 0.5
place_share = 0.8

[[limit]]
metric = "daylight factor"
at_least = 0.02
`)
	if err != nil {
		t.Fatal(err)
	}
	c := p.Criteria
	if c.Sunlight != "minimum" || *c.SunlightDay != (MonthDay{2, 28}) || *c.SunlightAltitudeDeg != 11 || c.ClothClass != 2 || *c.SDAAtLeast != 0.55 || c.ASEAtMost != nil {
		t.Errorf("criteria: %+v", c)
	}
	want := []Limit{
		{Name: "screens", Metric: LimitIlluminance, Hours: HoursInUse, AtLeast: ptr(300.0), AtMost: ptr(2000.0), TimeShare: .5, PlaceShare: .8, Line: 35},
		{Metric: LimitDaylightFactor, Hours: HoursInUse, AtLeast: ptr(0.02), TimeShare: 1, PlaceShare: 1, Line: 43},
	}
	if !reflect.DeepEqual(p.Limits, want) {
		t.Errorf("limits: got %+v, want %+v", p.Limits, want)
	}
}

func TestCriteriaProblems(t *testing.T) {
	for _, c := range []struct{ name, text, want string }{
		{"sunlight without altitude", "[criteria]\nsunlight = \"high\"\n", ":25: criteria.sunlight: got no sunlight_altitude_deg; want the least altitude of the sun in degrees, from the table of EN 17037 for the site"},
		{"day out of the range", "[criteria]\nsunlight_day = \"03-22\"\n", ":25: criteria.sunlight_day: got a day outside 02-01 to 03-21, want one within"},
		{"no plane", "[criteria]\nview_out = \"high\"\n", ":25: criteria.view_out: got no [[work_plane]] to judge, want at least one"},
		{"no plane for a limit", "[[limit]]\nmetric = \"direct sun\"\nat_most = 0\n", ":25: limit.metric: got no [[work_plane]] to judge, want at least one"},
		{"share", "[criteria]\nsda_at_least = 55\n", ":25: criteria.sda_at_least: got 55, want 0 to 1"},
		{"class", "[criteria]\ncloth_class = 5\n", ":25: criteria.cloth_class: got 5, want a whole number, 0 to 4"},
		{"illuminances", "[criteria]\nequinox_low_lx = 5000\n", ":25: criteria.equinox_low_lx: got 5000 to 3000 lx, want a lower and a higher illuminance"},
		{"no bound", "[[limit]]\nmetric = \"DGP\"\n", ":24: limit.at_least: missing; want at_least, at_most or both"},
		{"bounds the wrong way", "[[limit]]\nmetric = \"illuminance\"\nat_least = 500\nat_most = 300\n", ":27: limit.at_most: got 300, below at_least = 500; want it above"},
		{"no metric", "[[limit]]\nat_most = 1\n", ":24: limit.metric: missing; want \"illuminance\", \"direct sun\", \"daylight factor\", \"DGP\", \"eye illuminance\" or \"sunlit share\""},
		{"hours of eyes", "[[limit]]\nmetric = \"DGP\"\nat_most = 0.4\nhours = \"all\"\n", ":27: limit.hours: got \"all\", want \"in use\": viewpoints are looked at while the room is in use"},
		{"hours of a factor", "[[limit]]\nmetric = \"daylight factor\"\nat_least = 0.02\ntime_share = 0.5\n", ":27: limit.time_share: got it with the daylight factor, which has no hours; leave it out"},
	} {
		t.Run(c.name, func(t *testing.T) { wantProblem(t, "", c.text, c.want) })
	}
}
