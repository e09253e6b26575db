package report

import (
	"path"
	"slices"
	"strings"

	"squint/scene"
	"squint/scene/project"
)

// paths shows files as seen from the project file's folder, so that results do
// not depend on where the folder lies.
type paths struct {
	base  string
	inert *strings.Replacer
}

func newPaths(p *project.Project, s *scene.Scene) paths {
	f := paths{base: path.Dir(p.File)}
	files := []string{p.File, p.Weather.File}
	for _, m := range s.Meshes {
		files = append(files, m.File)
	}
	// The longest first, so that no name is taken for the start of another.
	slices.SortStableFunc(files, func(a, b string) int { return len(b) - len(a) })
	var pairs []string
	for _, file := range files {
		if short := f.of(file); short != file && file != "" {
			pairs = append(pairs, file, short)
		}
	}
	f.inert = strings.NewReplacer(pairs...)
	return f
}

// of is the slash path of file from the base.
func (f paths) of(file string) string {
	if file == "" || f.base == "." || path.IsAbs(file) != path.IsAbs(f.base) {
		return file
	}
	from, to := split(f.base), split(path.Clean(file))
	for len(from) > 0 && len(to) > 1 && from[0] == to[0] {
		from, to = from[1:], to[1:]
	}
	return path.Join(strings.Repeat("../", len(from)), path.Join(to...))
}

// in shortens the names of the project's files within a sentence.
func (f paths) in(s string) string { return f.inert.Replace(s) }

func split(p string) []string { return strings.Split(strings.Trim(p, "/"), "/") }
