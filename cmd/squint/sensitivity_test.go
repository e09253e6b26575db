package main

import (
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"squint/glare"
	"squint/glare/luminance"
)

// TestGroupingSensitivity prints how DGP depends on two choices that the
// publications leave open: how far apart bright pixels make one source, and
// from which luminance bright cores stand apart. It is a study over the images
// that SQUINT_IMAGES names (patterns with blanks between), such as a check's
// worst hours:
//
//	SQUINT_IMAGES='results/demo/bare/worst-hour/*.exr' go test -count=1 -run GroupingSensitivity -v ./cmd/squint
//
// The table of "squint guide glare" comes from it.
func TestGroupingSensitivity(t *testing.T) {
	if os.Getenv("SQUINT_IMAGES") == "" {
		t.Skip("a study of images: set SQUINT_IMAGES to patterns of fisheye images that say their view")
	}
	var names []string
	for _, pattern := range strings.Fields(os.Getenv("SQUINT_IMAGES")) {
		list, err := filepath.Glob(pattern)
		if err != nil || len(list) == 0 {
			t.Fatalf("%s: got %d files and error %v, want some", pattern, len(list), err)
		}
		names = append(names, list...)
	}
	const byDefault = glare.DefaultGroupingRad * 180 / math.Pi
	all := []float64{0, 2, 4, 6, 8, 10, 12} // degrees; 0: pixels that touch
	for _, variant := range []struct {
		about     string
		base      func(*testing.T, *luminance.Image) // what DGP is compared with
		change    func(*testing.T, *luminance.Image)
		groupings []float64
	}{
		{"the sun's discs kept apart", asItIs, asItIs, all},
		{"the discs left out", withoutDiscs, withoutDiscs, all},
		{"768 pixels wide, the discs in the pixels", asItIs, photographed, []float64{byDefault}},
	} {
		var base []glare.Result
		for _, name := range names {
			base = append(base, studied(t, name, variant.base, 0, byDefault))
		}
		var table strings.Builder
		fmt.Fprintf(&table, "%s: DGP less that of the default, largest size among the %d images with DGP in the range of its data, and among all %d; mean number of sources\n%7s", variant.about, inRange(base), len(base), "")
		for _, g := range variant.groupings {
			fmt.Fprintf(&table, "%20g deg", g)
		}
		table.WriteByte('\n')
		for _, core := range []float64{0, 1e4, 5e4, 5e5} { // cd/m2; 0: none
			fmt.Fprintf(&table, "%7g", core)
			for _, g := range variant.groupings {
				in, whole, sources := 0.0, 0.0, 0
				for i, name := range names {
					r := studied(t, name, variant.change, core, g)
					off := math.Abs(r.DGP - base[i].DGP)
					whole = max(whole, off)
					if base[i].InRange {
						in = max(in, off)
					}
					sources += len(r.Sources)
				}
				// What the guide says of its table, besides the numbers.
				if fine := variant.about != "768 pixels wide, the discs in the pixels"; fine && core == defaultCore && g == byDefault && in > 0.0001 {
					t.Errorf("%s: cores of their own change DGP by %.4f at the default grouping, want nothing", variant.about, in)
				} else if fine && core == 0 && in > 0.01 {
					t.Errorf("%s: grouping at %g degrees changes DGP by %.4f, want at most 0.01", variant.about, g, in)
				}
				fmt.Fprintf(&table, "    %7.4f %7.4f %5.1f", in, whole, float64(sources)/float64(len(names)))
			}
			table.WriteByte('\n')
		}
		t.Log("\n" + table.String())
	}
}

func inRange(all []glare.Result) (n int) {
	for _, r := range all {
		if r.InRange {
			n++
		}
	}
	return n
}

// studied evaluates an image, after a change.
func studied(t *testing.T, name string, change func(*testing.T, *luminance.Image), core, groupingDeg float64) glare.Result {
	t.Helper()
	im, err := readImage(name)
	if err != nil {
		t.Fatal(err)
	}
	if err := im.GatherDiscs(); err != nil {
		t.Fatal(err)
	}
	change(t, im)
	o := glareOptions{AgeYears: 40}
	o.Sources = sourceFlags{Luminance: glare.DefaultThresholdCdM2, Multiple: glare.DefaultMultiple, GroupingDeg: groupingDeg, CoreLuminance: core}
	out, err := evaluateImage(name, im, o)
	if err != nil {
		t.Fatal(err)
	}
	return out.Result
}

func asItIs(*testing.T, *luminance.Image) {}

func withoutDiscs(_ *testing.T, im *luminance.Image) { im.Attr.Discs = nil }

// photographed makes a camera's image of one of ours: finer, each pixel
// repeated, and with the sun in the pixels that it covers.
func photographed(t *testing.T, im *luminance.Image) {
	by := max(1, 768/im.Width)
	fine := &luminance.Image{Width: im.Width * by, Height: im.Height * by, Attr: im.Attr, Lum: make([]float32, len(im.Lum)*by*by)}
	for i := range fine.Lum {
		fine.Lum[i] = im.Lum[i/fine.Width/by*im.Width+i%fine.Width/by]
	}
	if err := fine.SpreadDiscs(); err != nil {
		t.Fatal(err)
	}
	fine.Attr.Discs, fine.Attr.DiscsInPixels = nil, false
	*im = *fine
}
