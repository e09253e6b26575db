package annual_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/scene/sky"
)

// TestTexelPatches: texels see the sky as the means of patches. A wall deep in
// a room sees only the lower part of the lowest row, and takes the whole row's
// mean for it. The same rays with finer patches show what that costs, without
// noise of its own; the cost falls with the square of their size, so that those
// of fineTexels keep a sixteenth of it. The limit, 1 % of a sensor's illuminance, is our choice: half
// of what the mirrored-sun room allows in all.
func TestTexelPatches(t *testing.T) {
	const most, finest = .01, fineTexels
	m := newModel(t, .25)
	m.box(r3.Vec{}, r3.Vec{X: 3.6, Y: 8.2, Z: 2.8}, m.matte(.2), m.matte(.7), m.matte(.5), aperture{false, hole{.2, .9, 3.4, 2.6}})
	w := m.world()
	sensors := []scene.Sensor{up(1.8, 1, .8), up(1.8, 3, .8), up(1.8, 5, .8), up(1.8, 7.5, .8)}
	names := []string{"overcast", "clear, sun 20 degrees high ahead", "clear, sun 20 degrees high behind", "clear, sun 50 degrees high aside"}
	moments := []*scene.Moment{skyMoment(0, overcast(t))}
	for i, x := range [][2]float64{{20, 0}, {20, 180}, {50, 90}} {
		s, err := sky.NewCIE(12, direction(deg(x[0]), deg(x[1])), sky.ByHorizontalIlluminance(1))
		if err != nil {
			t.Fatal(err)
		}
		moments = append(moments, skyMoment(i+1, s))
	}
	f := effort{batches: 2, texelSamples: 512, sensorSamples: 4096, fine: finest, seed: 190}
	if testing.Short() {
		f.texelSamples = 128
	}
	f.texels = finest
	want := year(t, w, sensors, moments, f)
	for _, factor := range []int{1, 2} {
		f.texels = factor
		got := year(t, w, sensors, moments, f)
		for k := range moments {
			for i := range sensors {
				bias := got[i][k].mean/want[i][k].mean - 1
				t.Logf("%d patches, %s, y %g: %+.2f %%", sky.NewPatches(factor).Count(), names[k], sensors[i].Position.Y, 100*bias)
				if factor == texelPatchFactor && math.Abs(bias) > most {
					t.Errorf("%d patches, %s, y %g: texels change the illuminance by %+.2f %%, want within %g %% of that with %d patches",
						sky.NewPatches(factor).Count(), names[k], sensors[i].Position.Y, 100*bias, 100*most, sky.NewPatches(finest).Count())
				}
			}
		}
	}
}
