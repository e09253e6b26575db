package study

import (
	"fmt"
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
	// The window is 1.5 m high from z = 1, the eye at z = 1.2, 2.15 m indoors of
	// the glass. The shelf's top is at z = 2, its outer edge 0.6 m outdoors of the
	// glass: from its lower corner there, at 2 less the thickness, a line of sight
	// passes the glass at 1.2 + (0.8 - thickness) 2.15/2.75. What lies between that
	// and z = 2 is taken, to within one row of lines. The twin is a shelf of hardly
	// any thickness.
	shelf := func(thickness float64) Sight {
		list := run(fmt.Sprintf("\n[[light_shelf]]\nname = \"shelf\"\nopening = \"window\"\nheight_m = 1\noutside_depth_m = 0.6\nthickness_m = %g\ntop = \"white\"\nunderside = \"white\"\n", thickness))
		if len(list) != 1 || math.Abs(list[0].LowM-2) > 1e-6 || math.Abs(list[0].HighM-2) > 1e-6 {
			t.Fatalf("shelf: got %+v, want its top 2 m above the floor", list)
		}
		return list[0]
	}
	want := (2 - (1.2 + (0.8-0.2)*2.15/2.75)) / 1.5
	if got := shelf(0.2).Taken[0]; math.Abs(got-want) > 1.0/sightCells {
		t.Errorf("shelf: takes %g, want %g", got, want)
	}
	if got := shelf(0.01).Taken[0]; math.Abs(got-want) <= 1.0/sightCells {
		t.Errorf("thin shelf: takes %g, as much as the thick one: the test sees nothing", got)
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
	// A line that rises by s per metre meets overlapping slats but for
	// 1 - 50/42 (sin 70 - s cos 70) where that is positive, from s = 0.291, at
	// z = 1.83 of the glass, on: at most 0.128 at its top, 0.03 of all lines. The
	// holes leave a tenth of the rest at most. The light is less than that of the
	// bare window.
	in := prepared(t, operatedRoom(""))
	bare, err := closedFactor(t.Context(), in, in.World, Options{Workers: 2, Progress: func(Stage, int, int) {}})
	if err != nil {
		t.Fatal(err)
	}
	t.Logf("perforated slats: %+v, bare %g", slats, bare)
	if len(slats) != 1 || slats[0].State != "shut" || !(slats[0].Factor > 0 && slats[0].Factor < min(0.05, bare)) || !(slats[0].Taken[0] > 1-0.1-0.03-1.0/sightCells && slats[0].Taken[0] < 1) {
		t.Errorf("perforated slats: got %+v, bare daylight factor %g", slats, bare)
	}
}
