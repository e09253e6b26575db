package main

import (
	"bytes"
	"context"
	"errors"
	"io"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"

	"github.com/spf13/cobra"
)

func TestExportFlags(t *testing.T) {
	with := func(h host, got *any) *cobra.Command {
		return newExport(h, func(_ context.Context, _ host, o exportOptions) error { *got = o; return nil })
	}
	all := []string{"obj", "stl", "gltf"}
	for _, c := range []struct {
		args string
		want any // nil for a usage error
	}{
		{"export", exportOptions{Formats: all}},
		{"export a.toml", exportOptions{pick: pick{Project: "a.toml"}, Formats: all}},
		{"export --out x --ground a.toml", exportOptions{pick: pick{Project: "a.toml"}, Out: "x", Formats: all, Ground: true}},
		{"export --format gltf,obj", exportOptions{Formats: []string{"gltf", "obj"}}},
		{"export --format stl --format obj", exportOptions{Formats: []string{"stl", "obj"}}},
		{"export a.toml b.toml", nil},
		{"export --format GLTF", nil},
		{"export --format obj,", nil},
		{"export --format", nil},
		{"export --ground=perhaps", nil},
	} {
		got, err := parse(t, strings.Fields(c.args), with)
		if c.want == nil {
			var usage usageError
			if !errors.As(err, &usage) || got != nil {
				t.Errorf("%s: got %+v and error %v, want a usage error", c.args, got, err)
			}
		} else if err != nil || !reflect.DeepEqual(got, c.want) {
			t.Errorf("%s: got %+v and error %v, want %+v", c.args, got, err, c.want)
		}
	}
}

// An export that fails or is stopped half way leaves what was there before.
func TestExportAllOrNothing(t *testing.T) {
	errFull := errors.New("disk full")
	ctx, stop := context.WithCancel(context.Background())
	for _, c := range []struct {
		name   string
		ctx    context.Context
		second func(io.Writer) error
		want   error
	}{
		{"fails", context.Background(), func(io.Writer) error { return errFull }, errFull},
		{"stopped", ctx, func(io.Writer) error { stop(); return nil }, context.Canceled},
	} {
		base := t.TempDir()
		kept := filepath.Join(base, "kept")
		if err := os.Mkdir(kept, 0o777); err != nil {
			t.Fatal(err)
		}
		old := filepath.Join(kept, "one")
		if err := os.WriteFile(old, []byte("old"), 0o666); err != nil {
			t.Fatal(err)
		}
		files := []exportFile{
			{name: "one", write: func(w io.Writer) error { _, err := io.WriteString(w, "new"); return err }},
			{name: "two", write: c.second},
		}
		for _, dir := range []string{kept, filepath.Join(base, "new", "deep")} {
			if err := writeTogether(c.ctx, dir, files); !errors.Is(err, c.want) {
				t.Errorf("%s: got %v, want %v", c.name, err, c.want)
			}
		}
		if data, err := os.ReadFile(old); err != nil || string(data) != "old" {
			t.Errorf("%s: the old file holds %q (%v)", c.name, data, err)
		}
		for dir, want := range map[string]int{kept: 1, base: 1} {
			if list, err := os.ReadDir(dir); err != nil || len(list) != want {
				t.Errorf("%s: %s holds %v (%v), want %d", c.name, dir, list, err, want)
			}
		}
	}
}

// A model far from its origin is warned of, one near it is not.
func TestExportNotes(t *testing.T) {
	dir := t.TempDir()
	if err := writeSmall(dir); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		move string
		want bool
	}{{"[0, 0, 0]", false}, {"[90000.1, 0, 0]", true}} {
		text := strings.Replace(smallProject, "finish = \"white\"\n", "finish = \"white\"\ntranslate_m = "+c.move+"\n", 1)
		if c.want {
			text = strings.NewReplacer("[0.5,", "[90000.6,", "[3.5,", "[90003.6,").Replace(text)
		}
		file := filepath.Join(dir, "project.toml")
		if err := os.WriteFile(file, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
		for _, f := range []struct {
			format string
			want   bool
		}{{"stl", c.want}, {"gltf", c.want}, {"obj", false}} {
			var out bytes.Buffer
			o := exportOptions{pick: pick{Project: file}, Out: filepath.Join(dir, "out"), Formats: []string{f.format}}
			if err := runExport(context.Background(), testHost(&out, io.Discard), o); err != nil {
				t.Fatal(err)
			}
			if got := strings.Contains(out.String(), "far from its origin"); got != f.want {
				t.Errorf("%s moved by %s: %q", f.format, c.move, out.String())
			}
		}
	}
}
