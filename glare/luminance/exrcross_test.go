package luminance

import (
	"bytes"
	"encoding/binary"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"github.com/mokiat/goexr/exr"
)

// TestOtherDecoder has our files decoded by mokiat/goexr, which shows R, G, B
// and A only: so the writer is given these, and a file of ours with Y and A is
// checked for its A.
func TestOtherDecoder(t *testing.T) {
	const width, height = 37, 45
	im := synthetic(width, height)
	for _, c := range []Compression{None, ZIP} {
		line := func(scale float32) func(y int, dst []byte) []byte {
			return func(y int, dst []byte) []byte {
				for _, v := range im.Lum[y*width : (y+1)*width] {
					dst = binary.LittleEndian.AppendUint32(dst, math.Float32bits(scale*v))
				}
				return dst
			}
		}
		var b bytes.Buffer
		planes := []exrPlane{{"B", exrFloat, line(4)}, {"G", exrFloat, line(2)}, {"R", exrFloat, line(1)}}
		attr := described(1, 1).Attr
		if err := writePlanes(&b, width, height, planes, attr.exr(), c); err != nil {
			t.Fatal(err)
		}
		picture, err := exr.Decode(&b)
		if err != nil {
			t.Fatalf("%s: %v", c, err)
		}
		for i, want := range im.Lum {
			got := picture.At(i%width, i/width).(exr.RGBAColor)
			if want != want { // NaN
				continue
			}
			if got.R != want || got.G != 2*want || got.B != 4*want {
				t.Fatalf("%s: pixel %d: got %v, want %g times 1, 2, 4", c, i, got, want)
			}
		}

		im := described(width, height)
		picture, err = exr.Decode(bytes.NewReader(writeEXR(t, im, EXROptions{Compression: c})))
		if err != nil {
			t.Fatalf("%s: %v", c, err)
		}
		for i, valid := range im.Valid {
			got := picture.At(i%width, i/width).(exr.RGBAColor).A
			if valid != (got == 1) || !valid != (got == 0) {
				t.Fatalf("%s: pixel %d: A is %g, valid %t", c, i, got, valid)
			}
		}
	}
}

// TestFoundationTools has our files read by the tools of Debian's package
// openexr.
func TestFoundationTools(t *testing.T) {
	for _, c := range []Compression{None, ZIP} {
		name := filepath.Join(t.TempDir(), "ours.exr")
		if err := os.WriteFile(name, writeEXR(t, described(37, 45), EXROptions{Compression: c}), 0o600); err != nil {
			t.Fatal(err)
		}
		for _, tool := range []struct {
			name string
			args []string
			want []string
		}{
			{"exrheader", nil, []string{
				"A, 16-bit floating-point", "Y, 32-bit floating-point", "whiteLuminance (type float): 1",
				`capDate (type string): "2026:03:21 09:00:00"`, "utcOffset (type float): -3600",
				"latitude (type float): 52.3676", "longitude (type float): -4.9041",
				`squintProjection (type string): "equidistant"`, "squintFovDeg (type double): 180",
				"squintPosition (type v3d)",
			}},
			{"exrinfo", []string{"-s"}, nil}, // -s: be strict
			{"exrstdattr", []string{"-comments", "read back", name, name + "2"}, nil},
		} {
			path, err := exec.LookPath(tool.name)
			if err != nil {
				t.Skipf("the tool %s is not installed (Debian package openexr)", tool.name)
			}
			args := tool.args
			if len(args) < 3 {
				args = append(args, name)
			}
			out, err := exec.Command(path, args...).CombinedOutput()
			if err != nil {
				t.Errorf("%s: %s: %v\n%s", c, tool.name, err, out)
			}
			for _, want := range tool.want {
				if !strings.Contains(string(out), want) {
					t.Errorf("%s: %s: no %q in\n%s", c, tool.name, want, out)
				}
			}
		}
		// exrstdattr has read and written all pixels.
		f, err := os.Open(name + "2")
		if err != nil {
			t.Fatal(err)
		}
		defer f.Close()
		got, err := ReadEXR(f)
		if err != nil {
			t.Fatal(err)
		}
		sameBits(t, got, described(37, 45))
		if got.Attr.Comment != "read back" {
			t.Errorf("%s: comment: got %q", c, got.Attr.Comment)
		}
	}
}
