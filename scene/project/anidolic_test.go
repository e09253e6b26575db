package project

import (
	"math"
	"reflect"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// ceiling goes before the first finish of the office, whose south opening is
// 3.4 m by 1.8 m: an opening above it, and an anidolic ceiling behind.
const ceiling = `
[[opening]]
name = "slot"
corners_m = [[0, 0, 2.8], [3.4, 0, 2.8], [3.4, 0, 3.3], [0, 0, 3.3]]

[[anidolic_ceiling]]
name = "scoop"
opening = "slot"
axis_tilt_deg = 50
acceptance_deg = 40
acceptance_below_deg = 35
duct_length_m = 3.5
reflector = "aluminium"
casing = "plaster"
entrance_glazing = "double glazing"
roller = "screen"
roller_follow = "acceptance"
`

func withCeiling(t *testing.T, old, new string) string {
	t.Helper()
	text := ceiling
	if old != "" && !strings.Contains(text, old) {
		t.Fatalf("no %q", old)
	}
	return office(t) + strings.Replace(text, old, new, 1)
}

func TestAnidolicCeiling(t *testing.T) {
	p, err := load(t, withCeiling(t, "", ""))
	if err != nil {
		t.Fatal(err)
	}
	got := p.AnidolicCeilings[0]
	line := got.Line
	want := AnidolicCeiling{Name: "scoop", Opening: "slot", AxisTiltDeg: 50, AcceptanceDeg: 40, AcceptanceBelowDeg: 35, CollectorShare: 1,
		DuctLengthM: 3.5, GapM: 0.01, Reflector: "aluminium", Casing: "plaster", EntranceGlazing: "double glazing",
		Roller: "screen", RollerDrawn: true, RollerFollow: "acceptance", Line: line}
	if !reflect.DeepEqual(got, want) {
		t.Errorf("\n got %+v\nwant %+v", got, want)
	}
	s := got.System("clear")
	if math.Abs(s.AxisTiltRad*180/math.Pi-50) > 1e-9 || math.Abs(s.UpperRad*180/math.Pi-40) > 1e-9 || math.Abs(s.LowerRad*180/math.Pi-35) > 1e-9 ||
		s.DuctLengthM != 3.5 || s.MouthGlazing != "clear" || s.KeepShare != 1 || !s.Drawn {
		t.Errorf("system: %+v", s)
	}
	p, err = load(t, withCeiling(t, "acceptance_below_deg = 35\n", ""))
	if err != nil || p.AnidolicCeilings[0].AcceptanceBelowDeg != 40 {
		t.Errorf("without acceptance_below_deg: %v, want that above", err)
	}
}

func TestAnidolicCeilingRefused(t *testing.T) {
	for _, c := range []struct{ name, old, new, want string }{
		{"beyond the wall", "acceptance_deg = 40", "acceptance_deg = 45", "anidolic_ceiling.axis_tilt_deg: the acceptance ends 95 degrees above"},
		{"no space", "duct_length_m = 3.5", "duct_length_m = 3.5\ncollector_space_m = 0.5", "anidolic_ceiling.collector_space_m: the collector reaches 1."},
		{"short duct", "duct_length_m = 3.5", "duct_length_m = 0.9", "anidolic_ceiling.outlet_length_m: the outlet is 0.96 m long and the duct 0.9 m in all"},
		{"high duct", "duct_length_m = 3.5", "duct_length_m = 3.5\nduct_height_m = 0.6", "anidolic_ceiling.duct_height_m: got 0.6 m, want 0.05 m to 0.48 m"},
		{"open to the weather", "entrance_glazing = \"double glazing\"\n", "", "anidolic_ceiling.entrance_glazing: missing, and the opening has no glazing"},
		{"window's opening", `opening = "slot"`, `opening = "south"`, `anidolic_ceiling.opening: got "south", where there is light_shelf "shelf" too`},
		{"mesh's glass", `opening = "slot"`, `opening = "east"`, `anidolic_ceiling.opening: got "east", whose glass is the mesh's own`},
		{"two panes", `opening = "slot"`, `opening = "north"`, `got "north", which has an inner_glazing`},
		{"no cloth", "roller = \"screen\"\n", "", "anidolic_ceiling.roller: missing, but roller_follow is given"},
		{"glass for a mirror", `reflector = "aluminium"`, `reflector = "coated"`, `got "coated", which is of type "glazing", want a finish of type`},
		{"name of a roller", `name = "scoop"`, `name = "screen"`, `anidolic_ceiling.name: got "screen", which is a roller already`},
		{"opening without glass", `opening = "slot"`, `opening = "none"`, `opening.glazing: missing; want a finish's name`},
		{"range", "axis_tilt_deg = 50", "axis_tilt_deg = 95", "want -90 to 90"},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := load(t, withCeiling(t, c.old, c.new))
			if err == nil || !strings.Contains(err.Error(), c.want) {
				t.Errorf("got %v, want %q", err, c.want)
			}
		})
	}
}

// TestAnidolicRoller: the cloth is one of the movables; drawn while the sun is
// between 15 and 90 degrees as seen along the opening, which faces azimuth 195.
func TestAnidolicRoller(t *testing.T) {
	p, err := load(t, withCeiling(t, "", ""))
	if err != nil {
		t.Fatal(err)
	}
	list := Movables(p)
	m := list[len(list)-1]
	if m.Name != "scoop" || m.Opening != "slot" || m.Kind != "anidolic_ceiling" || strings.Join(m.States, " ") != "raised drawn" || m.Standing != "drawn" || m.Follow == nil {
		t.Fatalf("got %+v", m)
	}
	rect, err := p.Openings[len(p.Openings)-1].Rect(p.Site.NorthDeg)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		profileDeg float64
		want       string
	}{{10, "raised"}, {20, "drawn"}, {80, "drawn"}, {120, "raised"}, {-10, "raised"}} {
		sin, cos := math.Sincos(c.profileDeg * math.Pi / 180)
		sun := r3.Add(r3.Scale(cos, rect.Outward), r3.Scale(sin, rect.Up))
		if got := m.Follow.States()[m.Follow.Choose(sun, rect)].Name; got != c.want {
			t.Errorf("profile %g: %s, want %s", c.profileDeg, got, c.want)
		}
	}
	raised := WithStates(p, map[string]string{"scoop": "raised"})
	if raised.AnidolicCeilings[0].RollerDrawn || !p.AnidolicCeilings[0].RollerDrawn {
		t.Error("raised: the copy is drawn, or the project itself has changed")
	}
	fixed, err := load(t, withCeiling(t, "roller_follow = \"acceptance\"\n", ""))
	if err != nil {
		t.Fatal(err)
	}
	list = Movables(fixed)
	if m := list[len(list)-1]; m.Follow != nil || m.Standing != "raised" {
		t.Errorf("without roller_follow: %+v", m)
	}
}
