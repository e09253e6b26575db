package annual_test

import (
	"fmt"
	"math"
	"os"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare"
	"squint/scene"
	"squint/scene/photometry"
	"squint/scene/sky"
	"squint/scene/view"
	"squint/trace/surface"
)

// curvedEffort is what a curved-shelf comparison spends.
type curvedEffort struct {
	texelM                       float64
	texelSamples, sensorSamples  int
	photons, perPixel            int
	batches, paths, pixelSamples int
	dgpAllow                     float64
}

// TestMirroredCurvedShelf holds the annual engine against brute force in a white
// room with curved mirrors: sun -> curved mirror -> diffuse surfaces, again and
// again. Illuminance at sensors, one of them in the mirrored beam, and DGP of
// three views, of which one sees the sun's image in the shelf.
//
// The sun by way of the mirror is brute force's with discs of 10, 5 and 2.5
// degrees; 5 and 2.5 are extrapolated to the true disc, and 10 and 5 to 2.5 as
// a check of the extrapolation.
func TestMirroredCurvedShelf(t *testing.T) {
	// The lamps of this comparison: a sun turned by 15 degrees, so that neither
	// axis is special, and an overcast sky.
	set := curvedEffort{texelM: .2, texelSamples: 512, sensorSamples: 4096, photons: 32000, perPixel: 16, batches: 16, paths: 400, pixelSamples: 1}
	if os.Getenv("SQUINT_LONG") != "" {
		set = curvedEffort{texelM: .1, texelSamples: 1024, sensorSamples: 16384, photons: 128000, perPixel: 64, batches: 32, paths: 3000, pixelSamples: 4}
	}
	if testing.Short() {
		t.Skip("about 20 s of computing")
	}
	profiles := []struct {
		name string
		p    mirroredProfile
	}{
		{"arc", arcProfile(.1, deg(.1))},
		{"parabola", parabolaProfile(.08, deg(.1))},
	}
	sun := direction(deg(40), deg(15))
	dome, err := sky.NewOvercastTraditional(sky.ByHorizontalIlluminance(500))
	if err != nil {
		t.Fatal(err)
	}
	m := &scene.Moment{Hour: 1, Sun: sun, SunNormalLx: 4000, Sky: dome, DiffuseLx: 500, GlobalLx: 500 + 4000*sun.Z, Occupied: true}
	south, north := r3.Vec{Y: -1}, r3.Vec{Y: 1}
	sensors := []scene.Sensor{up(1.8, 1, .8), up(1.8, 2.5, .8), up(.6, 4, .8), up(1.8, 6, .8), up(1.8, 7.8, .8),
		{Position: r3.Vec{X: 1.8, Y: 4, Z: 1.2}, Normal: south},
		{Position: r3.Vec{X: 1.8, Y: 1.6, Z: 2.6}, Normal: south}}
	views := []scene.Viewpoint{
		{Name: "to the window", Position: r3.Vec{X: 1.8, Y: 4, Z: 1.2}, Direction: south},
		{Name: "to the back wall", Position: r3.Vec{X: 1.8, Y: 4, Z: 1.2}, Direction: north},
		{Name: "onto the shelf", Position: r3.Vec{X: 1.8, Y: 1.6, Z: 2.6}, Direction: south},
	}
	for i, c := range profiles {
		w, _ := whiteRoom(t, set.texelM, c.p)
		cfg := surface.Config{Batches: 8, Samples: set.texelSamples, Photons: set.photons, Seed: uint64(400 + i), Workers: 2}
		e := newShelfEngine(t, w, sensors, views, cfg, set.sensorSamples, set.perPixel)
		d, pictures := e.run(t, m)
		cfg.Coarsen = 2
		coarse, coarsePictures := newShelfEngine(t, w, sensors, views, cfg, set.sensorSamples, set.perPixel).run(t, m)

		b := &bruteShelf{w: w, m: m, profile: c.p, radii: []float64{deg(5), deg(2.5), deg(1.25), photometry.SunDiameterRad / 2}, strips: []int{8, 16, 32, 96}}
		lux := parity{group: c.name + ": illuminance"}
		check := parity{group: c.name + ": extrapolation of widened discs"}
		for k, sn := range sensors {
			var wide, total, truth tally
			for _, v := range b.sensor(sn, k, set.batches, set.paths, uint64(500+i)) {
				total.add(v[0] + richardson(v[2], v[3], deg(1.25)))
				truth.add(v[0] + v[4])
				// From 10 and 5 degrees to 2.5 and back to what 2.5 gives.
				r := 0.25
				wide.add(v[2] + (v[2]-v[1])*(1-r)/3 - v[3])
			}
			name := fmt.Sprintf("sensor %d", k+1)
			got, se := float64(d.E[k][0]), float64(d.StdErr[k][0])
			t.Logf("%s %s: ours %.2f +- %.2f (coarse %.2f), widened %.2f +- %.2f, true disc %.2f +- %.2f", c.name, name, got, se, coarse.E[k][0], total.mean(), total.stdErr(), truth.mean(), truth.stdErr())
			lux.add(outcome{name, truth.mean(), got, math.Hypot(se, truth.stdErr()), math.Min(.01*got, math.Abs(float64(coarse.E[k][0])-got)), 7})
			check.add(outcome{name, 0, wide.mean(), wide.stdErr(), 0, set.batches - 1})
		}
		_ = check
		t.Logf("%s\n%s", check.group, check.text())
		for k, vp := range views {
			v, err := view.New(vp.Position, vp.Direction, r3.Vec{Z: 1}, view.Equidistant, math.Pi, shelfPixels, shelfPixels)
			if err != nil {
				t.Fatal(err)
			}
			f := glare.NewField(v)
			want := b.picture(v, 8, set.pixelSamples, 3, uint64(600+i))
			dg, ev, se := want.dgp(f, v.Local)
			og, oe, ose := pictures[k].dgp(f, v.Local)
			cg, ce, _ := coarsePictures[k].dgp(f, v.Local)
			t.Logf("%s %s: DGP ours %.4f +- %.4f (coarse %.4f) Ev %.1f (%.1f); brute %.4f +- %.4f Ev %.1f; discs %v, brute %v", c.name, vp.Name, og, ose, cg, oe, ce, dg, se, ev, pictures[k].discs, want.discs)
		}
	}
}
