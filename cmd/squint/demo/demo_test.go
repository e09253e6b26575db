package demo_test

import (
	"io/fs"
	"strings"
	"testing"
	"testing/fstest"

	"squint/cmd/squint/demo"
)

func TestFoldersAreFileSystems(t *testing.T) {
	if err := fstest.TestFS(demo.FS(), demo.Project, "room.obj", "frames.obj", "frames-mouth.obj", "room.mtl", "shed.obj", "skerrow.epw"); err != nil {
		t.Error(err)
	}
	if err := fstest.TestFS(demo.Starter(), demo.StarterProject, "room.obj", "room.mtl", "site.epw"); err != nil {
		t.Error(err)
	}
}

// Invented data say so, in both the project and the weather file.
func TestInventedIsMarked(t *testing.T) {
	for _, c := range []struct {
		fsys          fs.FS
		project, year string
	}{
		{demo.FS(), demo.Project, "skerrow.epw"},
		{demo.Starter(), demo.StarterProject, "site.epw"},
	} {
		project, err := fs.ReadFile(c.fsys, c.project)
		if err != nil {
			t.Fatal(err)
		}
		if !strings.Contains(string(project), "\ninvented = true") {
			t.Errorf("%s is not marked as invented", c.project)
		}
		year, err := fs.ReadFile(c.fsys, c.year)
		if err != nil {
			t.Fatal(err)
		}
		if !strings.Contains(string(year), "\nCOMMENTS 1,invented") {
			t.Errorf("%s is not marked as invented", c.year)
		}
	}
}
