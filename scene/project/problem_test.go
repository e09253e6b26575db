package project

import (
	"errors"
	"slices"
	"strings"
	"testing"
)

// TestProblems changes the minimal project in one place and wants one
// problem, word for word.
func TestProblems(t *testing.T) {
	shelf := "[[light_shelf]]\nname = \"s\"\nopening = \"south\"\nheight_m = 1\noutside_depth_m = 0.5\ntop = \"white\"\nunderside = \"white\"\n"
	roller := "[[roller]]\nname = \"r\"\nopening = \"south\"\nopenness = 0.05\ndiffuse_transmittance = 0.1\nreflectance = 0.5\n"
	plane := "[[work_plane]]\nname = \"p\"\npolygon_m = [[0, 0], [4, 0], [4, 4], [0, 4]]\n"
	for _, c := range []struct {
		name     string
		old, new string // old "" appends new, from line 24 on
		want     string // without the file's name
	}{
		// the traps of the TOML library
		{"array too short", "position_m = [1, 2, 1.2]", "position_m = [1, 2]", ":22: viewpoint.position_m: got 2 numbers, want 3 numbers"},
		{"array too long", "position_m = [1, 2, 1.2]", "position_m = [1, 2, 3, 4]", ":22: viewpoint.position_m: got 4 numbers, want 3 numbers"},
		{"too few corners", "[[0, 0, 1], ", "[", ":18: opening.corners_m: got 3 values, want 4 corners of 3 numbers each"},
		{"corner too short", "[2, 0, 1]", "[2, 0]", ":18: opening.corners_m: corner 2: got 2 numbers, want 3 numbers"},
		{"key in other case", "azimuth_deg = 180", "Azimuth_deg = 180", ":20: viewpoint.azimuth_deg: missing; want an azimuth in degrees, or toward_m\n:23: viewpoint.Azimuth_deg: unknown key; did you mean \"azimuth_deg\"?"},
		{"missing key", "unit = \"m\"\n", "", ":3: mesh.unit: missing; want \"m\", \"cm\", \"mm\", \"ft\" or \"in\""},
		{"backslash", `"a.stl"`, `"C:\Users\a.stl"`, ":4: invalid hexadecimal digit in unicode escape sequence; in double quotes a backslash starts a code: write paths with /"},
		{"syntax", "type = \"matte\"", "type = matte", ":10: "},
		{"key twice", "unit = \"m\"", "unit = \"m\"\nunit = \"m\"", ":6: unit: key unit is already defined"},
		{"UTF-16", minimal, "\xff\xfea", ":1: got text in UTF-16, want UTF-8; save the file as UTF-8"},
		// shapes of tables
		{"single brackets", "[[viewpoint]]", "[viewpoint]", ":20: viewpoint: got a table, want a list of tables; write [[viewpoint]], in double brackets"},
		{"double brackets", "[weather]", "[[weather]]", ":1: weather: got 1 value, want a table; write [weather] once, in single brackets"},
		{"no table", "", "[[shelf]]\n", ":24: shelf: unknown key; known: "},
		{"misspelt table", "", "[[lightshelf]]\n", ":24: lightshelf: unknown key; did you mean \"light_shelf\"?"},
		{"value for a table", "[weather]\nfile = \"a.epw\"", "weather = 3\n", ":1: weather: got 3, want a table"},
		{"no weather", "[weather]\nfile = \"a.epw\"", "", ": weather.file: missing; want a path in quotes"},
		{"no mesh", minimal[strings.Index(minimal, "[[mesh]]"):strings.Index(minimal, "[[finish]]")], "", ": mesh: missing; want at least one [[mesh]] of role \"room\""},
		{"nothing to check", minimal[strings.Index(minimal, "[[viewpoint]]"):], "", ": viewpoint: missing; want at least one [[viewpoint]], [[view_grid]] or [[work_plane]]"},
		// values
		{"latitude", "", "[site]\nlatitude_deg = 95\n", ":25: site.latitude_deg: got 95, want -90 to 90"},
		{"not a number", "", "[site]\nnorth_deg = nan\n", ":25: site.north_deg: got NaN, want -360 to 360"},
		{"infinite", "", "[site]\nnorth_deg = inf\n", ":25: site.north_deg: got +Inf, want -360 to 360"},
		{"text for a number", "reflectance = 0.7", "reflectance = \"0.7\"", ":11: finish.reflectance: got \"0.7\", want 0 to 1"},
		{"reflectance", "reflectance = 0.7", "reflectance = 1.2", ":11: finish.reflectance: got 1.2, want 0 to 1"},
		{"choice", `unit = "m"`, `unit = "MM"`, ":5: mesh.unit: got \"MM\", want \"m\", \"cm\", \"mm\", \"ft\" or \"in\"; did you mean \"mm\"?"},
		{"months", "", "[ground]\nreflectance_by_month = [0.2]\n", ":25: ground.reflectance_by_month: got 1 number, want 12 numbers"},
		{"both reflectances", "", "[ground]\nreflectance = 0.2\nreflectance_by_month = [0,0,0,0,0,0,0,0,0,0,0,0]\n", ":26: ground.reflectance_by_month: got reflectance too; want one of the two"},
		{"horizon order", "", "[horizon]\nline = [[90, 1], [0, 1]]\n", ":25: horizon.line: row 2: azimuth: got 0 after 90, want rising azimuths"},
		{"horizon range", "", "[horizon]\nline = [[10, 91]]\n", ":25: horizon.line: row 1: altitude: got 91, want 0 to 89"},
		{"horizon of one point", "", "[horizon]\nline = [[10, 5]]\n", ":25: horizon.line: got 1 point, want at least 2; for the same altitude all around give it at 0 and 180"},
		{"horizon ends", "", "[horizon]\nline = [[0, 1], [360, 2]]\n", ":25: horizon.line: row 2: altitude: got 2 at azimuth 360 and 1 at 0, which are one; leave one of the two out"},
		{"day", "", "[occupancy]\ndays = [\"mon\", \"thursday\"]\n", ":25: occupancy.days: item 2: got \"thursday\", want \"mon\", \"tue\", \"wed\", \"thu\", \"fri\", \"sat\" or \"sun\""},
		{"day twice", "", "[occupancy]\ndays = [\"mon\", \"mon\"]\n", ":25: occupancy.days: item 2: got \"mon\" twice"},
		{"no day", "", "[occupancy]\ndays = []\n", ":25: occupancy.days: got no days, want at least one"},
		{"hour", "", "[occupancy]\nfrom = \"8\"\n", ":25: occupancy.from: got \"8\", want a time of day such as \"08:30\""},
		{"hour 25", "", "[occupancy]\nto = \"24:01\"\n", ":25: occupancy.to: got \"24:01\", want a time of day such as \"08:30\""},
		{"hours the wrong way", "", "[occupancy]\nfrom = \"18:30\"\n", ":25: occupancy.from: got use from 18:30 to 18:00, want an end after the start, on the same day"},
		{"holiday", "", "[occupancy]\nholidays = [\"01-01\", \"02-30\"]\n", ":25: occupancy.holidays: item 2: got \"02-30\", want a day such as \"12-25\", month first"},
		{"daylight saving", "", "[occupancy]\ndaylight_saving_from = \"03-29\"\n", ":25: occupancy.daylight_saving_from: got no daylight_saving_to; want both or neither"},
		{"seed", "", "[simulation]\nseed = -1\n", ":25: simulation.seed: got -1, want a whole number, 0 or more"},
		{"whole number", "", "[simulation]\nbatches = 8.0\n", ":25: simulation.batches: got 8.0, want a whole number, 8 to 64"},
		{"not a multiple", "", "[simulation]\nsamples_per_pixel = 20\n", ":25: simulation.samples_per_pixel: got samples_per_pixel 20 with 8 batches, want a multiple, such as 24"},
		{"photons", "", "[simulation]\nphotons = 7\n", ":25: simulation.photons: got 7 with 8 batches, want at least one a batch, usually thousands, or 0 to leave mirrored sunlight out"},
		{"photons below none", "", "[simulation]\nphotons = -1\n", ":25: simulation.photons: got -1, want a whole number, 0 to 16777216"},
		{"step", "", "[simulation]\nstep_min = 25\n", ":25: simulation.step_min: got 25, want 60, 30, 20, 15, 10 or 5"},
		{"step too fine", "", "[simulation]\nstep_min = 1\n", ":25: simulation.step_min: got 1, want a whole number, 5 to 60"},
		{"criteria", "", "[criteria]\nglare = \"low\"\n", ":25: criteria.glare: got \"low\", want \"minimum\", \"medium\", \"high\" or \"none\""},
		// paths
		{"leaves the root", `"a.stl"`, `"../../a.stl"`, ":4: mesh.file: got \"../../a.stl\", which leaves the folder that the project may read; move the file into it, or start from a folder further up"},
		{"absolute", `"a.stl"`, `"/a.stl"`, ":4: mesh.file: got \"/a.stl\", an absolute path; want one relative to the project file's folder"},
		{"drive", `"a.stl"`, `"C:/a.stl"`, ":4: mesh.file: got \"C:/a.stl\", an absolute path; want one relative to the project file's folder"},
		{"backslashes", `"a.stl"`, `'b\a.stl'`, ":4: mesh.file: got \"b\\\\a.stl\", want / between folders"},
		{"folder", `"a.stl"`, `"."`, ":4: mesh.file: got \".\", want the path of a file, not of a folder"},
		// names
		{"unknown finish", `finish = "white"`, `finish = "wite"`, ":7: mesh.finish: got \"wite\", want the name of a finish; did you mean \"white\"?"},
		{"unknown finish of a group", `finish = "white"`, "[mesh.finishes]\nfloor = \"carpet\"", ":8: mesh.finishes.floor: got \"carpet\", want the name of a finish; known: \"white\", \"clear\""},
		{"group without a finish", `finish = "white"`, "[mesh.finishes]\nfloor = 3", ":8: mesh.finishes.floor: got 3, want a finish's name in quotes"},
		{"no finish", "finish = \"white\"\n", "", ":3: mesh.finish: missing; want a finish for all of the mesh, or a [mesh.finishes] table"},
		{"unknown opening", "", strings.Replace(shelf, `"south"`, `"South"`, 1), ":26: light_shelf.opening: got \"South\", want the name of an opening; did you mean \"south\"?"},
		{"name twice", `name = "clear"`, `name = "white"`, ":13: finish.name: got \"white\" again, want a name that no other finish has\n:19: opening.glazing: got \"clear\", want the name of a finish; known: \"white\""},
		{"empty name", `name = "v"`, `name = ""`, ":21: viewpoint.name: got \"\", want a name that is not empty"},
		{"name with a line break", `name = "v"`, `name = "v\nw"`, ":21: viewpoint.name: got \"v\\nw\", want a name of printable characters"},
		{"not glazing", `glazing = "clear"`, `glazing = "white"`, ":19: opening.glazing: got \"white\", which is of type \"matte\", want a finish of type \"glazing\""},
		// finishes
		{"finish type", `type = "matte"`, `type = "mate"`, ":10: finish.type: got \"mate\", want \"matte\", \"mirror\", \"glossy\", \"glazing\", \"diffuser\", \"cloth\" or \"perforated\"; did you mean \"matte\"?"},
		{"key of another type", "reflectance = 0.7", "reflectance = 0.7\npanes = 2", ":12: finish.panes: no key of type \"matte\" but of \"glazing\"; want name, type, loss_per_month, cleaning_months, reflectance, back"},
		{"mirror", "", "[[finish]]\nname = \"m\"\ntype = \"mirror\"\nspecular_reflectance = 0.9\ndiffuse_reflectance = 0.2\n", ":27: finish.specular_reflectance: got 0.9 and diffuse_reflectance 0.2, together 1.1, want at most 1"},
		{"own back", "reflectance = 0.7", "reflectance = 0.7\nback = \"white\"", ":12: finish.back: got the finish itself; leave it out where both sides are alike"},
		{"glazing back", "reflectance = 0.7", "reflectance = 0.7\nback = \"clear\"", ":12: finish.back: got \"clear\", which is of type \"glazing\", want a finish of type \"matte\", \"mirror\" or \"glossy\""},
		{"back with a back", "", "[[finish]]\nname = \"a\"\ntype = \"matte\"\nreflectance = 0\nback = \"b\"\n[[finish]]\nname = \"b\"\ntype = \"matte\"\nreflectance = 0\nback = \"white\"\n", ":28: finish.back: got \"b\", which has a back of its own; want a finish without"},
		{"no transmittance", "transmittance = 0.8\n", "", ":12: finish.transmittance: missing; want 0 to 1, or a table"},
		{"table and transmittance", "transmittance = 0.8", "transmittance = 0.8\ntable = [[0, 1, 0], [90, 0, 1]]", ":16: finish.table: got transmittance too; want one of the two"},
		{"table sum", "transmittance = 0.8", "table = [[0, 0.9, 0.2], [90, 0, 1]]", ":15: finish.table: row 1: got transmittance 0.9 and reflectance 0.2, together 1.1, want at most 1"},
		{"table order", "transmittance = 0.8", "table = [[0, 0.8, 0.2], [60, 0.6, 0.2], [40, 0.7, 0.2], [90, 0, 1]]", ":15: finish.table: row 3: got angle 40 after 60, want rising angles"},
		{"table end", "transmittance = 0.8", "table = [[0, 0.8, 0.2], [60, 0.6, 0.2]]", ":15: finish.table: got 2 rows, want at least two, the first at 0 degrees and the last at 90 (all light reflected: [90, 0, 1])"},
		// openings and systems
		// by hand: the diagonals' cross product is (0.6, -6, 0.8), corner 1 lies 0.6 / 6.0828 m off
		{"twisted opening", "[2, 0, 2.5]", "[2, 0.4, 2.5]", ":18: opening.corners_m: corner 1: lies 0.09864 m off the plane of the others, want at most 0.01266 m; split a twisted or curved opening into plane ones"},
		{"skewed opening", "[2, 0, 2.5], [0, 0, 2.5]", "[2.5, 0, 2.5], [0.5, 0, 2.5]", ":18: opening.corners_m: corner 1: the angle is 71.57 degrees, want 90 within 1; give the corners of a rectangle in order around it"},
		{"no corners", "corners_m = [[0, 0, 1], [2, 0, 1], [2, 0, 2.5], [0, 0, 2.5]]\n", "", ":16: opening.corners_m: missing; want 4 corners of 3 numbers each, or a mesh_group"},
		{"no glazing", "glazing = \"clear\"\n", "", ":16: opening.glazing: missing; want a finish's name in quotes"},
		{"tilt", "", shelf + "outside_tilt_deg = 95\n", ":31: light_shelf.outside_tilt_deg: got 95, want -60 to 60"},
		{"words in another order", "", shelf + "tilt_outside_deg = 5\n", ":31: light_shelf.tilt_outside_deg: unknown key; did you mean \"outside_tilt_deg\"?"},
		{"depth", "", strings.Replace(shelf, "0.5", "-0.5", 1), ":28: light_shelf.outside_depth_m: got -0.5, want 0 to 5"},
		{"no depth", "", strings.Replace(shelf, "0.5", "0", 1), ":28: light_shelf.outside_depth_m: got no outside_depth_m and no inside_depth_m above 0; want at least one of them"},
		{"shelf above the opening", "", strings.Replace(shelf, "height_m = 1", "height_m = 1.6", 1), ":27: light_shelf.height_m: got 1.6 m, want -1 m to the opening's height, 1.5 m"},
		{"shelf far below", "", strings.Replace(shelf, "height_m = 1", "height_m = -1.1", 1), ":27: light_shelf.height_m: got -1.1, want -1 to 20"},
		{"shelf of glass", "", strings.Replace(shelf, `top = "white"`, `top = "clear"`, 1), ":29: light_shelf.top: got \"clear\", which is of type \"glazing\", want a finish of type \"matte\", \"mirror\", \"glossy\" or \"perforated\""},
		{"roller", "", strings.Replace(roller, "0.5", "0.9", 1), ":27: roller.openness: got 0.05, diffuse_transmittance 0.1 and reflectance 0.9, together 1.05, want at most 1"},
		{"roller of nothing", "", "[[roller]]\nname = \"r\"\nopening = \"south\"\n", ":24: roller.cloth: missing; want a finish's name in quotes, or the single numbers openness, diffuse_transmittance and reflectance"},
		{"roller of half", "", strings.Replace(roller, "reflectance = 0.5\n", "", 1), ":24: roller.reflectance: missing; want 0 to 1"},
		{"roller of both", "", roller + "cloth = \"white\"\n", ":30: roller.cloth: got openness too; want either the cloth's finish or the single numbers"},
		{"roller with a cut-off and a cloth", "", "[[roller]]\nname = \"r\"\nopening = \"south\"\ncloth = \"c\"\ncut_off_deg = 60\n[[finish]]\nname = \"c\"\ntype = \"diffuser\"\ndiffuse_transmittance = 0\nreflectance = 0\n", ":27: roller.cloth: got cut_off_deg too; want either the cloth's finish or the single numbers"},
		{"roller of unknown cloth", "", "[[roller]]\nname = \"r\"\nopening = \"south\"\ncloth = \"cleer\"\n", ":27: roller.cloth: got \"cleer\", want the name of a finish; did you mean \"clear\"?"},
		{"roller of glass", "", "[[roller]]\nname = \"r\"\nopening = \"south\"\ncloth = \"clear\"\n", ":27: roller.cloth: got \"clear\", which is of type \"glazing\", want a finish of type \"cloth\", \"diffuser\" or \"perforated\""},
		{"roller's back", "", roller + "back_reflectance = 0.9\n", ":27: roller.openness: got 0.05, diffuse_transmittance 0.1 and back_reflectance 0.9, together 1.05, want at most 1"},
		{"roller's cut-off", "", roller + "cut_off_deg = 0\n", ":30: roller.cut_off_deg: got 0, want 1 to 90"},
		{"second roller", "", roller + strings.Replace(roller, `"r"`, `"q"`, 1), ":32: roller.opening: got a second roller inside of opening \"south\"; want one on each side at most"},
		{"roller through a shelf", "", roller + strings.Replace(shelf, "outside_depth", "inside_depth", 1), ":24: roller.drop: got 1, which reaches the shelf, whose top is 1 m above the opening's lower edge at the cloth; want at most 0.333, or a gap larger than the shelf's reach"},
		// receivers
		{"no direction", "azimuth_deg = 180\n", "", ":20: viewpoint.azimuth_deg: missing; want an azimuth in degrees, or toward_m"},
		{"two directions", "azimuth_deg = 180", "azimuth_deg = 180\ntoward_m = [0, 0, 0]", ":24: viewpoint.toward_m: got azimuth_deg too; want one of the two"},
		{"looks at itself", "azimuth_deg = 180", "toward_m = [1, 2, 1.2]", ":23: viewpoint.toward_m: got the eye's own position; want a point to look at"},
		{"crossing outline", "", strings.Replace(plane, "[4, 0], [4, 4]", "[4, 4], [4, 0]", 1), ":26: work_plane.polygon_m: the sides from point 1 and from point 3 meet; want an outline that does not cross itself"},
		{"closed outline", "", strings.Replace(plane, "[0, 4]]", "[0, 4], [0, 0]]", 1), ":26: work_plane.polygon_m: point 5: got the first point again; leave it out, the outline closes by itself"},
		{"two points", "", strings.Replace(plane, ", [4, 4], [0, 4]", "", 1), ":26: work_plane.polygon_m: got 2 points, want 3 to 1000"},
		{"spacing", "", plane + "spacing_m = 0.001\n", ":27: work_plane.spacing_m: got 0.001, want 0 or at least 0.02"},
	} {
		t.Run(c.name, func(t *testing.T) { wantProblem(t, c.old, c.new, c.want) })
	}
}

// wantProblem changes the minimal project, old to new, or appends new where
// old is "", and wants these problems, given without the file's name.
func wantProblem(t *testing.T, old, new, want string) {
	t.Helper()
	text := minimal + new
	if old != "" {
		if strings.Count(minimal, old) < 1 {
			t.Fatalf("the minimal project holds no %q", old)
		}
		text = strings.Replace(minimal, old, new, 1)
	}
	_, err := load(t, text)
	if err == nil {
		t.Fatal("got no problem")
	}
	full := "dir/office.toml" + strings.ReplaceAll(want, "\n", "\ndir/office.toml")
	// Of the parser's own words and of long lists only the start is ours.
	open := strings.HasSuffix(want, ": ")
	if got := err.Error(); got != full && !(open && strings.HasPrefix(got, full) && len(got) > len(full)) {
		t.Errorf("\n got %s\nwant %s", got, full)
	}
}

// TestAllAtOnce wants every problem of a file, by line, and nothing twice.
func TestAllAtOnce(t *testing.T) {
	_, err := load(t, `[site]
latitude_deg = 95
[[viewpoint]]
name = "v"
position_m = [1, 2]
[simulation]
batch = 8
[[finish]]
name = "f"
type = "mirror"
specular_reflectance = 0.9
diffuse_reflectance = 0.9
[[mesh]]
unit = "m"
up = "x"
finish = "g"
`)
	var ps Problems
	if !errors.As(err, &ps) {
		t.Fatalf("got %v (%T), want Problems", err, err)
	}
	type at struct {
		line int
		key  string
	}
	var got []at
	for _, p := range ps {
		got = append(got, at{p.Line, p.Key})
	}
	want := []at{{0, "weather.file"}, {2, "site.latitude_deg"}, {3, "viewpoint.azimuth_deg"}, {5, "viewpoint.position_m"},
		{7, "simulation.batch"}, {11, "finish.specular_reflectance"}, {13, "mesh.file"}, {15, "mesh.up"}, {16, "mesh.finish"}}
	if !slices.Equal(got, want) {
		t.Errorf("\n got %v\nwant %v\n%v", got, want, err)
	}
}

func TestSuggest(t *testing.T) {
	known := []string{"ceiling white", "floor", "glass_east", "outside_tilt_deg"}
	for _, c := range []struct{ unknown, want string }{
		{"Floor", "floor"},
		{"flor", "floor"},
		{"lfoor", "floor"},
		{"east_glass", "glass_east"},
		{"tilt_outside_deg", "outside_tilt_deg"},
		{"white ceiling", "ceiling white"},
		{"wall", ""},
		{"", ""},
		{strings.Repeat("x", 1000), ""},
	} {
		if got := Suggest(c.unknown, known); got != c.want {
			t.Errorf("%q: got %q, want %q", c.unknown, got, c.want)
		}
	}
}

// TestEdits has values counted by hand.
func TestEdits(t *testing.T) {
	for _, c := range []struct {
		a, b string
		want int
	}{{"", "", 0}, {"a", "", 1}, {"ab", "ba", 1}, {"kitten", "sitting", 3}, {"shelf", "shelve", 2}, {"abcd", "acbd", 1}} {
		if got := edits(c.a, c.b); got != c.want {
			t.Errorf("%q, %q: got %d, want %d", c.a, c.b, got, c.want)
		}
		if got := edits(c.b, c.a); got != c.want {
			t.Errorf("%q, %q: got %d, want %d", c.b, c.a, got, c.want)
		}
	}
}
