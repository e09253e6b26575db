package study

import (
	"fmt"
	"slices"
	"strings"
	"testing"
	"testing/fstest"

	"squint/scene/project"
	"squint/scene/view"
)

// gridFiles are the tiny room with a cupboard, about one of the four positions
// of a grid of eyes that look south and east.
func gridFiles(t testing.TB, more string) fstest.MapFS {
	grid := "\n[[view_grid]]\nname = \"hall\"\npolygon_m = [[0, 0], [4, 0], [4, 4], [0, 4]]\nspacing_m = 1.5\ndirections_deg = [180, 90]\n"
	return fstest.MapFS{
		"project.toml": {Data: fmt.Appendf(nil, tinyProject+grid+more, 2.0)},
		"room.obj":     {Data: []byte(tinyRoom(box{1, 2.5, 0, 1.5, 3, 2}))},
		"site.epw":     {Data: tinyYear(t)},
	}
}

// The views of a grid that lie in the room are judged under their names, each
// as one of all; those in the cupboard are left out, with a note.
func TestViewGrid(t *testing.T) {
	files := gridFiles(t, "")
	in, err := prepareFile(files, "project.toml", "", 1)
	if err != nil {
		t.Fatal(err)
	}
	r := study(t, in, 2)
	var names []string
	for _, v := range r.Views {
		names = append(names, v.Levels[0].Subject)
	}
	want := []string{"desk, looking east",
		"hall (1.25, 1.25) south", "hall (1.25, 1.25) east", "hall (2.75, 1.25) south", "hall (2.75, 1.25) east",
		"hall (2.75, 2.75) south", "hall (2.75, 2.75) east"}
	if !slices.Equal(names, want) {
		t.Errorf("got %q, want %q", names, want)
	}
	if len(r.Project.Viewpoints) != len(r.Scene.Viewpoints) || len(r.Views) != len(want) {
		t.Errorf("got %d viewpoints of the project, %d of the scene, %d views, want %d each", len(r.Project.Viewpoints), len(r.Scene.Viewpoints), len(r.Views), len(want))
	}
	note := `view grid "hall" leaves out 1 of 4 positions: 1 inside walls, furniture or other solids.`
	if !slices.Contains(r.Notes, note) {
		t.Errorf("got notes %q, want one %q", r.Notes, note)
	}
	k, err := PrepareLook(files, []Design{{Project: loaded(t, files)}}, LookOptions{Views: []string{"hall (2.75, 2.75) south"}, FOVDeg: 180, Width: 16, Height: 16,
		Projection: view.Equidistant, When: []When{AtHour(ClockTime{Month: 6, Day: 11, Hour: 12})}, Workers: 1})
	if err != nil {
		t.Fatal(err)
	}
	if len(k.Shots) != 1 || k.Shots[0].Name != "hall (2.75, 2.75) south" {
		t.Errorf("got shots %v, want the view by its name", k.Shots)
	}
}

func loaded(t testing.TB, files fstest.MapFS) *project.Project {
	t.Helper()
	p, err := project.Load(files, "project.toml")
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// A control must not watch a view that is left out: with none left it would
// watch all.
func TestViewGridWatched(t *testing.T) {
	const control = "[[roller]]\nname = \"cloth\"\nopening = \"window\"\nopenness = 0.05\ndiffuse_transmittance = 0.1\nreflectance = 0.5\n" +
		"[[control]]\nname = \"c\"\nsystems = [\"cloth\"]\nrule = \"glare\"\nviewpoints = [\"hall (%s) east\"]\n"
	if _, err := prepareFile(gridFiles(t, fmt.Sprintf(control, "2.75, 2.75")), "project.toml", "", 1); err != nil {
		t.Error(err)
	}
	_, err := prepareFile(gridFiles(t, fmt.Sprintf(control, "1.25, 2.75")), "project.toml", "", 1)
	if err == nil || !strings.Contains(err.Error(), `control.viewpoints: "hall (1.25, 2.75) east" is left out of its view grid, as it does not lie in a room`) {
		t.Errorf("got %v, want that the view is left out", err)
	}
}

// A grid beside the building is an error, not an empty list.
func TestViewGridOutdoors(t *testing.T) {
	files := gridFiles(t, "")
	text := strings.Replace(string(files["project.toml"].Data), "polygon_m = [[0, 0], [4, 0], [4, 4], [0, 4]]\nspacing_m = 1.5\ndirections_deg", "polygon_m = [[20, 0], [24, 0], [24, 4], [20, 4]]\nspacing_m = 1.5\ndirections_deg", 1)
	files["project.toml"] = &fstest.MapFile{Data: []byte(text)}
	_, err := prepareFile(files, "project.toml", "", 1)
	if err == nil || !strings.Contains(err.Error(), `view_grid "hall": none of 4 positions lies in a room`) {
		t.Errorf("got %v, want that no position lies in a room", err)
	}
}
