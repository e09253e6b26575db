package main

import (
	"math"
	"slices"
	"testing"

	"squint/cmd/squint/internal/report"
	"squint/glare/luminance"
	"squint/glare/photograph"
)

// A disc that the file keeps beside its pixels counts unless a mask hides the
// place where it is seen; roll turns the camera, not the disc.
func TestVisibleDiscs(t *testing.T) {
	im := &luminance.Image{Width: 32, Height: 32, Lum: make([]float32, 32*32)}
	discs := []luminance.Disc{
		{Direction: [3]float64{0.8, 0, 0.6}, OmegaSr: 6e-5, Luminance: 1e8},  // up
		{Direction: [3]float64{0.8, 0, -0.6}, OmegaSr: 6e-5, Luminance: 2e8}, // down
	}
	top, err := photograph.MaskPolygon("brow", [][2]float64{{0, 0}, {32, 0}, {32, 14}, {0, 14}}, 32, 32)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		roll float64
		want float64 // luminance of the one that is left, twice the file's
	}{{0, 4e8}, {math.Pi, 2e8}} {
		p, err := photograph.Develop(im, photograph.Settings{FOVRad: math.Pi, RollRad: c.roll, Factor: 2, Masks: []photograph.Mask{top}})
		if err != nil {
			t.Fatal(err)
		}
		if got := visibleDiscs(p, discs); len(got) != 1 || got[0].Luminance != c.want {
			t.Errorf("roll %g: got %+v, want one of %g cd/m2", c.roll, got, c.want)
		}
	}
}

func TestPictureNames(t *testing.T) {
	var images []*report.Image
	for _, name := range []string{"a.exr", "x/A.exr", "a.pfm", "sheet.exr", "b.tar.exr"} {
		images = append(images, &report.Image{File: name})
	}
	if got, want := pictureNames(images), []string{"a", "A-2", "a-3", "sheet-2", "b.tar"}; !slices.Equal(got, want) {
		t.Errorf("got %q, want %q", got, want)
	}
}
