package project

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"io"
	"io/fs"
	"path"
	"slices"
)

// maxBytes bounds a project file; a thousand viewpoints need some 100 kB.
const maxBytes = 4 << 20

// Load reads the project file of that name, checks it and completes it with
// the defaults. Paths in it are relative to the file's folder; those of the
// Project are slash separated and start at the root of fsys. Of a file with
// alternatives it checks all and returns the first.
//
// What is wrong with the file comes as Problems, all of it at once, by line;
// of TOML that cannot be parsed only the first error. A file that cannot be
// read is one Problem that wraps the cause, such as fs.ErrNotExist. Mesh and
// weather files are not opened.
func Load(fsys fs.FS, name string) (*Project, error) {
	all, err := LoadAll(fsys, name)
	if err != nil {
		return nil, err
	}
	return all[0], nil
}

// LoadAll is Load for every alternative, in the file's order: at least one
// project.
func LoadAll(fsys fs.FS, name string) ([]*Project, error) {
	data, err := read(fsys, name)
	if err != nil {
		return nil, Problems{{File: name, Message: "cannot be read: " + err.Error(), Err: err}}
	}
	if len(data) > maxBytes {
		return nil, Problems{{File: name, Message: fmt.Sprintf("larger than %d MiB, which no project file is", maxBytes>>20)}}
	}
	hash := sha256.Sum256(data)
	var all []*Project
	var problems Problems
	names := []string{""}
	for i := 0; i < len(names); i++ {
		// Reading marks the tree, so each alternative has its own.
		root, problem := parse(data)
		if problem != nil {
			problem.File = name
			return nil, Problems{*problem}
		}
		known := alternativesOf(root)
		if i == 0 && len(known) > 0 {
			names = known
		}
		r := &reader{file: name, dir: path.Dir(name)}
		p := &Project{File: name, Hash: hex.EncodeToString(hash[:]), Alternative: names[i]}
		r.choose(root, p.Alternative, known)
		r.document(root, p)
		for _, found := range r.problems {
			if !slices.Contains(problems, found) {
				problems = append(problems, found)
			}
		}
		all = append(all, p)
	}
	if len(problems) > 0 {
		return nil, problems.sorted()
	}
	return all, nil
}

func read(fsys fs.FS, name string) ([]byte, error) {
	f, err := fsys.Open(name)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	return io.ReadAll(io.LimitReader(f, maxBytes+1))
}

// document reads the tables in the schema's order.
func (r *reader) document(root *node, p *Project) {
	decode(r, root, "", projectKeys, p)
	known := names(projectKeys)
	for _, s := range sections() {
		known = append(known, s.name)
		r.section(s, root.table[s.name], p)
	}
	r.unknown(root, "", known)
	if root.table["mesh"] == nil || !root.table["mesh"].bad {
		r.needRoom(root, p)
	}
	if !root.has("viewpoint") && !root.has("view_grid") && !root.has("work_plane") {
		r.add(0, "viewpoint", "missing; want at least one [[viewpoint]], [[view_grid]] or [[work_plane]]")
	}
	r.expandViewGrids(p)
	r.completeRooms(p)
	r.resolveReferences(p)
	r.checkSides(p)
	r.checkSystems(p)
	r.checkControls(p)
	r.checkAsked(root, p)
}

func (r *reader) section(s section, n *node, p *Project) {
	switch {
	case n == nil && s.list:
	case n == nil:
		s.read(r, &node{table: map[string]*node{}}, p)
	case s.list && n.list == nil:
		hint := ""
		if n.table != nil {
			hint = "; write [[" + s.name + "]], in double brackets"
		}
		n.bad = true
		r.add(n.line, s.name, "got %s, want a list of tables%s", n.got(), hint)
	case s.list:
		for _, item := range n.list {
			if item.table == nil {
				n.bad = true
				r.add(item.line, s.name, "got %s, want a table", item.got())
				continue
			}
			s.read(r, item, p)
			n.bad = n.bad || item.bad
		}
	case n.table == nil:
		hint := ""
		if len(n.list) > 0 && n.list[0].table != nil {
			hint = "; write [" + s.name + "] once, in single brackets"
		}
		r.add(n.line, s.name, "got %s, want a table%s", n.got(), hint)
	default:
		s.read(r, n, p)
	}
}

func (r *reader) needRoom(root *node, p *Project) {
	for _, m := range p.Meshes {
		if m.Role == "room" {
			return
		}
	}
	r.add(root.table["mesh"].lineOr(0), "mesh", "missing; want at least one [[mesh]] of role \"room\"")
}

func (n *node) lineOr(line int) int {
	if n == nil {
		return line
	}
	return n.line
}
