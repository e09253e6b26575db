package project

import (
	"fmt"
	"slices"
	"strings"
	"testing"
)

const gridTable = "[[view_grid]]\nname = \"hall\"\npolygon_m = [[0, 0], [4, 0], [4, 3], [0, 3]]\nspacing_m = 1.5\n"

// TestViewGrid: of 4 m by 3 m inside the band of 0.5 m 3 m by 2 m remain, by
// hand 2 by 2 cells of 1.5 m by 1 m.
func TestViewGrid(t *testing.T) {
	p, err := load(t, minimal+gridTable+"directions_deg = [90, -150, 30]\nheight_m = 1.7\n")
	if err != nil {
		t.Fatal(err)
	}
	if first := p.Viewpoints[0]; len(p.Viewpoints) != 13 || first.Grid != "" {
		t.Fatalf("got %d viewpoints, the first %+v; want 12 after that of the file", len(p.Viewpoints), first)
	}
	i := 1
	for _, y := range []float64{1, 2} {
		for _, x := range []float64{1.25, 2.75} {
			for _, d := range []struct {
				azimuthDeg float64
				words      string
			}{{90, "east"}, {210, "210 deg"}, {30, "30 deg"}} {
				v := p.Viewpoints[i]
				name := fmt.Sprintf("hall (%.2f, %.2f) %s", x, y, d.words)
				if v.Name != name || v.PositionM != [3]float64{x, y, 1.7} || *v.AzimuthDeg != d.azimuthDeg || v.PitchDeg != 0 || v.TowardM != nil || v.Grid != "hall" || v.Line != 24 {
					t.Errorf("viewpoint %d: got %+v toward %g, want %q", i, v, *v.AzimuthDeg, name)
				}
				i++
			}
		}
	}
}

// TestViewGridDefaults: four directions from north at 1.2 m; one decimal where
// it is exact.
func TestViewGridDefaults(t *testing.T) {
	p, err := load(t, minimal+strings.Replace(gridTable, "1.5", "9", 1))
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, v := range p.Viewpoints[1:] {
		names = append(names, v.Name)
		if v.PositionM[2] != 1.2 {
			t.Errorf("%s: got height %g, want 1.2", v.Name, v.PositionM[2])
		}
	}
	want := []string{"hall (2.0, 1.5) north", "hall (2.0, 1.5) east", "hall (2.0, 1.5) south", "hall (2.0, 1.5) west"}
	if !slices.Equal(names, want) {
		t.Errorf("got %q, want %q", names, want)
	}
}

// TestViewGridNames wants all names of the finest grid to differ, and other
// tables to find them.
func TestViewGridNames(t *testing.T) {
	fine := "[[view_grid]]\nname = \"g\"\npolygon_m = [[0, 0], [3.93, 0], [3.93, 0.19], [0, 0.19]]\nperimeter_m = 0\nspacing_m = 0.1\ndirections = 12\n"
	p, err := load(t, minimal+fine+"[[roller]]\nname = \"r\"\nopening = \"south\"\nopenness = 0.05\ndiffuse_transmittance = 0.1\nreflectance = 0.5\n"+
		"[[control]]\nname = \"c\"\nsystems = [\"r\"]\nrule = \"glare\"\nviewpoints = [\"g (0.05, 0.05) 30 deg\"]\n")
	if err != nil {
		t.Fatal(err)
	}
	seen := map[string]bool{}
	for _, v := range p.Viewpoints {
		seen[v.Name] = true
	}
	if len(seen) != 1+40*2*12 {
		t.Errorf("got %d names of %d viewpoints, want %d", len(seen), len(p.Viewpoints), 1+40*2*12)
	}
}

// TestViewGridAlone: a grid is something to check, and judges what eyes judge.
func TestViewGridAlone(t *testing.T) {
	alone := minimal[:strings.Index(minimal, "[[viewpoint]]")]
	if _, err := load(t, alone+gridTable+"[criteria]\nglare_autonomy_at_least = 0.9\n"); err != nil {
		t.Error(err)
	}
}

func TestViewGridProblems(t *testing.T) {
	for _, c := range []struct{ name, old, new, want string }{
		{"no name", "name = \"hall\"\n", "", ":24: view_grid.name: missing; want text in quotes"},
		{"no spacing", "spacing_m = 1.5\n", "", ":24: view_grid.spacing_m: missing; want 0.1 to 100"},
		{"no outline", "polygon_m = [[0, 0], [4, 0], [4, 3], [0, 3]]\n", "", ":24: view_grid.polygon_m: missing; want a list of points of 2 numbers each"},
		{"spacing", "spacing_m = 1.5", "spacing_m = 0.05", ":27: view_grid.spacing_m: got 0.05, want 0.1 to 100"},
		{"too many", "spacing_m = 1.5", "spacing_m = 0.1", ":27: view_grid.spacing_m: got 0.1, which makes 30 by 20 positions in 4 directions, want at most 1000 viewpoints; give a larger spacing_m or split the area"},
		{"outline that crosses itself", "[4, 3], [0, 3]", "[0, 3], [4, 3]", ":26: view_grid.polygon_m: the sides from point 2 and from point 4 meet; want an outline that does not cross itself"},
		{"nothing inside the band", "spacing_m = 1.5", "spacing_m = 1.5\nperimeter_m = 1.5", ":26: view_grid.polygon_m: no viewpoint fits between the perimeter band of 1.5 m and the outline with 1.5 m spacing; want a larger outline, or smaller perimeter_m or spacing_m"},
		{"both", "spacing_m = 1.5", "spacing_m = 1.5\ndirections = 2\ndirections_deg = [10]", ":29: view_grid.directions_deg: got directions too; want one of the two"},
		{"direction out of range", "spacing_m = 1.5", "spacing_m = 1.5\ndirections_deg = [10, 370]", ":28: view_grid.directions_deg: number 2: got 370, want -360 to 360"},
		{"direction twice", "spacing_m = 1.5", "spacing_m = 1.5\ndirections_deg = [10, -350]", ":28: view_grid.directions_deg: got 10 degrees twice"},
		{"no direction", "spacing_m = 1.5", "spacing_m = 1.5\ndirections_deg = []", ":28: view_grid.directions_deg: got no numbers, want at least one"},
		{"not a list", "spacing_m = 1.5", "spacing_m = 1.5\ndirections_deg = 90", ":28: view_grid.directions_deg: got 90, want a list of numbers, each -360 to 360"},
		{"no directions", "spacing_m = 1.5", "spacing_m = 1.5\ndirections = 0", ":28: view_grid.directions: got 0, want a whole number, 1 to 16"},
		{"toward", "spacing_m = 1.5", "spacing_m = 1.5\ntoward_m = [1, 1, 1]", ":28: view_grid.toward_m: unknown key; known: \"name\", \"polygon_m\", \"height_m\", \"spacing_m\", \"perimeter_m\", \"directions\", \"directions_deg\", \"room\""},
		{"same name", "spacing_m = 1.5", "spacing_m = 1.5\n" + gridTable, ":29: view_grid.name: got \"hall\" again, want a name that no other view_grid has"},
		{"name of a viewpoint", "spacing_m = 1.5", "spacing_m = 1.5\n[[viewpoint]]\nname = \"hall (1.25, 1.00) north\"\nposition_m = [1, 1, 1]\nazimuth_deg = 0", ":25: view_grid.name: makes a viewpoint \"hall (1.25, 1.00) north\", which there is already; want another name"},
	} {
		text := minimal + strings.Replace(gridTable, c.old, c.new, 1)
		_, err := load(t, text)
		if got := fmt.Sprint(err); got != "dir/office.toml"+c.want {
			t.Errorf("%s:\n got %s\nwant dir/office.toml%s", c.name, got, c.want)
		}
	}
}
