package photograph

import (
	"errors"
	"image"
	"image/color"
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare"
	"squint/glare/luminance"
	"squint/scene/view"
)

var fisheyes = []view.Projection{view.Equidistant, view.Equisolid, view.Orthographic, view.Stereographic}

func develop(t testing.TB, im *luminance.Image, s Settings) *Photograph {
	t.Helper()
	if s.FOVRad == 0 {
		s.FOVRad = math.Pi
	}
	p, err := Develop(im, s)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func evaluate(p *Photograph) glare.Result {
	return glare.Evaluate(glare.NewField(p.View).Without(p.Hidden), p.Lum, nil, glare.Options{}, nil)
}

// The same scene with the circle elsewhere, of another size, and the camera
// rolled, in every projection: Ev, DGP and the sources stay.
//
// Bounds: a pixel is h = sqrt(2) times a pixel's side in angle across, at most
// 0.031 rad here (radius 100 pixels, largest scale pi/2 / 100 x sqrt 2, twice
// that at the rim of the orthographic, where cos theta is near 0). Edges of the
// windows run over 2 x (30 + 25 + 20 + 15) degrees = 3.1 rad. Pixels across an
// edge hold a mean over the image plane, in which the scale changes by h: Ev
// may differ by 6000 x 3.1 x h x h = 18 lx between two renderings, of which half
// the pixels, 16 samples each, err by h/4 at random on top, less. DGP then by
// 5.87e-5 x 18 + the source's own share: which pixels of the edge belong to the
// source changes its L^2 omega by up to the edge's share, 3.1 h/0.3 sr = 0.32, so
// DGP by 0.0918 log10(1.32) = 0.011.
func TestPlacementDoesNotMatter(t *testing.T) {
	const tolEv, tolDGP, tolDir = 18.0, 0.012, 0.031
	for _, p := range fisheyes {
		var first glare.Result
		for i, at := range []view.Placement{
			{X: 100, Y: 100, RadiusPx: 100},
			{X: 137.3, Y: 111.8, RadiusPx: 100.4, RollRad: 23 * deg},
			{X: 161.25, Y: 149.6, RadiusPx: 140.7, RollRad: -7 * deg},
			{X: 131, Y: 124.5, RadiusPx: 103, RollRad: math.Pi},
		} {
			v := camera(t, p, 2*int(math.Ceil(at.X)), 2*int(math.Ceil(at.Y))+40, at)
			im := shoot(v, 4, office(30))
			circle := Circle{at.X, at.Y, at.RadiusPx}
			r := evaluate(develop(t, im, Settings{Projection: p, Circle: &circle, RollRad: at.RollRad}))
			if i == 0 {
				first = r
				continue
			}
			if math.Abs(r.Ev-first.Ev) > tolEv || math.Abs(r.DGP-first.DGP) > tolDGP || len(r.Sources) != 2 {
				t.Errorf("%v %+v: Ev %.2f, DGP %.4f, %d sources, want %.2f, %.4f, 2", p, at, r.Ev, r.DGP, len(r.Sources), first.Ev, first.DGP)
				continue
			}
			for k, s := range r.Sources {
				if off := r3.Norm(r3.Sub(s.Dir, first.Sources[k].Dir)); off > tolDir {
					t.Errorf("%v %+v: source %d moved by %g rad", p, at, k+1, off)
				}
			}
			t.Logf("%-13v %+v: Ev %+.3f lx, DGP %+.5f", p, at, r.Ev-first.Ev, r.DGP-first.DGP)

			// The twins: a roll that is not declared and a circle taken for
			// the inscribed one must not pass.
			if at.RollRad != math.Pi {
				wrong := evaluate(develop(t, im, Settings{Projection: p, Circle: &circle}))
				if s := wrong.Sources; len(s) == 2 && r3.Norm(r3.Sub(s[0].Dir, first.Sources[0].Dir)) <= tolDir {
					t.Errorf("%v %+v: roll left out passed", p, at)
				}
			}
			wrong := evaluate(develop(t, im, Settings{Projection: p, RollRad: at.RollRad}))
			if math.Abs(wrong.Ev-first.Ev) <= tolEv && math.Abs(wrong.DGP-first.DGP) <= tolDGP {
				t.Errorf("%v %+v: the inscribed circle passed", p, at)
			}
		}
	}
}

// The circle as found instead of stated: 0.1 pixels of 100 change the scale by
// 1e-3, and Ev by up to four times that.
func TestFoundCircle(t *testing.T) {
	at := view.Placement{X: 137.3, Y: 111.8, RadiusPx: 100.4}
	im := shoot(camera(t, view.Equisolid, 300, 230, at), 4, office(30))
	f, err := FindCircle(im)
	if err != nil {
		t.Fatal(err)
	}
	found := evaluate(develop(t, im, Settings{Projection: view.Equisolid, Circle: &f.Circle}))
	stated := evaluate(develop(t, im, Settings{Projection: view.Equisolid, Circle: &Circle{at.X, at.Y, at.RadiusPx}}))
	if math.Abs(found.Ev/stated.Ev-1) > 4e-3 || math.Abs(found.DGP-stated.DGP) > 0.012 {
		t.Errorf("found: Ev %g, DGP %g; stated: %g, %g", found.Ev, found.DGP, stated.Ev, stated.DGP)
	}
}

// Vignetting that the lens had is undone: Ev = pi L again. Within a pixel the
// factor changes by its slope times half a pixel, to either side alike: second
// order, (pi/100)^2/24 x its curvature of about 1 = 4e-5; allowed 1e-3.
func TestVignettingUndone(t *testing.T) {
	lens, err := ReadVignetting(strings.NewReader("# lens\nangle_deg,factor\n0,1\n30, 0.96\n60,0.8\n90,0.5\n"), "lens.csv")
	if err != nil {
		t.Fatal(err)
	}
	for name, v := range map[string]Vignetting{"table": lens, "polynomial": VignettingPolynomial([]float64{1, 0, -5e-5})} {
		im := shoot(camera(t, view.Equidistant, 100, 100, view.Placement{}), 4, func(d r3.Vec) float64 {
			return 500 * v.At(math.Acos(math.Min(d.X, 1)))
		})
		// shoot spreads the dark surround over pixels of the rim; here they
		// are given their own luminance.
		for i := range im.Lum {
			if d, ok := camera(t, view.Equidistant, 100, 100, view.Placement{}).LocalPixelRay(i%100, i/100); ok && d.X < 0.05 {
				im.Lum[i] = float32(500 * v.At(math.Acos(d.X)))
			}
		}
		if got := evaluate(develop(t, im, Settings{Vignetting: v})).Ev; math.Abs(got/(500*math.Pi)-1) > 1e-3 {
			t.Errorf("%s: Ev %g, want %g", name, got, 500*math.Pi)
		}
		if got := evaluate(develop(t, im, Settings{})).Ev; math.Abs(got/(500*math.Pi)-1) <= 1e-3 {
			t.Errorf("%s: Ev with the vignetting left in passed: %g", name, got)
		}
	}
	if got := lens.At(45 * deg); math.Abs(got-0.88) > 1e-12 { // exact: half way from 0.96 to 0.8
		t.Errorf("table at 45 degrees: got %g, want 0.88", got)
	}
	if got := VignettingPolynomial([]float64{1, 0, -5e-5}).At(60 * deg); math.Abs(got-0.82) > 1e-12 { // exact: 1 - 5e-5 x 3600
		t.Errorf("polynomial at 60 degrees: got %g, want 0.82", got)
	}
}

func TestVignettingRefused(t *testing.T) {
	for text, want := range map[string]string{
		"":                                "got 0 rows",
		"angle_deg,factor\n":              "got 0 rows",
		"a,b\n0,1\n":                      "lens.csv:1: vignetting: got the header \"a,b\"",
		"angle_deg,factor\n5,1\n9,1\n":    "lens.csv:2: vignetting: got 5 degrees first",
		"angle_deg,factor\n0,1\n0,0.9\n":  "lens.csv:3: vignetting: got 0 degrees after 0",
		"angle_deg,factor\n0,1\n9,96\n":   "lens.csv:3: vignetting: got the factor \"96\", want 0.05 to 1.5",
		"angle_deg,factor\n0,1\n9,0.04\n": "lens.csv:3: vignetting: got the factor \"0.04\", want 0.05 to 1.5",
		"angle_deg,factor\n0,1\n20,-1\n":  "got the factor \"-1\"",
		"angle_deg,factor\n0,1\n20,1,1\n": "got 3 columns",
		"angle_deg,factor\n0,1\nx,1\n":    "got the angle \"x\"",
		"angle_deg,factor\n0,\"1\n":       "lens.csv: vignetting: ",
	} {
		if _, err := ReadVignetting(strings.NewReader(text), "lens.csv"); !errors.Is(err, ErrVignetting) || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: got %v, want %q", text, err, want)
		}
	}
	im := shoot(camera(t, view.Equidistant, 20, 20, view.Placement{}), 1, office(30))
	short, err := ReadVignetting(strings.NewReader("angle_deg,factor\n0,1\n80,0.5\n"), "lens.csv")
	if err != nil {
		t.Fatal(err)
	}
	for _, v := range []Vignetting{short, VignettingPolynomial([]float64{1, 0, -0.3}), VignettingPolynomial([]float64{16000})} {
		if _, err := Develop(im, Settings{FOVRad: math.Pi, Vignetting: v}); !errors.Is(err, ErrVignetting) {
			t.Errorf("got %v, want a refusal", err)
		}
	}
}

func TestMasks(t *testing.T) {
	at := view.Placement{X: 50, Y: 50, RadiusPx: 50}
	im := shoot(camera(t, view.Equidistant, 100, 100, at), 4, func(r3.Vec) float64 { return 500 })
	lower, err := MaskPolygon("body", [][2]float64{{0, 50}, {100, 50}, {100, 100}, {0, 100}}, 100, 100)
	if err != nil {
		t.Fatal(err)
	}
	pic := image.NewGray(image.Rect(5, 5, 105, 105))
	for i := range 100 * 100 {
		if i/100 < 50 {
			pic.SetGray(5+i%100, 5+i/100, color.Gray{Y: 255})
		}
	}
	same, err := MaskOf("mask.png", pic, 100, 100)
	if err != nil {
		t.Fatal(err)
	}
	for _, m := range []Mask{lower, same} {
		p := develop(t, im, Settings{Masks: []Mask{m}})
		f := glare.NewField(p.View)
		r := glare.Evaluate(f.Without(p.Hidden), p.Lum, nil, glare.Options{}, nil)
		// Exact: half of pi L. The rim's pixels are darkened by the surround,
		// which takes some of their cos theta < 0.04 away: at most the ring's
		// projected solid angle, pi sin^2 over the last pixel, 1e-3.
		if math.Abs(r.Ev/(500*math.Pi/2)-1) > 1e-3 {
			t.Errorf("%s: Ev %g, want %g", m.Name, r.Ev, 500*math.Pi/2)
		}
		if got := f.Without(p.Hidden).TotalOmega; math.Abs(got-math.Pi) > 1e-9 {
			t.Errorf("%s: %g sr left, want pi", m.Name, got)
		}
	}
	if _, err := MaskOf("small.png", image.NewGray(image.Rect(0, 0, 9, 9)), 100, 100); !errors.Is(err, ErrMask) {
		t.Errorf("another size: got %v, want a refusal", err)
	}
	for _, corners := range [][][2]float64{nil, {{0, 0}, {9, 9}}, {{200, 200}, {300, 200}, {300, 300}}} {
		if _, err := MaskPolygon("x", corners, 100, 100); !errors.Is(err, ErrMask) {
			t.Errorf("%v: got %v, want a refusal", corners, err)
		}
	}
}

// A spot scales the whole picture; two spots by the mean of their ratios.
func TestSpots(t *testing.T) {
	im := shoot(camera(t, view.Equidistant, 90, 90, view.Placement{}), 2, func(d r3.Vec) float64 {
		if d.Y > 0 {
			return 2
		}
		return 5
	})
	p := develop(t, im, Settings{Spots: []Spot{{X: 20.5, Y: 45.5, CdM2: 300}}})
	if p.Lum[45*90+20] != 300 || p.Lum[45*90+70] != 750 || p.Factor != 150 {
		t.Errorf("got %g and %g cd/m2, factor %g, want 300, 750, 150", p.Lum[45*90+20], p.Lum[45*90+70], p.Factor)
	}
	p = develop(t, im, Settings{Factor: 100, Spots: []Spot{{20.5, 45.5, 300}, {70.5, 45.5, 250}}})
	if p.Factor != 100 || len(p.SpotRatios) != 2 || p.SpotRatios[0] != 1.5 || p.SpotRatios[1] != 0.5 {
		t.Errorf("got %+v, want factor 100, ratios 1.5 and 0.5", p.SpotRatios)
	}
	for _, s := range []Spot{{0.5, 0.5, 300}, {45, 45, 0}, {45, 45, math.NaN()}, {-3, 5, 9}} {
		if _, err := Develop(im, Settings{FOVRad: math.Pi, Spots: []Spot{s}}); !errors.Is(err, ErrSpot) {
			t.Errorf("%+v: got %v, want a refusal", s, err)
		}
	}
}

func TestBadPixels(t *testing.T) {
	im := shoot(camera(t, view.Equidistant, 64, 64, view.Placement{}), 2, office(30))
	for i, v := range []float64{math.NaN(), math.Inf(1), -1, -2, 20000, 20000, 20000, 20000} {
		im.Lum[32*64+20+i] = float32(v)
	}
	im.Lum[0] = float32(math.NaN()) // outside of the circle
	p := develop(t, im, Settings{Factor: 2})
	if p.Unknown != 2 || p.Negative != 2 || !p.Hidden[32*64+20] || p.Hidden[0] || p.Hidden[32*64+22] {
		t.Errorf("got %d unknown, %d negative, want 2 and 2", p.Unknown, p.Negative)
	}
	if p.Plateau.Pixels != 4 || p.Plateau.CdM2 != 40000 || !p.Plateau.Clipped() {
		t.Errorf("got %+v, want 4 clipped pixels of 40000", p.Plateau)
	}
	mask := Mask{Name: "lamp", Hidden: make([]bool, 64*64)}
	for i := range 4 {
		mask.Hidden[32*64+24+i] = true
	}
	if p := develop(t, im, Settings{Factor: 2, Masks: []Mask{mask}}); p.Plateau.CdM2 >= 40000 {
		t.Errorf("clipped pixels behind a mask: got %g as the largest luminance, want less", p.Plateau.CdM2)
	}
	for i, l := range p.Lum {
		if !(l >= 0) {
			t.Fatalf("pixel %d: got %g, want a luminance", i, l)
		}
	}
	im = shoot(camera(t, view.Equidistant, 64, 64, view.Placement{}), 2, func(r3.Vec) float64 { return 3 })
	if p := develop(t, im, Settings{}); p.Plateau.Clipped() {
		t.Errorf("one luminance all over is called clipped: %+v", p.Plateau)
	}
	// A gradient in half floats, 11 bits, repeats its largest value and is not
	// clipped; the same cut at half of it is.
	for i := range im.Lum {
		bits := math.Float32bits(900 + float32(i%64)/4 + float32(i/64)/16)
		im.Lum[i] = math.Float32frombits(bits &^ (1<<13 - 1))
	}
	if p := develop(t, im, Settings{}); p.Plateau.Pixels < 4 || p.Plateau.Clipped() {
		t.Errorf("rounded luminances: got %+v, want several alike and not clipped", p.Plateau)
	}
	for i := range im.Lum {
		im.Lum[i] = min(im.Lum[i], 912)
	}
	if p := develop(t, im, Settings{}); !p.Plateau.Clipped() {
		t.Errorf("cut at 912: got %+v, want it called clipped", p.Plateau)
	}
	if _, err := Develop(im, Settings{FOVRad: math.Pi, Factor: 2e38}); !errors.Is(err, luminance.ErrInvalid) {
		t.Errorf("overflow: got %v, want a refusal", err)
	}
}

// No table makes the reader panic, and what it accepts has a factor anywhere.
func FuzzReadVignetting(f *testing.F) {
	for _, s := range []string{"", "angle_deg,factor\n0,1\n90,0.5\n", "angle_deg,factor\n0,1e300\n1e-300,1\n", "#\nangle_deg,factor\n0,NaN\n", "\"\n"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		v, err := ReadVignetting(strings.NewReader(text), "x.csv")
		if err != nil {
			return
		}
		for _, a := range []float64{0, 1e-9, 0.7, math.Pi / 2, math.Pi} {
			if got := v.At(a); !(got > 0) || math.IsInf(got, 0) {
				t.Errorf("%q: factor %g at %g rad", text, got, a)
			}
		}
	})
}
