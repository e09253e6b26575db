package luminance

import (
	"bytes"
	"errors"
	"math"
	"reflect"
	"strings"
	"testing"
)

func TestEXRRoundTrip(t *testing.T) {
	for _, c := range []Compression{None, ZIP} {
		for _, size := range [][2]int{{1, 1}, {9, 1}, {3, 16}, {31, 17}, {64, 64}, {5, 33}} {
			for _, make := range []func(w, h int) *Image{synthetic, described} {
				want := make(size[0], size[1])
				got, err := ReadEXR(bytes.NewReader(writeEXR(t, want, EXROptions{Compression: c})))
				if err != nil {
					t.Fatalf("%s %v: %v", c, size, err)
				}
				if size == [2]int{1, 1} { // a mask with all pixels valid is read as none
					want.Valid = nil
				}
				sameBits(t, got, want)
				if !reflect.DeepEqual(got.Attr, want.Attr) {
					t.Errorf("%s %v: attributes:\ngot  %+v\nwant %+v", c, size, got.Attr, want.Attr)
				}
			}
		}
	}
}

func TestEXRMoment(t *testing.T) {
	for moment, want := range map[string]string{
		"2026-03-21T09:00:00+01:00":   "2026-03-21T09:00:00+01:00",
		"2026-03-21T09:00:00-09:30":   "2026-03-21T09:00:00-09:30",
		"2026-03-21T09:00:00Z":        "2026-03-21T09:00:00Z",
		"2026-03-21T09:00:00":         "2026-03-21T09:00:00",
		"2026-03-21T09:00:00.5+05:45": "2026-03-21T09:00:00+05:45", // whole seconds only
		"":                            "",
	} {
		im := synthetic(2, 2)
		im.Attr.Moment = moment
		got, err := ReadEXR(bytes.NewReader(writeEXR(t, im, EXROptions{})))
		if err != nil || got.Attr.Moment != want {
			t.Errorf("%q: got %q, %v, want %q", moment, got.Attr.Moment, err, want)
		}
	}
}

func TestEXRMantissa(t *testing.T) {
	im := synthetic(256, 256)
	copy(im.Lum, make([]float32, 16)) // no NaN here
	full := writeEXR(t, im, EXROptions{Compression: ZIP})
	small := writeEXR(t, im, EXROptions{Compression: ZIP, MantissaBits: 10})
	if len(small)*4 > len(full)*3 {
		t.Errorf("rounded file has %d bytes, exact one %d: want a quarter less", len(small), len(full))
	}
	got, err := ReadEXR(bytes.NewReader(small))
	if err != nil {
		t.Fatal(err)
	}
	worst := 0.0
	for i, l := range im.Lum {
		if l != 0 {
			worst = math.Max(worst, math.Abs(float64(got.Lum[i])/float64(l)-1))
		}
	}
	// exact: half a unit of the 10th bit of a mantissa of 1 to 2. Rounding to
	// 9 bits would exceed it, to 11 stay below half of it.
	if limit := math.Ldexp(1, -11); worst > limit || worst < limit/2 {
		t.Errorf("largest relative error: got %g, want %g to %g", worst, limit/2, limit)
	}
}

func TestRoundMantissa(t *testing.T) {
	inf := float32(math.Inf(1))
	for _, c := range []struct {
		v    float32
		bits int
		want float32 // by hand, IEEE 754 round to nearest, ties to even
	}{
		{1.75, 1, 2}, {1.25, 1, 1}, {1.375, 2, 1.5}, {1.125, 2, 1}, {-1.75, 1, -2}, {0, 5, 0},
		{math.MaxFloat32, 10, 3.4011621e38}, {inf, 3, inf}, {1.2345678, 0, 1.2345678}, {1.2345678, 23, 1.2345678},
	} {
		if got := roundMantissa(c.v, c.bits); got != c.want {
			t.Errorf("%g to %d bits: got %g, want %g", c.v, c.bits, got, c.want)
		}
	}
	if nan := float32(math.NaN()); !math.IsNaN(float64(roundMantissa(nan, 4))) {
		t.Error("NaN did not stay")
	}
}

func TestEXRRefuses(t *testing.T) {
	for name, c := range map[string]struct {
		change func(*Image, *EXROptions)
		want   string
	}{
		"length":    {func(im *Image, _ *EXROptions) { im.Lum = im.Lum[1:] }, "got 15, want 4 x 4 = 16"},
		"mask":      {func(im *Image, _ *EXROptions) { im.Valid = make([]bool, 3) }, "valid mask: got 3"},
		"size":      {func(im *Image, _ *EXROptions) { im.Width = 40000 }, "got 40000 x 4 pixels"},
		"moment":    {func(im *Image, _ *EXROptions) { im.Attr.Moment = "noon" }, `moment: got "noon"`},
		"latitude":  {func(im *Image, _ *EXROptions) { im.Attr.HasSite, im.Attr.LatitudeDeg = true, 91 }, "latitude 91"},
		"comment":   {func(im *Image, _ *EXROptions) { im.Attr.Comment = strings.Repeat("a", maxText+1) }, "comment"},
		"discs":     {func(im *Image, _ *EXROptions) { im.Attr.Discs = make([]Disc, maxDiscs+1) }, "discs"},
		"mantissa":  {func(_ *Image, o *EXROptions) { o.MantissaBits = 24 }, "mantissa"},
		"PIZ":       {func(_ *Image, o *EXROptions) { o.Compression = exrPIZ }, "compression: got PIZ"},
		"direction": {func(im *Image, _ *EXROptions) { im.Attr.Direction[0] = math.NaN() }, "direction"},
		"disc":      {func(im *Image, _ *EXROptions) { im.Attr.Discs = []Disc{{OmegaSr: -1}} }, "disc 1"},
	} {
		im, opt := synthetic(4, 4), EXROptions{}
		c.change(im, &opt)
		var b bytes.Buffer
		err := WriteEXR(&b, im, opt)
		if err == nil || !strings.Contains(err.Error(), c.want) || b.Len() != 0 {
			t.Errorf("%s: got %v and %d bytes, want an error with %q and nothing", name, err, b.Len(), c.want)
		}
		if !errors.Is(err, ErrInvalid) && !errors.Is(err, ErrUnsupported) {
			t.Errorf("%s: %v wraps neither ErrInvalid nor ErrUnsupported", name, err)
		}
	}
}

// TestEXRWorst writes the largest attributes that pass Validate and reads
// them: the limits of writer and reader must fit.
func TestEXRWorst(t *testing.T) {
	im := synthetic(3, 3)
	im.Attr.Comment, im.Attr.Software = strings.Repeat("c", maxText), strings.Repeat("s", maxText)
	for range maxDiscs {
		im.Attr.Discs = append(im.Attr.Discs, Disc{[3]float64{-0.12345678901234567, -0.12345678901234567, -0.12345678901234567}, 1.2345678901234567e-300, 1.2345678901234567e+300})
	}
	got, err := ReadEXR(bytes.NewReader(writeEXR(t, im, EXROptions{})))
	if err != nil || !reflect.DeepEqual(got.Attr, im.Attr) {
		t.Errorf("got %v, or attributes that differ", err)
	}
}

func BenchmarkWriteEXR(b *testing.B) {
	im := synthetic(1024, 1024)
	for _, c := range []Compression{None, ZIP} {
		b.Run(c.String(), func(b *testing.B) {
			for b.Loop() {
				writeEXR(b, im, EXROptions{Compression: c, MantissaBits: 10})
			}
		})
	}
}
