package luminance

import (
	"fmt"
	"math"
)

// OpenEXR's fixed numbers. Source: "OpenEXR File Layout" (from memory).
const (
	exrMagic = "\x76\x2f\x31\x01"

	exrVersion   = 2
	exrTiled     = 0x200
	exrLongNames = 0x400
	exrDeep      = 0x800
	exrMultipart = 0x1000
)

// exrPixel is the type of a channel's samples.
type exrPixel int32

const (
	exrUint exrPixel = iota
	exrHalf
	exrFloat
)

func (p exrPixel) size() int {
	if p == exrHalf {
		return 2
	}
	return 4
}

// Compression of an OpenEXR file. The values are those of the file.
type Compression uint8

// The compressions that WriteEXR offers.
const (
	None Compression = 0
	ZIP  Compression = 3
)

const (
	exrRLE  Compression = 1
	exrZIPS Compression = 2
	exrPIZ  Compression = 4
)

// exrCompressions holds name and scan lines in a chunk by Compression; those
// with no lines are not read.
var exrCompressions = [...]struct {
	name  string
	lines int
}{
	{"none", 1}, {"RLE", 1}, {"ZIPS", 1}, {"ZIP", 16}, {"PIZ", 32},
	{"PXR24", 0}, {"B44", 0}, {"B44A", 0}, {"DWAA", 0}, {"DWAB", 0},
}

// String returns the usual name of the compression.
func (c Compression) String() string {
	if int(c) < len(exrCompressions) {
		return exrCompressions[c].name
	}
	return fmt.Sprintf("compression(%d)", uint8(c))
}

// exrChannel is an entry of the channel list.
type exrChannel struct {
	name                 string
	pixel                exrPixel
	xSampling, ySampling int
}

// samples is the number of multiples of step in lo..hi.
func samples(step, lo, hi int) int {
	return floorDiv(hi, step) - floorDiv(lo-1, step)
}

func floorDiv(a, b int) int {
	q := a / b
	if a%b < 0 {
		q--
	}
	return q
}

// exrBox is a window of pixels; the maxima belong to it.
type exrBox struct{ xMin, yMin, xMax, yMax int }

func (b exrBox) width() int  { return b.xMax - b.xMin + 1 }
func (b exrBox) height() int { return b.yMax - b.yMin + 1 }

// check wants a box of 1 to MaxSide pixels each way, near enough to the
// origin that no sum of coordinates overflows.
func (b exrBox) check() error {
	const far = 1 << 30
	if b.xMin < -far || b.yMin < -far || b.xMax > far || b.yMax > far || b.xMax < b.xMin || b.yMax < b.yMin {
		return fmt.Errorf("got (%d, %d) to (%d, %d), want an ordered box with coordinates within %d", b.xMin, b.yMin, b.xMax, b.yMax, far)
	}
	if b.width() > MaxSide || b.height() > MaxSide {
		return fmt.Errorf("got %d x %d pixels, want at most %d each way", b.width(), b.height(), MaxSide)
	}
	return nil
}

// chromaticities are CIE 1931 x, y of red, green, blue and white.
type chromaticities [8]float64

// rec709 are the primaries that a file without chromaticities means.
// Source: Recommendation ITU-R BT.709-6 (2015), items 1.3 and 1.4; that they
// are the default is OpenEXR's "Standard Attributes" (from memory).
var rec709 = chromaticities{0.64, 0.33, 0.30, 0.60, 0.15, 0.06, 0.3127, 0.3290}

// weights returns what red, green and blue contribute to luminance, their sum
// being 1. ok is false for colours that do not span a plane. Source: SMPTE RP
// 177-1993, Derivation of Basic Television Color Equations (from memory).
func (c chromaticities) weights() (w [3]float64, ok bool) {
	// Solve (primaries as columns of XYZ) k = white of luminance 1 for k; the
	// luminance of a primary is then k*y. Cramer's rule on columns
	// (x, y, 1-x-y).
	col := func(i int) [3]float64 { return [3]float64{c[2*i], c[2*i+1], 1 - c[2*i] - c[2*i+1]} }
	r, g, b := col(0), col(1), col(2)
	white := col(3)
	if !(math.Abs(white[1]) > 1e-6) {
		return w, false
	}
	for i := range white {
		white[i] /= c[7]
	}
	det := determinant(r, g, b)
	if !(math.Abs(det) > 1e-9) { // nearer than that: no triangle but a line
		return w, false
	}
	w[0] = determinant(white, g, b) / det * c[1]
	w[1] = determinant(r, white, b) / det * c[3]
	w[2] = determinant(r, g, white) / det * c[5]
	sum := w[0] + w[1] + w[2]
	return w, math.Abs(sum-1) < 1e-6
}

func determinant(a, b, c [3]float64) float64 {
	return a[0]*(b[1]*c[2]-b[2]*c[1]) - b[0]*(a[1]*c[2]-a[2]*c[1]) + c[0]*(a[1]*b[2]-a[2]*b[1])
}
