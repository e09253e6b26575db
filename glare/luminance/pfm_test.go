package luminance

import (
	"bytes"
	"errors"
	"math"
	"strings"
	"testing"
)

func TestPFMRoundTrip(t *testing.T) {
	for _, size := range [][2]int{{1, 1}, {5, 4}, {4, 5}, {64, 100}} {
		want := synthetic(size[0], size[1])
		var b bytes.Buffer
		if err := WritePFM(&b, want); err != nil {
			t.Fatal(err)
		}
		got, err := ReadPFM(&b)
		if err != nil {
			t.Fatal(err)
		}
		sameBits(t, got, want)
	}
}

func TestReadPFM(t *testing.T) {
	// 1, 2 and 3 as big-endian floats
	one, two, three := "\x3f\x80\x00\x00", "\x40\x00\x00\x00", "\x40\x40\x00\x00"
	for name, c := range map[string]struct {
		file string
		want []float32
	}{
		"bottom row first": {"Pf\n1 2\n1.0\n" + one + two, []float32{2, 1}},
		"scale":            {"Pf 2 1\n 2.5\n" + one + two, []float32{2.5, 5}},
		"carriage returns": {"Pf\r2\t1\n1\n" + one + two, []float32{1, 2}},
		"little-endian":    {"Pf\n1 1\n-1\n\x00\x00\x80\x3f", []float32{1}},
		"colour":           {"PF\n1 1\n1\n" + one + two + three, []float32{0.2126*1 + 0.7152*2 + 0.0722*3}}, // Recommendation ITU-R BT.709-6, item 3.2
	} {
		im, err := ReadPFM(strings.NewReader(c.file))
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		for i, want := range c.want {
			if math.Abs(float64(im.Lum[i]-want)) > 2e-4 || !im.Attr.Relative { // weights have 4 digits
				t.Errorf("%s: got %v, relative %t, want %v, true", name, im.Lum, im.Attr.Relative, c.want)
				break
			}
		}
	}
}

func TestPFMMalformed(t *testing.T) {
	for file, c := range map[string]struct {
		cause error
		want  string
	}{
		"":                    {ErrTruncated, "type: file ends early"},
		"P5\n2 2\n1\n":        {ErrFormat, `line 1: type: got "P5"`},
		"Pf\n0 2\n1\n":        {ErrMalformed, `line 2: size: got "0"`},
		"Pf\n2 x\n1\n":        {ErrMalformed, `size: got "x"`},
		"Pf\n2 99999\n1\n":    {ErrTooLarge, "got 99999 pixels"},
		"Pf\n2 2\n0\n":        {ErrMalformed, `line 3: scale: got "0"`},
		"Pf\n2 2\nNaN\n":      {ErrMalformed, "scale"},
		"Pf\n2 1\n1\n1234567": {ErrTruncated, "got 7 of 8 bytes"},
		"Pf\n2 " + strings.Repeat("1", 40) + "\n1\n": {ErrMalformed, "size"},
		"Pf\n32768 32768\n-1\n1234":                  {ErrTruncated, "got 4 of 131072 bytes"},
	} {
		_, err := ReadPFM(strings.NewReader(file))
		var pe *ParseError
		if !errors.As(err, &pe) || !errors.Is(err, c.cause) || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%q: got %v, want %v with %q", file, err, c.cause, c.want)
		}
	}
}

func FuzzReadPFM(f *testing.F) {
	f.Add([]byte("Pf\n1 2\n-1.0\n12345678"))
	f.Add([]byte("PF\n1 1\n2e3\n123456789012"))
	f.Fuzz(func(t *testing.T, b []byte) { readable(t, b, ReadPFM) })
}
