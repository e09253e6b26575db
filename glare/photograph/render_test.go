package photograph

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/luminance"
	"squint/scene/view"
)

const deg = math.Pi / 180

// camera is a photograph's geometry: w x h pixels.
func camera(t testing.TB, p view.Projection, w, h int, at view.Placement) view.View {
	t.Helper()
	v, err := view.New(r3.Vec{}, r3.Vec{Y: 1}, r3.Vec{Z: 1}, p, math.Pi, w, h)
	if err != nil {
		t.Fatal(err)
	}
	v.Placement = at
	if err := v.Validate(); err != nil {
		t.Fatal(err)
	}
	return v
}

// shoot renders a scene as a sensor sees it: each pixel the mean over n x n
// points, dark outside of the image circle. Where corners and centre agree, the
// centre stands for the pixel.
func shoot(v view.View, n int, lum func(dir r3.Vec) float64) *luminance.Image {
	im := &luminance.Image{Width: v.Width, Height: v.Height, Lum: make([]float32, v.Width*v.Height)}
	at := func(x, y float64) float64 {
		if d, ok := v.LocalRay(x, y); ok {
			return lum(d)
		}
		return 0
	}
	for i := range im.Lum {
		x, y := float64(i%v.Width), float64(i/v.Width)
		centre, alike := at(x+0.5, y+0.5), true
		for j := range 4 {
			alike = alike && at(x+float64(j%2), y+float64(j/2)) == centre
		}
		if im.Lum[i] = float32(centre); alike {
			continue
		}
		sum := 0.0
		for j := range n * n {
			sum += at(x+(float64(j%n)+0.5)/float64(n), y+(float64(j/n)+0.5)/float64(n))
		}
		im.Lum[i] = float32(sum / float64(n*n))
	}
	return im
}

// office is a window of 6000 cd/m2 up on the left, another on the right, pale
// walls, a lighter ceiling, and a floor as dark as given.
func office(floor float64) func(r3.Vec) float64 {
	return func(d r3.Vec) float64 {
		az, sinEl := math.Atan2(d.Y, d.X)/deg, d.Z
		switch {
		case az > 20 && az < 50 && sinEl > 0 && sinEl < 0.42:
			return 6000
		case az > -60 && az < -40 && sinEl > 0.08 && sinEl < 0.34:
			return 3500
		case sinEl < -0.26:
			return floor
		case sinEl > 0.5:
			return 200
		}
		return 120
	}
}
