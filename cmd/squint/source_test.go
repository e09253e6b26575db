package main

import (
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// The root is the nearest folder that holds all, so that names do not depend
// on where the user stands.
func TestOpenSource(t *testing.T) {
	for _, c := range []struct{ mesh, weather, root, name string }{
		{"room.obj", "site.epw", "a/b", "project.toml"},
		{"in/room.obj", "site.epw", "a/b", "project.toml"},
		{"../models/room.obj", "site.epw", "a", "b/project.toml"},
		{"../models/room.obj", "../../epw/site.epw", "", "a/b/project.toml"},
		{"../b/room.obj", "site.epw", "a/b", "project.toml"},
		{"../bb/room.obj", "site.epw", "a", "b/project.toml"},
	} {
		top := t.TempDir()
		dir := filepath.Join(top, "a", "b")
		if err := os.MkdirAll(dir, 0o777); err != nil {
			t.Fatal(err)
		}
		text := strings.Replace(smallProject, `"room.obj"`, `"`+c.mesh+`"`, 1)
		text = strings.Replace(text, `"site.epw"`, `"`+c.weather+`"`, 1)
		file := filepath.Join(dir, "project.toml")
		if err := os.WriteFile(file, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
		s, err := openSource(file)
		if err != nil {
			t.Fatal(err)
		}
		if want := filepath.Join(top, filepath.FromSlash(c.root)); s.root != want || s.name != c.name {
			t.Errorf("%s, %s: got root %s and name %s, want %s and %s", c.mesh, c.weather, s.root, s.name, want, c.name)
		}
		if data, err := fs.ReadFile(s, s.name); err != nil || string(data) != text {
			t.Errorf("the project is not to be read from its root: %v", err)
		}
		if got, want := s.show(s.files[1]), filepath.Join(dir, filepath.FromSlash(c.mesh)); got != want {
			t.Errorf("shown as %s, want %s", got, want)
		}
		if _, err := s.Open("../outside"); err == nil {
			t.Error("a name that leaves the root was opened")
		}
	}
}

func TestDefaultOut(t *testing.T) {
	for project, want := range map[string]string{
		"":                "results/demo",
		"office.toml":     "results/office",
		"a/b/office.toml": "a/b/results/office",
		"/x/y.toml":       "/x/results/y",
		"office":          "results/office",
		".toml":           "results/.toml",
		"two.parts.toml":  "results/two.parts",
		"../up.toml":      "../results/up",
	} {
		if got := filepath.ToSlash(defaultOut(filepath.FromSlash(project))); got != want {
			t.Errorf("%q: got %s, want %s", project, got, want)
		}
	}
}
