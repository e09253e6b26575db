package main

import (
	"bytes"
	"context"
	"errors"
	"image/png"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// TestSunPath runs the sun path of a small project from a viewpoint and from an
// opening.
func TestSunPath(t *testing.T) {
	dir := t.TempDir()
	if err := writeSmall(dir); err != nil {
		t.Fatal(err)
	}
	small := pick{Project: filepath.Join(dir, "project.toml")}
	for _, c := range []struct {
		o    sunPathOptions
		base string
	}{
		{sunPathOptions{View: "desk"}, "desk"},
		{sunPathOptions{}, "desk"},
		{sunPathOptions{Opening: "window"}, "window"},
		{sunPathOptions{Opening: "window", Form: "ahead"}, "window"},
	} {
		c.o.pick, c.o.Workers, c.o.WidthPx, c.o.Out = small, 2, 400, filepath.Join(dir, "out")
		var out bytes.Buffer
		if err := runSunPath(context.Background(), testHost(&out, &out), c.o); err != nil {
			t.Fatal(err)
		}
		for _, l := range strings.Split(out.String(), "\n") {
			if len([]rune(l)) > 80 && !strings.Contains(l, dir) {
				t.Errorf("line of %d columns: %q", len(l), l)
			}
		}
		if !strings.Contains(out.String(), "Direct sun on ") || !strings.Contains(out.String(), "clock     Jan") {
			t.Errorf("got\n%s\nwant a finding and a table", out.String())
		}
		file, err := os.Open(filepath.Join(dir, "out", c.base+".png"))
		if err != nil {
			t.Fatal(err)
		}
		if _, err := png.Decode(file); err != nil {
			t.Error(err)
		}
		if err := file.Close(); err != nil {
			t.Error(err)
		}
		for _, end := range []string{".csv", ".json"} {
			if _, err := os.Stat(filepath.Join(dir, "out", c.base+end)); err != nil {
				t.Error(err)
			}
		}
	}
	for _, o := range []sunPathOptions{
		{View: "desc"}, {Opening: "door"}, {View: "desk", Opening: "window"}, {Form: "down"}, {WidthPx: 5}, {WidthPx: -1},
	} {
		o.pick, o.Workers, o.Out = small, 1, filepath.Join(dir, "none")
		var out bytes.Buffer
		var usage usageError
		if err := runSunPath(context.Background(), testHost(&out, &out), o); !errors.As(err, &usage) {
			t.Errorf("%+v: got %v, want a usage error", o, err)
		}
		if _, err := os.Stat(o.Out); err == nil {
			t.Errorf("%+v: something was written", o)
		}
	}
}
