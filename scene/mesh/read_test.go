package mesh

import (
	"errors"
	"io/fs"
	"strings"
	"testing"
	"testing/fstest"

	"gonum.org/v1/gonum/spatial/r3"
)

// metresZ reads files as they are.
var metresZ = Options{Unit: Metre, Up: Z}

// files makes a file system of names and contents in turn.
func files(namesAndContents ...string) fs.FS {
	fsys := fstest.MapFS{}
	for i := 0; i < len(namesAndContents); i += 2 {
		fsys[namesAndContents[i]] = &fstest.MapFile{Data: []byte(namesAndContents[i+1])}
	}
	return fsys
}

const oneOBJ = "v 0 0 0\nv 1 0 0\nv 0 1 0\nf 1 2 3\n"

func TestReadOptions(t *testing.T) {
	fsys := files("a.obj", oneOBJ, "a.OBJ", oneOBJ, "a.Stl", asciiOne, "a.glb", "x", "a", "x", "empty.obj", "", "empty.stl", "", "dir.obj/x", "")
	tests := []struct {
		name string
		opt  Options
		is   error  // want errors.Is
		want string // in the message; "" for no error
	}{
		{"a.obj", metresZ, nil, ""},
		{"a.OBJ", metresZ, nil, ""},
		{"a.Stl", metresZ, nil, ""},
		{"a.obj", Options{Up: Z}, nil, "a.obj: unit: got none"},
		{"a.obj", Options{Unit: 77, Up: Z}, nil, "a.obj: unit: got none"},
		{"a.obj", Options{Unit: Metre}, nil, "a.obj: up: got none"},
		{"a.obj", Options{Unit: Metre, Up: Z, MaxBytes: -1}, nil, "got -1 bytes"},
		{"a.obj", Options{Unit: Metre, Up: Z, MaxBytes: int64(len(oneOBJ))}, nil, ""},
		{"a.obj", Options{Unit: Metre, Up: Z, MaxBytes: int64(len(oneOBJ)) - 1}, ErrTooLarge, "more than 31 bytes"},
		{"a.glb", metresZ, ErrUnsupported, `".glb"`},
		{"a", metresZ, ErrUnsupported, ".stl or .obj"},
		{"none.obj", metresZ, fs.ErrNotExist, "none.obj"},
		{"../a.obj", metresZ, nil, "../a.obj"},
		{"empty.obj", metresZ, ErrNoTriangles, "empty.obj: got no triangles"},
		{"empty.stl", metresZ, ErrTruncated, "got 0 bytes"},
		{"dir.obj", metresZ, ErrUnsupported, "folder"},
	}
	for _, tt := range tests {
		m, err := Read(fsys, tt.name, tt.opt)
		if tt.want == "" && tt.is == nil {
			if err != nil || len(m.Triangles) != 1 || m.File != tt.name || m.Unit != tt.opt.Unit || m.Up != tt.opt.Up {
				t.Errorf("%s %+v: got %+v, %v, want one triangle", tt.name, tt.opt, m, err)
			}
			continue
		}
		if err == nil || m != nil || tt.is != nil && !errors.Is(err, tt.is) || !strings.Contains(err.Error(), tt.want) {
			t.Errorf("%s %+v: got %v, want %q and %v", tt.name, tt.opt, err, tt.want, tt.is)
		}
	}
}

// TestReadUnitsAndAxes reads one corner in every unit, both ways up, from both
// formats.
func TestReadUnitsAndAxes(t *testing.T) {
	fsys := files(
		"a.obj", "v 1 2 3\nv 1000 2000 3000\nv 0 0 0\nv 9 0 0\nf 2 3 4\n",
		"a.stl", "solid\nfacet normal 0 0 0 outer loop vertex 1000 2000 3000 vertex 0 0 0 vertex 9 0 0 endloop endfacet\nendsolid\n",
	)
	for u := Metre; u <= Inch; u++ {
		k := 1000 * u.Metres()
		for up, want := range map[Axis]r3.Vec{Z: {X: k, Y: 2 * k, Z: 3 * k}, Y: {X: k, Y: -3 * k, Z: 2 * k}} {
			for _, name := range []string{"a.obj", "a.stl"} {
				m, err := Read(fsys, name, Options{Unit: u, Up: up})
				if err != nil {
					t.Errorf("%s: %v", name, err)
					continue
				}
				// Tolerance: one rounding of the product here and one there.
				if got := m.Triangles[0].V[0]; r3.Norm(r3.Sub(got, want)) > 4*0x1p-52*r3.Norm(want) {
					t.Errorf("%s in %v, %v up: got %v m, want %v", name, u, up, got, want)
				}
			}
		}
	}
}
