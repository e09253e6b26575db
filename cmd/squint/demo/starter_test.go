package demo_test

import (
	"io/fs"
	"regexp"
	"testing"
	"testing/fstest"

	"squint/cmd/squint/demo"
	"squint/scene"
	"squint/scene/project"
)

// What the starting project shows behind comment marks works when the marks
// are taken away.
func TestStarterOptionsWork(t *testing.T) {
	files := fstest.MapFS{}
	list, err := fs.ReadDir(demo.Starter(), ".")
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range list {
		data, err := fs.ReadFile(demo.Starter(), e.Name())
		if err != nil {
			t.Fatal(err)
		}
		files[e.Name()] = &fstest.MapFile{Data: data}
	}
	text := files[demo.StarterProject].Data
	text = regexp.MustCompile(`(?m)^# (\[|[a-z_]+ = )`).ReplaceAll(text, []byte("$1"))
	// One or the other, not both.
	text = regexp.MustCompile(`(?m)^reflectance = 0\.2\n`).ReplaceAll(text, nil)
	files[demo.StarterProject].Data = text
	p, err := project.Load(files, demo.StarterProject)
	if err != nil {
		t.Fatal(err)
	}
	if len(p.Rollers) != 1 || len(p.Horizon) != 4 || p.Weather.MomentOffsetH == nil || p.Ground.Reflectance[0] != 0.6 {
		t.Errorf("the options behind comment marks were not taken: %+v", p)
	}
	if _, err := scene.Build(files, p); err != nil {
		t.Error(err)
	}
	// The shown defaults are the defaults.
	plain, err := project.Load(demo.Starter(), demo.StarterProject)
	if err != nil {
		t.Fatal(err)
	}
	if plain.Simulation != p.Simulation {
		t.Errorf("simulation: shown %+v, default %+v", p.Simulation, plain.Simulation)
	}
	if plain.Openings[0].Group != p.Openings[0].Group || plain.Meshes[0].RotateDeg != p.Meshes[0].RotateDeg || plain.Viewpoints[0].PitchDeg != p.Viewpoints[0].PitchDeg {
		t.Error("a shown default of a mesh, opening or viewpoint is not the default")
	}
}
