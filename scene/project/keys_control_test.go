package project

import (
	"reflect"
	"slices"
	"strings"
	"testing"
)

// TestControlProblems is TestProblems for a control, from line 31 on, of a blind
// with the states raised, open and half.
func TestControlProblems(t *testing.T) {
	namedBlind := strings.Replace(someBlind, "upper", "states = [{ name = \"open\", tilt_deg = 0 }, { name = \"half\", tilt_deg = -45 }]\nupper", 1)
	const rollers = "[[roller]]\nname = \"r\"\nopening = \"south\"\nposition = \"outside\"\nopenness = 0\ndiffuse_transmittance = 0\nreflectance = 0\n"
	for _, c := range []struct{ name, control, want string }{
		{"no rule", "systems = [\"b\"]\n", ":31: control.rule: missing; want \"always\", \"timetable\", \"facade sun\", \"work plane sun\", \"glare\", \"follow\" or \"manual\""},
		{"unknown rule", "systems = [\"b\"]\nrule = \"glar\"\n", ":34: control.rule: got \"glar\", want \"always\", \"timetable\", \"facade sun\", \"work plane sun\", \"glare\", \"follow\" or \"manual\"; did you mean \"glare\"?"},
		{"both", "systems = [\"b\"]\nrule = \"glare\"\nopenings = [\"south\"]\n", ":35: control.openings: got systems too; want one of the two"},
		{"neither", "rule = \"glare\"\n", ":31: control.systems: missing; want a list of names in quotes, or openings"},
		{"unknown system", "systems = [\"a\", \"b\"]\nrule = \"glare\"\n", ":33: control.systems: got \"a\", want the name of a system that moves; did you mean \"b\"?"},
		{"a name, not a list", "systems = \"b\"\nrule = \"glare\"\n", ":33: control.systems: got \"b\", want a list of names in quotes"},
		{"no names", "systems = []\nrule = \"glare\"\n", ":33: control.systems: got no names, want at least one"},
		{"numbers", "systems = [\"b\", 3]\nrule = \"glare\"\n", ":33: control.systems: item 2: got 3, want a name in quotes"},
		{"unknown opening", "openings = [\"south\", \"sooth\"]\nrule = \"glare\"\n", ":33: control.openings: got \"sooth\", want the name of an opening; did you mean \"south\"?"},
		{"operated twice", "systems = [\"b\"]\nrule = \"glare\"\n[[control]]\nname = \"d\"\nopenings = [\"south\"]\nrule = \"glare\"\n", ":37: control.openings: got \"b\", which \"c\" operates already; want one control for each"},
		{"name twice", "systems = [\"b\"]\nrule = \"glare\"\n[[control]]\nname = \"c\"\nsystems = [\"r\"]\nrule = \"glare\"\n" + rollers, ":36: control.name: got \"c\" again, want a name that no other control has"},
		{"nothing follows", "systems = [\"b\"]\nrule = \"follow\"\n", ":34: control.rule: got \"follow\", but \"b\" follows nothing; want follow there, or roller_follow"},
		{"always without a state", "systems = [\"b\"]\nrule = \"always\"\n", ":31: control.state: missing; want the name of a state in quotes"},
		{"state of another", "systems = [\"b\"]\nrule = \"always\"\nstate = \"drawn\"\n", ":35: control.state: got \"drawn\", want a state of \"b\": \"raised\", \"open\", \"half\""},
		{"state left out", "systems = [\"b\"]\nrule = \"always\"\norder = [\"raised\", \"half\"]\nstate = \"open\"\n", ":36: control.state: got \"open\", want a state of \"b\": \"raised\", \"half\""},
		{"unknown order", "systems = [\"b\"]\nrule = \"glare\"\norder = [\"raised\", \"shut\"]\n", ":35: control.order: got \"shut\", want a state of \"b\": \"raised\", \"open\", \"half\""},
		{"order twice", "systems = [\"b\"]\nrule = \"glare\"\norder = [\"raised\", \"raised\"]\n", ":35: control.order: got \"raised\" twice"},
		{"closed above open", "systems = [\"b\"]\nrule = \"facade sun\"\nopen = \"half\"\nclosed = \"raised\"\n", ":36: control.closed: got \"raised\", which is more open than \"half\"; want one further down in \"raised\", \"open\", \"half\", or another order"},
		{"key of another rule", "systems = [\"b\"]\nrule = \"glare\"\ndirect_lx = 500\n", ":35: control.direct_lx: got the rule \"glare\"; want \"work plane sun\", or no direct_lx"},
		{"closed of glare", "systems = [\"b\"]\nrule = \"glare\"\nclosed = \"half\"\n", ":35: control.closed: got the rule \"glare\"; want \"facade sun\", \"work plane sun\" or \"manual\", or no closed"},
		{"watching nothing", "systems = [\"b\"]\nrule = \"facade sun\"\nviewpoints = [\"v\"]\n", ":35: control.viewpoints: got no dgp_limit; want it, or no viewpoints"},
		{"unknown viewpoint", "systems = [\"b\"]\nrule = \"glare\"\nviewpoints = [\"w\"]\n", ":35: control.viewpoints: got \"w\", want the name of a viewpoint; did you mean \"v\"?"},
		{"hysteresis by morning", "systems = [\"b\"]\nrule = \"glare\"\nreopen = \"next morning\"\nhysteresis = 0.02\n", ":36: control.hysteresis: got reopen = \"next morning\", which has none; leave it out"},
		{"hysteresis too wide", "systems = [\"b\"]\nrule = \"glare\"\nhysteresis = 0.1\n", ":35: control.hysteresis: got 0.1, want 0 to 0.09"},
		{"opens later than it closes", "systems = [\"b\"]\nrule = \"facade sun\"\nreopen_wm2 = 301\n", ":35: control.reopen_wm2: got 301, want at most facade_wm2, 300"},
		{"passive and sun", "systems = [\"b\"]\nrule = \"manual\"\nuser = \"passive\"\ndesk_wm2 = 30\n", ":36: control.desk_wm2: got user = \"passive\", who bears no sun at all; leave it out"},
		{"no timetable", "systems = [\"b\"]\nrule = \"timetable\"\n", ":31: control.timetable: missing; want a list of tables such as { from = \"20:00\", to = \"06:00\", state = \"drawn\" }"},
		{"no periods", "systems = [\"b\"]\nrule = \"timetable\"\ntimetable = []\n", ":35: control.timetable: missing; want a list of tables such as { from = \"20:00\", to = \"06:00\", state = \"drawn\" }"},
		{"periods of text", "systems = [\"b\"]\nrule = \"timetable\"\ntimetable = [\"08:00\"]\n", ":35: control.timetable: item 1: got \"08:00\", want a table such as { state = \"drawn\" }"},
		{"period without a state", "systems = [\"b\"]\nrule = \"timetable\"\ntimetable = [{ from = \"08:00\" }]\n", ":35: control.timetable.state: missing; want text in quotes"},
		{"period of no length", "systems = [\"b\"]\nrule = \"timetable\"\ntimetable = [{ from = \"08:00\", to = \"08:00\", state = \"half\" }]\n", ":35: control.timetable.to: got the time of from, 08:00; want another one"},
		{"period of another's state", "systems = [\"b\"]\nrule = \"timetable\"\ntimetable = [{ state = \"half\" },\n{ state = \"down\" }]\n", ":35: control.timetable: got \"down\", want a state of \"b\": \"raised\", \"open\", \"half\""},
	} {
		t.Run(c.name, func(t *testing.T) {
			wantProblem(t, "", namedBlind+"[[control]]\nname = \"c\"\n"+c.control, c.want)
		})
	}
}

// TestControlsLoad reads one of each rule, and wants what the file leaves out
// to be as the key table says.
func TestControlsLoad(t *testing.T) {
	p, err := load(t, office(t)+`
[[control]]
name = "venetian"
openings = ["north"]
rule = "timetable"
order = ["raised", "half"]
dgp_limit = 0.35
viewpoints = ["desk 1"]
timetable = [
  { from = "20:00", to = "06:00", state = "half" },
  { from = "12:00", to = "13:30", state = "half", days = ["sat"], first_day = "11-01", last_day = "02-29" },
]
[[control]]
name = "screen"
systems = ["screen", "second"]
rule = "facade sun"
reopen_wm2 = 150
[[control]]
name = "mirrors"
systems = ["mirrors"]
rule = "follow"
`)
	if err != nil {
		t.Fatal(err)
	}
	every := [7]bool{true, true, true, true, true, true, true}
	// What the key table gives all of them.
	base := Control{FacadeWm2: 300, DirectLx: 1000, SensorShare: .02, User: "active", DeskWm2: 50, DGPLimit: .4, Reopen: "hysteresis", Hysteresis: .05}
	venetian, screen, mirrors := base, base, base
	venetian.Name, venetian.Openings, venetian.Rule, venetian.Order = "venetian", []string{"north"}, "timetable", []string{"raised", "half"}
	venetian.GlareLed, venetian.DGPLimit, venetian.Viewpoints = true, .35, []string{"desk 1"}
	venetian.Timetable = []ControlPeriod{
		{State: "half", FromH: 20, ToH: 6, Days: every, FirstDay: &MonthDay{1, 1}, LastDay: &MonthDay{12, 31}},
		{State: "half", FromH: 12, ToH: 13.5, Days: [7]bool{5: true}, FirstDay: &MonthDay{11, 1}, LastDay: &MonthDay{2, 29}},
	}
	screen.Name, screen.Systems, screen.Rule, screen.ReopenWm2 = "screen", []string{"screen", "second"}, "facade sun", ptr(150.0)
	mirrors.Name, mirrors.Systems, mirrors.Rule = "mirrors", []string{"mirrors"}, "follow"
	for i, want := range []Control{venetian, screen, mirrors} {
		got := p.Controls[i]
		if got.Line == 0 {
			t.Errorf("%s: no line", got.Name)
		}
		got.Line = 0
		if !reflect.DeepEqual(got, want) {
			t.Errorf("\n got %+v\nwant %+v", got, want)
		}
	}
	for _, m := range Movables(p) {
		for _, c := range p.Controls {
			want := m.Name == c.Name || m.Name == "second" && c.Name == "screen"
			if c.Operates(m) != want {
				t.Errorf("%s operates %s: got %t, want %t", c.Name, m.Name, !want, want)
			}
		}
	}
}

// TestOpenToClosed wants slats of a law in the order in which they turn away
// from square to the glass.
func TestOpenToClosed(t *testing.T) {
	p, err := load(t, office(t)+"[[blind]]\nname = \"cut\"\nopening = \"east\"\nslat_width_mm = 80\npitch_mm = 72\nupper = \"plaster\"\nfollow = \"cut-off\"\nsteps = 3\n")
	if err != nil {
		t.Fatal(err)
	}
	want := map[string][]string{
		"screen":   {"raised", "drawn"},
		"venetian": {"raised", "open", "half"},
		"mirrors":  {"tilt -2.9", "tilt 8.3", "tilt 19.6", "tilt 30.8", "tilt 42.1"},
	}
	for _, m := range Movables(p) {
		got := m.OpenToClosed()
		if w, ok := want[m.Name]; ok && !slices.Equal(got, w) {
			t.Errorf("%s: got %q, want %q", m.Name, got, w)
		}
		if m.Name == "cut" { // its tilts rise to 0, square to the glass
			if n := len(got); n < 3 || got[0] != "raised" || got[1] != m.States[n-1] || got[n-1] != m.States[1] {
				t.Errorf("cut: got %q of %q, want raised, then the states from the last one back", got, m.States)
			}
		}
	}
}
