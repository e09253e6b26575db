package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"slices"
	"strings"

	"squint/scene/project"
)

// source is a project on disk as a file system. Its root is the nearest folder
// that holds the project and every file that it names, so that names, which
// go into the results, do not depend on where the user stands; messages show
// them as the user would type them.
type source struct {
	root  string // absolute
	name  string // of the project file, from root, with slashes
	typed string // as the user gave it
	files []string
}

// openSource finds the root. Problems of the project file are an error.
func openSource(typed string) (*source, error) {
	if info, err := os.Stat(typed); err == nil && info.IsDir() {
		return nil, fmt.Errorf("%s: got a folder, want a project file in it", typed)
	}
	abs, err := filepath.Abs(typed)
	if err != nil {
		return nil, err
	}
	// Load resolves what the project names; the volume's root holds it all.
	volume := filepath.VolumeName(abs) + string(filepath.Separator)
	s := &source{root: volume, typed: typed}
	s.name = s.slash(abs)
	all, err := project.LoadAll(s, s.name)
	if err != nil {
		return nil, s.explain(err)
	}
	for _, p := range all {
		for _, f := range append([]string{p.Weather.File}, meshFiles(p)...) {
			if !slices.Contains(s.files, f) {
				s.files = append(s.files, f)
			}
		}
	}
	root := path.Dir(s.name)
	for _, f := range s.files {
		root = common(root, path.Dir(f))
	}
	s.root = filepath.Join(volume, filepath.FromSlash(root))
	for i, f := range s.files {
		s.files[i] = within(root, f)
	}
	s.name = within(root, s.name)
	return s, nil
}

func meshFiles(p *project.Project) (list []string) {
	for _, m := range p.Meshes {
		list = append(list, m.File)
	}
	return list
}

// slash is a path below the root, from there.
func (s *source) slash(abs string) string {
	return filepath.ToSlash(strings.TrimPrefix(abs, s.root))
}

// common is the nearest folder that holds both.
func common(a, b string) string {
	for a != "." && a != b && !strings.HasPrefix(b, a+"/") {
		a = path.Dir(a)
	}
	return a
}

func within(root, name string) string {
	if root == "." {
		return name
	}
	return strings.TrimPrefix(name, root+"/")
}

// Open implements fs.FS.
func (s *source) Open(name string) (fs.File, error) {
	if !fs.ValidPath(name) {
		return nil, &fs.PathError{Op: "open", Path: s.show(name), Err: fs.ErrNotExist}
	}
	f, err := os.Open(filepath.Join(s.root, filepath.FromSlash(name)))
	var pathErr *fs.PathError
	if errors.As(err, &pathErr) {
		pathErr.Path = s.show(name)
	}
	if err != nil {
		return nil, err
	}
	return f, nil
}

// show is a name as the user would type it: by the folder that he gave.
func (s *source) show(name string) string {
	if name == s.name {
		return s.typed
	}
	full := filepath.Join(s.root, filepath.FromSlash(name))
	if filepath.IsAbs(s.typed) {
		return full
	}
	here, err := filepath.Abs(".")
	if err != nil {
		return full
	}
	if rel, err := filepath.Rel(here, full); err == nil {
		return rel
	}
	return full
}

// explain puts the shown names into messages that name the project's files.
func (s *source) explain(err error) error {
	if err == nil {
		return nil
	}
	var problems project.Problems
	if errors.As(err, &problems) {
		shown := make(project.Problems, len(problems))
		for i, p := range problems {
			if p.File = s.show(p.File); p.Err != nil && errors.Is(p.Err, fs.ErrNotExist) {
				p.Message = "there is no such file"
			}
			shown[i] = p
		}
		return shown
	}
	if joined, ok := err.(interface{ Unwrap() []error }); ok {
		var all []error
		for _, e := range joined.Unwrap() {
			all = append(all, s.explain(e))
		}
		return errors.Join(all...)
	}
	// The first colon makes the message's start like its other places.
	text := strings.TrimPrefix(s.shownNames().Replace(": "+err.Error()), ": ")
	if text != err.Error() {
		return shownError{text, err}
	}
	return err
}

// shownNames rewrites the project's files where a message names one as its
// place: at its start and after a colon.
func (s *source) shownNames() *strings.Replacer {
	var pairs []string
	for _, name := range append([]string{s.name}, s.files...) {
		for _, end := range []string{":", " "} {
			pairs = append(pairs, ": "+name+end, ": "+s.show(name)+end)
		}
	}
	return strings.NewReplacer(pairs...)
}

// shownError is an error in other words.
type shownError struct {
	text string
	err  error
}

func (e shownError) Error() string { return e.text }
func (e shownError) Unwrap() error { return e.err }
