package mesh

import (
	"bytes"
	"encoding/binary"
	"errors"
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// binarySTL writes a file by the layout in stl.go, with a count that may lie.
func binarySTL(header string, count uint32, facets ...[9]float32) []byte {
	var b bytes.Buffer
	head := make([]byte, 80)
	copy(head, header)
	b.Write(head)
	put := func(v any) {
		if err := binary.Write(&b, binary.LittleEndian, v); err != nil {
			panic(err)
		}
	}
	put(count)
	for _, f := range facets {
		put([3]float32{})
		put(f)
		put(uint16(0))
	}
	return b.Bytes()
}

var oneFacet = [9]float32{0, 0, 0, 1, 0, 0, 0, 2, 0}

func TestReadBinarySTL(t *testing.T) {
	for _, header := range []string{"made by hand", "solid made by hand", "SOLID"} {
		m, err := Read(files("dir/Part A.stl", string(binarySTL(header, 2, oneFacet, [9]float32{0, 0, 0, 1, 1, 1, 2, 2, 2}))), "dir/Part A.stl", metresZ)
		if err != nil {
			t.Errorf("%q: %v", header, err)
			continue
		}
		checkMesh(t, m)
		if len(m.Triangles) != 1 || m.Triangles[0].V != [3]r3.Vec{{}, {X: 1}, {Y: 2}} || m.Triangles[0].Material != -1 {
			t.Errorf("%q: got %v", header, m.Triangles)
		}
		if m.Degenerate != 1 || len(m.Notes) != 1 || !strings.Contains(m.Notes[0], "1 face without any area dropped") {
			t.Errorf("%q: got %d degenerate, notes %q", header, m.Degenerate, m.Notes)
		}
		if len(m.Groups) != 1 || m.Groups[0] != "Part A" {
			t.Errorf("%q: got groups %q, want the file's base name", header, m.Groups)
		}
	}
}

func TestReadBinarySTLFaults(t *testing.T) {
	nan, inf := float32(math.NaN()), float32(math.Inf(1))
	whole := binarySTL("x", 2, oneFacet, oneFacet)
	solid := binarySTL("solid x", 2, oneFacet, oneFacet)
	tests := []struct {
		name string
		data []byte
		is   error
		want string // "" for no error
	}{
		{"padding", append(bytes.Clone(whole), "\r\n"...), nil, ""},
		{"cut short", whole[:len(whole)-1], ErrTruncated, "a.stl: triangle count: got 2 in the header, which takes 184 bytes, but the file has 183, room for 1"},
		{"cut short, starts with solid", solid[:len(solid)-20], ErrTruncated, "room for 1"},
		{"count too small", binarySTL("x", 1, oneFacet, oneFacet), nil, "got 1 in the header, which takes 134 bytes, but the file has 184, room for 2; the header is wrong"},
		{"count zero", binarySTL("x", 0, oneFacet), nil, "got 0 in the header"},
		{"count huge", binarySTL("x", math.MaxUint32, oneFacet), ErrTruncated, "got 4294967295 in the header"},
		{"no triangles", binarySTL("x", 0), ErrNoTriangles, "no triangles"},
		{"only degenerate", binarySTL("x", 1, [9]float32{}), ErrNoTriangles, "all faces (1) have none"},
		{"header cut", whole[:50], ErrTruncated, "at least 84 bytes"},
		{"not a number", binarySTL("x", 2, oneFacet, [9]float32{0, 0, nan}), ErrNotFinite, "a.stl: triangle 2: vertex: got 0 0 NaN"},
		{"infinite", binarySTL("x", 2, [9]float32{0, 0, 0, inf, 0, 0, 1, 1, 1}, oneFacet), ErrNotFinite, "triangle 1: vertex: got +Inf 0 0"},
		{"damaged", binarySTL("x", 1, [9]float32{0, 0, 0, 1, 0, 0, 0, 1e30, 0}), ErrNotFinite, "1e+30"},
		{"text of another kind", []byte(strings.Repeat("v 0 0 0\n", 20)), nil, "which starts with \"solid\""},
	}
	for _, tt := range tests {
		m, err := Read(files("a.stl", string(tt.data)), "a.stl", metresZ)
		if tt.want == "" {
			if err != nil || len(m.Triangles) != 2 || len(m.Notes) != 1 {
				t.Errorf("%s: got %v, %v, want two triangles and a note", tt.name, m, err)
			}
			continue
		}
		var e *ParseError
		if !errors.As(err, &e) || e.File != "a.stl" || !strings.Contains(err.Error(), tt.want) || tt.is != nil && !errors.Is(err, tt.is) {
			t.Errorf("%s: got %v, want %q and %v", tt.name, err, tt.want, tt.is)
		}
	}
}

func FuzzReadSTL(f *testing.F) {
	f.Add(binarySTL("solid x", 2, oneFacet, oneFacet))
	f.Add(binarySTL("x", 3, oneFacet))
	f.Add([]byte(asciiOne))
	f.Add([]byte("\xef\xbb\xbf \n SOLID a\r\nFacet Normal nan 0 0 Outer Loop\rvertex 1,5 0 0"))
	f.Add([]byte("solid\nendsolid\nsolid\nend solid\nsolid 2\nfacet normal 0 0 0"))
	f.Fuzz(func(t *testing.T, data []byte) {
		m, err := Read(files("a.stl", string(data)), "a.stl", metresZ)
		if err == nil {
			checkMesh(t, m)
			return
		}
		if msg := err.Error(); len(msg) > 1000 {
			t.Errorf("message of %d bytes", len(msg))
		}
	})
}
