package project

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"io/fs"
	"os"
	"reflect"
	"strings"
	"testing"
	"testing/fstest"
)

func load(t testing.TB, text string) (*Project, error) {
	t.Helper()
	return Load(fstest.MapFS{"dir/office.toml": {Data: []byte(text)}}, "dir/office.toml")
}

func office(t testing.TB) string {
	t.Helper()
	data, err := os.ReadFile("testdata/office.toml")
	if err != nil {
		t.Fatal(err)
	}
	return string(data)
}

func ptr[T any](v T) *T { return &v }

// wantOffice is testdata/office.toml read by eye, with the defaults of the
// key tables written out.
func wantOffice(data string) *Project {
	hash := sha256.Sum256([]byte(data))
	return &Project{
		File: "dir/office.toml", Hash: hex.EncodeToString(hash[:]), Title: "Office, level 3", Invented: true,
		Site:    Site{NorthDeg: 15, LatitudeDeg: ptr(59.33), LongitudeDeg: ptr(18.06), UTCOffsetH: ptr(1.0), ElevationM: ptr(20.0)},
		Weather: Weather{File: "dir/weather/stockholm.epw", MomentOffsetH: ptr(-0.5)},
		Ground:  Ground{LevelM: -9, Reflectance: [12]float64{.6, .6, .4, .2, .2, .2, .2, .2, .2, .2, .2, .4}},
		Horizon: []HorizonPoint{{0, 5}, {90, 10}, {180.5, 2}},
		Occupancy: Occupancy{Days: [7]bool{0: true, 2: true}, FromH: 9.5, ToH: 17, Holidays: []MonthDay{{1, 1}, {2, 29}},
			DaylightSavingFrom: &MonthDay{3, 29}, DaylightSavingTo: &MonthDay{10, 25}},
		Meshes: []Mesh{
			{File: "dir/room.obj", Unit: "mm", Up: "y", Role: "room", RotateDeg: 90, TranslateM: [3]float64{1, 2, 3}, Finish: "plaster",
				Finishes: []Assignment{{"floor", "carpet", 40}, {"Ceiling 1", "plaster", 41}}, Line: 31},
			{File: "dir/city/blocks.stl", Unit: "m", Up: "z", Role: "surroundings", Finish: "carpet", Line: 43},
		},
		Finishes: []Finish{
			{Name: "plaster", Type: "matte", Reflectance: .8, Back: "carpet", CleaningMonths: 12, Line: 50},
			{Name: "carpet", Type: "matte", Reflectance: .2, CleaningMonths: 12, Line: 56},
			{Name: "aluminium", Type: "mirror", SpecularReflectance: .7, DiffuseReflectance: .1, CleaningMonths: 12, Line: 61},
			{Name: "double glazing", Type: "glazing", Transmittance: .78, Panes: 2, CleaningMonths: 12, Line: 67},
			{Name: "coated", Type: "glazing", Table: [][3]float64{{0, .6, .2}, {60, .5, .3}, {90, 0, 1}}, CleaningMonths: 12, Line: 72},
			{Name: "anodised", Type: "glossy", TotalReflectance: .85, SpecularShare: .9, SpreadDeg: 2, Back: "aluminium", CleaningMonths: 12, Line: 138},
			{Name: "opal", Type: "diffuser", DiffuseTransmittance: .5, Reflectance: .4, Back: "opal indoors", CleaningMonths: 12, Line: 146},
			{Name: "opal indoors", Type: "diffuser", DiffuseTransmittance: .5, Reflectance: .3, CleaningMonths: 12, Line: 153},
			{Name: "screen", Type: "cloth", Openness: .05, DiffuseTransmittance: .15, Reflectance: .5, BackReflectance: ptr(.1), CutOffDeg: 65, CleaningMonths: 12, Line: 159},
			{Name: "punched", Type: "perforated", OpenShare: .3, HoleDiameterMM: 2, ThicknessMM: 1, Base: "anodised", CleaningMonths: 12, Line: 168},
			{Name: "pane", Type: "glazing", Transmittance: .9, Panes: 1, LossPerMonth: .02, CleaningMonths: 6, Line: 243},
		},
		Openings: []Opening{
			{Name: "south", Group: "facade", CornersM: [4][3]float64{{0, 0, .9}, {3.4, 0, .9}, {3.4, 0, 2.7}, {0, 0, 2.7}}, HasCorners: true,
				OutwardDeg: ptr(195.0), Glazing: "double glazing", Line: 81},
			{Name: "east", Group: "east", MeshGroup: "glass_east", Line: 88},
			{Name: "north", Group: "north", CornersM: [4][3]float64{{3.4, 8.2, .9}, {0, 8.2, .9}, {0, 8.2, 2.7}, {3.4, 8.2, 2.7}}, HasCorners: true,
				Glazing: "coated", InnerGlazing: "coated", CavityM: .12, Line: 182},
		},
		LightShelves: []LightShelf{
			{Name: "shelf", Opening: "south", HeightM: 1.2, OutsideDepthM: .6, InsideDepthM: .4, ThicknessM: .05,
				OutsideTiltDeg: 10, ExtendM: .1, GapM: .01, OutsideShape: ShelfShape{Profile: "flat"}, InsideShape: ShelfShape{Profile: "flat"},
				Stack: 1, Top: "aluminium", Underside: "plaster", Line: 92},
			{Name: "hollow", Opening: "north", OutsideDepthM: .8, ThicknessM: .05, GapM: .01,
				OutsideShape: ShelfShape{Profile: "polyline", PolylineM: [][2]float64{{0, 0}, {.3, -.05}, {.8, 0}}}, InsideShape: ShelfShape{Profile: "flat"},
				Stack: 2, StackSpacingM: .5, Top: "aluminium", Underside: "plaster", Line: 189},
			{Name: "dish", Opening: "north", InsideDepthM: .5, ThicknessM: .05, GapM: .01,
				OutsideShape: ShelfShape{Profile: "flat"}, InsideShape: ShelfShape{Profile: "parabola", FocusM: 1.5},
				Stack: 1, Top: "aluminium", Underside: "plaster", Line: 200},
		},
		Sills: []Sill{{Name: "sill", Opening: "south", DepthM: .25, TiltDeg: -5, ThicknessM: .03, GapM: .01, Finish: "anodised", Line: 209}},
		Blinds: []Blind{{Slats: Slats{Name: "venetian", Opening: "north", Position: "between", SlatWidthMM: 80, PitchMM: 72, ThicknessMM: .2, SagittaMM: 6,
			GapM: .02, SideGapM: .005, Upper: "aluminium", Lower: "plaster", States: []SlatState{{"open", 0}, {"half", -45}}, Steps: 8, Line: 215}, Drop: .7}},
		Louvres: []Louvres{{Slats: Slats{Name: "mirrors", Opening: "south", Position: "outside", SlatWidthMM: 100, PitchMM: 90, ThicknessMM: 2,
			GapM: .2, SideGapM: .005, Upper: "anodised", Follow: "redirect", RedirectDepthM: 6, RedirectRiseM: .6, Steps: 5, Line: 230}, BottomM: 1.5}},
		Rollers: []Roller{
			{Name: "screen", Opening: "south", Position: "outside", Openness: .05, DiffuseTransmittance: .1, Reflectance: .5,
				BackReflectance: ptr(.2), CutOffDeg: 70, Drop: .3, GapM: .05, Drawn: true, Line: 103},
			{Name: "second", Opening: "south", Position: "inside", Cloth: "screen", Drop: .3, GapM: .05, Drawn: true, Line: 176}},
		Viewpoints: []Viewpoint{
			{Name: "desk 1", PositionM: [3]float64{1, 2, 1.2}, AzimuthDeg: ptr(180.0), PitchDeg: -5, Line: 114},
			{Name: "desk 2", PositionM: [3]float64{1, 3, 1.2}, TowardM: &[3]float64{1, 0, 1.2}, Line: 120},
		},
		WorkPlanes: []WorkPlane{{Name: "desks", PolygonM: [][2]float64{{0, 0}, {3.6, 0}, {3.6, 8.2}, {0, 8.2}}, HeightM: .85, PerimeterM: .5, Line: 125}},
		Criteria: Criteria{Glare: "medium", Provision: "minimum", SourceRule: "luminance", SourceLuminance: 2000, SourceMultiple: 4,
			ProvisionOpenings: "vertical", ProvisionFactor: "none", ViewOut: "none", ViewAbovePlaneM: .35, Sunlight: "none", SunlightDay: &MonthDay{3, 21}, SunlightHeightM: 1.2,
			EquinoxLowLx: 300, EquinoxHighLx: 3000},
		Simulation: Simulation{Seed: 7, Batches: 16, FisheyePixels: 96, SamplesPerPixel: 32, SensorSamples: 4096, TexelM: .2, TexelSamples: 256, Photons: 8000, MemoryMiB: 1024, StepMin: 60, Soiling: "clean"},
	}
}

func TestLoadWhole(t *testing.T) {
	text := office(t)
	for _, c := range []struct{ name, text string }{
		{"as written", text},
		{"byte order mark", "\xef\xbb\xbf" + text},
		{"carriage returns", strings.ReplaceAll(text, "\n", "\r\n")},
	} {
		t.Run(c.name, func(t *testing.T) {
			got, err := load(t, c.text)
			if err != nil {
				t.Fatal(err)
			}
			if want := wantOffice(c.text); !reflect.DeepEqual(got, want) {
				g, w := reflect.ValueOf(*got), reflect.ValueOf(*want)
				for i := range g.NumField() {
					if a, b := g.Field(i).Interface(), w.Field(i).Interface(); !reflect.DeepEqual(a, b) {
						t.Errorf("%s:\n got %+v\nwant %+v", g.Type().Field(i).Name, a, b)
					}
				}
			}
		})
	}
}

// TestLoadInline wants the other ways to write tables to mean the same.
func TestLoadInline(t *testing.T) {
	got, err := load(t, `
weather.file = "a.epw"
mesh = [ { file = "a.stl", unit = "m", up = "z", finishes = { a = "f",
  b = "f" } } ]
finish = [ { name = "f", type = "matte", reflectance = 1 } ]
viewpoint = [
  { name = "v", position_m = [0, 0, 1], azimuth_deg = 0 },
]
`)
	if err != nil {
		t.Fatal(err)
	}
	if want := []Assignment{{"a", "f", 3}, {"b", "f", 4}}; !reflect.DeepEqual(got.Meshes[0].Finishes, want) {
		t.Errorf("finishes: got %v, want %v", got.Meshes[0].Finishes, want)
	}
	if got.Viewpoints[0].Line != 7 {
		t.Errorf("line of the viewpoint: got %d, want 7", got.Viewpoints[0].Line)
	}
}

// minimal is the least that loads; the tests of problems change it.
const minimal = `[weather]
file = "a.epw"
[[mesh]]
file = "a.stl"
unit = "m"
up = "z"
finish = "white"
[[finish]]
name = "white"
type = "matte"
reflectance = 0.7
[[finish]]
name = "clear"
type = "glazing"
transmittance = 0.8
[[opening]]
name = "south"
corners_m = [[0, 0, 1], [2, 0, 1], [2, 0, 2.5], [0, 0, 2.5]]
glazing = "clear"
[[viewpoint]]
name = "v"
position_m = [1, 2, 1.2]
azimuth_deg = 180
`

func TestMinimal(t *testing.T) {
	p, err := load(t, minimal)
	if err != nil {
		t.Fatal(err)
	}
	want := Occupancy{Days: [7]bool{true, true, true, true, true}, FromH: 8, ToH: 18}
	if !reflect.DeepEqual(p.Occupancy, want) {
		t.Errorf("occupancy: got %+v, want %+v", p.Occupancy, want)
	}
	if p.Ground.Reflectance[11] != 0.2 {
		t.Errorf("ground: got %v, want 0.2 in each month", p.Ground.Reflectance)
	}
}

func TestCannotBeRead(t *testing.T) {
	_, err := Load(fstest.MapFS{}, "office.toml")
	var p Problem
	if !errors.Is(err, fs.ErrNotExist) || !errors.As(err, &p) || p.File != "office.toml" {
		t.Errorf("got %v (%T), want a Problem that wraps fs.ErrNotExist", err, err)
	}
	if _, err := load(t, strings.Repeat("#\n", maxBytes/2+1)); err == nil || !strings.Contains(err.Error(), "larger than") {
		t.Errorf("a large file: got %v, want a problem with its size", err)
	}
}

// FuzzLoad wants no panic, and problems that are sorted and printable, or a
// project that keeps the promises of schema.go.
func FuzzLoad(f *testing.F) {
	f.Add(office(f))
	f.Add(minimal)
	f.Add(strings.ReplaceAll(minimal, "0", "nan"))
	f.Add("[[mesh]]\n[mesh.finishes]\n\"a\\u0000b\" = 1\n[mesh.finishes.x]\n[[mesh.y]]\n")
	f.Add("mesh = [[1], {a.b.c = [{}]}]\n")
	f.Add(strings.Repeat("[", 300))
	f.Fuzz(func(t *testing.T, text string) {
		p, err := load(t, text)
		if err == nil {
			if len(p.Viewpoints)+len(p.WorkPlanes) == 0 || len(p.Meshes) == 0 {
				t.Error("nothing to check, and no problem")
			}
			for _, m := range p.Meshes {
				if !fs.ValidPath(m.File) {
					t.Errorf("path %q leaves the root", m.File)
				}
			}
			return
		}
		var ps Problems
		if !errors.As(err, &ps) || len(ps) == 0 {
			t.Fatalf("got %T, want Problems", err)
		}
		lines := strings.Count(text, "\n") + 1
		for i, q := range ps {
			if q.Message == "" || q.Line < 0 || q.Line > lines || i > 0 && q.Line < ps[i-1].Line {
				t.Errorf("problem %d of %v", i, ps)
			}
		}
	})
}

func BenchmarkLoad(b *testing.B) {
	text := office(b)
	for b.Loop() {
		if _, err := load(b, text); err != nil {
			b.Fatal(err)
		}
	}
}
