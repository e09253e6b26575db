package outlook_test

import (
	"math"
	"testing"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/sky"
	"squint/scene/system"
	"squint/trace/outlook"
)

// TestSunlitUnderShelf: the lower glass under a shelf, both so wide that the
// ends do not matter, over every sunlit hour of a year. The shadow reaches
// depth x tan(profile angle) below the shelf's lower edge; gap x tan of it below
// the shelf's top are lit by the sun that comes through the gap at the glass:
// elementary geometry in the section.
func TestSunlitUnderShelf(t *testing.T) {
	const height, depth, thickness, gap, points = 1.6, 0.6, 0.04, 0.002, 128
	hours := yearOfSuns(t)
	// The formula is told depth, the model depthM; far is the largest difference.
	compare := func(depthM float64) (far, mean float64, n int) {
		m := newModel(t)
		r := m.window(-1, 0, 1, height)
		top := m.window(-1, height, 1, height+1)
		m.shelf(system.LightShelf{OutsideDepthM: depthM, ThicknessM: thickness, ExtendM: 19, GapM: gap}, top, 0)
		w := m.world()
		for _, sun := range hours {
			got := outlook.Sunlit(w, r, sun, points)
			if sun.Z <= 0 || sun.Y <= 0 {
				if !math.IsNaN(got) {
					t.Fatalf("sun %v: got %g, want no value", sun, got)
				}
				continue
			}
			// The shelf runs on for 19 m: beyond a side angle of 86 degrees its end
			// throws the shadow.
			if math.Abs(sun.X) > 14*sun.Y {
				continue
			}
			tan := sun.Z / sun.Y
			shade := math.Min(depth*tan+thickness, height) - math.Min(gap*tan, height)
			want := 1 - shade/height
			far = math.Max(far, math.Abs(got-want))
			mean += want
			n++
		}
		return far, mean / float64(n), n
	}
	far, mean, n := compare(depth)
	t.Logf("%d hours, mean sunlit share %.3f, largest difference %.4f", n, mean, far)
	if n < 1500 || mean < .2 || mean > .8 {
		t.Fatalf("%d hours of mean %.2f prove little", n, mean)
	}
	// Two edges, each found to within 1/n of the area.
	const bound = 2.0 / points
	if far > bound {
		t.Errorf("largest difference %.4f, want at most %.4f", far, bound)
	}
	// Twin: a shelf 3 cm deeper than the formula is told.
	if far, _, _ := compare(depth + .03); far <= bound {
		t.Errorf("a deeper shelf is not noticed: %.4f", far)
	}
}

// yearOfSuns are the sun's hourly directions at 50 degrees north, the model's
// +y pointing south-south-east.
func yearOfSuns(t *testing.T) []r3.Vec {
	t.Helper()
	var suns []r3.Vec
	for h := range 8760 {
		s, err := sky.SunAt(sky.Site{LatitudeDeg: 50}, time.Date(2023, 1, 1, h, 30, 0, 0, time.UTC))
		if err != nil {
			t.Fatal(err)
		}
		sin, cos := math.Sincos(160 * degree)
		d := s.Direction
		suns = append(suns, vec(d.X*cos-d.Y*sin, d.X*sin+d.Y*cos, d.Z))
	}
	return suns
}

// Cloth outdoors lights the glass by what it passes; the skyline hides the sun;
// the pane itself does not count.
func TestSunlitBehindCloth(t *testing.T) {
	m := newModel(t)
	r := m.window(-1, 0, 1, 1)
	m.rect(scene.Pane, m.glass(), vec(-1, 0, 0), vec(2, 0, 0), vec(0, 0, 1))
	sun := r3.Unit(vec(.2, 1, .5))
	near(t, "bare", outlook.Sunlit(m.world(), r, sun, 64), 1, 0)
	sheet := m.finish(materials.NewPerforated(materials.Perforated{OpenShare: .25, HoleDiameterM: .001, Base: matte(t)}))
	m.rect(scene.System, sheet, vec(-9, .1, -9), vec(18, 0, 0), vec(0, 0, 18))
	near(t, "behind a sheet", outlook.Sunlit(m.world(), r, sun, 64), .25, 1e-6)
	h, err := sky.NewHorizon([]sky.HorizonPoint{{AzimuthRad: 0, AltitudeRad: .8}, {AzimuthRad: 3, AltitudeRad: .8}})
	if err != nil {
		t.Fatal(err)
	}
	m.s.Horizon, m.s.HasHorizon = h, true
	near(t, "behind hills", outlook.Sunlit(m.world(), r, sun, 64), 0, 0)
}

// TestSunReaches: hours of sun above an altitude x at a free point facing
// everywhere are 24/pi acos((sin x - sin phi sin delta)/(cos phi cos delta));
// values of the reference sheet, section 7, derived there: latitude 50 and
// 59.33 degrees, declinations -17.3, -10.9 and 0.
func TestSunReaches(t *testing.T) {
	const perHour = 60
	w := newModel(t).world()
	for _, c := range []struct{ lat, decl, min, want float64 }{
		{50, -17.3, 0, 9.0948}, {50, -17.3, 10, 6.5527},
		{50, -10.9, 0, 10.2310}, {50, -10.9, 10, 7.9593},
		{50, 0, 0, 12}, {50, 0, 10, 9.9103},
		{59.33, -17.3, 0, 7.7758}, {59.33, -17.3, 10, 3.7528},
		{59.33, -10.9, 0, 9.4736}, {59.33, -10.9, 10, 6.3767},
		{59.33, 0, 0, 12}, {59.33, 0, 10, 9.3463},
	} {
		suns := day(c.lat, c.decl, perHour)
		got := float64(outlook.SunReaches(w, vec(0, 0, 1), suns, c.min*degree)) / perHour
		const bound = 2 * 0.5 / perHour // rise and set, half a step each
		near(t, "hours of sun", got, c.want, bound+1e-4)
		// Twin: half a degree of altitude more.
		if other := float64(outlook.SunReaches(w, vec(0, 0, 1), suns, (c.min+.5)*degree)) / perHour; math.Abs(other-c.want) <= bound {
			t.Errorf("latitude %g, declination %g, altitude %g: half a degree more changes nothing", c.lat, c.decl, c.min)
		}
	}
	// A wall in the west at the height of the sun takes the afternoon.
	m := newModel(t)
	m.rect(scene.Surroundings, 0, vec(-1, -100, -100), vec(0, 200, 0), vec(0, 0, 200))
	got := float64(outlook.SunReaches(m.world(), vec(0, 0, 1), day(50, 0, perHour), 0)) / perHour
	near(t, "beside a wall", got, 6, .5/perHour+.06) // the sun passes the wall's plane at noon
}

// day is the sun over a solar day at a constant declination, east positive x.
func day(lat, decl, perHour float64) []r3.Vec {
	sinP, cosP := math.Sincos(lat * degree)
	sinD, cosD := math.Sincos(decl * degree)
	var suns []r3.Vec
	for i := range int(24 * perHour) {
		sinH, cosH := math.Sincos((float64(i)+.5)/24/perHour*2*math.Pi - math.Pi)
		suns = append(suns, vec(-cosD*sinH, sinD*cosP-cosD*cosH*sinP, sinD*sinP+cosD*cosH*cosP))
	}
	return suns
}
