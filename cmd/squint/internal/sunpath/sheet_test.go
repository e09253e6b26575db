package sunpath

import (
	"context"
	"image/color"
	"math"
	"testing"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/falsecolour"
	"squint/materials"
	"squint/scene"
	"squint/scene/sky"
)

// TestMarks: in the picture the low sun's colour stands where the point sees
// the sun, and nowhere else on the sun's paths.
func TestMarks(t *testing.T) {
	m := newModel(t)
	m.window(-.8, .6, .3, 1.6)
	m.rect(m.matte(), scene.Room, r3.Vec{X: -10, Y: 4, Z: -1}, r3.Vec{X: 20}, r3.Vec{Z: 40})
	y := compute(t, m.input(r3.Vec{Y: 2}))
	for _, form := range []Form{Ahead, Up} {
		d, err := y.draw(context.Background(), Sheet{Form: form, WidthPx: 1000, World: y.Input.World(r3.Vec{}), FromH: 8, ToH: 18})
		if err != nil {
			t.Fatal(err)
		}
		var dots []falsecolour.Place
		for i := range y.Samples {
			if at, ok := d.on(y.Samples[i].Sun); ok && y.Samples[i].Direct() {
				dots = append(dots, at)
			}
		}
		seen, coloured, hidden, wrong := 0, 0, 0, 0
		for i := range y.Samples {
			s := &y.Samples[i]
			at, ok := d.on(s.Sun)
			if !ok {
				continue
			}
			is := d.Image.RGBAAt(int(at.X*d.Scale()), int(at.Y*d.Scale())) == color.RGBA{0xC8, 0x76, 0x1B, 255}
			switch {
			case s.Free == 1:
				if seen++; is {
					coloured++
				}
			case s.Free == 0 && !near(dots, at):
				if hidden++; is {
					wrong++
				}
			}
		}
		// Paths, hours and names cover some dots.
		if seen < 100 || coloured < seen*6/10 {
			t.Errorf("form %d: %d of %d suns that are seen are marked", form, coloured, seen)
		}
		if hidden < 1000 || wrong > 0 {
			t.Errorf("form %d: %d of %d suns that are hidden are marked as seen", form, wrong, hidden)
		}
	}
}

// near reports that one of the dots reaches to a place.
func near(dots []falsecolour.Place, p falsecolour.Place) bool {
	for _, at := range dots {
		if math.Hypot(at.X-p.X, at.Y-p.Y) < sunDot+1 {
			return true
		}
	}
	return false
}

// TestSights: what lines of sight end at.
func TestSights(t *testing.T) {
	glass, err := materials.NewGlazing(.8, 1)
	if err != nil {
		t.Fatal(err)
	}
	sheet, err := materials.NewPerforated(materials.Perforated{OpenShare: .3, HoleDiameterM: .002, ThicknessM: .001, Base: newModel(t).matte()})
	if err != nil {
		t.Fatal(err)
	}
	m := newModel(t)
	pane := func(b materials.BSDF, kind scene.Kind, x, y float64) {
		m.rect(b, kind, r3.Vec{X: x, Y: y, Z: 0}, r3.Vec{X: 1}, r3.Vec{Z: 10})
	}
	pane(glass, scene.Pane, 0, 5)
	pane(sheet, scene.System, 1, 5)
	pane(m.matte(), scene.System, 2, 5)
	pane(m.matte(), scene.Room, 3, 5)
	pane(m.matte(), scene.Surroundings, 4, 5)
	pane(glass, scene.Pane, 4, 4)
	pane(sheet, scene.System, 5, 4)
	pane(m.matte(), scene.Room, 6, 5)
	m.s.HasHorizon = true
	if m.s.Horizon, err = sky.NewHorizon([]sky.HorizonPoint{{AltitudeRad: degrees(10)}, {AzimuthRad: math.Pi, AltitudeRad: degrees(10)}}); err != nil {
		t.Fatal(err)
	}
	w := m.input(r3.Vec{}).World(r3.Vec{})
	for _, c := range []struct {
		name string
		x, z float64 // where the line from 1.5 m up meets the plane y = 5
		want kind
	}{
		{"sky", -1, 5, skyStraight}, {"sky through glass", .5, 5, skyGlass}, {"sky through holes", 1.5, 5, skyCloth},
		{"system", 2.5, 5, shading}, {"room", 3.5, 5, room}, {"surroundings through glass", 4.8, 5, surroundings},
		{"a wall behind holes", 6.5, 5, shading}, {"skyline", -1, 1.8, surroundings}, {"skyline through glass", .5, 1.8, surroundings},
		{"skyline through holes", 1.5, 1.8, shading}, {"ground", -1, -.5, ground},
	} {
		p := r3.Vec{Z: 1.5}
		got := look(w, p, r3.Unit(r3.Sub(r3.Vec{X: c.x, Y: 5, Z: c.z}, p)))
		if got.kind != c.want {
			t.Errorf("%s: got %q, want %q", c.name, kindNames[got.kind], kindNames[c.want])
		}
	}
}

// TestPlaces: the picture can be drawn wherever the sun may run.
func TestPlaces(t *testing.T) {
	for _, c := range []struct {
		lat   float64
		ahead r3.Vec
	}{{90, r3.Vec{Y: -1}}, {-35, r3.Vec{Y: 1}}, {-35, r3.Vec{Z: 1}}, {78, r3.Vec{Z: -1}}} {
		in := newModel(t).input(r3.Vec{})
		in.Sun = func(at time.Time) (r3.Vec, error) { return scene.SunAt(sky.Site{LatitudeDeg: c.lat}, 0, at) }
		in.Point.Ahead = c.ahead
		y := compute(t, in)
		for _, form := range []Form{Ahead, Up} {
			if _, err := y.draw(context.Background(), Sheet{Form: form, WidthPx: 400, World: in.World(r3.Vec{}), FromH: 0, ToH: 24}); err != nil {
				t.Errorf("latitude %g, form %d: %v", c.lat, form, err)
			}
		}
	}
}
