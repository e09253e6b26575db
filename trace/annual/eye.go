package annual

import (
	"math"
	"math/bits"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/photometry"
	"squint/trace/coeff"
	"squint/trace/surface"
)

// discRays is the number of rays a batch sends to the sun's disc from an eye.
const discRays = 4

// eyeScratch holds the images of one eye over a block.
type eyeScratch struct {
	image  [][]surface.Row // [batch][pixel]
	sunlit []surface.Row   // summed over batches
	frame  Frame
}

func (s *eyeScratch) prepare(e *coeff.Eye, batches int) {
	if len(s.image) != batches || len(s.sunlit) != len(e.Inside) {
		s.image = make([][]surface.Row, batches)
		for b := range s.image {
			s.image[b] = make([]surface.Row, len(e.Inside))
		}
		s.sunlit = make([]surface.Row, len(e.Inside))
	}
	size := e.View.Width * e.View.Height
	if len(s.frame.Mean) != size {
		s.frame = Frame{Mean: make([]float32, size), Sunlit: make([]float32, size), Discs: make([]Disc, batches)}
		for range batches {
			s.frame.Batch = append(s.frame.Batch, make([]float32, size))
		}
	}
	for p := range s.sunlit {
		s.sunlit[p] = surface.Row{}
	}
}

// see makes the images of one eye for a block and hands them on.
func (w *worker) see(bl *surface.Block, b block, eye int, lit []uint64) {
	e := w.r.Eyes[eye]
	batches := len(w.lights)
	s := &w.eye
	s.prepare(e, batches)
	for batch := range w.lights {
		w.render(bl, e, eye, batch, lit)
	}
	f := &s.frame
	f.Eye = eye
	inv := 1 / float32(batches)
	for h, m := range bl.Moments {
		f.Moment, f.Index = m, b[h]
		for p, px := range e.Inside {
			var sum float32
			for batch := range s.image {
				v := s.image[batch][p][h]
				f.Batch[batch][px] = v
				sum += v
			}
			f.Mean[px] = sum * inv
			f.Sunlit[px] = s.sunlit[p][h] * inv
		}
		w.discs(e, eye, m, &bl.Sun[h], f)
		w.sink(w.number, f)
	}
}

// render fills one batch's image rows: D from the surfaces, A from the sky,
// B by shadow rays from the first diffuse surface.
func (w *worker) render(bl *surface.Block, e *coeff.Eye, eye, batch int, lit []uint64) {
	eb := &e.Batches[batch]
	light := &w.lights[batch]
	img := w.eye.image[batch]
	var random [surface.Width]sampling.Stream
	for h, m := range bl.Moments {
		random[h] = sampling.NewStream(w.cfg.Seed, streamEyeSun, uint64(eye), uint64(m.Hour), uint64(batch))
	}
	for p := range e.Inside {
		row := surface.Row{}
		surfaces := eb.SurfacesOf(p)
		for i := range surfaces {
			sf := &surfaces[i]
			if sf.Side < 0 {
				continue
			}
			weight := sf.Weight
			if sf.Ground {
				weight *= bl.GroundReflectance
			}
			surface.AddScaled(&row, &light.Rest[sf.Side], weight)
			if lit[sf.Side] != 0 {
				w.sunlit(bl, sf, weight, lit[sf.Side], &random, &row, &w.eye.sunlit[p])
			}
		}
		for _, x := range eb.ExitsOf(p) {
			for h, m := range bl.Moments {
				row[h] += x.Weight * float32(m.Sky.Luminance(x.Dir))
			}
		}
		if g := eb.Below[p]; g > 0 {
			surface.AddScaled(&row, &bl.Below, g)
		}
		img[p] = row
	}
}

// sunlit adds the sun on one surface sample for the moments in mask.
func (w *worker) sunlit(bl *surface.Block, sf *coeff.SurfaceSample, weight float32, mask uint64, random *[surface.Width]sampling.Stream, row, lit *surface.Row) {
	n := vec(sf.Normal)
	p := vec(sf.Point)
	for ; mask != 0; mask &= mask - 1 {
		h := bits.TrailingZeros64(mask)
		rays := &bl.Sun[h]
		dir, ok := rays.Draw(random[h].Uint64())
		if !ok {
			continue
		}
		cos := r3.Dot(n, dir)
		if cos <= 0 {
			continue
		}
		if tr := w.t.World.Transmittance(p, dir, math.Inf(1)); tr > 0 {
			v := weight * float32(rays.NormalLx*cos*tr)
			row[h] += v
			lit[h] += v
		}
	}
}

// discs looks for the sun's own disc from the eye. What is opaque takes from
// its solid angle; glass and cloth take from its luminance.
func (w *worker) discs(e *coeff.Eye, eye int, m *scene.Moment, rays *surface.SunRays, f *Frame) {
	f.Disc = Disc{}
	for b := range f.Discs {
		f.Discs[b] = Disc{}
	}
	if rays.NormalLx <= 0 || r3.Dot(m.Sun, e.View.Direction) <= 0 {
		return
	}
	full := photometry.DiscSolidAngle(photometry.SunDiameterRad)
	lum := photometry.DiscLuminance(m.SunNormalLx, photometry.SunDiameterRad)
	var seen, through float64
	for b := range f.Discs {
		s := sampling.NewStream(w.cfg.Seed, streamDisc, uint64(eye), uint64(m.Hour), uint64(b))
		var open int
		var tau float64
		for range discRays {
			dir, ok := rays.Draw(s.Uint64())
			if !ok || w.t.World.Blocked(e.View.Position, dir, math.Inf(1)) {
				continue
			}
			open++
			tau += w.t.World.Straight(e.View.Position, dir, math.Inf(1))
		}
		if open == 0 || tau == 0 {
			continue
		}
		share := float64(open) / discRays
		f.Discs[b] = Disc{Dir: m.Sun, OmegaSr: full * share, Luminance: lum * tau / float64(open)}
		seen += share
		through += share * tau / float64(open)
	}
	if seen > 0 {
		n := float64(len(f.Discs))
		f.Disc = Disc{Dir: m.Sun, OmegaSr: full * seen / n, Luminance: lum * through / seen}
	}
}

func vec(a [3]float32) r3.Vec {
	return r3.Vec{X: float64(a[0]), Y: float64(a[1]), Z: float64(a[2])}
}
