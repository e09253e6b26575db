package luminance

import (
	"bytes"
	"errors"
	"io/fs"
	"math"
	"strings"
	"testing"
	"testing/fstest"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/view"
)

func TestCheck(t *testing.T) {
	nan := float32(math.NaN())
	im := &Image{Width: 2, Height: 2, Lum: []float32{1, nan, -1, 3}}
	if err := im.Check(); !errors.Is(err, ErrInvalid) || !strings.Contains(err.Error(), "got NaN at column 1, row 0 (and 1 more") {
		t.Errorf("got %v", err)
	}
	im.Valid = []bool{true, false, false, true}
	if err := im.Check(); err != nil {
		t.Errorf("masked: got %v", err)
	}
	for _, c := range []struct {
		x, y int
		want float32
		ok   bool
	}{{0, 0, 1, true}, {1, 0, 0, false}, {1, 1, 3, true}, {2, 0, 0, false}, {0, -1, 0, false}} {
		if got, ok := im.At(c.x, c.y); got != c.want || ok != c.ok {
			t.Errorf("At(%d, %d): got %g, %t, want %g, %t", c.x, c.y, got, ok, c.want, c.ok)
		}
	}
}

func TestView(t *testing.T) {
	v, err := view.New(r3.Vec{X: 1, Y: 2, Z: 1.2}, r3.Vec{X: 1, Y: 1}, r3.Vec{Z: 1}, view.Equisolid, math.Pi, 64, 32)
	if err != nil {
		t.Fatal(err)
	}
	im := synthetic(64, 32)
	im.Attr.SetView(v)
	read, err := ReadEXR(bytes.NewReader(writeEXR(t, im, EXROptions{})))
	if err != nil {
		t.Fatal(err)
	}
	got, err := read.View()
	if err != nil {
		t.Fatal(err)
	}
	// Unit vectors are made unit again, radians became degrees and back: a few
	// units in the last place.
	if r3.Norm(r3.Sub(got.Direction, v.Direction)) > 1e-15 || r3.Norm(r3.Sub(got.Up, v.Up)) > 1e-15 || math.Abs(got.FOVRad-v.FOVRad) > 1e-15 ||
		got.Position != v.Position || got.Projection != v.Projection || got.Width != 64 || got.Height != 32 {
		t.Errorf("got %+v, want %+v", got, v)
	}

	for name, c := range map[string]struct {
		attr Attributes
		want string
	}{
		"nothing":   {Attributes{}, "projection: the image does not say it"},
		"no angle":  {Attributes{Projection: "equidistant"}, "field of view: the image does not say it"},
		"unheard":   {Attributes{Projection: "mercator", FOVDeg: 180}, `got "mercator"`},
		"too wide":  {Attributes{Projection: "perspective", FOVDeg: 180}, "field of view"},
		"no pose":   {Attributes{Projection: "equidistant", FOVDeg: 180}, ""},
		"no up":     {Attributes{Projection: "equidistant", FOVDeg: 180, Direction: [3]float64{1, 0, 0}}, ""},
		"up is dir": {Attributes{Projection: "equidistant", FOVDeg: 180, Direction: [3]float64{0, 0, 1}}, "parallel"},
	} {
		_, err := (&Image{Width: 4, Height: 4, Attr: c.attr}).View()
		if (err == nil) != (c.want == "") || err != nil && !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %q", name, err, c.want)
		}
	}
}

func TestRead(t *testing.T) {
	var pfm bytes.Buffer
	if err := WritePFM(&pfm, synthetic(3, 3)); err != nil {
		t.Fatal(err)
	}
	fsys := fstest.MapFS{
		"a.exr":   {Data: writeEXR(t, synthetic(3, 3), EXROptions{})},
		"a.pfm":   {Data: pfm.Bytes()},
		"a.txt":   {Data: []byte("x")},
		"cut.exr": {Data: []byte(exrMagic + "\x02\x00\x00\x00chan")},
	}
	for _, name := range []string{"a.exr", "a.pfm"} {
		im, err := Read(fsys, name)
		if err != nil {
			t.Fatal(err)
		}
		sameBits(t, im, synthetic(3, 3))
	}
	for name, want := range map[string]string{
		"a.txt":   "a.txt: got neither OpenEXR nor PFM",
		"cut.exr": "cut.exr: byte 12: attribute name: file ends early",
	} {
		if _, err := Read(fsys, name); err == nil || !strings.HasPrefix(err.Error(), want) {
			t.Errorf("%s: got %v, want %q", name, err, want)
		}
	}
	if _, err := Read(fsys, "none.exr"); !errors.Is(err, fs.ErrNotExist) {
		t.Errorf("missing file: got %v", err)
	}
}
