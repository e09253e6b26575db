package project

import (
	"strings"
	"testing"
)

const (
	someBlind = "[[blind]]\nname = \"b\"\nopening = \"south\"\nslat_width_mm = 80\npitch_mm = 72\nupper = \"white\"\n"                              // lines 24 to 29
	someShelf = "[[light_shelf]]\nname = \"s\"\nopening = \"south\"\nheight_m = 1\noutside_depth_m = 0.5\ntop = \"white\"\nunderside = \"white\"\n" // lines 24 to 30
	holed     = "[[finish]]\nname = \"holed\"\ntype = \"perforated\"\nopen_share = 0.1\nhole_diameter_mm = 1\nthickness_mm = 0.2\nbase = \"white\"\n"
)

// TestSystemProblems is TestProblems for slats, sills, shapes and second panes;
// the opening is 2 m by 1.5 m.
func TestSystemProblems(t *testing.T) {
	louvres := strings.Replace(someBlind, "blind", "louvres", 1)
	sill := "[[sill]]\nname = \"i\"\nopening = \"south\"\ndepth_m = 0.3\nfinish = \"white\"\n"
	for _, c := range []struct{ name, old, new, want string }{
		{"pitch below thickness", "", strings.Replace(someBlind, "72", "1", 1) + "thickness_mm = 1\n", ":28: blind.pitch_mm: got 0.001 m, want more than the thickness, 0.001 m, so that the slats do not touch"},
		// acos(1/20) is 87.134 degrees
		{"closed too far", "", strings.Replace(someBlind, "72", "20", 1) + "thickness_mm = 1\ntilt_deg = -88\n", ":31: blind.tilt_deg: got -88 degrees, want -87.1 to 87.1: beyond, slats 0.08 m wide touch at a pitch of 0.02 m"},
		{"a state too far", "", strings.Replace(someBlind, "72", "20", 1) + "thickness_mm = 1\nstates = [{ name = \"shut\", tilt_deg = 88 }]\n", ":31: blind.states: \"shut\": got 88 degrees, want -87.1 to 87.1: beyond, slats 0.08 m wide touch at a pitch of 0.02 m"},
		{"between one pane", "", someBlind + "position = \"between\"\n", ":30: blind.position: got \"between\", but opening \"south\" has no inner_glazing; want that there, and cavity_m"},
		{"deeper than its cavity", `glazing = "clear"`, "glazing = \"clear\"\ninner_glazing = \"clear\"\ncavity_m = 0.06\n\n" + someBlind + "position = \"between\"\n",
			":26: blind.slat_width_mm: at a tilt of 0 degrees the slats are 0.08 m deep, want at most 0.058 m between panes 0.06 m apart"},
		{"louvres between panes", "", louvres + "position = \"between\"\n", ":30: louvres.position: got \"between\", want \"inside\" or \"outside\""},
		{"strip upside down", "", louvres + "bottom_m = 1\ntop_m = 0.5\n", ":31: louvres.top_m: got 0.5, want more than bottom_m, 1"},
		{"strip above the opening", "", louvres + "top_m = 1.6\n", ":30: louvres.top_m: got 1.6 m, want 0 m to the opening's height, 1.5 m"},
		{"states and tilt", "", someBlind + "tilt_deg = 3\nstates = [{ name = \"open\", tilt_deg = 0 }]\n", ":30: blind.tilt_deg: got states too, which have their tilts; leave it out"},
		{"states and follow", "", someBlind + "follow = \"cut-off\"\nstates = [{ name = \"open\", tilt_deg = 0 }]\n", ":30: blind.follow: got states too; want one of the two"},
		{"no states", "", someBlind + "states = []\n", ":30: blind.states: got none, want at least one"},
		{"states of numbers", "", someBlind + "states = [0, 45]\n", ":30: blind.states: item 1: got 0, want a table such as { name = \"open\", tilt_deg = 0 }"},
		{"state without a tilt", "", someBlind + "states = [{ name = \"open\" }]\n", ":30: blind.states.tilt_deg: missing; want -90 to 90"},
		{"state with a wrong key", "", someBlind + "states = [\n{ name = \"open\", tilt = 0, tilt_deg = 1 }]\n", ":31: blind.states.tilt: unknown key; known: \"name\", \"tilt_deg\""},
		{"state twice", "", someBlind + "states = [{ name = \"a\", tilt_deg = 0 }, { name = \"a\", tilt_deg = 1 }]\n", ":30: blind.states: got the name \"a\" twice"},
		{"state raised", "", someBlind + "states = [{ name = \"raised\", tilt_deg = 0 }]\n", ":30: blind.states: got the name \"raised\", which is that of a blind drawn up; want another one"},
		{"redirect whither", "", someBlind + "follow = \"redirect\"\nredirect_depth_m = 5\n", ":24: blind.redirect_rise_m: missing; follow = \"redirect\" needs it"},
		{"depth of no redirect", "", someBlind + "follow = \"cut-off\"\nredirect_depth_m = 5\n", ":31: blind.redirect_depth_m: got no follow = \"redirect\"; want that, or leave redirect_depth_m out"},
		{"steps of nothing", "", someBlind + "steps = 5\n", ":30: blind.steps: got no follow; want it, or no steps"},
		{"slats of glass", "", strings.Replace(someBlind, `upper = "white"`, `upper = "clear"`, 1), ":29: blind.upper: got \"clear\", which is of type \"glazing\", want a finish of type \"matte\", \"mirror\", \"glossy\" or \"perforated\""},
		{"perforated below only", "", someBlind + "lower = \"holed\"\n" + holed, ":30: blind.lower: got \"holed\" of type \"perforated\" under \"white\" of type \"matte\"; want both perforated, or neither"},
		{"perforated board", "", strings.Replace(someBlind, `upper = "white"`, `upper = "holed"`, 1) + "thickness_mm = 2\n" + holed, ":30: blind.thickness_mm: got 2 with a perforated finish; want less than 2, as perforated slats are sheets"},
		{"perforated in two ways", "", strings.Replace(someBlind, `upper = "white"`, `upper = "holed"`, 1) + "lower = \"more\"\n" + holed + strings.Replace(strings.Replace(holed, "\"holed\"", "\"more\"", 1), "0.1", "0.2", 1),
			":30: blind.lower: got \"more\", which lets other light through: open_share 0.2, here 0.1; want both sides to let the same through"},
		{"blind through a shelf", "", someShelf + strings.Replace(someBlind, "opening", "position = \"outside\"\nopening", 1),
			":31: blind.drop: the slats reach down to 0 m above the opening's lower edge, into the shelf, whose top is at 1 m; want them to end above it, or a gap larger than the shelf's reach"},
		{"louvres through a shelf", "", someShelf + louvres + "bottom_m = 0.5\n", // outside is their default
			":37: louvres.bottom_m: the slats reach down to 0.5 m above the opening's lower edge, into the shelf, whose top is at 1 m; want them to end above it, or a gap larger than the shelf's reach"},
		{"louvres in a blind", "", strings.Replace(louvres, "\"b\"", "\"l\"", 1) + "position = \"inside\"\n" + someBlind, ":24: louvres.gap_m: reaches from 0.02 to 0.1 m from the plane of the glass, inside, "},
		{"one name for two that move", "", someBlind + "[[roller]]\nname = \"b\"\nopening = \"south\"\nopenness = 0\ndiffuse_transmittance = 0\nreflectance = 0\ngap_m = 0.2\n", ":25: blind.name: got \"b\" again, want a name that no other roller, blind or louvres has"},
		// sills, shapes, panes
		{"sill without depth", "", strings.Replace(sill, "depth_m = 0.3\n", "", 1), ":24: sill.depth_m: missing; want 0.01 to 5"},
		{"sill shallower than its gap", "", strings.Replace(sill, "0.3", "0.02", 1) + "gap_m = 0.05\n", ":27: sill.depth_m: got 0.02 m, want above "},
		{"no sagitta", "", someShelf + "outside_profile = \"arc\"\n", ":24: light_shelf.outside_sagitta_m: missing; outside_profile = \"arc\" needs it"},
		{"sagitta of a flat one", "", someShelf + "outside_sagitta_m = 0.1\n", ":31: light_shelf.outside_sagitta_m: got the outside_profile \"flat\"; leave outside_sagitta_m out, or give a profile that has it"},
		{"sagitta and focus", "", someShelf + "outside_profile = \"parabola\"\noutside_sagitta_m = 0.1\noutside_focus_m = 1\n", ":33: light_shelf.outside_focus_m: got outside_sagitta_m too; want one of the two"},
		{"shape of nothing", "", someShelf + "inside_profile = \"arc\"\ninside_sagitta_m = 0.1\n", ":31: light_shelf.inside_profile: got no inside_depth_m above 0; want that, or leave inside_profile out"},
		{"too hollow", "", someShelf + "outside_profile = \"arc\"\noutside_sagitta_m = 0.2\n", ":32: light_shelf.outside_sagitta_m: got 0.2 m, want above 0 m and at most 0.1443 m, with a depth of 0.5 m"}, // 0.25 tan 30
		{"stack without spacing", "", someShelf + "stack = 2\n", ":24: light_shelf.stack_spacing_m: missing; a stack of 2 shelves needs it"},
		{"stack touches", "", someShelf + "stack = 2\nstack_spacing_m = 0.04\n", ":32: light_shelf.stack_spacing_m: got 0.04 m, want more than 0.05 m, the height of a shelf outside, so that stacked shelves do not touch"},
		{"pane without a cavity", `glazing = "clear"`, "glazing = \"clear\"\ninner_glazing = \"clear\"", ":20: opening.inner_glazing: got no cavity_m; want both or neither"},
		{"inner pane of stone", `glazing = "clear"`, "glazing = \"clear\"\ncavity_m = 0.1\ninner_glazing = \"white\"", ":21: opening.inner_glazing: got \"white\", which is of type \"matte\", want a finish of type \"glazing\""},
	} {
		t.Run(c.name, func(t *testing.T) { wantStart(t, c.old, c.new, c.want) })
	}
}

// wantStart is wantProblem, but for a want that ends in a blank, of which only
// the start counts.
func wantStart(t *testing.T, old, new, want string) {
	t.Helper()
	if !strings.HasSuffix(want, " ") {
		wantProblem(t, old, new, want)
		return
	}
	if _, err := load(t, minimal+new); err == nil || !strings.HasPrefix(err.Error(), "dir/office.toml"+want) {
		t.Errorf("\n got %v\nwant %s...", err, want)
	}
}

// TestMovables of an office with one of each.
func TestMovables(t *testing.T) {
	extra := "[[louvres]]\nname = \"fixed\"\nopening = \"east\"\nslat_width_mm = 100\npitch_mm = 90\nupper = \"white\"\n" +
		"[[blind]]\nname = \"plain\"\nopening = \"east\"\nslat_width_mm = 25\npitch_mm = 20\nupper = \"white\"\n"
	p, err := load(t, office(t)+strings.ReplaceAll(extra, "white", "plaster"))
	if err != nil {
		t.Fatal(err)
	}
	list := Movables(p)
	type row struct{ name, opening, kind, standing, states string }
	want := []row{
		{"screen", "south", "roller", "drawn", "raised drawn"},
		{"second", "south", "roller", "drawn", "raised drawn"},
		{"venetian", "north", "blind", "open", "raised open half"},
		{"plain", "east", "blind", "drawn", "raised drawn"},
		// (0 - 5.711)/2 and (90 - 5.711)/2 degrees, 10.5 to 11.3 apart, rounded down to tenths; atan(0.6/6) = 5.7106
		{"mirrors", "south", "louvres", "", "tilt -2.9|tilt 8.3|tilt 19.6|tilt 30.8|tilt 42.1"},
	}
	if len(list) != len(want) {
		t.Fatalf("got %d movables, want %d: %+v", len(list), len(want), list)
	}
	for i, m := range list {
		sep := " "
		if m.Follow != nil {
			sep = "|"
			states := m.Follow.States()
			for k, s := range states {
				if m.States[m.FollowFrom+k] != s.Name {
					t.Errorf("%s: state %d of the law is %q, of the movable %q", m.Name, k, s.Name, m.States[m.FollowFrom+k])
				}
			}
		}
		if got := (row{m.Name, m.Opening, m.Kind, m.Standing, strings.Join(m.States, sep)}); got != want[i] {
			t.Errorf("\n got %+v\nwant %+v", got, want[i])
		}
	}
	q := WithStates(p, map[string]string{"screen": "raised", "venetian": "half", "plain": "raised", "mirrors": "tilt 30.8"})
	if q.Rollers[0].Drawn || !q.Rollers[1].Drawn || q.Blinds[0].TiltDeg != -45 || q.Blinds[0].Raised || !q.Blinds[1].Raised || q.Louvres[0].TiltDeg < 30.79 || q.Louvres[0].TiltDeg > 30.81 {
		t.Errorf("got rollers %+v, blinds %+v, louvres %+v", q.Rollers, q.Blinds, q.Louvres)
	}
	if !p.Rollers[0].Drawn || p.Blinds[0].TiltDeg != 0 || p.Blinds[1].Raised || p.Louvres[0].TiltDeg != 0 {
		t.Error("the project itself has changed")
	}
	// Each movable stands where it was put, in every state.
	for _, m := range list {
		for _, state := range m.States {
			for _, n := range Movables(WithStates(p, map[string]string{m.Name: state})) {
				if n.Name == m.Name && n.Standing != state {
					t.Errorf("%s: put in %q, stands in %q", m.Name, state, n.Standing)
				}
			}
		}
	}
	// Back from raised.
	if b := WithStates(q, map[string]string{"plain": "drawn"}).Blinds[1]; b.Raised {
		t.Error("drawn: still raised")
	}
	for name, choice := range map[string]map[string]string{
		"unknown name": {"venetion": "open"}, "unknown state": {"venetian": "ajar"}, "fixed": {"fixed": "tilt 0"}, "drawn with states": {"venetian": "drawn"}, "roller's": {"screen": "half"},
	} {
		t.Run(name, func(t *testing.T) {
			defer func() {
				if recover() == nil {
					t.Error("want a panic")
				}
			}()
			WithStates(p, choice)
		})
	}
}
