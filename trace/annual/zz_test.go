package annual_test

import (
	"testing"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/photometry"
	"squint/scene/view"
	"squint/trace"
)

func TestZZ(t *testing.T) {
	sun := direction(deg(40), deg(15))
	m := &scene.Moment{Sun: sun, SunNormalLx: 4000}
	for i, p := range []mirroredProfile{arcProfile(.1, deg(.1)), parabolaProfile(.08, deg(.1)), {{Y: -.6, Z: 2}, {Y: .6, Z: 2}}} {
		w, _ := whiteRoom(t, .2, p)
		b := &bruteShelf{w: w, m: m, profile: p}
		for _, y := range []float64{1.2, 1.6, 2.4, 3.2} {
			pos := r3.Vec{X: 1.8, Y: y, Z: 2.6}
			v, _ := view.New(pos, r3.Vec{Y: -1}, r3.Vec{Z: 1}, view.Equidistant, math.Pi, 64, 64)
			want := b.images(v)
			f := w.NewImageFinder(pos)
			for _, n := range []int{32, 512, 16384} {
				var a tally
				for k := range 20 {
					scr := uint32(sampling.Hash(3, uint64(k)))
					dirs := make([]r3.Vec, n)
					for j := range dirs {
						u, vv := sampling.OwenSobol2(uint32(j), scr)
						dirs[j] = trace.ConeDirection(sun, photometry.SunDiameterRad/2, u, vv)
					}
					s := 0.0
					for _, im := range f.Find(sun, dirs, func(int) bool { return true }, nil) {
						s += im.Share
					}
					a.add(s)
					if n > 1000 && k > 2 {
						break
					}
				}
				ww := 0.0
				if len(want) > 0 {
					ww = want[0].OmegaSr / photometry.DiscSolidAngle(photometry.SunDiameterRad)
				}
				t.Logf("%d y %.1f n %d share %.4f +- %.4f (sd %.4f) want %.4f", i, y, n, a.mean(), a.stdErr(), a.stdErr()*math.Sqrt(float64(a.n)), ww)
			}
		}
	}
}
