package study

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/scene/sky"
)

// openFacade is a meter on a plane to the south with nothing before it but the
// ground and a horizon line of one altitude, rad, all around.
func openFacade(t *testing.T, horizon float64) *facade {
	t.Helper()
	in := tiny(t, 2, 64)
	if horizon > 0 {
		line, err := sky.NewHorizon([]sky.HorizonPoint{{AltitudeRad: horizon}, {AzimuthRad: math.Pi, AltitudeRad: horizon}})
		if err != nil {
			t.Fatal(err)
		}
		in.Scene.Horizon, in.Scene.HasHorizon = line, true
	}
	rect := in.Scene.Openings[0].Rect
	rect.Origin = r3.Add(rect.Origin, r3.Scale(0.2, rect.Outward)) // out of its reveal
	o := &operation{open: in.World, facades: map[string]*facade{}}
	return o.facade("open", rect)
}

// TestIrradiance: an even sky of luminance L, DHI = pi L, gives a vertical plane
// pi L/2, and the ground its reflectance times half of what it gets. Above a
// horizon line of altitude a the sky gives L times the integral of cos^2 h dh
// from a to pi/2 by that of cos z dz from -pi/2 to pi/2, L (pi/2 - a - sin(2a)/2);
// the land takes the rest of the view. A sun behind the line is on nothing.
// All derived here.
func TestIrradiance(t *testing.T) {
	const beam, dhi = 500.0, 100.0
	s, err := sky.NewCIE(5, r3.Vec{Z: 1}, sky.ByZenithLuminance(1000))
	if err != nil {
		t.Fatal(err)
	}
	root := math.Sqrt2 / 2
	sun := r3.Vec{Y: -root, Z: root} // south, 45 degrees up
	for _, c := range []struct {
		name    string
		horizon float64 // rad
		beam    float64
	}{
		{"sky alone", 0, 0},
		{"with the sun", 0, beam},
		{"a faint sun above a line", math.Pi / 6, 50},
		{"the sun behind a line", math.Pi / 3, beam},
	} {
		f := openFacade(t, c.horizon)
		m := &scene.Moment{Sun: sun, Sky: s, DiffuseLx: math.Pi * 1000, DHI: dhi, DNI: c.beam}
		seen := c.beam * root // on the facade and on the ground alike
		if c.horizon > math.Pi/4 {
			seen = 0
		}
		open := (math.Pi/2 - c.horizon - math.Sin(2*c.horizon)/2) / math.Pi
		ground := f.world.Scene.GroundReflectance[m.Month]
		want := dhi*open + seen + ground*(1-open)*(dhi+seen)
		// The disc is cut by the line; as many of the 256 directions as lie on it,
		// the side of a square of them, may fall on either side.
		slack := 0.01 * want
		if c.horizon > 0 {
			slack = dhi / 16
		}
		if got := f.irradiance(m); math.Abs(got-want) > slack {
			t.Errorf("%s: got %.2f W/m2, want %.2f", c.name, got, want)
		}
		// The twin: blind to the line, the sky or the sun is too much.
		if c.horizon > 0 {
			f.world.Scene.HasHorizon = false
			blind := &operation{open: f.world, facades: map[string]*facade{}}
			rect := f.world.Scene.Openings[0].Rect
			rect.Origin = r3.Add(rect.Origin, r3.Scale(0.2, rect.Outward))
			if got := blind.facade("open", rect).irradiance(m); math.Abs(got-want) <= slack {
				t.Errorf("%s: got %.2f W/m2 without the line too: the test sees nothing", c.name, got)
			}
		}
	}
}

// Desks behind the horizon line have no sun either: neither a meter on them
// nor the sun through a group of openings.
func TestSunBehindTheHorizon(t *testing.T) {
	in := tiny(t, 2, 64)
	at := in.Scene.WorkPlanes[0].Sensors[0].Position
	window := in.Scene.Openings[0].Rect
	sun := r3.Unit(r3.Sub(window.Point(window.WidthM/2, window.HeightM/2, 0), at))
	if sun.Z <= 0 || sunThrough(in.World, at, sun) == 0 {
		t.Fatalf("the window does not let in the sun from %v", sun)
	}
	line, err := sky.NewHorizon([]sky.HorizonPoint{{AltitudeRad: 1.4}, {AzimuthRad: math.Pi, AltitudeRad: 1.4}})
	if err != nil {
		t.Fatal(err)
	}
	in.Scene.Horizon, in.Scene.HasHorizon = line, true
	if got := sunThrough(in.World, at, sun); got != 0 {
		t.Errorf("got %g of the sun from behind the line, want 0", got)
	}
}
