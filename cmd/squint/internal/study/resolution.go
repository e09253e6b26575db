package study

import (
	"math"

	"squint/glare"
	"squint/trace/coeff"
)

// atHalf is DGP of the image with its pixels joined two by two, NaN where that
// cannot be done. Discs of the sun are sources of their own in both.
func (g *standingSink) atHalf(w *sinkScratch, e *coeff.Eye, lum []float32) float64 {
	if g.wide == nil {
		return math.NaN()
	}
	width, half := e.View.Width, e.View.Width/2
	if n := half * (e.View.Height / 2); len(w.wide) != n {
		w.wide = make([]float32, n)
	}
	for y := range e.View.Height / 2 {
		for x := range half {
			// The mean by solid angle, which is 0 outside the circle.
			var sum, omega float64
			for _, px := range [4]int{2*y*width + 2*x, 2*y*width + 2*x + 1, (2*y+1)*width + 2*x, (2*y+1)*width + 2*x + 1} {
				sum += float64(lum[px]) * g.field.Omega[px]
				omega += g.field.Omega[px]
			}
			w.wide[y*half+x] = 0
			if omega > 0 {
				w.wide[y*half+x] = float32(sum / omega)
			}
		}
	}
	dgp, _ := glare.DGPOnly(g.wide, w.wide, w.discs, g.opt, &w.coarse)
	return dgp
}

// biasFrom is the DGP from which the hours count that a view's resolution is
// judged by: what is darker is near no limit. glare.MinDGP bounds the data
// behind DGP.
const biasFrom = glare.MinDGP

// judgeResolution sets the view's Bias: the root mean square, over the hours
// that count, of what joining pixels two by two changes. Where the error
// falls with the pixels' width that is the whole of it; the demo's views at
// 64, 96 and 128 pixels lie 0.5 to 1.2 times it from those at 256.
func (v *ViewResult) judgeResolution() {
	sum, n := 0.0, 0
	for h, d := range v.DGP {
		if d >= biasFrom {
			x := float64(v.Coarse[h] - d)
			sum += x * x
			n++
		}
	}
	bias := 0.0
	if n > 0 {
		bias = math.Sqrt(sum / float64(n))
	}
	for h := range v.Bias {
		v.Bias[h] = float32(bias)
	}
}

// widened are the standard errors of DGP that make z of them as wide as those of
// the samples and the view's bias together; 0 in the dark.
func (v *ViewResult) widened(z float64) []float32 {
	out := make([]float32, len(v.StdErr))
	for h, se := range v.StdErr {
		if out[h] = se; v.DGP[h] != 0 || se != 0 {
			out[h] = se + v.Bias[h]/float32(z)
		}
	}
	return out
}
