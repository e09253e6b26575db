package surface

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/scenetest"
	"squint/scene/sky"
)

// shelfRoom is facadeRoom with a mirrored shelf inside the window that throws a
// share of what meets it diffusely.
func shelfRoom(t testing.TB, texelM, diffuse float64) *room {
	r := facadeRoom(t, texelM, false)
	m, err := materials.NewMirror(.75, diffuse)
	f := scenetest.Finish(t, r.s, m, err)
	r.rect(r.part("shelf", .1), f, r3.Vec{X: .2, Z: 1.9}, r3.Vec{X: 3.2}, r3.Vec{Y: 1})
	return r
}

// TestWeakParts: a part whose finishes scatter less than a tenth has cells three
// times as large, one with a tenth or with one finish that scatters has its own.
func TestWeakParts(t *testing.T) {
	edge := func(more bool, diffuse float64) float64 {
		r := shelfRoom(t, .3, diffuse)
		part := int32(len(r.s.Parts) - 1)
		if more { // an edge of paint on the shelf
			r.rect(part, r.matte(.5), r3.Vec{X: .2, Z: 1.88}, r3.Vec{X: 3.2}, r3.Vec{Z: .02})
		}
		return cut(r.world(), 1).grid[part].EdgeM[0]
	}
	for _, c := range []struct {
		name    string
		more    bool
		diffuse float64
		want    float64
	}{
		{"0.099", false, .099, .3}, {"0.101", false, .101, .1}, {"0.1", false, .1, .1}, {"painted edge", true, .05, .1},
	} {
		if got := edge(c.more, c.diffuse); math.Abs(got-c.want) > 1e-12 {
			t.Errorf("%s: cells of %g m, want %g", c.name, got, c.want)
		}
	}
	if got := cut(shelfRoom(t, .3, .05).world(), 1).grid[0].EdgeM[0]; got != .3 {
		t.Errorf("the painted floor has cells of %g m, want its own 0.3", got)
	}
}

// TestWeakPartsKeepTheLight: a shelf that throws 0.099 diffusely, and is cut
// coarsely, lights the ceiling above it as one with 0.101 does that is not.
// Between them lies what 0.002 of that light is, in proportion to what 0.101
// brings against hardly any; then 4 standard errors of the difference, and half a
// hundredth for what larger cells blur (own choice).
func TestWeakPartsKeepTheLight(t *testing.T) {
	dome, err := sky.NewCIE(12, r3.Unit(r3.Vec{X: -.2, Y: -.8, Z: .6}), sky.ByHorizontalIlluminance(10000))
	if err != nil {
		t.Fatal(err)
	}
	m := &scene.Moment{Step: 1, Sun: dome.Sun(), SunNormalLx: 60000, Sky: dome, DiffuseLx: 10000, GlobalLx: 10000 + 60000*dome.Sun().Z}
	// ceiling is the mean illuminance of the ceiling within 3 m of the window, by
	// the sides' areas, with its standard error over the batches.
	ceiling := func(diffuse float64) (mean, err float64) {
		const batches = 8
		tr := everySide(t, shelfRoom(t, .3, diffuse).world(), Config{Batches: batches, Samples: 256, Photons: 1 << 14, Seed: 1, Workers: 2})
		bl := tr.NewBlock([]*scene.Moment{m}, nil)
		var sum, square float64
		for b := range batches {
			var light Light
			tr.Solve(bl, b, &light, nil)
			var e, area float64
			for i, side := range tr.sides {
				p, n := tr.Texels.Sample(side/2, .5, .5, .5)
				if side&1 == 1 || tr.World.Scene.Parts[tr.Part(int32(i))].Name != "ceiling" || n.Z > -.9 || p.Y < 0 || p.Y > 3 || p.X < 0 || p.X > 3.6 {
					continue
				}
				a := tr.Texels.AreaM2(side / 2)
				e, area = e+a*float64(light.E[i][0]), area+a
			}
			sum, square = sum+e/area, square+e*e/area/area
		}
		return sum / batches, stdErr(sum, square, batches)
	}
	coarse, errCoarse := ceiling(.099)
	fine, errFine := ceiling(.101)
	none, _ := ceiling(1e-6)
	brings := fine - none
	allowed := 4*math.Hypot(errCoarse, errFine) + .005*fine
	got := coarse + .002/.101*brings - fine
	t.Logf("ceiling: %.1f +- %.1f lx coarse, %.1f +- %.1f fine, %.1f without; off by %.1f, allowed %.1f", coarse, errCoarse, fine, errFine, none, got, allowed)
	if math.Abs(got) > allowed {
		t.Errorf("coarse cells change the ceiling by %.1f lx of %.1f, want at most %.1f", got, fine, allowed)
	}
	// Twin: the diffuse light of the shelf left out.
	if brings <= allowed {
		t.Errorf("twin: the shelf's diffuse light is %.1f lx, which the test would not miss within %.1f", brings, allowed)
	}
}
