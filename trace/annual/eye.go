package annual

import (
	"math"
	"math/bits"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene/photometry"
	"squint/trace"
	"squint/trace/coeff"
	"squint/trace/surface"
)

// tileWidth is the number of pixels whose rows are turned round together: a
// cache line of float32.
const tileWidth = 16

// tile holds tileWidth pixels of the images of a block's moments.
type tile [surface.Width][tileWidth]float32

// eyeScratch holds the images of one eye over a block.
type eyeScratch struct {
	image  [][]tile // [batch][tile]
	sunlit []tile   // summed over batches
	frames [framesAtOnce]Frame
	batch  [framesAtOnce][][]float32 // of the frames, all of them
}

// framesAtOnce is the number of moments whose images are taken out of the tiles
// together: their lines lie beside each other.
const framesAtOnce = 4

func (s *eyeScratch) prepare(e *coeff.Eye, batches int) {
	tiles := (len(e.Inside) + tileWidth - 1) / tileWidth
	if len(s.image) != batches || len(s.sunlit) != tiles {
		s.image = make([][]tile, batches)
		for b := range s.image {
			s.image[b] = make([]tile, tiles)
		}
		s.sunlit = make([]tile, tiles)
	}
	size := e.View.Width * e.View.Height
	for k := range s.frames {
		if f := &s.frames[k]; len(f.Mean) != size || len(s.batch[k]) != batches {
			*f = Frame{Mean: make([]float32, size), Sunlit: make([]float32, size)}
			s.batch[k] = nil
			for range batches {
				s.batch[k] = append(s.batch[k], make([]float32, size))
			}
		}
	}
	clear(s.sunlit)
}

// see makes the images of one eye for a block, from so many batches, and hands
// them on.
func (w *worker) see(bl *surface.Block, b block, eye int, lit []uint64, batches int) {
	e := w.r.Eyes[eye]
	s := &w.eye
	s.prepare(e, len(w.lights))
	for batch := range batches {
		w.render(bl, e, eye, batch, lit)
	}
	for first := 0; first < len(bl.Moments); first += framesAtOnce {
		frames := s.frames[:min(framesAtOnce, len(bl.Moments)-first)]
		for k := range frames {
			frames[k].Batch = s.batch[k][:batches]
		}
		s.develop(e, s.image[:batches], frames, first)
		for k := range frames {
			f, h := &frames[k], first+k
			m := bl.Moments[h]
			f.Eye, f.Moment, f.Index = eye, m, b[h]
			f.Discs, w.images = Discs(w.t, e.View.Position, inFront(e.View.Direction), e.Mirrors, m.Sun, &bl.Sun[h], f.Discs[:0], w.images)
			w.sink(w.number, f)
		}
	}
}

// develop takes the images of the moments from first on out of the tiles.
func (s *eyeScratch) develop(e *coeff.Eye, images [][]tile, frames []Frame, first int) {
	inv := 1 / float32(len(images))
	for t := range s.sunlit {
		inside := e.Inside[t*tileWidth : min((t+1)*tileWidth, len(e.Inside))]
		var sum [framesAtOnce][tileWidth]float32
		for batch, image := range images {
			lines := image[t][first : first+len(frames)]
			for i := range lines {
				line, out, sum := &lines[i], frames[i].Batch[batch], &sum[i]
				for k, px := range inside {
					out[px] = line[k]
					sum[k] += line[k]
				}
			}
		}
		lit := s.sunlit[t][first : first+len(frames)]
		for i := range frames {
			f := &frames[i]
			for k, px := range inside {
				f.Mean[px] = sum[i][k] * inv
				f.Sunlit[px] = lit[i][k] * inv
			}
		}
	}
}

// render fills one batch's images: D from the surfaces, A from the sky,
// B by shadow rays from the first diffuse surface.
func (w *worker) render(bl *surface.Block, e *coeff.Eye, eye, batch int, lit []uint64) {
	eb := &e.Batches[batch]
	light := &w.lights[batch]
	var random [surface.Width]sampling.Stream
	for h, m := range bl.Moments {
		random[h] = sampling.NewStream(w.cfg.Seed, streamEyeSun, uint64(eye), uint64(m.Step), uint64(batch))
	}
	var rows [tileWidth]surface.Row
	for t := range w.eye.sunlit {
		pixels := min(tileWidth, len(e.Inside)-t*tileWidth)
		sun := sunOn{tile: &w.eye.sunlit[t]}
		for k := range pixels {
			p := t*tileWidth + k
			row := &rows[k]
			*row = surface.Row{}
			sun.pixel = k
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
				surface.AddScaled(row, &light.Rest[sf.Side], weight)
				if lit[sf.Side] != 0 {
					w.sunlit(bl, sf, weight, lit[sf.Side], &random, row, &sun)
				}
			}
			for _, x := range eb.ExitsOf(p) {
				for h, m := range bl.Moments {
					row[h] += x.Weight * float32(m.Sky.Luminance(x.Dir))
				}
			}
			for _, x := range eb.ShinesOf(p) {
				w.shine(bl, &x, &random, row)
			}
			if g := eb.Below[p]; g > 0 {
				surface.AddScaled(row, &bl.Below, g)
			}
		}
		image := &w.eye.image[batch][t]
		for h := range bl.Moments {
			line := &image[h]
			for k := range rows {
				line[k] = rows[k][h]
			}
		}
	}
}

// sunOn is where the sun on a pixel's first surface is summed.
type sunOn struct {
	tile  *tile
	pixel int
}

// sunlit adds the sun on one surface sample for the moments in mask.
func (w *worker) sunlit(bl *surface.Block, sf *coeff.SurfaceSample, weight float32, mask uint64, random *[surface.Width]sampling.Stream, row *surface.Row, lit *sunOn) {
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
			lit.tile[h][lit.pixel] += v
		}
	}
}

// shine adds the sun as one glossy sample shows it.
func (w *worker) shine(bl *surface.Block, x *coeff.ShineSample, random *[surface.Width]sampling.Stream, row *surface.Row) {
	for h := range bl.Sun {
		rays := &bl.Sun[h]
		if rays.NormalLx <= 0 {
			continue
		}
		dir, ok := rays.Draw(random[h].Uint64())
		if !ok {
			continue
		}
		f := float64(x.Weight) * rays.NormalLx * trace.Shining(x.Gloss, x.Facing, x.Wo, dir)
		if f <= 0 {
			continue
		}
		row[h] += float32(f * w.t.World.Transmittance(x.Point, dir, math.Inf(1)))
	}
}

// inFront tells directions on the forward side of an eye.
func inFront(forward r3.Vec) func(dir r3.Vec) bool {
	return func(dir r3.Vec) bool { return r3.Dot(dir, forward) > 0 }
}

// Discs appends to out the sun's own disc and its images seen from eye, as far
// as sees wants the direction; facets are the mirrors to look at, as
// trace.World.MirrorsFrom finds them. What is opaque takes from the solid angle;
// mirrors, glass and cloth take from the luminance. images is scratch, returned
// for use again.
func Discs(t *surface.Transport, eye r3.Vec, sees func(dir r3.Vec) bool, facets []int32, sun r3.Vec, rays *surface.SunRays, out []Disc, images []trace.Image) ([]Disc, []trace.Image) {
	if rays.NormalLx <= 0 {
		return out, images
	}
	full := photometry.DiscSolidAngle(photometry.SunDiameterRad)
	lum := photometry.DiscLuminance(rays.NormalLx, photometry.SunDiameterRad)
	if sees(sun) {
		if share, tau, seen := discSeen(t, eye, sun, rays); share > 0 && tau > 0 {
			out = append(out, Disc{Dir: sun, OmegaSr: full * share, Luminance: lum * tau, Mirror: -1, Via: t.World.FirstPane(eye, seen)})
		}
	}
	first := len(out)
	images = t.World.Images(eye, sun, facets, t.Hidden, images[:0])
	for _, im := range images {
		if im.Share > 0 && sees(im.Dir) {
			out = append(out, Disc{Dir: im.Dir, OmegaSr: full * im.Share, Luminance: lum * im.Luminous, Mirror: im.Part, Via: im.Via})
		}
	}
	return merge(out, first), images
}

// A disc that an edge crosses is looked at by finePoints lines of sight: by the
// 32 that stand for it elsewhere a fiftieth of it was missed, which is 0.05 of
// DGP where the rest is bright. rimPoints around its edge find those of which
// the 32 see all or nothing: a sliver of a six-hundredth, which 12 do not find,
// is 0.02 of DGP. Own choices, by hours of the gallery's projects.
const (
	rimPoints  = 24
	finePoints = 4096
)

// discSeen is the share of the disc that nothing opaque hides, what is left of
// its light there, and a direction in which it is seen.
func discSeen(t *surface.Transport, eye, sun r3.Vec, rays *surface.SunRays) (share, tau float64, seen r3.Vec) {
	open, looked := 0, 0
	look := func(dir r3.Vec, hidden bool) {
		looked++
		if !hidden && !t.World.Blocked(eye, dir, math.Inf(1)) {
			open++
			seen = dir
			tau += t.World.Straight(eye, dir, math.Inf(1))
		}
	}
	for i, dir := range rays.Dirs() {
		look(dir, !rays.Visible(i))
	}
	cut := open > 0 && open < looked
	frame := materials.NewFrame(sun)
	r, z := math.Sincos(photometry.SunDiameterRad / 2)
	for i := 0; i < rimPoints && !cut; i++ {
		y, x := math.Sincos(2 * math.Pi * float64(i) / rimPoints)
		dir := frame.ToWorld(r3.Vec{X: r * x, Y: r * y, Z: z})
		cut = (open > 0) == (t.Hidden(dir) || t.World.Blocked(eye, dir, math.Inf(1)))
	}
	if cut {
		open, looked, tau = 0, 0, 0
		// The last digits of the first point, which is random, scramble the rest.
		scramble := uint32(math.Float64bits(rays.Dirs()[0].X))
		for i := range uint32(finePoints) {
			u, v := sampling.OwenSobol2(i, scramble)
			dir := trace.ConeDirection(sun, photometry.SunDiameterRad/2, u, v)
			look(dir, t.Hidden(dir))
		}
	}
	if open == 0 {
		return 0, 0, seen
	}
	return float64(open) / float64(looked), tau / float64(open), seen
}

// mergeWithin is the angle within which images in the same mirror are one
// source: neighbouring facets of a curved mirror show parts of one image.
const mergeWithin = 2 * photometry.SunDiameterRad

// merge joins images (from index first on) in one mirror that touch, directly
// or by way of others: solid angles add up, flux is kept. In order, so the
// result is the same on every run.
func merge(d []Disc, first int) []Disc {
	images := append([]Disc(nil), d[first:]...)
	out := d[:first]
	taken := make([]bool, len(images))
	var queue []int
	for i := range images {
		if taken[i] {
			continue
		}
		taken[i] = true
		queue = append(queue[:0], i)
		sum := Disc{Mirror: images[i].Mirror, Via: images[i].Via}
		var flux float64
		for len(queue) > 0 {
			k := queue[0]
			queue = queue[1:]
			im := &images[k]
			sum.OmegaSr += im.OmegaSr
			flux += im.OmegaSr * im.Luminance
			sum.Dir = r3.Add(sum.Dir, r3.Scale(im.OmegaSr*im.Luminance, im.Dir))
			for j := range images {
				if !taken[j] && images[j].Mirror == im.Mirror && r3.Dot(images[j].Dir, im.Dir) >= math.Cos(mergeWithin) {
					taken[j] = true
					queue = append(queue, j)
				}
			}
		}
		if flux > 0 {
			sum.Dir, sum.Luminance = r3.Unit(sum.Dir), flux/sum.OmegaSr
			out = append(out, sum)
		}
	}
	return out
}

func vec(a [3]float32) r3.Vec {
	return r3.Vec{X: float64(a[0]), Y: float64(a[1]), Z: float64(a[2])}
}
