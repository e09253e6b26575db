package luminance

import (
	"bytes"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/view"
)

func withDiscs() *Image {
	im := &Image{Width: 64, Height: 64, Lum: make([]float32, 64*64)}
	for i := range im.Lum {
		im.Lum[i] = 1500
	}
	im.Attr.Projection, im.Attr.FOVDeg = "equidistant", 180
	im.Attr.Discs = []Disc{
		{Direction: [3]float64{0.6, 0, 0.8}, OmegaSr: 6.8e-5, Luminance: 1e9},
		{Direction: [3]float64{0.6, 0.002, 0.8}, OmegaSr: 3e-5, Luminance: 4e8}, // beside it
		{Direction: [3]float64{-0.6, 0, 0.8}, OmegaSr: 6.8e-5, Luminance: 1e9},  // behind
	}
	return im
}

func (im *Image) lux(t *testing.T) float64 {
	t.Helper()
	v, err := im.View()
	if err != nil {
		t.Fatal(err)
	}
	sum := 0.0
	for i, l := range im.Lum {
		sum += float64(l) * v.ProjectedSolidAngle(i%64, i/64)
	}
	return sum
}

// Spread, written, read and gathered: the illuminance at the eye rises by that
// of the discs, and the pixels are what they were.
func TestDiscsThereAndBack(t *testing.T) {
	im := withDiscs()
	before := im.lux(t)
	if err := im.SpreadDiscs(); err != nil {
		t.Fatal(err)
	}
	if err := im.SpreadDiscs(); err != nil || !im.Attr.DiscsInPixels { // once is enough
		t.Fatal(err)
	}
	// Exact to 4e-6 (solid angle over 4 pi) and float32: L omega cos.
	want := (1e9*6.8e-5 + 4e8*3e-5) * 0.6
	if got := im.lux(t) - before; math.Abs(got/want-1) > 1e-5 {
		t.Errorf("discs add %g lx, want %g", got, want)
	}
	var file bytes.Buffer
	if err := WriteEXR(&file, im, EXROptions{Compression: ZIP}); err != nil {
		t.Fatal(err)
	}
	back, err := ReadEXR(&file)
	if err != nil {
		t.Fatal(err)
	}
	if !back.Attr.DiscsInPixels || len(back.Attr.Discs) != 3 {
		t.Fatalf("read back: %+v", back.Attr)
	}
	if err := back.GatherDiscs(); err != nil || back.Attr.DiscsInPixels {
		t.Fatal(err)
	}
	for i, l := range back.Lum {
		// A pixel with a disc held up to 1e9 x 6.8e-5/2e-3 = 3e7 cd/m2, good
		// to 2^-24 of it; twice, for both roundings.
		if math.Abs(float64(l)-1500) > 4 {
			t.Fatalf("pixel %d: got %g, want 1500", i, l)
		}
	}
}

func TestDiscsNeedAView(t *testing.T) {
	im := withDiscs()
	im.Attr.Projection = ""
	if err := im.SpreadDiscs(); err == nil {
		t.Error("discs were spread in an unknown view")
	}
	if im.Attr.DiscsInPixels {
		t.Error("what failed says that the discs stand in the pixels")
	}
	im.Attr.DiscsInPixels = true
	if err := im.GatherDiscs(); err == nil || !im.Attr.DiscsInPixels {
		t.Errorf("gathered in an unknown view: got %v, in pixels %v, want an error and true", err, im.Attr.DiscsInPixels)
	}
}

// A disc that the edge of the picture cuts keeps its illuminance in the pixels
// that there are, however small their parts within the circle.
func TestDiscsAtTheEdge(t *testing.T) {
	v := view.View{Direction: r3.Vec{Y: 1}, Up: r3.Vec{Z: 1}, Projection: view.Equidistant, FOVRad: math.Pi / 3, Width: 33, Height: 33}
	cut := 0
	for i := range 500 {
		// Around the edge at 30 degrees, up to the disc's radius of 0.27 outside.
		theta := (30 + 0.25*math.Sin(float64(i))) * math.Pi / 180
		s, c := math.Sincos(2 * math.Pi * float64(i) / 500)
		d := Disc{Direction: [3]float64{math.Cos(theta), math.Sin(theta) * c, math.Sin(theta) * s}, OmegaSr: 6.8e-5, Luminance: 1e9}
		got := 0.0
		for _, s := range d.shares(v) {
			got += s.lum * v.ProjectedSolidAngle(s.pixel%v.Width, s.pixel/v.Width)
		}
		if theta > math.Pi/6 {
			cut++
		}
		// Exact, see shares.
		if want := 1e9 * 6.8e-5 * (1 - 6.8e-5/(4*math.Pi)) * math.Cos(theta); math.Abs(got/want-1) > 1e-9 {
			t.Errorf("disc %d, %.2f degrees off the axis: got %g lx, want %g", i, theta*180/math.Pi, got, want)
		}
	}
	if cut < 200 {
		t.Errorf("got %d discs with their middle outside, want 200", cut)
	}
}
