package main

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"io"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"time"
)

// reuseDir holds, below the results folder, what later runs need not compute.
const reuseDir = "reuse"

// reuseCap bounds it: a few versions of a project of a hundred viewpoints. Own
// choice.
const reuseCap = 2 << 30

// reuseFolder keeps entries as files, the key as name.
type reuseFolder struct {
	dir string
	cap int64
	// fresh reads nothing but what this run saved.
	fresh bool
	now   func() time.Time
	saved map[string]bool
}

func newReuseFolder(out string, fresh bool, now func() time.Time) *reuseFolder {
	return &reuseFolder{dir: filepath.Join(out, reuseDir), cap: reuseCap, fresh: fresh, now: now, saved: map[string]bool{}}
}

const (
	reuseSuffix  = ".part"
	reusePartial = ".partial-" // of what is being written
	// reuseStale is how old such a file is that nobody writes any more.
	reuseStale = time.Hour
)

func (f *reuseFolder) path(key string) string { return filepath.Join(f.dir, key+reuseSuffix) }

// Load reads an entry; what cannot be read is not there.
func (f *reuseFolder) Load(key string) ([]byte, bool) {
	if f.fresh && !f.saved[key] {
		return nil, false
	}
	data, err := os.ReadFile(f.path(key))
	return data, err == nil
}

// Save writes an entry whole or not at all, and removes the oldest of the
// others where all together are too large.
func (f *reuseFolder) Save(key string, data []byte) (err error) {
	if err := os.MkdirAll(f.dir, 0o777); err != nil {
		return err
	}
	file, err := os.CreateTemp(f.dir, reusePartial+"*")
	if err != nil {
		return err
	}
	_, err = file.Write(data)
	if err = errors.Join(err, file.Chmod(0o644), file.Close()); err == nil {
		err = os.Rename(file.Name(), f.path(key))
	}
	if err != nil {
		return errors.Join(err, os.Remove(file.Name()))
	}
	f.saved[key] = true
	return f.shrink()
}

// shrink removes what was written first, entries of this run last of all.
func (f *reuseFolder) shrink() error {
	list, err := os.ReadDir(f.dir)
	if err != nil {
		return err
	}
	var entries []os.FileInfo
	var size int64
	for _, e := range list {
		if strings.HasPrefix(e.Name(), reusePartial) {
			if info, err := e.Info(); err == nil && f.now().Sub(info.ModTime()) > reuseStale {
				_ = os.Remove(filepath.Join(f.dir, e.Name())) // of a run that was killed
			}
			continue
		}
		key, ours := strings.CutSuffix(e.Name(), reuseSuffix)
		info, err := e.Info()
		if err != nil || !ours || len(key) != 2*sha256.Size || !info.Mode().IsRegular() {
			continue // not ours, or just removed by another run
		}
		entries = append(entries, info)
		size += info.Size()
	}
	mine := func(i os.FileInfo) bool { return f.saved[strings.TrimSuffix(i.Name(), reuseSuffix)] }
	slices.SortStableFunc(entries, func(a, b os.FileInfo) int {
		if mine(a) != mine(b) {
			if mine(b) {
				return -1
			}
			return 1
		}
		return a.ModTime().Compare(b.ModTime())
	})
	for _, e := range entries {
		if size <= f.cap {
			break
		}
		if err := os.Remove(filepath.Join(f.dir, e.Name())); err != nil && !errors.Is(err, os.ErrNotExist) {
			return err
		}
		size -= e.Size()
	}
	return nil
}

// programHash stands for this very program: its version alone does not tell
// two builds apart.
func programHash() (string, error) {
	name, err := os.Executable()
	if err != nil {
		return "", err
	}
	file, err := os.Open(name)
	if err != nil {
		return "", err
	}
	defer file.Close()
	sum := sha256.New()
	if _, err := io.Copy(sum, file); err != nil {
		return "", err
	}
	return hex.EncodeToString(sum.Sum(nil)), nil
}
