package project

import (
	"strings"
	"testing"
	"testing/fstest"
)

const twoDesigns = `
[weather]
file = "w.epw"
[[alternative]]
name = "bare"
[[alternative]]
name = "shelf"
about = "with a white shelf"
[[mesh]]
file = "room.obj"
unit = "m"
up = "z"
role = "room"
finish = "white"
[[finish]]
name = "white"
type = "matte"
reflectance = 0.7
[[finish]]
name = "glass"
type = "glazing"
transmittance = 0.8
panes = 2
[[opening]]
name = "window"
corners_m = [[0, 0, 1], [2, 0, 1], [2, 0, 2], [0, 0, 2]]
glazing = "glass"
[[light_shelf]]
name = "shelf"
only = ["shelf"]
opening = "window"
outside_depth_m = 0.5
top = "white"
underside = "white"
[[viewpoint]]
name = "desk"
position_m = [1, 2, 1.2]
azimuth_deg = 180
`

func TestAlternatives(t *testing.T) {
	load := func(text string) ([]*Project, error) {
		return LoadAll(fstest.MapFS{"p.toml": {Data: []byte(text)}}, "p.toml")
	}
	all, err := load(twoDesigns)
	if err != nil {
		t.Fatal(err)
	}
	if len(all) != 2 || all[0].Alternative != "bare" || all[1].Alternative != "shelf" {
		t.Fatalf("got %d projects", len(all))
	}
	if got := [2]int{len(all[0].LightShelves), len(all[1].LightShelves)}; got != [2]int{0, 1} {
		t.Errorf("shelves of the two: %v, want [0 1]", got)
	}
	if a := all[0].Alternatives; len(a) != 2 || a[1].About != "with a white shelf" || a[1].Line == 0 {
		t.Errorf("alternatives: %+v", a)
	}
	one, err := Load(fstest.MapFS{"p.toml": {Data: []byte(twoDesigns)}}, "p.toml")
	if err != nil || one.Alternative != "bare" {
		t.Errorf("Load: %v, %v", one, err)
	}

	for _, c := range []struct{ name, from, to, want string }{
		{"unknown name", `only = ["shelf"]`, `only = ["shelve"]`, `p.toml:30: light_shelf.only: got "shelve", want the name of an alternative; known: "bare", "shelf"`},
		{"no list", `only = ["shelf"]`, `only = "shelf"`, `light_shelf.only: got "shelf", want a list of names of alternatives`},
		{"empty", `only = ["shelf"]`, `only = []`, `light_shelf.only: got 0 values, want a list`},
		{"number", `only = ["shelf"]`, `only = [3]`, `light_shelf.only: got 3, want the name of an alternative`},
		{"same name", `name = "bare"`, `name = "shelf"`, `alternative.name: got "shelf" again`},
		{"only of the second", `outside_depth_m = 0.5`, `outside_depth_m = 50`, `light_shelf.outside_depth_m: got 50`},
		{"alternative of an alternative", `about = "with a white shelf"`, `only = ["bare"]`, `alternative.only: unknown key`},
		{"reference lost", `[[opening]]`, "[[opening]]\nonly = [\"bare\"]", `light_shelf.opening: got "window"`},
	} {
		_, err := load(strings.Replace(twoDesigns, c.from, c.to, 1))
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %q", c.name, err, c.want)
		}
		if err != nil && strings.Count(err.Error(), "\n") > 0 {
			t.Errorf("%s: told more than once: %v", c.name, err)
		}
	}
	// The same table twice is right where no alternative has both.
	text := strings.Replace(twoDesigns, "[[opening]]", "[[opening]]\nonly = [\"shelf\"]", 1) + `
[[opening]]
name = "window"
only = ["bare"]
corners_m = [[0, 0, 1], [2, 0, 1], [2, 0, 2.4], [0, 0, 2.4]]
glazing = "glass"
`
	if all, err = load(text); err != nil || all[0].Openings[0].CornersM[2][2] != 2.4 || all[1].Openings[0].CornersM[2][2] != 2 {
		t.Errorf("an opening for each: %v", err)
	}
}
