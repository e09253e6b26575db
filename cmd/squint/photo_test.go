package main

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"image"
	"image/color"
	"image/png"
	"math"
	"os"
	"strconv"
	"strings"

	"github.com/rogpeppe/go-internal/testscript"
	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/luminance"
	"squint/scene/view"
)

// lobby is what photo shoots: a window of 6000 cd/m2 to the left, a smaller
// one of 3000 to the right, in a room of 100 with a floor of 20.
func lobby(d r3.Vec) float64 {
	const deg = math.Pi / 180
	az, el := math.Atan2(-d.Y, d.X)/deg, math.Asin(d.Z)/deg
	switch {
	case az > -50 && az < -20 && el > 0 && el < 25:
		return 6000
	case az > 40 && az < 60 && el > 5 && el < 20:
		return 3000
	case el < -15:
		return 20
	}
	return 100
}

// cmdPhoto writes an invented photograph, PFM by its ending, else OpenEXR:
// photo FILE [KEY=VALUE...] with
//
//	size=WxH circle=x,y,r roll=deg fov=deg projection=name
//	unit=x        cd/m2 that the file's 1 stands for, which it does not say
//	clip=cd/m2    end of the camera's range
//	uniform=cd/m2 instead of the lobby
//	says=yes      the file says projection, field of view and unit
//	nan=n minus=n pixels without a number and below 0, in the middle row
func cmdPhoto(ts *testscript.TestScript, _ bool, args []string) {
	v := view.View{Direction: r3.Vec{Y: 1}, Up: r3.Vec{Z: 1}, Projection: view.Equidistant, FOVRad: math.Pi, Width: 128, Height: 128}
	unit, clip, uniform, nan, minus, says := 1.0, math.Inf(1), 0.0, 0, 0, false
	for _, a := range args[1:] {
		key, value, _ := strings.Cut(a, "=")
		n := []float64{0}
		if key != "projection" && key != "says" {
			var err error
			n, err = numbers(strings.ReplaceAll(value, "x", ","))
			ts.Check(err)
		}
		switch key {
		case "size":
			v.Width, v.Height = int(n[0]), int(n[1])
		case "circle":
			v.Placement.X, v.Placement.Y, v.Placement.RadiusPx = n[0], n[1], n[2]
		case "roll":
			v.Placement.RollRad = n[0] * math.Pi / 180
		case "fov":
			v.FOVRad = n[0] * math.Pi / 180
		case "projection":
			p, err := view.ParseProjection(value)
			ts.Check(err)
			v.Projection = p
		case "unit":
			unit = n[0]
		case "clip":
			clip = n[0]
		case "uniform":
			uniform = n[0]
		case "nan":
			nan = int(n[0])
		case "minus":
			minus = int(n[0])
		case "says":
			says = true
		default:
			ts.Fatalf("photo: no key %q", key)
		}
	}
	ts.Check(v.Validate())
	im := &luminance.Image{Width: v.Width, Height: v.Height, Lum: make([]float32, v.Width*v.Height)}
	const n = 4
	for i := range im.Lum {
		sum := 0.0
		for j := range n * n {
			d, ok := v.LocalRay(float64(i%v.Width)+(float64(j%n)+0.5)/n, float64(i/v.Width)+(float64(j/n)+0.5)/n)
			switch {
			case ok && uniform > 0:
				sum += uniform
			case ok:
				sum += lobby(d)
			}
		}
		// A little of its own for each pixel, as cameras have: no two are alike.
		l := sum / (n * n) * (1 + 1e-4*math.Sin(float64(i)))
		im.Lum[i] = float32(math.Min(l, clip) / unit)
	}
	middle := v.Height/2*v.Width + v.Width/2
	for i := range nan {
		im.Lum[middle+i] = float32(math.NaN())
	}
	for i := range minus {
		im.Lum[middle+nan+i] = -1
	}
	im.Attr.Relative = !says
	if says {
		im.Attr.SetView(v)
	}
	var b bytes.Buffer
	if strings.HasSuffix(args[0], ".pfm") {
		ts.Check(luminance.WritePFM(&b, im))
	} else {
		ts.Check(luminance.WriteEXR(&b, im, luminance.EXROptions{Compression: luminance.ZIP}))
	}
	ts.Check(os.WriteFile(ts.MkAbs(args[0]), b.Bytes(), 0o666))
}

// cmdShade writes a mask: shade FILE WIDTH HEIGHT FROM-ROW, black from that row
// on.
func cmdShade(ts *testscript.TestScript, _ bool, args []string) {
	var n [3]int
	for i := range n {
		v, err := strconv.Atoi(args[1+i])
		ts.Check(err)
		n[i] = v
	}
	im := image.NewGray(image.Rect(0, 0, n[0], n[1]))
	for i := range n[0] * n[2] {
		im.SetGray(i%n[0], i/n[0], color.Gray{Y: 255})
	}
	var b bytes.Buffer
	ts.Check(png.Encode(&b, im))
	ts.Check(os.WriteFile(ts.MkAbs(args[0]), b.Bytes(), 0o666))
}

// cmdAgrees wants the one row of CSV on stdout to have the DGP of the first
// viewpoint's worst hour in a summary: agrees SUMMARY.json. An image keeps
// float32 and the table six digits: 1e-5.
func cmdAgrees(ts *testscript.TestScript, _ bool, args []string) {
	var summary struct {
		Views []struct {
			Worst struct {
				DGP float64 `json:"dgp"`
			} `json:"worst_hour"`
		} `json:"views"`
	}
	ts.Check(json.Unmarshal([]byte(ts.ReadFile(args[0])), &summary))
	rows, err := csv.NewReader(strings.NewReader(ts.ReadFile("stdout"))).ReadAll()
	ts.Check(err)
	if len(rows) != 2 || rows[0][1] != "dgp" || len(summary.Views) == 0 {
		ts.Fatalf("got %d rows and %d viewpoints", len(rows), len(summary.Views))
	}
	got, err := strconv.ParseFloat(rows[1][1], 64)
	ts.Check(err)
	if want := summary.Views[0].Worst.DGP; math.Abs(got-want) > 1e-5*max(1, want) || want == 0 {
		ts.Fatalf("the image has DGP %g, the check %g", got, want)
	}
}
