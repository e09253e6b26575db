package mesh

import (
	"bytes"
	"fmt"
	"io/fs"
	"path"

	"gonum.org/v1/gonum/spatial/r3"
)

// readOBJ reads an OBJ file and the MTL files it names.
func readOBJ(b *builder, fsys fs.FS, maxBytes int64, data []byte) error {
	data, err := plainText(b.mesh.File, data)
	if err != nil {
		return err
	}
	if i := bytes.IndexByte(data, 0); i >= 0 {
		return &ParseError{File: b.mesh.File, Line: 1 + bytes.Count(data[:i], []byte{'\n'}), Err: ErrUnsupported,
			Problem: "got a zero byte, want text; this is no OBJ file or a damaged one, export it again"}
	}
	r := objReader{
		builder: b, fsys: fsys, maxBytes: maxBytes,
		lines: lineReader{data: data}, base: baseName(b.mesh.File), material: -1, group: -1,
	}
	for {
		line, ok := r.lines.next()
		if !ok {
			break
		}
		if err := r.statement(line); err != nil {
			return err
		}
	}
	r.report()
	return nil
}

// objReader is the state of an OBJ file being read.
type objReader struct {
	*builder
	fsys     fs.FS
	maxBytes int64
	lines    lineReader

	vertices      []r3.Vec // metres, z up
	vts, vns      int      // counts so far: only they matter, for indices
	base          string   // group of faces without g and o
	object, named string   // last o, and last g since it
	group         int32    // index of the group in force, -1 until a face needs it
	material      int32    // index of the material in force, -1 for none or until a face needs it
	used          string   // its name, "" for none

	defined map[string]bool // materials of the MTL files; nil if there was none
	useLine map[string]int  // line of the first face of a material
	clip    clipper
	corners []int
	face    []r3.Vec

	notPlanar, crossing, repeated, loose, short, curved, unknown tally
}

// tally counts what is only worth a note, and where it was first.
type tally struct {
	count, line int
	text        string  // of the first
	worst       float64 // largest of what the note states
}

func (t *tally) hit(line int, text string, value float64) {
	if t.count == 0 {
		t.line, t.text = line, text
	}
	t.count++
	t.worst = max(t.worst, value)
}

func (r *objReader) fail(key, format string, args ...any) error {
	return &ParseError{File: r.mesh.File, Line: r.lines.line, Key: key, Problem: fmt.Sprintf(format, args...)}
}

// statement reads one line, continuations joined.
func (r *objReader) statement(line []byte) error {
	key, rest := field(line)
	if len(key) == 0 || key[0] == '#' {
		return nil
	}
	switch string(key) {
	case "v":
		return r.vertex(rest)
	case "vt":
		r.vts++
	case "vn":
		r.vns++
	case "f", "fo":
		return r.readFace(rest)
	case "o":
		r.object, r.named, r.group = r.name(rest), "", -1
	case "g":
		r.named, r.group = r.name(rest), -1
	case "usemtl":
		r.used, r.material = r.name(rest), -1
	case "mtllib":
		return r.library(rest)
	case "curv", "surf":
		r.curved.hit(r.lines.line, string(key), 0)
	case "s", "l", "p", "vp", "curv2", "cstype", "deg", "bmat", "step", "parm", "trim", "hole", "scrv", "sp", "end", "con",
		"mg", "bevel", "c_interp", "d_interp", "lod", "usemap", "maplib", "shadow_obj", "trace_obj", "ctech", "stech":
		// Nothing that adds surface, or part of curv and surf.
	default:
		r.unknown.hit(r.lines.line, quoted(key), 0)
	}
	return nil
}

// vertex reads x y z, also with a weight w or a colour r g b after it, which
// only curved surfaces and pictures use.
func (r *objReader) vertex(rest []byte) error {
	var c [3]float64
	n := 0
	for ; ; n++ {
		var word []byte
		if word, rest = field(rest); len(word) == 0 || word[0] == '#' {
			break
		}
		x, problem := parseNumber(word)
		if problem != "" {
			return r.fail("v", "%s", problem)
		}
		if n < 3 {
			c[n] = x
		}
	}
	if n != 3 && n != 4 && n != 6 && n != 7 {
		return r.fail("v", "got %s, want x y z, with or without a weight and a colour r g b; export the file again", plural(n, "number"))
	}
	p, ok := r.point(c[0], c[1], c[2])
	if !ok {
		return &ParseError{File: r.mesh.File, Line: r.lines.line, Key: "v", Problem: badPoint(c[0], c[1], c[2]), Err: ErrNotFinite}
	}
	r.vertices = append(r.vertices, p)
	return nil
}

// inMaterial returns the index of the material in force, -1 for none. Like
// groups, materials without faces are not listed.
func (r *objReader) inMaterial() int32 {
	if r.material >= 0 || r.used == "" {
		return r.material
	}
	r.material = r.builder.material(r.used)
	if r.useLine == nil {
		r.useLine = map[string]int{}
	}
	if r.useLine[r.used] == 0 {
		r.useLine[r.used] = r.lines.line
	}
	return r.material
}

// inGroup returns the index of the group in force. Groups without faces are
// not listed: they would only be names to mistake.
func (r *objReader) inGroup() int32 {
	if r.group >= 0 {
		return r.group
	}
	name := r.named
	if name == "" {
		name = r.object
	}
	if name == "" {
		name = r.base
	}
	r.group = r.builder.group(name)
	return r.group
}

// report turns tallies into notes.
func (r *objReader) report() {
	if t := r.notPlanar; t.count > 0 {
		r.notef("%s not planar, the first in line %d, the worst %s m off its plane: cut into triangles all the same", plural(t.count, "polygon"), t.line, lengthText(t.worst))
	}
	if t := r.crossing; t.count > 0 {
		r.notef("%s whose outline crosses itself, the first in line %d: the triangles are a guess, check them", plural(t.count, "polygon"), t.line)
	}
	if t := r.repeated; t.count > 0 {
		r.notef("%s going round more than once, the first in line %d: read once", plural(t.count, "polygon"), t.line)
	}
	if t := r.short; t.count > 0 {
		r.notef("%s with fewer than three corners, the first in line %d", plural(t.count, "face"), t.line)
	}
	if t := r.loose; t.count > 0 {
		r.notef("%s with a vt or vn index out of range, the first in line %d: not needed here, but the file may be damaged", plural(t.count, "corner"), t.line)
	}
	if t := r.curved; t.count > 0 {
		r.notef("%s not read, the first in line %d: export as polygons", plural(t.count, "surf or curv statement"), t.line)
	}
	if t := r.unknown; t.count > 0 {
		r.notef("%s of an unknown kind ignored, the first in line %d: %q", plural(t.count, "line"), t.line, t.text)
	}
	if r.defined == nil || r.mesh.MissingMTL != "" {
		return
	}
	var undefined tally
	for _, name := range r.mesh.Materials {
		if !r.defined[name] {
			undefined.hit(r.useLine[name], name, 0)
		}
	}
	if t := undefined; t.count > 0 {
		r.notef("%s that no MTL file defines, the first in line %d: %q; its name serves all the same", plural(t.count, "material"), t.line, t.text)
	}
}

// folder returns the folder of the OBJ file, where its MTL files are.
func (r *objReader) folder() string { return path.Dir(r.mesh.File) }
