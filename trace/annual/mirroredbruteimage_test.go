package annual_test

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/photometry"
	"squint/trace/annual"
)

// images is what a point sees of the true disc in the mirror, taken as one
// source: a fine grid of lines of sight over the part of the wedge in which a
// coarse one, a tenth of the smallest image here apart, finds it.
func (b *bruteShelf) images(p, facing r3.Vec) []annual.Disc {
	const coarse, across, along = 1e-4, 64, 4000
	lo, hi := b.wedge(p)
	first, last := math.Inf(1), math.Inf(-1)
	for psi := lo; psi < hi; psi += coarse {
		if b.sees(p, psi, 8).OmegaSr > 0 {
			first, last = math.Min(first, psi), math.Max(last, psi)
		}
	}
	if first > last {
		return nil
	}
	lo, hi = first-2*coarse, last+2*coarse
	sums := make([]annual.Disc, along)
	inParallel(along, func(i int) { sums[i] = b.sees(p, lo+(hi-lo)*(float64(i)+.5)/along, across) })
	var all annual.Disc
	for _, d := range sums {
		all.OmegaSr += d.OmegaSr * (hi - lo) / along
		all.Luminance += d.Luminance * (hi - lo) / along
		all.Dir = r3.Add(all.Dir, d.Dir)
	}
	if all.OmegaSr == 0 || r3.Dot(all.Dir, facing) <= 0 {
		return nil
	}
	all.Dir = r3.Unit(all.Dir)
	all.Luminance *= photometry.DiscLuminance(b.m.SunNormalLx, photometry.SunDiameterRad) / all.OmegaSr
	return []annual.Disc{all}
}

// sees integrates, over the axis of the shelf, what p sees of the disc at angle
// psi of the wedge: solid angle by radian, the same times the share the mirror
// leaves, and its direction.
func (b *bruteShelf) sees(p r3.Vec, psi float64, across int) (d annual.Disc) {
	sin := math.Sin(photometry.SunDiameterRad / 2)
	sp, cp := math.Sincos(psi)
	for j := range across {
		u := b.m.Sun.X + sin*(2*(float64(j)+.5)/float64(across)-1)
		c := math.Sqrt(1 - u*u)
		dir := r3.Vec{X: u, Y: -c * cp, Z: c * sp}
		if _, out, passed, hit := b.bounce(p, dir); !hit && passed < 1 && r3.Dot(out, b.m.Sun) >= math.Cos(photometry.SunDiameterRad/2) {
			d.OmegaSr += 2 * sin / float64(across)
			d.Luminance += 2 * sin / float64(across) * passed
			d.Dir = r3.Add(d.Dir, r3.Scale(passed, dir))
		}
	}
	return d
}
