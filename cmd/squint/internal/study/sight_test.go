package study

import (
	"math"
	"testing"
	"testing/fstest"
)

// A shelf square to a low line of sight hides the strip that its thickness and
// depth cover; a drawn cloth of 3 % openness leaves 3 %; perforated slats, shut,
// leave less light than a raised blind.
func TestSights(t *testing.T) {
	run := func(more string) []Sight {
		fsys := operatedRoom(more)
		fsys["site.epw"] = &fstest.MapFile{Data: tinyYear(t)}
		in, err := prepareFile(fsys, "project.toml", "", 2)
		if err != nil {
			t.Fatal(err)
		}
		list, err := sights(t.Context(), in.fsys, in, Options{Workers: 2, Progress: func(Stage, int, int) {}})
		if err != nil {
			t.Fatal(err)
		}
		return list
	}
	if got := run(""); len(got) != 0 {
		t.Errorf("a bare window: got %+v", got)
	}
	cloth := run(operatedRoller)
	if len(cloth) != 1 || cloth[0].State != "drawn" || math.Abs(cloth[0].Taken[0]-0.97) > 1e-6 || !math.IsNaN(cloth[0].Factor) {
		t.Errorf("cloth: got %+v, want 97 %% taken", cloth)
	}
	// The window is 1.5 m high from z = 1, the eye at z = 1.2, 2 m indoors of
	// y = 0 and 2.15 m of the glass. The shelf's top is at z = 2 at the glass,
	// 0.6 m deep outdoors: its outer edge is seen through the height
	// 1.2 + 0.8 2.15/2.75 = 1.825 of the glass, its underside through what is
	// between that and 2 - 0.04: by height 9 to 12 % of the opening.
	shelf := run("\n[[light_shelf]]\nname = \"shelf\"\nopening = \"window\"\nheight_m = 1\noutside_depth_m = 0.6\nthickness_m = 0.04\ntop = \"white\"\nunderside = \"white\"\n")
	if len(shelf) != 1 || math.Abs(shelf[0].LowM-2) > 1e-6 || math.Abs(shelf[0].HighM-2) > 1e-6 {
		t.Fatalf("shelf: got %+v, want its top 2 m above the floor", shelf)
	}
	// Its lower edge outdoors, at z = 1.96, shows at 1.2 + 0.76 2.15/2.75 =
	// 1.794 of the glass.
	lo := 1.2 + 0.76*2.15/2.75
	if want := (2 - lo) / 1.5; math.Abs(shelf[0].Taken[0]-want) > 1.5/sightCells {
		t.Errorf("shelf: takes %g, want about %g", shelf[0].Taken[0], want)
	}
	slats := run(`
[[finish]]
name = "holed"
type = "perforated"
open_share = 0.1
hole_diameter_mm = 1
thickness_mm = 0.2
base = "white"
[[blind]]
name = "blind"
opening = "window"
slat_width_mm = 50
pitch_mm = 42
upper = "holed"
states = [{ name = "open", tilt_deg = 0 }, { name = "shut", tilt_deg = -70 }]
`)
	if len(slats) != 1 || slats[0].State != "shut" || !(slats[0].Factor > 0 && slats[0].Factor < 0.05) || !(slats[0].Taken[0] > 0.8 && slats[0].Taken[0] < 1) {
		t.Errorf("perforated slats: got %+v", slats)
	}
}
