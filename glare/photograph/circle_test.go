package photograph

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"squint/glare/luminance"
	"squint/scene/view"
)

// Rendered photographs whose circle is known exactly. 0.1 pixels: the doc
// comment's promise; a pixel's edge is a ramp of one pixel whose middle is found
// to a fraction of it along 720 rays.
func TestFindCircle(t *testing.T) {
	for _, c := range []struct {
		name     string
		w, h     int
		at       view.Placement
		p        view.Projection
		floor    float64
		surround float64 // noise up to so much, cd/m2
		least    float64 // of Agree
	}{
		{"inscribed", 200, 200, view.Placement{X: 100, Y: 100, RadiusPx: 97}, view.Equidistant, 30, 0, 0.95},
		{"between pixels", 240, 200, view.Placement{X: 127.31, Y: 96.78, RadiusPx: 88.4}, view.Equisolid, 30, 0, 0.95},
		{"noise around", 240, 200, view.Placement{X: 127.31, Y: 96.78, RadiusPx: 88.4}, view.Equisolid, 30, 0.5, 0.95},
		{"far off", 400, 260, view.Placement{X: 150.5, Y: 121.25, RadiusPx: 90.7, RollRad: 0.2}, view.Orthographic, 30, 0.1, 0.95},
		{"black floor", 240, 240, view.Placement{X: 118.6, Y: 123.3, RadiusPx: 101.2}, view.Stereographic, 0, 0, 0.5},
		{"cut at top and bottom", 300, 160, view.Placement{X: 148.2, Y: 82.9, RadiusPx: 95.5}, view.Equidistant, 30, 0, 0.95},
	} {
		im := shoot(camera(t, c.p, c.w, c.h, c.at), 8, office(c.floor))
		rng := rand.New(rand.NewPCG(7, 8))
		for i := range im.Lum {
			im.Lum[i] += float32(c.surround * rng.Float64())
		}
		f, err := FindCircle(im)
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		t.Logf("%-22s off by %.3f, %.3f, radius %.3f px; agree %.2f, rms %.2f, stretch %.4f", c.name, f.X-c.at.X, f.Y-c.at.Y, f.RadiusPx-c.at.RadiusPx, f.Agree, f.RMSPx, f.Stretch)
		if math.Hypot(f.X-c.at.X, f.Y-c.at.Y) > 0.1 || math.Abs(f.RadiusPx-c.at.RadiusPx) > 0.1 {
			t.Errorf("%s: got %+v, want %+v", c.name, f.Circle, c.at)
		}
		if f.Agree < c.least || math.Abs(f.Stretch) > 0.003 { // 0.003: 0.1 pixels of a radius of 90, in width less height
			t.Errorf("%s: got %+v, want %g of the edge and no stretch", c.name, f, c.least)
		}
	}
}

// A picture made wider or narrower: the circle is an ellipse, and that must be
// said. Width and height are each good to 0.2 pixels, both edges as good as
// those of TestFindCircle, of a diameter of 260; 0.002 in all, twice that for
// pixels mixed by the resizing.
func TestFindStretchedCircle(t *testing.T) {
	v := camera(t, view.Equidistant, 300, 300, view.Placement{X: 150, Y: 150, RadiusPx: 130})
	sharp := shoot(v, 4, office(30))
	for _, width := range []int{318, 312, 285} {
		im := &luminance.Image{Width: width, Height: 300, Lum: make([]float32, width*300)}
		for i := range im.Lum {
			x, y := (float64(i%width)+0.5)*300/float64(width), float64(i/width)+0.5
			im.Lum[i] = float32(sampler{sharp}.at(x, y))
		}
		f, err := FindCircle(im)
		if err != nil {
			t.Fatal(err)
		}
		if want := float64(width)/300 - 1; math.Abs(f.Stretch-want) > 0.004 {
			t.Errorf("got %+v, want a stretch of %g", f, want)
		}
	}
}

func TestFindCircleRefuses(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 10))
	for name, lum := range map[string]func(x, y int) float64{
		"dark":     func(x, y int) float64 { return 0 },
		"even":     func(x, y int) float64 { return 50 },
		"nothing":  func(x, y int) float64 { return math.NaN() },
		"square":   func(x, y int) float64 { return inSquare(x, y) },
		"confetti": func(x, y int) float64 { return 100 * math.Pow(rng.Float64(), 8) },
		"one spot": func(x, y int) float64 { return float64(1000 * max(0, 3-abs(x-60)-abs(y-60))) },
	} {
		im := &luminance.Image{Width: 120, Height: 120, Lum: make([]float32, 120*120)}
		for i := range im.Lum {
			im.Lum[i] = float32(lum(i%120, i/120))
		}
		if f, err := FindCircle(im); !errors.Is(err, ErrNoCircle) {
			t.Errorf("%s: got %+v and %v, want a refusal", name, f, err)
		}
	}
	for _, size := range []int{1, 2, 3} {
		if _, err := FindCircle(&luminance.Image{Width: size, Height: size, Lum: make([]float32, size*size)}); !errors.Is(err, ErrNoCircle) {
			t.Errorf("%d pixels: got %v, want a refusal", size, err)
		}
	}
}

func inSquare(x, y int) float64 {
	if x > 15 && x < 105 && y > 15 && y < 105 {
		return 100
	}
	return 0
}

func abs(x int) int { return max(x, -x) }
