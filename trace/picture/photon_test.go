package picture

import (
	"context"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
	"gonum.org/v1/gonum/stat/distuv"

	"squint/materials"
	"squint/scene"
	"squint/scene/sky"
	"squint/scene/view"
	"squint/trace"
)

// thrown is a level mirror of 1 m2 that throws a sun 45 degrees high onto a
// ceiling 2 m above it, which does not shade it: the patch has 1 m2 and, for
// the law of reflection, the mirror's own illuminance times its reflectance.
// Penumbra and edges apart the value is exact.
func thrown(t testing.TB, rho float64) (*trace.World, *scene.Moment, view.View) {
	m := newModel(t)
	m.rect(m.finish(materials.NewMirror(rho, 0)), 0.2, at(0, 0, 1), at(1, 0, 0), at(0, 1, 0))
	m.rect(m.matte(0.5), 0.2, at(1.5, -0.5, 3), at(0, 2, 0), at(2, 0, 0))
	dome, err := sky.NewOvercastTraditional(sky.ByHorizontalIlluminance(0))
	if err != nil {
		t.Fatal(err)
	}
	sun := r3.Unit(at(-1, 0, 1))
	// 1.6 m of the ceiling are 1.6 m above the eye.
	v, err := view.New(at(2.5, 0.5, 1.4), at(0, 0, 1), at(0, 1, 0), view.Perspective, 2*math.Atan(0.5), 64, 64)
	if err != nil {
		t.Fatal(err)
	}
	return trace.Accelerate(m.s, 2), &scene.Moment{Step: 5, Sun: sun, SunNormalLx: 1000 * math.Sqrt2, Sky: dome}, v
}

// within tells whether the mean of batches lies within a two-sided 0.995 limit
// of the truth (7 degrees of freedom; two quantities make 0.01 in all).
func within(batch [Batches]float64, truth, bias float64) (mean, se float64, ok bool) {
	var square float64
	for _, x := range batch {
		mean += x / Batches
	}
	for _, x := range batch {
		square += (x - mean) * (x - mean) / (Batches * (Batches - 1))
	}
	se = math.Sqrt(square)
	limit := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: Batches - 1}.Quantile(1 - 0.005/2)
	return mean, se, math.Abs(mean-truth) <= limit*se+bias
}

// TestThrownSun: the patch that a mirror throws has the exact illuminance in its
// inner part, and in all the exact flux; twins in which each photon weighs 3 %
// more do not.
func TestThrownSun(t *testing.T) {
	const rho, lx = 0.85, 1000.0
	w, m, v := thrown(t, rho)
	check := func(weight float64) (ok bool) {
		m := *m
		m.SunNormalLx *= weight
		l := light(t, w, &m, 2, v)
		p, err := l.Render(context.Background(), v, Options{Quantity: Illuminance, Samples: 32})
		if err != nil {
			t.Fatal(err)
		}
		pixelM := 1.6 / float64(p.Width)
		var inner, flux [Batches]float64
		n := 0.0
		for y := range p.Height {
			for x := range p.Width {
				// Up in the picture is +y, left is towards x of the cross product.
				h, _ := w.Closest(v.Position, mustPixel(v, x, y))
				fromEdge := math.Min(0.5-math.Abs(h.Point.X-2.5), 0.5-math.Abs(h.Point.Y-0.5))
				for b := range flux {
					e := float64(p.Batch[b][y*p.Width+x])
					flux[b] += e * pixelM * pixelM
					// The radius and the penumbra, 0.05 and 0.03 m, do not reach farther in.
					if fromEdge > 0.1 {
						inner[b] += e
					}
				}
				if fromEdge > 0.1 {
					n++
				}
			}
		}
		for b := range inner {
			inner[b] /= n
		}
		e, eSE, okInner := within(inner, rho*lx, 0)
		f, fSE, okFlux := within(flux, rho*lx, 0)
		t.Logf("weight %.2f: inside %.1f +- %.1f lx, flux %.1f +- %.1f lm, exact %.1f", weight, e, eSE, f, fSE, rho*lx)
		return okInner && okFlux
	}
	if !check(1) {
		t.Error("the thrown sun is off")
	}
	if check(1.03) {
		t.Error("twin with photons 3 % too strong was accepted")
	}
}

func mustPixel(v view.View, x, y int) r3.Vec {
	_, dir, _ := v.Pixel(x, y)
	return dir
}

// TestRadius: the series shrinks as its source says: r[i]^2/r[0]^2 is the
// product of (k+2/3)/(k+1), which falls as i^(-1/3).
func TestRadius(t *testing.T) {
	square := func(i int) float64 { r := radiusM(i); return r * r }
	if got := square(1) / square(0); math.Abs(got-(1+2.0/3)/2) > 1e-12 { // Knaus & Zwicker 2011 (from memory), i = 1
		t.Errorf("second round: got %g of the first square, want 5/6", got)
	}
	if got := square(8000) / square(1000); math.Abs(got-0.5) > 1e-3 { // 8^(-1/3), exact limit
		t.Errorf("from 1000 to 8000 rounds: got a factor %g, want 1/2", got)
	}
}
