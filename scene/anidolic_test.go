package scene

import (
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
)

const anidolicTables = `[[finish]]
name = "aluminium"
type = "mirror"
specular_reflectance = 0.9
diffuse_reflectance = 0

[[finish]]
name = "screen"
type = "cloth"
openness = 0.05
diffuse_transmittance = 0.1
reflectance = 0.4

` + roomMesh + `
[[opening]]
name = "slot"
group = "south"
corners_m = [[1, 0, 2.4], [3, 0, 2.4], [3, 0, 2.8], [1, 0, 2.8]]

[[anidolic_ceiling]]
name = "scoop"
opening = "slot"
axis_tilt_deg = 55
acceptance_deg = 35
duct_length_m = 3
reflector = "aluminium"
casing = "white"
entrance_glazing = "clear"
roller = "screen"
`

// TestAnidolicCeiling: parts, both sides of the walls, the outlet as an
// opening of the group, and its place by hand: mouth 0.38 m high after gaps of
// 0.01 m, outlet 0.76 m long, from 2.24 to 3 m behind the glass.
func TestAnidolicCeiling(t *testing.T) {
	s := mustBuild(t, anidolicTables, room().files())
	if len(s.Notes) != 0 {
		t.Errorf("notes: %q", s.Notes)
	}
	parts := map[string]int{}
	for _, tri := range s.Triangles {
		p := s.Parts[tri.Part]
		if p.Kind == System {
			parts[p.Name]++
			if p.Opening != 0 {
				t.Errorf("%+v: want opening 0", p)
			}
		}
		if p.Name != "scoop/duct" && p.Name != "scoop/collector" && p.Name != "scoop/outlet" {
			continue
		}
		f := s.Finishes[tri.Finish].BSDF
		mirror, _ := f.Delta(materials.Front, 1)
		scattered, _ := f.Lambert(materials.Back)
		behind, _ := f.Delta(materials.Back, 1)
		if mirror != 0.9 || scattered != 0.8 || behind != 0 { // as in the project
			t.Fatalf("%s: mirrors %g in front, scatters %g and mirrors %g behind", p.Name, mirror, scattered, behind)
		}
	}
	for _, name := range []string{"scoop/collector", "scoop/duct", "scoop/outlet", "scoop/frame", "scoop/entrance"} {
		if parts[name] == 0 {
			t.Errorf("no part %s: %v", name, parts)
		}
	}
	if len(parts) != 5 || len(s.Openings) != 2 {
		t.Fatalf("parts %v, openings %+v", parts, s.Openings)
	}
	o := s.Openings[1]
	if o.Name != "scoop outlet" || o.Group != "south" || apart(o.Rect.Outward, r3.Vec{Z: 1}) > near ||
		math.Abs(o.Rect.WidthM-1.98) > near || math.Abs(o.Rect.HeightM-0.76) > near {
		t.Errorf("outlet: %+v", o)
	}
	if m := o.Rect.Point(0.99, 0.38, 0); apart(m, r3.Vec{X: 2, Y: 2.62, Z: 2.41}) > near {
		t.Errorf("middle of the outlet: %v", m)
	}
	if s.Bounds.Min.Y > -0.9 {
		t.Errorf("bounds %v leave the collector out", s.Bounds)
	}
	drawn := mustBuild(t, anidolicTables+"roller_drawn = true\n", room().files())
	if n := len(drawn.Triangles) - len(s.Triangles); n != 2 {
		t.Errorf("the drawn cloth has %d faces, want 2", n)
	}
}

// TestAnidolicMouthPane: the opening's pane is as large as the mouth.
func TestAnidolicMouthPane(t *testing.T) {
	glazed := strings.Replace(anidolicTables, "group = \"south\"\n", "group = \"south\"\nglazing = \"clear\"\n", 1)
	for _, c := range []struct {
		tables string
		want   float64
	}{{glazed, 1.98 * 0.38}, {glazed + "duct_height_m = 0.2\ngap_m = 0.05\n", 1.9 * 0.2}, {anidolicTables, 0}} {
		s := mustBuild(t, c.tables, room().files())
		got, normal := panes(s)
		if math.Abs(got-c.want) > near || c.want > 0 && apart(normal, r3.Vec{Y: -1}) > near {
			t.Errorf("pane: got %g m2 facing %v, want %g m2", got, normal, c.want)
		}
		frame := 0.0
		for _, tri := range s.Triangles {
			if s.Parts[tri.Part].Name == "scoop/frame" {
				frame += area(tri)
			}
		}
		// Pane and frame fill the opening of 2 m by 0.4 m.
		if c.want > 0 && math.Abs(frame+got-0.8) > near {
			t.Errorf("pane %g and frame %g m2, want 0.8 together", got, frame)
		}
	}
}

func TestAnidolicNotes(t *testing.T) {
	s := mustBuild(t, strings.Replace(anidolicTables, "duct_length_m = 3\n", "duct_length_m = 7\n", 1), room().files())
	const want = `anidolic_ceiling "scoop": the middle of its outlet, [2, 6.62, 2.41], lies outside the room meshes`
	if len(s.Notes) != 1 || !strings.Contains(s.Notes[0], want) {
		t.Errorf("got %q, want %q", s.Notes, want)
	}
	group := strings.Replace(anidolicTables, `corners_m = [[1, 0, 2.4], [3, 0, 2.4], [3, 0, 2.8], [1, 0, 2.8]]`, "mesh_group = \"glass\"\noutward_deg = 180\nglazing = \"clear\"", 1)
	group = strings.Replace(group, "duct_length_m = 3\n", "duct_length_m = 2\n", 1)
	if _, err := build(t, group, roomWithGlass().files()); err == nil || !strings.Contains(err.Error(), `anidolic_ceiling "scoop": outlet length: the outlet is 2.96 m long`) {
		t.Errorf("an opening known from the mesh alone: got %v", err)
	}
}
