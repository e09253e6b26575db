package main

import (
	"bytes"
	"io/fs"
	"strings"
	"testing"

	"squint/cmd/squint/demo"
)

// The embedded files are what the generator writes today.
func TestFilesAreCurrent(t *testing.T) {
	want, err := texts()
	if err != nil {
		t.Fatal(err)
	}
	year, err := inventedEPW()
	if err != nil {
		t.Fatal(err)
	}
	want["files/skerrow.epw"], want["starter/site.epw"] = year, year
	embedded := map[string]fs.FS{"files": demo.FS(), "starter": demo.Starter()}
	seen := 0
	for path, data := range want {
		folder, name, _ := strings.Cut(path, "/")
		got, err := fs.ReadFile(embedded[folder], name)
		if err != nil {
			t.Errorf("%s: %v; run go generate ./cmd/squint/demo", path, err)
			continue
		}
		if !bytes.Equal(got, data) {
			t.Errorf("%s: embedded bytes differ from the generator's; run go generate ./cmd/squint/demo", path)
		}
		seen++
	}
	for folder, f := range embedded {
		list, err := fs.ReadDir(f, ".")
		if err != nil {
			t.Fatal(err)
		}
		for _, e := range list {
			if _, ok := want[folder+"/"+e.Name()]; !ok {
				t.Errorf("%s/%s is embedded but not generated", folder, e.Name())
			}
		}
	}
	if seen != 11 {
		t.Errorf("compared %d files, want 11", seen)
	}
}
