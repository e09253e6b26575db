package mesh

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// maxCoordinate bounds what a file may hold, in its own unit: a thousand
// million metres even in millimetres. Larger values are damage, and their
// products overflow.
const maxCoordinate = 1e12

// builder collects the triangles of a file.
type builder struct {
	mesh      *Mesh
	scale     float64
	groups    map[string]int32
	materials map[string]int32
	latin1    string // first name that was not UTF-8
}

func newBuilder(file string, opt Options) *builder {
	return &builder{
		mesh:      &Mesh{File: file, Unit: opt.Unit, Up: opt.Up},
		scale:     opt.Unit.Metres(),
		groups:    map[string]int32{},
		materials: map[string]int32{},
	}
}

// point converts from the file's unit and axes. ok is false for what cannot be
// a coordinate: not a number, infinite, or beyond maxCoordinate.
func (b *builder) point(x, y, z float64) (p r3.Vec, ok bool) {
	// A comparison with NaN is false, so one test serves all three reasons.
	if !(math.Abs(x) <= maxCoordinate && math.Abs(y) <= maxCoordinate && math.Abs(z) <= maxCoordinate) {
		return r3.Vec{}, false
	}
	return b.mesh.Up.turn(r3.Vec{X: b.scale * x, Y: b.scale * y, Z: b.scale * z}), true
}

func badPoint(x, y, z float64) string {
	return fmt.Sprintf("got %.6g %.6g %.6g, want three finite numbers up to %.0e; the file is damaged, export it again", x, y, z, float64(maxCoordinate))
}

func (b *builder) name(raw []byte) string {
	name, latin1 := cleanName(raw)
	if latin1 && b.latin1 == "" {
		b.latin1 = name
	}
	return name
}

func (b *builder) group(name string) int32    { return intern(b.groups, &b.mesh.Groups, name) }
func (b *builder) material(name string) int32 { return intern(b.materials, &b.mesh.Materials, name) }

func intern(index map[string]int32, names *[]string, name string) int32 {
	i, ok := index[name]
	if !ok {
		i = int32(len(*names))
		index[name] = i
		*names = append(*names, name)
	}
	return i
}

// add appends a triangle, or counts it as degenerate.
func (b *builder) add(v [3]r3.Vec, group, material int32) {
	if flat(v) {
		b.mesh.Degenerate++
		return
	}
	b.mesh.Triangles = append(b.mesh.Triangles, Triangle{V: v, Group: group, Material: material})
}

// flat reports whether a triangle has no area. Reading a coordinate of size M
// rounds it by up to M·2⁻⁵³, the unit's scale by as much again, and each
// difference of two as well. So the height over the longest edge, area over
// length, is uncertain by a few M·2⁻⁵², 8 of them with all corners and axes
// against us; below that, the corners may as well be on one line.
func flat(v [3]r3.Vec) bool {
	e1, e2, e3 := r3.Sub(v[1], v[0]), r3.Sub(v[2], v[0]), r3.Sub(v[2], v[1])
	longest := math.Sqrt(math.Max(r3.Norm2(e1), math.Max(r3.Norm2(e2), r3.Norm2(e3))))
	return r3.Norm(r3.Cross(e1, e2)) <= longest*8*0x1p-52*math.Max(size(v[0]), math.Max(size(v[1]), size(v[2])))
}

// size is the largest of the coordinates without their signs.
func size(v r3.Vec) float64 {
	return math.Max(math.Abs(v.X), math.Max(math.Abs(v.Y), math.Abs(v.Z)))
}

func (b *builder) notef(format string, args ...any) {
	b.mesh.Notes = append(b.mesh.Notes, b.mesh.File+": "+fmt.Sprintf(format, args...))
}

// finish checks and returns the mesh.
func (b *builder) finish() (*Mesh, error) {
	m := b.mesh
	if len(m.Triangles) == 0 {
		problem := "got no triangles, want at least one; the file holds no surfaces"
		if m.Degenerate > 0 {
			problem = fmt.Sprintf("got no triangles with an area, want at least one; all faces (%d) have none", m.Degenerate)
		}
		return nil, &ParseError{File: m.File, Problem: problem, Err: ErrNoTriangles}
	}
	if m.Degenerate > 0 {
		b.notef("%s without any area dropped", plural(m.Degenerate, "face"))
	}
	if b.latin1 != "" {
		b.notef("names are not UTF-8 and were read as Latin-1, the first as %q", b.latin1)
	}
	return m, nil
}

func plural(n int, noun string) string {
	if n == 1 {
		return "1 " + noun
	}
	return fmt.Sprintf("%d %ss", n, noun)
}
