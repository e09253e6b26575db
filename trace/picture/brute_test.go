package picture

import (
	"context"
	"math"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"

	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/view"
	"squint/trace"
	"squint/trace/parallel"
)

// plain renders with the path tracer, which knows no texels and averages over no
// neighbours: mean and standard error by pixel.
func plain(w *trace.World, m *scene.Moment, v view.View, samples int) (mean, se []float64) {
	const batches = 32
	mean, se = make([]float64, v.Width*v.Height), make([]float64, v.Width*v.Height)
	_ = parallel.Each(context.Background(), 2, len(mean), func(px int) {
		if v.SolidAngle(px%v.Width, px/v.Width) <= 0 {
			return
		}
		tr := trace.NewTracer(w, []*scene.Moment{m})
		tr.Portals = true
		var sum, square float64
		for b := range batches {
			s := sampling.Stream3(99, uint64(px), uint64(b))
			out := []float64{0}
			for range samples / batches {
				dir, ok := v.Ray(float64(px%v.Width)+s.Float64(), float64(px/v.Width)+s.Float64())
				for !ok {
					dir, ok = v.Ray(float64(px%v.Width)+s.Float64(), float64(px/v.Width)+s.Float64())
				}
				tr.Luminance(v.Position, dir, 1, &s, out)
			}
			x := out[0] / float64(samples/batches)
			sum += x
			square += x * x
		}
		mean[px] = sum / batches
		se[px] = math.Sqrt(math.Max(0, square/batches-mean[px]*mean[px]) / (batches - 1))
	})
	return mean, se
}

// What a picture may be off by beside its noise, as a share of the luminance:
// light of the second surface that is read from a texel's mean (0.01, what
// DEVELOPERS.md finds for texels of this size against two other estimators), and
// what the filter blurs: at the edge of a surface its disc has one half, whose
// centroid lies 4 r/(3 pi) inside, with weights 1-d^2/r^2 less than that, 0.34
// r; illuminance changes there by at most its own size over the mean distance R,
// and r = 0.15 R: 0.05. Over a picture edges are few, and inside a surface the
// first order cancels: 0.15^2/2 = 0.011 is left. The filter's least width of 2.5
// pixels has shrunk to 1.25 at the 512 samples here, where a neighbour counts
// 0.36 beside the pixel's own 1; pixels as wide as these, 9 degrees, differ by
// little else than edges, which it does not cross.
const (
	texelBias  = 0.01
	edgeBias   = 0.05
	insideBias = 0.011
)

// holds compares a picture with the plain one: each pixel, and the mean of the
// relative differences. Family error 0.01: half of it over the pixels (Sidak),
// half for the mean.
// A picture's error has 7 degrees of freedom; the plain one's is small.
func holds(t testing.TB, p *Picture, mean, se []float64) (pixels int, ratio float64, wrong bool) {
	var n, far, own float64
	for i := range mean {
		if mean[i] > 0 {
			n++
		}
	}
	var by [Batches]float64
	student := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: Batches - 1}
	limit := student.Quantile(1 - (1-math.Pow(1-0.005, 1/n))/2)
	for i := range mean {
		if mean[i] <= 0 {
			continue
		}
		d := math.Abs(float64(p.Mean[i]) - mean[i])
		bound := limit*math.Hypot(float64(p.StdErr[i]), se[i]) + (texelBias+edgeBias)*mean[i]
		if d > bound {
			pixels++
		}
		far = math.Max(far, d/bound)
		for b := range by {
			by[b] += (float64(p.Batch[b][i])/mean[i] - 1) / n
		}
		own += se[i] * se[i] / (mean[i] * mean[i] * n * n)
	}
	// Pixels share gathered rays, so the mean's error comes from the batches.
	var square float64
	for _, r := range by {
		ratio += r / Batches
	}
	for _, r := range by {
		square += (r - ratio) * (r - ratio) / (Batches * (Batches - 1))
	}
	allowed := student.Quantile(1-0.005/2)*math.Sqrt(square+own) + texelBias + insideBias
	t.Logf("%d pixels, %d beyond their bound (largest %.2f of it); mean relative difference %+.4f, allowed %.4f", int(n), pixels, far, ratio, allowed)
	return pixels, ratio, pixels > 0 || math.Abs(ratio) > allowed
}

// TestAgainstPlainTracer: a small picture agrees with the plain path tracer
// pixel by pixel; twins with a planted defect do not.
func TestAgainstPlainTracer(t *testing.T) {
	w, m := office(t), sunny(t)
	v := eye(t, 20)
	samples := 1 << 15
	if testing.Short() {
		samples = 1 << 13
	}
	mean, se := plain(w, m, v, samples)
	l := light(t, w, m, 2, v)
	render := func() *Picture {
		p, err := l.Render(context.Background(), v, Options{Samples: 512})
		if err != nil {
			t.Fatal(err)
		}
		return p
	}
	p := render()
	t.Logf("median error %.4f", p.MedianError)
	if _, _, wrong := holds(t, p, mean, se); wrong {
		t.Error("the picture differs from the plain tracer's")
	}
	// A corner of ceiling and walls from nearby, where surfaces read each other
	// closer than a texel's edge.
	corner, err := view.New(at(1, 4, 2.2), at(-1, 1, 0.8), at(0, 0, 1), view.Perspective, 0.5, 16, 16)
	if err != nil {
		t.Fatal(err)
	}
	cornerMean, cornerSE := plain(w, m, corner, samples)
	near, err := light(t, w, m, 2, corner).Render(context.Background(), corner, Options{Samples: 256})
	if err != nil {
		t.Fatal(err)
	}
	t.Logf("corner: median error %.4f", near.MedianError)
	if _, _, wrong := holds(t, near, cornerMean, cornerSE); wrong {
		t.Error("the corner differs from the plain tracer's")
	}
	// Twin: the surfaces' exchange 10 % too bright.
	for b := range l.rest {
		for i := range l.rest[b] {
			l.rest[b][i] *= 1.1
		}
	}
	if _, _, wrong := holds(t, render(), mean, se); !wrong {
		t.Error("twin with light between surfaces 10 % too strong was accepted")
	}
	for b := range l.rest {
		for i := range l.rest[b] {
			l.rest[b][i] /= 1.1
		}
	}
	// Twin: no sun on the second surface.
	clear(l.lit)
	if _, _, wrong := holds(t, render(), mean, se); !wrong {
		t.Error("twin without sun on the second surface was accepted")
	}
}
