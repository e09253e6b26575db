package luminance

import (
	"bytes"
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

// synthetic is an image with smooth and noisy parts and every kind of float.
func synthetic(width, height int) *Image {
	im := &Image{Width: width, Height: height, Lum: make([]float32, width*height)}
	rng := rand.New(rand.NewPCG(1, 2))
	for i := range im.Lum {
		x, y := i%width, i/width
		im.Lum[i] = float32(100 + 3*x + y*y)
		if x > width/2 {
			im.Lum[i] *= float32(0.5 + rng.Float64())
		}
	}
	special := []float32{0, math.Float32frombits(1 << 31), 1.6e9, math.MaxFloat32, math.SmallestNonzeroFloat32,
		float32(math.Inf(1)), -3, math.Float32frombits(0x7f800001), math.Float32frombits(0xffc12345)}
	copy(im.Lum, special)
	return im
}

// described is synthetic with all attributes and a mask.
func described(width, height int) *Image {
	im := synthetic(width, height)
	im.Valid = make([]bool, len(im.Lum))
	for i := range im.Valid {
		im.Valid[i] = i%7 != 6
		if !im.Valid[i] {
			im.Lum[i] = 0
		}
	}
	im.Attr = Attributes{
		Projection: "equidistant", FOVDeg: 180,
		Position: [3]float64{1.2, 3.4, 1.1999999999999997}, Direction: [3]float64{0.1, 0.99, 0}, Up: [3]float64{0, 0, 1},
		Moment: "2026-03-21T09:00:00+01:00", HasSite: true, LatitudeDeg: 52.3676, LongitudeDeg: -4.9041,
		Discs:   []Disc{{Direction: [3]float64{0.5, 0.1, 0.8600000000000001}, OmegaSr: 6.8e-5, Luminance: 1.6e9}, {Direction: [3]float64{1, 0, 0}}},
		Comment: "clear sky, blinds up\nDGP 0.31 \u00b1 0.01", Software: "squint 0.1",
	}
	return im
}

// sameBits compares images bit by bit.
func sameBits(t *testing.T, got, want *Image) {
	t.Helper()
	if got.Width != want.Width || got.Height != want.Height || len(got.Lum) != len(want.Lum) {
		t.Fatalf("size: got %d x %d (%d), want %d x %d (%d)", got.Width, got.Height, len(got.Lum), want.Width, want.Height, len(want.Lum))
	}
	for i := range want.Lum {
		if g, w := math.Float32bits(got.Lum[i]), math.Float32bits(want.Lum[i]); g != w {
			t.Fatalf("pixel %d: got %#x, want %#x", i, g, w)
		}
	}
	if !slices.Equal(got.Valid, want.Valid) {
		t.Errorf("masks differ")
	}
}

func writeEXR(t testing.TB, im *Image, opt EXROptions) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := WriteEXR(&b, im, opt); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}
