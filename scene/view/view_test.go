package view

import (
	"errors"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

const deg = math.Pi / 180

func mustView(t testing.TB, p Projection, fovDeg float64, w, h int) View {
	t.Helper()
	v, err := New(r3.Vec{X: 1, Y: 2, Z: 1.2}, r3.Vec{X: 0.3, Y: 1, Z: -0.2}, r3.Vec{X: 0.1, Z: 1}, p, fovDeg*deg, w, h)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// cases covers every projection, wide and narrow, square, wide and tall.
var cases = []struct {
	p      Projection
	fovDeg float64
	w, h   int
}{
	{Equidistant, 180, 64, 64}, {Equidistant, 180, 33, 47}, {Equidistant, 220, 50, 40}, {Equidistant, 360, 64, 64}, {Equidistant, 60, 9, 9},
	{Equisolid, 180, 64, 64}, {Equisolid, 300, 31, 20}, {Equisolid, 360, 64, 64},
	{Orthographic, 180, 64, 64}, {Orthographic, 180, 20, 31}, {Orthographic, 120, 24, 24},
	{Stereographic, 180, 64, 64}, {Stereographic, 250, 41, 33},
	{Perspective, 90, 40, 30}, {Perspective, 150, 30, 50},
	{Cylindrical, 360, 72, 30}, {Cylindrical, 100, 31, 40},
	{Equirectangular, 360, 72, 36}, {Equirectangular, 120, 20, 90}, // the latter reaches beyond the poles
}

func TestNewRejects(t *testing.T) {
	x, z := r3.Vec{X: 1}, r3.Vec{Z: 1}
	nan := math.NaN()
	for _, c := range []struct {
		what          string
		pos, dir, up  r3.Vec
		p             Projection
		fov           float64
		width, height int
	}{
		{"position", r3.Vec{X: nan}, x, z, Equidistant, 1, 8, 8},
		{"position", r3.Vec{X: math.Inf(1), Y: math.Inf(-1)}, x, z, Equidistant, 1, 8, 8},
		{"direction", x, r3.Vec{}, z, Equidistant, 1, 8, 8},
		{"direction", x, r3.Vec{X: nan}, z, Equidistant, 1, 8, 8},
		{"up", x, x, r3.Vec{}, Equidistant, 1, 8, 8},
		{"up", x, x, r3.Vec{X: -3}, Equidistant, 1, 8, 8},
		{"projection", x, x, z, Projection(7), 1, 8, 8},
		{"projection", x, x, z, Projection(-1), 1, 8, 8},
		{"field of view", x, x, z, Equidistant, 0, 8, 8},
		{"field of view", x, x, z, Equidistant, nan, 8, 8},
		{"field of view", x, x, z, Equidistant, 361 * deg, 8, 8},
		{"field of view", x, x, z, Orthographic, 181 * deg, 8, 8},
		{"field of view", x, x, z, Perspective, math.Pi, 8, 8},
		{"field of view", x, x, z, Stereographic, 2 * math.Pi, 8, 8},
		{"size", x, x, z, Equidistant, 1, 0, 8},
		{"size", x, x, z, Equidistant, 1, 8, MaxPixels + 1},
	} {
		_, err := New(c.pos, c.dir, c.up, c.p, c.fov, c.width, c.height)
		if !errors.Is(err, ErrInvalid) || !strings.Contains(err.Error(), ": "+c.what+": got") {
			t.Errorf("got error %v, want one about %q", err, c.what)
		}
	}
}

func TestProjectionNames(t *testing.T) {
	for p := range Projection(len(projections)) {
		if got, err := ParseProjection(p.String()); err != nil || got != p {
			t.Errorf("%v: got %v, %v", p, got, err)
		}
	}
	if _, err := ParseProjection("fish"); !errors.Is(err, ErrInvalid) || !strings.Contains(err.Error(), "equisolid") {
		t.Errorf("got %v, want an error that lists the names", err)
	}
}

// Looking north with z up, right in the image is east and up in it is up.
func TestOrientation(t *testing.T) {
	for _, c := range cases {
		v, err := New(r3.Vec{}, r3.Vec{Y: 2}, r3.Vec{Z: 1}, c.p, c.fovDeg*deg, c.w, c.h)
		if err != nil {
			t.Fatal(err)
		}
		mx, my := float64(c.w)/2, float64(c.h)/2
		if d, ok := v.Ray(mx, my); !ok || r3.Norm(r3.Sub(d, r3.Vec{Y: 1})) > 1e-15 {
			t.Errorf("%v: middle: got %v, want north", c, d)
		}
		if d, ok := v.Ray(mx+1, my); !ok || d.X <= 0 || math.Abs(d.Z) > 1e-15 {
			t.Errorf("%v: right of the middle: got %v, want east of north", c, d)
		}
		if d, ok := v.Ray(mx, my-1); !ok || d.Z <= 0 || math.Abs(d.X) > 1e-15 {
			t.Errorf("%v: above the middle: got %v, want upwards", c, d)
		}
	}
}

// The law of each projection, at 3/4 of the width.
func TestLaws(t *testing.T) {
	for _, c := range []struct {
		p       Projection
		fovDeg  float64
		wantDeg float64 // from the line of sight
	}{
		{Equidistant, 180, 45},                                  // exact: r ~ theta
		{Equisolid, 180, 2 * math.Asin(0.5*math.Sqrt2/2) / deg}, // exact: r ~ sin(theta/2)
		{Orthographic, 180, 30},                                 // exact: r ~ sin theta, asin 1/2
		{Stereographic, 180, 2 * math.Atan(0.5) / deg},          // exact: r ~ tan(theta/2)
		{Perspective, 90, math.Atan(0.5) / deg},                 // exact: x ~ tan az
		{Cylindrical, 360, 90}, {Equirectangular, 360, 90},      // exact: x ~ az
	} {
		v := mustView(t, c.p, c.fovDeg, 100, 100)
		d, ok := v.LocalRay(75, 50)
		if got := math.Acos(d.X) / deg; !ok || math.Abs(got-c.wantDeg) > 1e-12 {
			t.Errorf("%v: got %g degrees, want %g", c.p, got, c.wantDeg)
		}
	}
}

func TestRoundTrips(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for _, c := range cases {
		v := mustView(t, c.p, c.fovDeg, c.w, c.h)
		size := float64(max(c.w, c.h))
		// Near sin = 1 the inverse loses half the digits: 1e-8 of the radius.
		tol := 1e-7 * size
		seen := 0
		for range 2000 {
			px, py := rng.Float64()*float64(c.w), rng.Float64()*float64(c.h)
			d, ok := v.Ray(px, py)
			if !ok {
				continue
			}
			seen++
			if n := r3.Norm(d); math.Abs(n-1) > 1e-14 {
				t.Fatalf("%v: length %g, want 1", c, n)
			}
			qx, qy, ok := v.Project(r3.Scale(7, d))
			if !ok || math.Hypot(qx-px, qy-py) > tol {
				t.Fatalf("%v: (%g, %g) came back as (%g, %g), %t", c, px, py, qx, qy, ok)
			}
		}
		if seen < 500 {
			t.Errorf("%v: %d of 2000 points seen, want 500", c, seen)
		}
		for range 2000 {
			d := r3.Unit(r3.Vec{X: rng.NormFloat64(), Y: rng.NormFloat64(), Z: rng.NormFloat64()})
			px, py, ok := v.Project(d)
			if !ok {
				continue
			}
			if e, ok := v.Ray(px, py); !ok || r3.Norm(r3.Sub(d, e)) > 1e-7 {
				t.Fatalf("%v: %v came back as %v, %t", c, d, e, ok)
			}
		}
	}
}

// Rotating the whole world about any axis leaves the image as it is.
func TestRotationInvariance(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	for _, c := range cases {
		v := mustView(t, c.p, c.fovDeg, c.w, c.h)
		rot := r3.NewRotation(1.234, r3.Vec{X: 0.3, Y: -1, Z: 0.5})
		w := v
		w.Direction, w.Up = rot.Rotate(v.Direction), rot.Rotate(v.Up)
		for range 200 {
			d := r3.Unit(r3.Vec{X: rng.NormFloat64(), Y: rng.NormFloat64(), Z: rng.NormFloat64()})
			ax, ay, aok := v.Project(d)
			bx, by, bok := w.Project(rot.Rotate(d))
			if aok != bok || (aok && math.Hypot(ax-bx, ay-by) > 1e-9*float64(c.w)) {
				t.Fatalf("%v: (%g, %g, %t) and rotated (%g, %g, %t)", c, ax, ay, aok, bx, by, bok)
			}
		}
	}
}

// Rolling the camera by a quarter turn turns a square fisheye image by one.
func TestRoll(t *testing.T) {
	for _, p := range []Projection{Equidistant, Equisolid, Orthographic, Stereographic} {
		v := mustView(t, p, 180, 40, 40)
		_, left, _ := v.Frame()
		w := v
		w.Up = left // what was left is now up
		for _, q := range [][2]float64{{20, 5}, {11, 30}, {33, 17}} {
			a, _ := v.Ray(q[0], q[1])
			// (x, y) from the middle becomes (-y, x), with y downwards.
			b, ok := w.Ray(40-q[1], q[0])
			if !ok || r3.Norm(r3.Sub(a, b)) > 1e-14 {
				t.Errorf("%v: %v and rolled %v", p, a, b)
			}
		}
	}
}

func TestOutside(t *testing.T) {
	for _, c := range cases {
		v := mustView(t, c.p, c.fovDeg, c.w, c.h)
		for _, q := range [][2]float64{{-1e-6, 1}, {1, -1e-6}, {float64(c.w) + 1e-6, 1}, {1, float64(c.h) + 1e-6}, {math.NaN(), 1}} {
			if d, ok := v.Ray(q[0], q[1]); ok {
				t.Errorf("%v: %v: got %v, want nothing", c, q, d)
			}
		}
		if c.p.Fisheye() {
			if d, ok := v.Ray(0.01, 0.01); ok {
				t.Errorf("%v: corner: got %v, want nothing", c, d)
			}
		}
		for _, d := range []r3.Vec{{}, {X: math.NaN(), Y: 1}, {X: math.Inf(1)}} {
			if _, _, ok := v.LocalProject(d); ok {
				t.Errorf("%v: %v is seen, want not", c, d)
			}
		}
	}
	behind := r3.Vec{X: -1}
	if _, _, ok := mustView(t, Perspective, 90, 8, 8).LocalProject(behind); ok {
		t.Error("perspective sees behind itself")
	}
	if _, _, ok := mustView(t, Equidistant, 360, 8, 8).LocalProject(behind); !ok {
		t.Error("full equidistant does not see behind itself")
	}
}

// A pixel has a ray exactly where it has a solid angle, and the ray hits it.
func TestPixelRay(t *testing.T) {
	for _, c := range cases {
		v := mustView(t, c.p, c.fovDeg, c.w, c.h)
		for iy := -1; iy <= c.h; iy++ {
			for ix := -1; ix <= c.w; ix++ {
				d, ok := v.PixelRay(ix, iy)
				if ok != (v.SolidAngle(ix, iy) > 0) {
					t.Fatalf("%v (%d, %d): ray %t, solid angle %g", c, ix, iy, ok, v.SolidAngle(ix, iy))
				}
				if !ok {
					continue
				}
				px, py, ok := v.Project(d)
				const slack = 1e-6
				if !ok || px < float64(ix)-slack || px > float64(ix)+1+slack || py < float64(iy)-slack || py > float64(iy)+1+slack {
					t.Fatalf("%v (%d, %d): ray seen at (%g, %g), %t", c, ix, iy, px, py, ok)
				}
			}
		}
	}
}
