package luminance

import (
	"errors"
	"math"
	"os"
	"strings"
	"testing"
)

// smooth, noise: what testdata/library.cpp wrote. Its values are exact in
// half floats.
func smooth(c, x, y int) float64 { return float64((c+1)*(x*x+3*y*y)/16%2048) * 0.25 }

func noise(x, y int) uint32 {
	h := uint32(x)*0x9E3779B1 ^ uint32(y)*0x85EBCA77
	h ^= h >> 15
	h *= 0x2C1B3C6D
	h ^= h >> 12
	h *= 0x297A2D39
	return h ^ h>>15
}

// TestLibraryFiles reads files written by the Academy Software Foundation's
// own library, OpenEXR 3.1.5 (testdata/README.md).
func TestLibraryFiles(t *testing.T) {
	rgb := func(white float64) func(x, y int) float64 {
		return func(x, y int) float64 {
			// weights: Recommendation ITU-R BT.709-6, item 3.2, to 4 digits,
			// hence the tolerance below.
			return white * (0.2126*smooth(0, x, y) + 0.7152*smooth(1, x, y) + 0.0722*smooth(2, x, y))
		}
	}
	opaque := func(x, y int) bool { return x%5 != 0 }
	all := func(int, int) bool { return true }
	for _, c := range []struct {
		file          string
		width, height int
		lum           func(x, y int) float64 // in display window coordinates
		valid         func(x, y int) bool
		tolerance     float64 // relative
		described     bool
	}{
		// 4-digit weights: three of them off by up to 5e-5 each.
		{"rgb_half_rle.exr", 37, 45, rgb(200), opaque, 2e-4, true},
		{"rgb_half_zips.exr", 37, 45, rgb(1), opaque, 2e-4, false},
		{"rgb_half_zip.exr", 37, 45, // display window begins at (-3, 5), lines run upwards
			func(x, y int) float64 { return rgb(200)(x-3, y+5) }, func(x, y int) bool { return opaque(x-3, y) }, 2e-4, true},
		{"rgb_half_piz.exr", 37, 45, rgb(200), opaque, 2e-4, true},
		{"rgb_float_none.exr", 37, 45, rgb(200), opaque, 2e-4, true},
		{"rgb_float_piz.exr", 37, 45, // data window (4, 6) to (30, 50)
			func(x, y int) float64 {
				if x < 4 || x > 30 || y < 6 {
					return 0
				}
				return rgb(200)(x, y)
			},
			func(x, y int) bool { return opaque(x, y) && x >= 4 && x <= 30 && y >= 6 }, 2e-4, true},
		// 1000.25 times smooth, rounded to float by the writer: 2^-24.
		{"y_float_piz.exr", 37, 70, func(x, y int) float64 { return 1000.25 * smooth(0, x, y) }, all, 0x1p-23, false},
		// unsigned integers, of which float keeps 24 bits; stored as they are
		{"y_uint_noise_piz.exr", 330, 33, func(x, y int) float64 { return float64(noise(x, y)) }, all, 0x1p-23, false},
		// more than 2^14 different words in a chunk: sums that wrap
		{"y_uint_ramp_piz.exr", 900, 33, func(x, y int) float64 { return float64(uint32(x+900*y) ^ noise(x, y)&7) }, all, 0, false},
		{"y_uint_constant_piz.exr", 37, 45, func(x, y int) float64 { return 7 }, all, 0, false},
		// Y beside chroma at half resolution; grey, so that Y is that of the
		// colours, which the library by default rounds to 7 bits of mantissa
		// (its RgbaOutputFile, from memory): 2^-8.
		{"yc_half_piz.exr", 38, 46, func(x, y int) float64 { return smooth(0, x, y) }, all, 0x1p-8, false},
	} {
		t.Run(c.file, func(t *testing.T) {
			im, err := Read(os.DirFS("testdata"), c.file)
			if err != nil {
				t.Fatal(err)
			}
			if im.Width != c.width || im.Height != c.height {
				t.Fatalf("got %d x %d, want %d x %d", im.Width, im.Height, c.width, c.height)
			}
			for y := range c.height {
				for x := range c.width {
					want := c.lum(x, y)
					if got := float64(im.Lum[y*c.width+x]); math.Abs(got-want) > c.tolerance*math.Abs(want) {
						t.Fatalf("(%d, %d): got %g, want %g", x, y, got, want)
					}
					if valid := im.Valid == nil || im.Valid[y*c.width+x]; valid != c.valid(x, y) {
						t.Fatalf("(%d, %d): valid %t, want %t", x, y, valid, c.valid(x, y))
					}
				}
			}
			if im.Attr.Relative == c.described {
				t.Errorf("relative: got %t, want %t", im.Attr.Relative, !c.described)
			}
			if !c.described {
				return
			}
			a := im.Attr
			if a.Moment != "2026-06-21T14:30:00+02:00" || !a.HasSite || a.LatitudeDeg != 52.3676 || a.LongitudeDeg != 4.9041 || a.Comment != "made by the library" {
				t.Errorf("attributes: got %+v", a)
			}
		})
	}
}

func TestLibraryFilesRefused(t *testing.T) {
	for file, want := range map[string]string{
		"tiled.exr":          "tiled.exr: byte 8: version: got a tiled image, want scan lines in one part; save it as a plain scan line file",
		"multipart.exr":      "multi-part image",
		"deep.exr":           "deep image",
		"rgb_half_pxr24.exr": "compression: got PXR24, want none, RLE, ZIPS, ZIP or PIZ; save it with one of these",
	} {
		_, err := Read(os.DirFS("testdata"), file)
		var pe *ParseError
		if !errors.As(err, &pe) || !errors.Is(err, ErrUnsupported) || pe.File != file || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: got %v, want a ParseError with %q", file, err, want)
		}
	}
}
