package surface

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/photometry"
	"squint/trace"
)

// discPoints is the number of points that stand for the sun's disc; a ray
// takes one of them at random.
const discPoints = 32

// SunRays is the sun of one moment: directions spread over its disc, and
// which of them the ground or the horizon line hides.
type SunRays struct {
	NormalLx float64 // 0 where there is no sun
	patch    int
	dirs     [discPoints]r3.Vec
	hidden   [discPoints]bool
}

// newSunRays spreads the points by a scrambled sequence of the moment.
func (t *Transport) newSunRays(m *scene.Moment) SunRays {
	s := SunRays{NormalLx: m.SunNormalLx}
	if s.NormalLx <= 0 {
		return s
	}
	up := m.Sun
	up.Z = math.Max(up.Z, 0)
	s.patch = t.Patches.Index(r3.Unit(up))
	stream := sampling.Stream3(t.Config.Seed, streamDisc, uint64(m.Step))
	scramble := stream.Uint32()
	all := true
	for i := range s.dirs {
		u, v := sampling.OwenSobol2(uint32(i), scramble)
		s.dirs[i] = trace.ConeDirection(m.Sun, photometry.SunDiameterRad/2, u, v)
		s.hidden[i] = t.Hidden(s.dirs[i])
		all = all && s.hidden[i]
	}
	if all {
		s.NormalLx = 0
	}
	return s
}

// Draw picks a direction to the disc by the low bits of a random number;
// false where the horizon hides it.
func (s *SunRays) Draw(bits uint64) (r3.Vec, bool) {
	i := bits % discPoints
	return s.dirs[i], !s.hidden[i]
}

// Visible reports whether point i of the disc is above the horizon.
func (s *SunRays) Visible(i int) bool { return !s.hidden[i] }

// Dirs are the directions to the points of the disc.
func (s *SunRays) Dirs() []r3.Vec { return s.dirs[:] }

// sunOn samples the direct sun on every active side for all moments of a
// block in batch b: one ray from a random point of the texel to a random point
// of the disc. Sides that look at no sky near the sun, nor have neighbours that
// do, are passed over (neighbours.maySee).
func (t *Transport) sunOn(bl *Block, b int, light *Light) {
	w := t.World
	for i, side := range t.sides {
		sun := &light.Sun[i]
		*sun = Row{}
		light.Lit[i] = 0
		if !t.near.looksUp[i] {
			continue
		}
		k := side / 2
		sign := 1.0
		if side&1 == int32(materials.Back) {
			sign = -1
		}
		for h := range bl.Sun {
			rays := &bl.Sun[h]
			if rays.NormalLx <= 0 || !t.near.maySee(i, rays.patch) {
				continue
			}
			s := sampling.Stream4(t.Config.Seed, streamSun, uint64(bl.Moments[h].Step)<<32|uint64(side), uint64(b))
			dir, ok := rays.Draw(s.Uint64())
			if !ok {
				continue
			}
			p, n := t.Texels.Sample(k, s.Float64(), s.Float64(), s.Float64())
			n = r3.Scale(sign, n)
			cos := r3.Dot(dir, n)
			if cos <= 0 {
				continue
			}
			if tr := w.Transmittance(w.Offset(p, n), dir, math.Inf(1)); tr > 0 {
				sun[h] = float32(rays.NormalLx * cos * tr)
				light.Lit[i] |= 1 << h
			}
		}
	}
}
