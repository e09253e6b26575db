package report

import (
	"bufio"
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
)

// folder writes files in two steps: all of them whole, under temporary names;
// then, once nothing can fail any more but a rename, under their own. So a run
// that fails or is stopped leaves what was there before.
type folder struct {
	dir    string
	made   []string // folders that were made, outermost first
	staged []staged
}

type staged struct{ temporary, name string }

// File is one file to write, its name a slash path within the folder.
type File struct {
	Name  string
	Write func(w io.Writer) error
}

// WriteFiles writes files into a folder, which it makes, all or none.
func WriteFiles(ctx context.Context, dir string, files []File) error {
	f, err := openFolder(dir)
	if err != nil {
		return err
	}
	for _, x := range files {
		if err == nil {
			err = f.stage(x.Name, x.Write)
		}
		if err == nil {
			err = ctx.Err()
		}
	}
	if err == nil {
		err = f.commit()
	}
	if err != nil {
		return errors.Join(err, f.abandon())
	}
	return nil
}

// InTheWayError is a folder where a file is to be written.
type InTheWayError struct{ Path string }

func (e *InTheWayError) Error() string {
	return e.Path + ": got a folder, want a file or nothing; move it away"
}

func openFolder(dir string) (*folder, error) {
	f := &folder{dir: dir}
	if err := f.mkdir(dir); err != nil {
		return nil, errors.Join(err, f.abandon())
	}
	return f, nil
}

// mkdir makes a folder and those above it, and remembers which it made.
func (f *folder) mkdir(dir string) error {
	var missing []string
	for d := filepath.Clean(dir); ; d = filepath.Dir(d) {
		_, err := os.Stat(d)
		if err == nil || d == filepath.Dir(d) {
			break
		}
		if !errors.Is(err, os.ErrNotExist) {
			return err
		}
		missing = append(missing, d)
	}
	for i := len(missing) - 1; i >= 0; i-- {
		if err := os.Mkdir(missing[i], 0o777); err != nil && !errors.Is(err, os.ErrExist) {
			return err
		}
		f.made = append(f.made, missing[i])
	}
	return nil
}

// stage writes one file, name a slash path within the folder.
func (f *folder) stage(name string, write func(w io.Writer) error) (err error) {
	path := filepath.Join(f.dir, filepath.FromSlash(name))
	if err := f.mkdir(filepath.Dir(path)); err != nil {
		return err
	}
	if info, err := os.Stat(path); err == nil && info.IsDir() {
		return &InTheWayError{path}
	}
	file, err := os.CreateTemp(filepath.Dir(path), ".partial-*")
	if err != nil {
		return err
	}
	f.staged = append(f.staged, staged{file.Name(), path})
	defer func() { err = errors.Join(err, file.Close()) }()
	// CreateTemp makes files for the owner alone; results are for others too,
	// as far as the folder lets them in.
	if err := file.Chmod(0o644); err != nil {
		return err
	}
	b := bufio.NewWriterSize(file, 1<<18)
	if err := write(b); err != nil {
		return fmt.Errorf("%s: %w", path, err)
	}
	if err := b.Flush(); err != nil {
		return err
	}
	// Without it a file may be renamed but empty after a power failure.
	return file.Sync()
}

// commit gives the files their names, in the order of staging.
func (f *folder) commit() error {
	for len(f.staged) > 0 {
		if err := os.Rename(f.staged[0].temporary, f.staged[0].name); err != nil {
			return err
		}
		f.staged = f.staged[1:]
	}
	f.made = nil
	return nil
}

// abandon removes what was begun; after commit it does nothing.
func (f *folder) abandon() error {
	var errs []error
	for _, s := range f.staged {
		if err := os.Remove(s.temporary); err != nil && !errors.Is(err, os.ErrNotExist) {
			errs = append(errs, err)
		}
	}
	f.staged = nil
	for i := len(f.made) - 1; i >= 0; i-- {
		// A folder into which others have written meanwhile stays.
		_ = os.Remove(f.made[i])
	}
	f.made = nil
	return errors.Join(errs...)
}
