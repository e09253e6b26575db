package mesh

import (
	"errors"
	"slices"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

const squareOBJ = "v 0 0 0\nv 1 0 0\nv 1 1 0\nv 0 1 0\n"

func readText(text string) (*Mesh, error) { return Read(files("a.obj", text), "a.obj", metresZ) }

func TestReadOBJFaces(t *testing.T) {
	tri := [3]r3.Vec{{}, {X: 1}, {X: 1, Y: 1}} // corners 1 2 3 of squareOBJ
	normals := "vt 0 0\nvt 1 0\nvn 0 0 1\nvn 0 0 1\nvn 0 0 1\n"
	tests := []struct {
		name, text string
		triangles  int
	}{
		{"v", squareOBJ + "f 1 2 3", 1},
		{"v/vt", squareOBJ + normals + "f 1/1 2/2 3/1", 1},
		{"v//vn", squareOBJ + normals + "f 1//1 2//2 3//3", 1},
		{"v/vt/vn", squareOBJ + normals + "f 1/1/1 2/2/2 3/1/3", 1},
		{"v/ and v//", squareOBJ + normals + "f 1/ 2// 3/1/", 1},
		{"counted back", squareOBJ + "f -4 -3 -2", 1},
		{"counted back per list", squareOBJ + normals + "f -4/-2/-3 -3/-1/-2 -2/-1/-1", 1},
		{"counted back from here, not from the end", "v 0 0 0\nv 1 0 0\nv 1 1 0\nf -3 -2 -1\nv 9 9 9\nv 8 8 8\nv 7 7 0\nf -3 -2 -1", 2},
		{"quad", squareOBJ + "f 1 2 3 4", 2},
		{"blanks", "v   0 0\t0  \n  v 1 0 0\nv 1 1 0 \n\n \nf   1  2\t3   ", 1},
		{"carriage returns", strings.ReplaceAll(squareOBJ+"f 1 2 3\n", "\n", "\r\n"), 1},
		{"only carriage returns", strings.ReplaceAll(squareOBJ+"f 1 2 3\n", "\n", "\r"), 1},
		{"byte order mark", "\xef\xbb\xbf" + squareOBJ + "f 1 2 3", 1},
		{"weight", strings.ReplaceAll(squareOBJ, " 0\n", " 0 1.0\n") + "f 1 2 3", 1},
		{"colour", strings.ReplaceAll(squareOBJ, " 0\n", " 0 0.5 0.25 1\n") + "f 1 2 3", 1},
		{"colour and weight", strings.ReplaceAll(squareOBJ, " 0\n", " 0 1 0.5 0.25 1\n") + "f 1 2 3", 1},
		{"comment after", strings.ReplaceAll(squareOBJ, " 0\n", " 0 # a, corner\n") + "f 1 2 3 # a face", 1},
		{"comment ending in a backslash", "# C:\\models\\\n" + squareOBJ + "f 1 2 3", 1},
		{"continued face", squareOBJ + "f 1 \\\n2 \\\r\n 3", 1},
		{"continued vertex and normal", "v 0 \\\n0 0\nv 1 0 0\nv 1 1 0\nvn 0 \\\n 0 1\nf 1//1 2//1 3//1", 1},
		{"continued at the end", squareOBJ + "f 1 2 3 \\", 1},
		{"other statements", squareOBJ + "s 1\nl 1 2\np 1\nvp 0 0\ns off\nf 1 2 3\n", 1},
		{"old word for f", squareOBJ + "fo 1 2 3", 1},
		{"exponents and signs", "v +0.0 -0 .0\nv 1e0 0 0\nv 1.0E+0 10e-1 0\nf +1 2 3", 1},
	}
	for _, tt := range tests {
		m, err := readText(tt.text)
		if err != nil {
			t.Errorf("%s: %v", tt.name, err)
			continue
		}
		checkMesh(t, m)
		if len(m.Triangles) != tt.triangles || len(m.Notes) > 0 {
			t.Errorf("%s: got %d triangles and notes %q, want %d and none", tt.name, len(m.Triangles), m.Notes, tt.triangles)
		}
		if m.Triangles[0].V != tri && tt.triangles == 1 {
			t.Errorf("%s: got %v, want %v", tt.name, m.Triangles[0].V, tri)
		}
	}
}

func TestReadOBJNames(t *testing.T) {
	const f = "f 1 2 3\n"
	tests := []struct {
		name, text        string
		groups, materials []string
		of                []string // group/material of each triangle
	}{
		{"none", f, []string{"a"}, nil, []string{"a/"}},
		{"object", "o desk\n" + f, []string{"desk"}, nil, []string{"desk/"}},
		{"group before object", "g top\no desk\n" + f, []string{"desk"}, nil, []string{"desk/"}},
		{"group after object", "o desk\ng top\n" + f + "g\n" + f, []string{"top", "desk"}, nil, []string{"top/", "desk/"}},
		{"several names", "g  desk \t top\n" + f, []string{"desk top"}, nil, []string{"desk top/"}},
		{"back to a group", "g x\n" + f + "g y\n" + f + "g x\n" + f, []string{"x", "y"}, nil, []string{"x/", "y/", "x/"}},
		{"groups without faces", "g x\ng y\n" + f + "g z\n", []string{"y"}, nil, []string{"y/"}},
		{"materials", f + "usemtl oak\n" + f + "usemtl glass\nusemtl  white paint \n" + f + "usemtl\n" + f,
			[]string{"a"}, []string{"oak", "white paint"}, []string{"a/", "a/oak", "a/white paint", "a/"}},
		{"material outlives group", "g x\nusemtl oak\n" + f + "g y\n" + f, []string{"x", "y"}, []string{"oak"}, []string{"x/oak", "y/oak"}},
		{"number sign in a name", "g wall #3\nusemtl RAL #9010\n" + f, []string{"wall #3"}, []string{"RAL #9010"}, []string{"wall #3/RAL #9010"}},
	}
	for _, tt := range tests {
		m, err := readText(squareOBJ + tt.text)
		if err != nil {
			t.Errorf("%s: %v", tt.name, err)
			continue
		}
		checkMesh(t, m)
		var of []string
		for _, tri := range m.Triangles {
			material := ""
			if tri.Material >= 0 {
				material = m.Materials[tri.Material]
			}
			of = append(of, m.Groups[tri.Group]+"/"+material)
		}
		if !slices.Equal(m.Groups, tt.groups) || !slices.Equal(m.Materials, tt.materials) || !slices.Equal(of, tt.of) {
			t.Errorf("%s: got groups %q, materials %q, faces %q; want %q, %q, %q", tt.name, m.Groups, m.Materials, of, tt.groups, tt.materials, tt.of)
		}
	}
}

func TestReadOBJFaults(t *testing.T) {
	many := "f" + strings.Repeat(" 1 2 3 4 2", 2001) + " 1\n" // not a whole number of rounds
	tests := []struct {
		name, text string
		is         error
		want       string
	}{
		{"index too large", squareOBJ + "f 1 2 5", nil, "a.obj:5: f: got vertex 5, want 1 to 4, or -4 to -1 counted back: there are 4 vertices so far"},
		{"index too small", squareOBJ + "f 1 2 -5", nil, "a.obj:5: f: got vertex -5, want 1 to 4"},
		{"index zero", squareOBJ + "f 0 1 2", nil, "a.obj:5: f: got vertex 0, want 1 to 4"},
		{"index huge", squareOBJ + "f 99999999999999999999 1 2", nil, `a.obj:5: f: got "99999999999999999999"`},
		{"no index", squareOBJ + "f 1 2 x", nil, `a.obj:5: f: got "x", want whole numbers`},
		{"index broken", squareOBJ + "f 1 2 3.5", nil, `got "3.5"`},
		{"only a slash", squareOBJ + "f 1 2 /3", nil, `got "/3"`},
		{"four parts", squareOBJ + "f 1 2 3/1/1/1", nil, `got "3/1/1/1"`},
		{"texture broken", squareOBJ + "f 1 2 3/x", nil, `got "3/x"`},
		{"sign only", squareOBJ + "f 1 2 -", nil, `got "-"`},
		{"line counted over continuations", "v 0 0 0 \\\n\\\n\\\n\nf 1 2 3", nil, "a.obj:5: f: got vertex 2"},
		{"decimal comma", "v 0,5 0 0\n", nil, `a.obj:1: v: got "0,5", want a number with a decimal point`},
		{"commas between", "v 1, 2, 3\n", nil, `a.obj:1: v: got "1,"`},
		{"word", "v 0 zero 0\n", nil, `a.obj:1: v: got "zero", want a number`},
		{"two numbers", "v 0 0\n", nil, "a.obj:1: v: got 2 numbers, want x y z"},
		{"five numbers", "v 0 0 0 0 0\n", nil, "got 5 numbers"},
		{"no number", "v\n", nil, "got 0 numbers"},
		{"not a number", "v 0 0 NaN\n", ErrNotFinite, "a.obj:1: v: got 0 0 NaN"},
		{"infinite", "v 0 1e999 0\n", ErrNotFinite, "got 0 +Inf 0"},
		{"too far", "v 0 -1e13 0\n", ErrNotFinite, "got 0 -1e+13 0, want three finite numbers up to 1e+12"},
		{"too many corners", squareOBJ + many, nil, "a.obj:5: f: got 10006 corners, want at most 10000"},
		{"no faces", squareOBJ, ErrNoTriangles, "no triangles, want"},
		{"only flat faces", squareOBJ + "f 1 2 2\nf 1 2 1 2\n", ErrNoTriangles, "all faces (2) have none"},
		{"not text", "v 0 0 0\n\x00\x01", ErrUnsupported, "a.obj:2: got a zero byte"},
		{"UTF-16", "\xff\xfev\x00", nil, "UTF-16"},
	}
	for _, tt := range tests {
		m, err := readText(tt.text)
		var e *ParseError
		if !errors.As(err, &e) || m != nil || e.File != "a.obj" || !strings.Contains(err.Error(), tt.want) || tt.is != nil && !errors.Is(err, tt.is) {
			t.Errorf("%s: got %v, want %q and %v", tt.name, err, tt.want, tt.is)
		}
	}
}

func TestReadOBJNotes(t *testing.T) {
	tests := []struct {
		name, text, want string
		triangles        int
	}{
		{"not planar", "v 0 0 0.02\nv 1 0 0\nv 1 1 0.02\nv 0 1 0\nf 1 2 3 4", "a.obj: 1 polygon not planar, the first in line 5, the worst 0.01 m off its plane", 2},
		{"planar enough", "v 0 0 0.001\nv 1 0 0\nv 1 1 0.001\nv 0 1 0\nf 1 2 3 4", "", 2},
		{"crossing itself", "v 0 0 0\nv 3 3 0\nv 3 0 0\nv 0 1 0\nf 1 2 3 4", "a.obj: 1 polygon whose outline crosses itself, the first in line 5", 2},
		{"twice round", squareOBJ + "f 1 2 3 4 1 2 3 4", "a.obj: 1 polygon going round more than once, the first in line 5", 2},
		{"two corners", squareOBJ + "f 1 2\nf 1 2 3", "a.obj: 1 face with fewer than three corners, the first in line 5", 1},
		{"no vt", squareOBJ + "vt 0 0\nf 1/1 2/2 3/0", "a.obj: 2 corners with a vt or vn index out of range, the first in line 6", 1},
		{"curved", squareOBJ + "cstype bspline\nsurf 0 1 0 1 1 2 3 4\nend\nf 1 2 3", "a.obj: 1 surf or curv statement not read, the first in line 6", 1},
		{"unknown", squareOBJ + "face 1 2 3\nf 1 2 3", `a.obj: 1 line of an unknown kind ignored, the first in line 5: "face"`, 1},
		{"flat faces", squareOBJ + "f 1 2 2\nf 1 2 1 2\nf 1 2 3", "a.obj: 2 faces without any area dropped", 1},
		{"Latin-1", squareOBJ + "g Terraind\xe6k\nf 1 2 3", `the first as "Terraindæk"`, 1},
	}
	for _, tt := range tests {
		m, err := readText(tt.text)
		if err != nil {
			t.Errorf("%s: %v", tt.name, err)
			continue
		}
		checkMesh(t, m)
		if tt.want == "" && len(m.Notes) > 0 || !strings.Contains(strings.Join(m.Notes, "\n"), tt.want) || len(m.Triangles) != tt.triangles {
			t.Errorf("%s: got %d triangles, notes %q; want %d, %q", tt.name, len(m.Triangles), m.Notes, tt.triangles, tt.want)
		}
	}
}

// TestReadOBJPolygon reads a wall with a window hole as one keyhole polygon.
func TestReadOBJPolygon(t *testing.T) {
	m, err := readText(`
v 0 0 0
v 4 0 0
v 4 0 3
v 0 0 3
v 1 0 1
v 1 0 2
v 3 0 2
v 3 0 1
f 1 2 3 4 1 5 6 7 8 5
`)
	if err != nil {
		t.Fatal(err)
	}
	if got := m.GroupAreas()[0]; got != 4*3-2*1 { // exact: wall less window
		t.Errorf("area %g, want 10", got)
	}
	for _, tri := range m.Triangles {
		n := r3.Cross(r3.Sub(tri.V[1], tri.V[0]), r3.Sub(tri.V[2], tri.V[0]))
		if n.Y >= 0 { // exact: the outline is counter-clockwise seen from -y
			t.Errorf("triangle %v faces %v, want -y", tri.V, n)
		}
	}
	if len(m.Notes) > 0 {
		t.Errorf("notes %q, want none", m.Notes)
	}
}

func FuzzReadOBJ(f *testing.F) {
	f.Add(squareOBJ+"mtllib b.mtl\nusemtl x\nf 1/1/1 -3//1 3/1 4", "newmtl x\n")
	f.Add("v 0 \\\n0 0 1\nv 1 0 0 .1 .2 .3\nv 1,5 0 0\ng a b\no \xff\nf 1 2 3 1 2 3", "newmtl\n")
	f.Add(squareOBJ+"v 2 2 0\nf 1 2 3 4 1 5 2 3", "\\\n\\\n")
	f.Add(squareOBJ+"f 1 3 2 4 1 2\nf -1 -2 -1 -3 -2 -4", "")
	f.Fuzz(func(t *testing.T, obj, mtl string) {
		m, err := Read(files("d/a.obj", obj, "d/b.mtl", mtl), "d/a.obj", metresZ)
		if err == nil {
			checkMesh(t, m)
			return
		}
		if msg := err.Error(); len(msg) > 1000 {
			t.Errorf("message of %d bytes", len(msg))
		}
	})
}
