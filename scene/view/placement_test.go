package view

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// placed is an image of 40 x 32 pixels on which the circle lies off centre.
func placed(t testing.TB, p Projection, fovDeg float64, at Placement) View {
	t.Helper()
	v := mustView(t, p, fovDeg, 40, 32)
	v.Placement = at
	if err := v.Validate(); err != nil {
		t.Fatal(err)
	}
	return v
}

var fisheyes = []Projection{Equidistant, Equisolid, Orthographic, Stereographic}

// A circle between pixels still holds the whole cone, rolled or not.
func TestPlacedSums(t *testing.T) {
	for _, p := range fisheyes {
		v := placed(t, p, 180, Placement{X: 22.37, Y: 15.81, RadiusPx: 13.459, RollRad: 0.3})
		solid, projected := sums(v)
		if math.Abs(solid/(2*math.Pi)-1) > sumTolerance || math.Abs(projected/math.Pi-1) > sumTolerance {
			t.Errorf("%v: got %.15g and %.15g, want 2 pi and pi", p, solid, projected)
		}
		// The twin: an image too narrow for the circle must not pass.
		v.Width = 33
		if solid, _ := sums(v); math.Abs(solid/(2*math.Pi)-1) <= sumTolerance {
			t.Errorf("%v: a circle that is cut off has the whole cone", p)
		}
	}
}

// The same circle in a larger image: the same pixels, moved.
func TestPlacedAsInscribed(t *testing.T) {
	for _, p := range fisheyes {
		a := mustView(t, p, 180, 24, 24)
		b := placed(t, p, 180, Placement{X: 21, Y: 17, RadiusPx: 12})
		for y := range 24 {
			for x := range 24 {
				da, oka := a.LocalPixelRay(x, y)
				db, okb := b.LocalPixelRay(x+9, y+5)
				if oka != okb || r3.Norm(r3.Sub(da, db)) > 1e-12 {
					t.Fatalf("%v (%d, %d): %v and moved %v", p, x, y, da, db)
				}
				if sa, sb := a.SolidAngle(x, y), b.SolidAngle(x+9, y+5); math.Abs(sa-sb) > 1e-12 {
					t.Fatalf("%v (%d, %d): %g sr and moved %g", p, x, y, sa, sb)
				}
			}
		}
	}
}

// A camera that leans to its right sees what is above the line of sight to
// the left of its picture's upper end.
func TestPlacedRoll(t *testing.T) {
	for _, p := range append([]Projection{Perspective}, fisheyes...) {
		fov := 180.0
		if p == Perspective {
			fov = 90
		}
		v := placed(t, p, fov, Placement{RollRad: 20 * deg})
		px, py, ok := v.LocalProject(r3.Vec{X: 1, Z: 0.3})
		right, up := px-20, 16-py
		if want := -math.Tan(20 * deg); !ok || up <= 0 || math.Abs(right/up-want) > 1e-12 {
			t.Errorf("%v: above is seen %g to the right and %g up, want a ratio of %g", p, right, up, want)
		}
	}
}

func TestPlacedRoundTrips(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	for _, p := range fisheyes {
		v := placed(t, p, 180, Placement{X: 12.2, Y: 25.3, RadiusPx: 19, RollRad: -1.1}) // cut off on two sides
		seen := 0
		for range 2000 {
			px, py := rng.Float64()*40, rng.Float64()*32
			d, ok := v.LocalRay(px, py)
			if !ok {
				continue
			}
			seen++
			qx, qy, ok := v.LocalProject(d)
			if !ok || math.Hypot(qx-px, qy-py) > 1e-7*40 { // as TestRoundTrips
				t.Fatalf("%v: (%g, %g) came back as (%g, %g), %t", p, px, py, qx, qy, ok)
			}
		}
		if seen < 500 {
			t.Errorf("%v: %d of 2000 points seen, want 500", p, seen)
		}
		for y := range 32 {
			for x := range 40 {
				if _, ok := v.LocalPixelRay(x, y); ok != (v.SolidAngle(x, y) > 0) {
					t.Fatalf("%v (%d, %d): ray %t, solid angle %g", p, x, y, ok, v.SolidAngle(x, y))
				}
			}
		}
	}
}

func TestPlacementRejected(t *testing.T) {
	for _, c := range []struct {
		p  Projection
		at Placement
	}{
		{Equidistant, Placement{RadiusPx: 0.5}}, {Equidistant, Placement{RadiusPx: -3}},
		{Equidistant, Placement{RadiusPx: math.NaN()}}, {Equidistant, Placement{X: 1e7, RadiusPx: 10}},
		{Equidistant, Placement{RollRad: math.NaN()}}, {Equidistant, Placement{RollRad: 7}},
		{Perspective, Placement{X: 20, Y: 16, RadiusPx: 10}},
	} {
		v := mustView(t, c.p, 90, 40, 32)
		v.Placement = c.at
		if err := v.Validate(); !errors.Is(err, ErrInvalid) {
			t.Errorf("%v %+v: got %v, want a refusal", c.p, c.at, err)
		}
	}
}
