package annual_test

import (
	"fmt"
	"math"
	"sync"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/photometry"
	"squint/scene/view"
	"squint/trace"
)

// bruteShelf answers for a room with a mirrored shelf by following paths
// backwards, with rays and finishes alone: no photons, texels, links or images.
//
// The sun on diffuse surfaces is sampled by rays to its true disc. By way of the
// mirror it is found by chance: the disc is part of the sky, widened to some
// half-angles of equal normal illuminance, and from every point of a path
// directions are drawn in all of the wedge in which it sees the shelf's profile.
// Only along the shelf's axis (x), whose component no mirror here changes, are
// they confined to what the disc spans: others cannot hit it. Elsewhere, rays
// that leave the scene find the sky without the sun, so that nothing counts
// twice. Source of the estimator: Kajiya 1986, The rendering equation, SIGGRAPH.
type bruteShelf struct {
	w       *trace.World
	m       *scene.Moment
	profile mirroredProfile
	radii   []float64 // half-angles of the widened discs
	strips  []int     // directions drawn for each disc at each point of a path
	first   bool      // at a path's first point as well
}

// value is light from sky and directly from the sun, then by way of the mirror
// for each disc.
type value []float64

// wedge is the range of angles in the plane of y and z, from -y upwards, in
// which p sees the profile.
func (b *bruteShelf) wedge(p r3.Vec) (lo, hi float64) {
	lo, hi = math.Inf(1), math.Inf(-1)
	for _, v := range b.profile {
		a := math.Atan2(v.Z-p.Z, p.Y-v.Y)
		lo, hi = math.Min(lo, a), math.Max(hi, a)
	}
	return lo, hi
}

// bounce follows mirrors from org along dir; passed is the share they leave.
func (b *bruteShelf) bounce(org, dir r3.Vec) (h trace.Hit, out r3.Vec, passed float64, hit bool) {
	passed = 1
	for range 50 {
		h, hit = b.w.Closest(org, dir)
		if !hit {
			return h, dir, passed, false
		}
		mirror, _ := h.BSDF.Delta(h.Side, h.Cos)
		if mirror <= 0 {
			return h, dir, passed, true
		}
		passed *= mirror
		dir = r3.Add(dir, r3.Scale(2*h.Cos, h.Facing()))
		org = b.w.Offset(h.Point, h.Facing())
	}
	return h, dir, 0, true
}

// mirrored adds scale times the widened suns' illuminance by the mirror on plane
// n at p.
func (b *bruteShelf) mirrored(p, n r3.Vec, scale float64, s *sampling.Stream, out value) {
	low := math.Inf(1)
	for _, v := range b.profile {
		low = math.Min(low, v.Z)
	}
	if p.Z <= low {
		return // only the underside is seen from below
	}
	lo, hi := b.wedge(p)
	for k, r := range b.radii {
		count := b.strips[k]
		sin := math.Sin(r)
		lum := b.m.SunNormalLx / (math.Pi * sin * sin)
		for i := range count {
			u := b.m.Sun.X + sin*(2*s.Float64()-1)
			psi := lo + (hi-lo)*(float64(i)+s.Float64())/float64(count)
			sp, cp := math.Sincos(psi)
			c := math.Sqrt(math.Max(0, 1-u*u))
			dir := r3.Vec{X: u, Y: -c * cp, Z: c * sp}
			cos := r3.Dot(dir, n)
			if cos <= 0 {
				continue
			}
			if _, last, passed, hit := b.bounce(p, dir); !hit && passed < 1 && r3.Dot(last, b.m.Sun) >= math.Cos(r) {
				out[1+k] += scale * passed * cos * lum * 2 * sin * (hi - lo) / float64(count)
			}
		}
	}
}

// illuminance adds one path's estimate for plane n at p.
func (b *bruteShelf) illuminance(p, n r3.Vec, s *sampling.Stream, out value) {
	scale := 1.0
	for depth := 0; ; depth++ {
		p = b.w.Offset(p, n)
		sun := trace.ConeDirection(b.m.Sun, photometry.SunDiameterRad/2, s.Float64(), s.Float64())
		if cos := r3.Dot(sun, n); cos > 0 {
			if tr := b.w.Transmittance(p, sun, math.Inf(1)); tr > 0 {
				out[0] += scale * b.m.SunNormalLx * cos * tr
			}
		}
		if depth > 0 || b.first {
			b.mirrored(p, n, scale, s, out)
		}
		h, dir, passed, hit := b.bounce(p, trace.CosineDirection(n, s.Float64(), s.Float64()))
		if !hit {
			if dir.Z > 0 {
				out[0] += scale * passed * math.Pi * b.m.Sky.Luminance(dir)
			}
			return
		}
		rho, _ := h.BSDF.Lambert(h.Side)
		scale *= passed * rho
		if depth >= 2 {
			keep := math.Min(1, scale)
			if s.Float64() >= keep {
				return
			}
			scale /= keep
		}
		if scale <= 0 {
			return
		}
		p, n = h.Point, h.Facing()
	}
}

// sensor is the mean of paths estimates in each of some independent batches.
func (b *bruteShelf) sensor(sn scene.Sensor, index, batches, paths int, seed uint64) []value {
	out := make([]value, batches)
	inParallel(batches, func(k int) {
		s := sampling.Stream4(seed, 951, uint64(index), uint64(k))
		v := make(value, 1+len(b.radii))
		for range paths {
			b.illuminance(sn.Position, sn.Normal, &s, v)
		}
		for i := range v {
			v[i] /= float64(paths)
		}
		out[k] = v
	})
	return out
}

// picture traces a fisheye in batches of some samples a pixel; mirrored sun is
// that of disc number radius.
func (b *bruteShelf) picture(v view.View, batches, samples, radius int, seed uint64) picture {
	out := picture{mean: make([]float32, v.Width*v.Height), batch: make([][]float32, batches)}
	inParallel(batches, func(k int) {
		img := make([]float32, v.Width*v.Height)
		for px := range img {
			ix, iy := px%v.Width, px/v.Width
			if v.SolidAngle(ix, iy) <= 0 {
				continue
			}
			s := sampling.Stream4(seed, 952, uint64(px), uint64(k))
			var sum float64
			n := 0
			for range samples {
				dir, ok := v.Ray(float64(ix)+s.Float64(), float64(iy)+s.Float64())
				if !ok {
					continue
				}
				n++
				h, last, passed, hit := b.bounce(v.Position, dir)
				if !hit {
					if last.Z > 0 {
						sum += passed * b.m.Sky.Luminance(last)
					}
					continue
				}
				e := make(value, 1+len(b.radii))
				b.illuminance(h.Point, h.Facing(), &s, e)
				rho, _ := h.BSDF.Lambert(h.Side)
				sum += passed * rho / math.Pi * (e[0] + e[1+radius])
			}
			if n > 0 {
				img[px] = float32(sum / float64(n))
			}
		}
		out.batch[k] = img
	})
	for _, img := range out.batch {
		for i := range img {
			out.mean[i] += img[i] / float32(batches)
		}
	}
	out.discs = b.images(v.Position, v.Direction)
	return out
}

// inParallel works on 0 to n-1 with two goroutines.
func inParallel(n int, work func(i int)) {
	var wg sync.WaitGroup
	for g := range 2 {
		wg.Add(1)
		go func() {
			defer wg.Done()
			for i := g; i < n; i += 2 {
				work(i)
			}
		}()
	}
	wg.Wait()
}

// richardson extrapolates values of two discs, the second with half the radius
// of the first, to a disc of another radius: the error of a widened disc is of
// second order. Source: Richardson 1911, The approximate arithmetical solution by
// finite differences, Phil. Trans. Royal Society A 210.
func richardson(wide, narrow, narrowRadius, radius float64) float64 {
	r := radius / narrowRadius
	return narrow + (narrow-wide)*(1-r*r)/3
}

// TestBruteShelfPlane holds the brute force itself against the image source of a
// level mirror: the ceiling's illuminance by the mirror in the middle of its
// patch is E_n rho sin(altitude), and the widened discs' differ by their mean
// sine only, 1 - r^2/4 of it for a disc of even luminance against its centre.
func TestBruteShelfPlane(t *testing.T) {
	w, _ := whiteRoom(t, .5, mirroredProfile{{Y: -.6, Z: 2}, {Y: .6, Z: 2}})
	m := sunMoment(t, 1, deg(40), 0, 50)
	b := bruteShelf{w: w, m: m, profile: mirroredProfile{{Y: -.6, Z: 2}, {Y: .6, Z: 2}},
		radii: []float64{deg(5), deg(2.5), deg(1.25), photometry.SunDiameterRad / 2}, strips: []int{64, 64, 64, 64}}
	n := 4000
	rows := parity{group: "brute force, plane mirror"}
	for k, r := range b.radii {
		var a tally
		for i := range n {
			s := sampling.Stream3(7, uint64(i), uint64(k))
			out := make(value, 5)
			b.mirrored(r3.Vec{X: 1.8, Y: .86, Z: 2.799}, r3.Vec{Z: -1}, 1, &s, out)
			a.add(out[1+k])
		}
		want := 50 * .9 * math.Sin(deg(40))
		rows.add(outcome{fmt.Sprintf("disc of radius %.3f degrees", r*180/math.Pi), want, a.mean(), a.stdErr(), want * r * r, n - 1})
	}
	rows.judge(t, .1)
}
