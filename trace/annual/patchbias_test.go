package annual_test

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/sky"
)

// The annual engine averages the sky over patches. What that costs at a sensor
// follows from the geometry alone: the sensor's weights by patch, found here by
// quadrature and not by the engine, times the patches' mean luminance.

// patchWeights integrates the cosine at the sensor over what an aperture shows
// of each patch, in sr; share weights a direction by its cosine on the
// aperture's plane (glass), nil for none.
func patchWeights(p *sky.Patches, at, normal r3.Vec, org, u, v, out r3.Vec, share func(cos float64) float64) []float64 {
	const n = 300
	w := make([]float64, p.Count())
	area := r3.Norm(r3.Cross(u, v)) / n / n
	for i := range n {
		for j := range n {
			q := r3.Add(org, r3.Add(r3.Scale((float64(i)+0.5)/n, u), r3.Scale((float64(j)+0.5)/n, v)))
			d := r3.Sub(q, at)
			r2 := r3.Norm2(d)
			d = r3.Unit(d)
			cos, co := r3.Dot(d, normal), r3.Dot(d, out)
			k := p.Index(d)
			if cos <= 0 || co <= 0 || k < 0 {
				continue
			}
			x := cos * co * area / r2
			if share != nil {
				x *= share(co)
			}
			w[k] += x
		}
	}
	return w
}

// openWeights does the same for the whole sky but what lies below the altitude
// that block gives for an azimuth.
func openWeights(p *sky.Patches, normal r3.Vec, block func(azimuth float64) float64) []float64 {
	const n = 600
	w := make([]float64, p.Count())
	for i := range n {
		az := (float64(i) + 0.5) / n * 2 * math.Pi
		lo := math.Sin(block(az))
		for j := range n {
			z := lo + (1-lo)*(float64(j)+0.5)/n
			s, c := math.Sincos(az)
			h := math.Sqrt(1 - z*z)
			d := r3.Vec{X: h * s, Y: h * c, Z: z}
			if cos := r3.Dot(d, normal); cos > 0 {
				w[p.Index(d)] += cos * (1 - lo) * 2 * math.Pi / n / n
			}
		}
	}
	return w
}

// patched is the illuminance of a sensor under a sky averaged over patches.
func patched(p *sky.Patches, w []float64, s *sky.Sky) float64 {
	mean := make([]float64, p.Count())
	p.Average(s, mean)
	var e float64
	for k := range w {
		e += w[k] * mean[k]
	}
	return e
}
