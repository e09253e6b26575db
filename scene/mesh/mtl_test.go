package mesh

import (
	"errors"
	"slices"
	"strings"
	"testing"
)

func TestReadMTL(t *testing.T) {
	const face = squareOBJ + "usemtl oak\nf 1 2 3\n"
	oak := "# comment\r\nnewmtl oak\r\nKd 1 1 1\r\n"
	tests := []struct {
		name    string
		library string // the line
		files   []string
		missing string
		note    string // "" for none
	}{
		{"none asked for", "", nil, "", ""},
		{"there", "mtllib a.mtl", []string{"d/a.mtl", oak}, "", ""},
		{"after a dot", "mtllib ./a.mtl", []string{"d/a.mtl", oak}, "", ""},
		{"blanks in its name", "mtllib my  room.mtl ", []string{"d/my room.mtl", oak}, "", ""},
		{"two files", "mtllib x.mtl a.mtl", []string{"d/x.mtl", "", "d/a.mtl", oak}, "", ""},
		{"two files, blanks", "mtllib my room.MTL a.mtl", []string{"d/my room.MTL", "", "d/a.mtl", oak}, "", ""},
		{"quoted", `mtllib "a b.mtl"`, []string{"d/a b.mtl", oak}, "", ""},
		{"path of another computer", `mtllib C:\Users\me\a.mtl`, []string{"d/a.mtl", oak}, "", ""},
		{"absolute path", "mtllib /home/me/a.mtl", []string{"d/a.mtl", oak}, "", ""},
		{"folder above", `mtllib ..\a.mtl`, []string{"a.mtl", oak}, "", ""},
		{"outside", "mtllib ../../../a.mtl", nil, "../../../a.mtl", "is not there"},
		{"missing", "mtllib a.mtl", nil, "a.mtl", `d/a.obj: line 1: mtllib: "a.mtl" is not there`},
		{"missing, blanks", "mtllib my room.mtl", nil, "my room.mtl", `"my room.mtl" is not there`},
		{"one of two missing", "mtllib a.mtl b.mtl", []string{"d/a.mtl", oak}, "b.mtl", `"b.mtl" is not there`},
		{"a folder", "mtllib a.mtl", []string{"d/a.mtl/x", ""}, "a.mtl", "is not there"},
		{"other materials", "mtllib a.mtl", []string{"d/a.mtl", "newmtl pine\nnewmtl Oak"}, "", `1 material that no MTL file defines, the first in line 7: "oak"`},
		{"no name", "mtllib", nil, "", ""},
	}
	for _, tt := range tests {
		fsys := files(append([]string{"d/a.obj", tt.library + "\n" + face}, tt.files...)...)
		m, err := Read(fsys, "d/a.obj", metresZ)
		if err != nil {
			t.Errorf("%s: %v", tt.name, err)
			continue
		}
		if m.MissingMTL != tt.missing || !slices.Equal(m.Materials, []string{"oak"}) {
			t.Errorf("%s: got missing %q, materials %q; want %q, [oak]", tt.name, m.MissingMTL, m.Materials, tt.missing)
		}
		if notes := strings.Join(m.Notes, "\n"); !strings.Contains(notes, tt.note) || (tt.note == "") != (notes == "") {
			t.Errorf("%s: got notes %q, want %q", tt.name, notes, tt.note)
		}
	}
}

func TestReadMTLFaults(t *testing.T) {
	tests := []struct {
		name, mtl string
		is        error
		want      string
	}{
		{"no name", "newmtl oak\nnewmtl \n", nil, "d/a.mtl:2: newmtl: got no name"},
		{"too large", strings.Repeat("#", 200), ErrTooLarge, "d/a.mtl: got a file of more than 100 bytes"},
		{"UTF-16", "\xfe\xff\x00n", nil, "d/a.mtl: got UTF-16"},
	}
	for _, tt := range tests {
		_, err := Read(files("d/a.obj", "mtllib a.mtl\n"+oneOBJ, "d/a.mtl", tt.mtl), "d/a.obj", Options{Unit: Metre, Up: Z, MaxBytes: 100})
		if err == nil || !strings.Contains(err.Error(), tt.want) || tt.is != nil && !errors.Is(err, tt.is) {
			t.Errorf("%s: got %v, want %q", tt.name, err, tt.want)
		}
	}
}
