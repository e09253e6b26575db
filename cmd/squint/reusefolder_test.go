package main

import (
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"
)

// reuseKey is a key as the study makes them.
func reuseKey(c string) string { return strings.Repeat(c, 64) }

// What is saved comes back; of too much the oldest goes, what others put into
// the folder stays.
func TestReuseFolder(t *testing.T) {
	out := t.TempDir()
	put := func(f *reuseFolder, key string, size int) {
		t.Helper()
		if err := f.Save(key, make([]byte, size)); err != nil {
			t.Fatal(err)
		}
	}
	old := newReuseFolder(out, false, time.Now)
	put(old, reuseKey("a"), 40)
	put(old, reuseKey("b"), 40)
	foreign := filepath.Join(out, reuseDir, "letter.txt")
	if err := os.WriteFile(foreign, make([]byte, 500), 0o666); err != nil {
		t.Fatal(err)
	}
	// a was written last.
	for key, ago := range map[string]time.Duration{"a": time.Hour, "b": 2 * time.Hour} {
		at := time.Date(2020, 1, 1, 12, 0, 0, 0, time.UTC).Add(-ago)
		if err := os.Chtimes(old.path(reuseKey(key)), at, at); err != nil {
			t.Fatal(err)
		}
	}
	f := newReuseFolder(out, false, time.Now)
	f.cap = 100
	put(f, reuseKey("c"), 50)
	for key, want := range map[string]bool{"a": true, "b": false, "c": true, "d": false} {
		if _, ok := f.Load(reuseKey(key)); ok != want {
			t.Errorf("entry %s is there: %v, want %v", key, ok, want)
		}
	}
	list, err := os.ReadDir(f.dir)
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, e := range list {
		names = append(names, e.Name())
	}
	if want := []string{reuseKey("a") + reuseSuffix, reuseKey("c") + reuseSuffix, "letter.txt"}; !slices.Equal(names, want) {
		t.Errorf("got %v, want %v", names, want)
	}
	fresh := newReuseFolder(out, true, time.Now)
	if _, ok := fresh.Load(reuseKey("a")); ok {
		t.Errorf("a fresh run read an earlier entry")
	}
	put(fresh, reuseKey("a"), 7)
	if data, ok := fresh.Load(reuseKey("a")); !ok || len(data) != 7 {
		t.Errorf("a fresh run does not read its own entry")
	}
}

// A folder that cannot be made is an error, for the run to tell of.
func TestReuseFolderInTheWay(t *testing.T) {
	out := t.TempDir()
	if err := os.WriteFile(filepath.Join(out, reuseDir), nil, 0o666); err != nil {
		t.Fatal(err)
	}
	f := newReuseFolder(out, false, time.Now)
	if err := f.Save(reuseKey("a"), []byte("x")); err == nil {
		t.Errorf("got no error with a file in the way")
	}
	if _, ok := f.Load(reuseKey("a")); ok {
		t.Errorf("got an entry from nowhere")
	}
}
