package mesh

import (
	"errors"
	"slices"
	"strings"
	"testing"
	"time"

	"gonum.org/v1/gonum/spatial/r3"
)

const facetText = `  facet normal 0 0 1
    outer loop
      vertex 0 0 0
      vertex 1 0 0
      vertex 0 2.0e0 0
    endloop
  endfacet
`

const asciiOne = "solid wall\n" + facetText + "endsolid wall\n"

func TestReadASCIISTL(t *testing.T) {
	upper := strings.ToUpper(asciiOne)
	tests := []struct {
		name, text string
		triangles  int
		groups     []string
	}{
		{"plain", asciiOne, 1, []string{"wall"}},
		{"upper case", upper, 1, []string{"WALL"}},
		{"mixed case", strings.NewReplacer("facet", "Facet", "vertex", "VerTex", "loop", "LOOP").Replace(asciiOne), 1, []string{"wall"}},
		{"byte order mark", "\xef\xbb\xbf" + asciiOne, 1, []string{"wall"}},
		{"indented, blank lines", "\n\n \t" + strings.ReplaceAll(asciiOne, "\n", "\n \n"), 1, []string{"wall"}},
		{"carriage returns", strings.ReplaceAll(asciiOne, "\n", "\r\n"), 1, []string{"wall"}},
		{"only carriage returns", strings.ReplaceAll(asciiOne, "\n", "\r"), 1, []string{"wall"}},
		{"end facet", strings.NewReplacer("endfacet", "end facet", "endloop", "end  loop", "endsolid", "END solid").Replace(asciiOne), 1, []string{"wall"}},
		{"one line", strings.ReplaceAll(asciiOne, "\n", " "), 1, []string{"wall"}},
		{"bare solid", "solid\n" + facetText + "endsolid", 1, []string{"a"}},
		{"tab", "solid\twide  name\n" + facetText + "endsolid", 1, []string{"wide name"}},
		{"normal not a number", strings.Replace(asciiOne, "0 0 1", "nan -nan(ind) 0,0", 1), 1, []string{"wall"}},
		{"two solids", asciiOne + strings.ReplaceAll(asciiOne, "wall", "floor") + "\n\n", 2, []string{"wall", "floor"}},
		{"same names", asciiOne + asciiOne + strings.ReplaceAll(asciiOne, "wall", "wall 2") + asciiOne, 4, []string{"wall", "wall 2", "wall 2 2", "wall 3"}},
		{"bare solids", strings.Repeat("solid\n"+facetText+"endsolid\n", 3), 3, []string{"a", "a 2", "a 3"}},
		{"no endsolid between", "solid x\n" + facetText + "solid y\n" + facetText + "endsolid y", 2, []string{"x", "y"}},
		{"empty solid", "solid nothing\nendsolid nothing\n" + asciiOne, 1, []string{"wall"}},
		{"Latin-1", "solid f\xfcr\n" + facetText + "endsolid", 1, []string{"für"}},
		{"long line", "solid wall\n" + strings.Repeat(strings.ReplaceAll(facetText, "\n", " "), 1000) + "\nendsolid", 1000, []string{"wall"}},
	}
	for _, tt := range tests {
		m, err := Read(files("a.stl", tt.text), "a.stl", metresZ)
		if err != nil {
			t.Errorf("%s: %v", tt.name, err)
			continue
		}
		checkMesh(t, m)
		if len(m.Triangles) != tt.triangles || !slices.Equal(m.Groups, tt.groups) {
			t.Errorf("%s: got %d triangles in %q, want %d in %q", tt.name, len(m.Triangles), m.Groups, tt.triangles, tt.groups)
		}
		if m.Triangles[0].V != [3]r3.Vec{{}, {X: 1}, {Y: 2}} {
			t.Errorf("%s: got %v", tt.name, m.Triangles[0])
		}
	}
}

func TestReadASCIISTLNotes(t *testing.T) {
	text := "solid nothing\nendsolid\n" + asciiOne + asciiOne + "solid p\xe9\n" + strings.Replace(facetText, "2.0e0", "0", 1) + "endsolid\n"
	m, err := Read(files("a.stl", text), "a.stl", metresZ)
	if err != nil {
		t.Fatal(err)
	}
	want := []string{
		"a.stl: 4 solids, each a group of its own",
		`a.stl: 1 solid without facets, the first called "nothing"`,
		"a.stl: 1 solid bearing a name already used: a number was added",
		"a.stl: 1 face without any area dropped",
		`a.stl: names are not UTF-8 and were read as Latin-1, the first as "pé"`,
	}
	if !slices.Equal(m.Notes, want) {
		t.Errorf("got notes\n%s\nwant\n%s", strings.Join(m.Notes, "\n"), strings.Join(want, "\n"))
	}
}

func TestReadASCIISTLFaults(t *testing.T) {
	fault := func(old, new string) string { return strings.Replace(asciiOne, old, new, 1) }
	tests := []struct {
		name, text string
		is         error
		want       string
	}{
		{"no endsolid", "solid wall\n" + facetText, ErrTruncated, "a.stl:9: got the end of the file, want endsolid"},
		{"cut in a facet", asciiOne[:60], ErrTruncated, "cut short"},
		{"cut in a normal", "solid x\nfacet normal 0 ", ErrTruncated, "a.stl:2:"},
		{"not a number", fault("1 0 0", "1 NaN 0"), ErrNotFinite, "a.stl:5: vertex: got 1 NaN 0"},
		{"infinite", fault("1 0 0", "-Inf 0 0"), ErrNotFinite, "a.stl:5: vertex: got -Inf 0 0"},
		{"overflow", fault("1 0 0", "1e999 0 0"), ErrNotFinite, "+Inf"},
		{"decimal comma", fault("2.0e0", "2,0"), nil, `a.stl:6: vertex: got "2,0", want a number with a decimal point`},
		{"word for a number", fault("2.0e0", "two"), nil, `a.stl:6: vertex: got "two", want a number`},
		{"fourth vertex", fault("    endloop", "vertex 1 1 1\nendloop"), nil, "a.stl:7: vertex: got a fourth vertex"},
		{"two vertices", fault("      vertex 1 0 0\n", ""), nil, `a.stl:6: got "endloop", want vertex`},
		{"no normal", fault("normal 0 0 1", ""), nil, `a.stl:3: got "outer", want normal`},
		{"short normal", fault("0 0 1", "0 0"), nil, `a.stl:3: got "loop", want outer`},
		{"facet after endsolid", asciiOne + facetText, nil, "a.stl:10: facet: got a facet outside a solid"},
		{"second solid on the line of endsolid", strings.ReplaceAll(asciiOne+asciiOne, "\n", " "), nil, "a.stl:1: facet: got a facet outside a solid"},
		{"noise", fault("endsolid", "colour 1 2 3\nendsolid"), nil, `a.stl:9: got "colour", want facet or endsolid`},
		{"noise, long", fault("endsolid", strings.Repeat("x", 5000)), nil, `xxx...", want facet`},
		{"only an empty solid", "solid a\nendsolid a\n", ErrNoTriangles, "no triangles"},
		{"UTF-16", "\xff\xfes\x00o\x00l\x00i\x00d\x00", nil, "UTF-16"},
	}
	for _, tt := range tests {
		m, err := Read(files("a.stl", tt.text), "a.stl", metresZ)
		var e *ParseError
		if !errors.As(err, &e) || m != nil || !strings.Contains(err.Error(), tt.want) || tt.is != nil && !errors.Is(err, tt.is) {
			t.Errorf("%s: got %v, want %q and %v", tt.name, err, tt.want, tt.is)
		}
	}
}

// TestReadASCIISTLBlankLines reads what makes a recursive reader overflow its
// stack, which nothing can recover from.
func TestReadASCIISTLBlankLines(t *testing.T) {
	start := time.Now()
	m, err := Read(files("a.stl", "solid wall\n"+strings.Repeat("\n", 8<<20)+facetText+"endsolid"), "a.stl", metresZ)
	if err != nil || len(m.Triangles) != 1 {
		t.Fatalf("got %v, %v", m, err)
	}
	if took := time.Since(start); took > 10*time.Second {
		t.Errorf("8 million blank lines took %v", took)
	}
}
