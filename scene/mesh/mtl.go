package mesh

import (
	"bytes"
	"errors"
	"io/fs"
	"path"
	"strings"
)

// library reads the MTL files that mtllib names. The names may hold blanks, so
// the whole line is tried as one name first.
func (r *objReader) library(rest []byte) error {
	raw := r.name(rest)
	if raw == "" {
		return nil
	}
	found, err := r.readMTL(raw)
	if found || err != nil {
		return err
	}
	names := splitLibraries(raw)
	for _, name := range names {
		if len(names) > 1 {
			if found, err = r.readMTL(name); err != nil {
				return err
			}
		}
		if !found {
			r.notef("line %d: mtllib: %q is not there: the names of materials come from usemtl alone; put the file beside the mesh", r.lines.line, name)
			if r.mesh.MissingMTL == "" {
				r.mesh.MissingMTL = name
			}
		}
	}
	return nil
}

// splitLibraries cuts after each word that ends in .mtl.
func splitLibraries(line string) []string {
	var names, words []string
	for _, word := range strings.Fields(line) {
		words = append(words, word)
		if strings.EqualFold(path.Ext(strings.Trim(word, `"`)), ".mtl") {
			names, words = append(names, strings.Join(words, " ")), nil
		}
	}
	if len(words) > 0 {
		names = append(names, strings.Join(words, " "))
	}
	return names
}

// mtlPath returns where an MTL file is looked for: beside the OBJ file, and
// with the last part of its name only if that is a path of another computer.
func mtlPath(folder, name string) string {
	name = strings.ReplaceAll(strings.Trim(name, `"`), `\`, "/")
	if strings.HasPrefix(name, "/") || len(name) > 1 && name[1] == ':' {
		name = path.Base(name)
	}
	return path.Join(folder, name)
}

// readMTL collects the names that newmtl defines. found is false if there is
// no such file.
func (r *objReader) readMTL(name string) (found bool, err error) {
	file := mtlPath(r.folder(), name)
	if !fs.ValidPath(file) {
		return false, nil
	}
	data, err := readCapped(r.fsys, file, r.maxBytes)
	switch {
	case errors.Is(err, fs.ErrNotExist) || errors.Is(err, ErrUnsupported): // ErrUnsupported: a folder
		return false, nil
	case err != nil:
		return false, err
	}
	if data, err = plainText(file, data); err != nil {
		return false, err
	}
	if r.defined == nil {
		r.defined = map[string]bool{}
	}
	lines := lineReader{data: data}
	for {
		line, ok := lines.next()
		if !ok {
			return true, nil
		}
		key, rest := field(line)
		if !bytes.Equal(key, []byte("newmtl")) {
			continue
		}
		material := r.name(rest)
		if material == "" {
			return false, &ParseError{File: file, Line: lines.line, Key: "newmtl", Problem: "got no name, want the name of a material"}
		}
		r.defined[material] = true
	}
}
