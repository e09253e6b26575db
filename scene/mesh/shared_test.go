package mesh

import (
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// sharedModels returns the folder of meshes that other programs exported, kept
// outside the repository, or skips.
func sharedModels(t *testing.T) string {
	t.Helper()
	dir, err := os.Getwd()
	if err != nil {
		t.Fatal(err)
	}
	for {
		if _, err := os.Stat(filepath.Join(dir, "go.mod")); err == nil {
			break
		}
		parent := filepath.Dir(dir)
		if parent == dir {
			t.Fatal("no go.mod above the test")
		}
		dir = parent
	}
	models := filepath.Join(dir, "..", "shared", "models")
	if _, err := os.Stat(models); err != nil {
		if os.Getenv("SQUINT_REQUIRE_SHARED") == "1" {
			t.Fatalf("SQUINT_REQUIRE_SHARED is set, but %v", err)
		}
		t.Skip("exported meshes are not at ../shared/models: not tried")
	}
	return models
}

func TestSharedModels(t *testing.T) {
	// Triangle counts are of the facets and f lines in the files, counted with
	// grep and od, an n-gon as n-2 (Meisters 1975), less those without area,
	// counted in exact rational arithmetic. Areas are exact: cubes of edge 1;
	// ((1, 2, 3), (2, 3, 1), (3, 1, 2)) is equilateral with edge sqrt(6).
	ring := 16 * math.Sin(math.Pi/16) * (0.7425*0.7425 - 0.6875*0.6875) // two regular 32-gons, radii from the file
	tests := []struct {
		file      string
		triangles int
		dropped   int
		area      float64 // 0: not known
		tolerance float64 // of the area: coordinates are written with that many digits
		groups    string
		materials string
		missing   string
		note      string
	}{
		{"3DSMaxExport.STL", 2000, 0, 0, 0, "3DSMaxExport", "", "", ""},
		{"Spider_binary.stl", 1368 - 56, 56, 0, 0, "Spider_binary", "", "", "56 faces without any area dropped"},
		{"sphereWithHole.stl", 285, 0, 0, 0, "tinysphere_withhole", "", "", ""},
		{"triangle_with_empty_solid.stl", 1, 0, 2, 0, "testTriangle", "", "", `1 solid without facets, the first called "emptySolid"`},
		{"box_longline.obj", 12, 0, 6, 0, "1", "Defauli", "", "1 polygon going round more than once"},
		{"concave_polygon.obj", 64, 0, ring, 1e-5, "default", "test", "", ""},
		{"cube_mtllib_after_g.obj", 12, 0, 6, 0, "Object", "MyMaterial", "cube_mtllib_after_g.mat", "is not there"},
		{"multiple_spaces.obj", 1, 0, math.Sqrt(3) / 4 * 6, 1e-15, "multiple_spaces", "", "", ""},
		{"only_a_part_of_vertexcolors.obj", 3, 0, 0, 0, "cube", "", "", ""},
		{"regr01.obj", 2710 - 4, 4, 0, 0, "Base,Rem,Site", "Base,Roof,Terraindæk,Wall-inner", "", `Latin-1, the first as "Terraindæk"`},
		{"regr_3429812.obj", 4, 0, 0, 0, "rectangle,triangle1,triangle2", "Trim", "", ""},
		{"space_in_material_name.obj", 64, 0, ring, 1e-5, "default", "Hard Shiny Plastic White", "", ""},
	}
	dir := sharedModels(t)
	tried := map[string]bool{}
	for _, tt := range tests {
		tried[tt.file] = true
		m, err := Read(os.DirFS(dir), tt.file, metresZ)
		if err != nil {
			t.Errorf("%s: %v", tt.file, err)
			continue
		}
		checkMesh(t, m)
		if len(m.Triangles) != tt.triangles || m.Degenerate != tt.dropped {
			t.Errorf("%s: got %d triangles, %d dropped; want %d, %d", tt.file, len(m.Triangles), m.Degenerate, tt.triangles, tt.dropped)
		}
		for _, g := range strings.Split(tt.groups, ",") {
			if m.GroupIndex(g) < 0 {
				t.Errorf("%s: groups %q lack %q", tt.file, m.Groups, g)
			}
		}
		for _, name := range strings.Split(tt.materials, ",") {
			if name != "" && m.MaterialIndex(name) < 0 {
				t.Errorf("%s: materials %q lack %q", tt.file, m.Materials, name)
			}
		}
		notes := strings.Join(m.Notes, "\n")
		if m.MissingMTL != tt.missing || !strings.Contains(notes, tt.note) || (tt.note == "") != (notes == "") {
			t.Errorf("%s: missing %q, notes %q; want %q, %q", tt.file, m.MissingMTL, notes, tt.missing, tt.note)
		}
		var area float64
		for _, a := range m.GroupAreas() {
			area += a
		}
		if tt.area > 0 && math.Abs(area-tt.area) > tt.tolerance {
			t.Errorf("%s: area %.12g, want %.12g", tt.file, area, tt.area)
		}
	}
	// Every other mesh there must be read or refused with a sentence.
	entries, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range entries {
		ext := strings.ToLower(filepath.Ext(e.Name()))
		if tried[e.Name()] || ext != ".stl" && ext != ".obj" {
			continue
		}
		if m, err := Read(os.DirFS(dir), e.Name(), metresZ); err == nil {
			checkMesh(t, m)
		}
	}
}
