package picture

import (
	"context"
	"errors"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/trace"
	"squint/trace/parallel"
)

// Quantity is what a picture shows.
type Quantity int

// The quantities: luminance as the camera sees it, cd/m2, or the illuminance on
// the first surface that is not clear, on the side seen, lx.
const (
	Luminance Quantity = iota
	Illuminance
)

// Options say when a picture is good enough; the first that is reached ends it.
type Options struct {
	Quantity Quantity
	// Error is the median relative standard error to reach; 0 is never reached.
	Error float64
	// Samples is the largest number a pixel, in whole rounds of Batches; 0 means
	// no limit.
	Samples int
	// Enough, if not nil, is asked after every round whether that is all, as
	// where time is up.
	Enough func() bool
	// Progress, if not nil, hears of the picture so far: first within seconds,
	// then from time to time.
	Progress func(p *Picture)
}

// Picture is a rendered picture, pixels row by row from the top left corner.
type Picture struct {
	Width, Height int
	Quantity      Quantity
	// Mean is NaN outside; Batch holds each batch's own, StdErr the standard
	// error of the mean.
	Mean, StdErr []float32
	Batch        [][]float32
	// MedianError is the median over pixels of StdErr / Mean.
	MedianError float64
	Samples     int // a pixel, at least
	// Ended says why no more samples were taken.
	Ended End
}

// End is why a picture was finished.
type End int

// The ends: it was stopped by its context, had time or samples enough, or has
// the error that was asked for.
const (
	Stopped End = iota
	HadTime
	HadSamples
	HasError
)

// ErrNothing is returned where a picture was stopped before its first round.
var ErrNothing = errors.New("stopped before the first samples were complete")

// Render makes a picture. Where the context ends before Options do, what there is
// becomes the picture, once every pixel has samples. It takes about 300 bytes a
// pixel.
func (l *Light) Render(ctx context.Context, c Camera, o Options) (*Picture, error) {
	f, err := l.newFilm(ctx, c, o.Quantity)
	if err != nil {
		return nil, ErrNothing
	}
	for check := 1; l.round(ctx, f) == nil; {
		end := Stopped
		switch {
		case o.Samples > 0 && f.rounds*Batches >= o.Samples:
			end = HadSamples
		case o.Enough != nil && o.Enough():
			end = HadTime
		}
		if f.rounds < check && end == Stopped {
			continue
		}
		p := f.develop(l.stage.cfg.Workers)
		if o.Error > 0 && p.MedianError <= o.Error {
			end = HasError
		}
		p.Ended = end
		if o.Progress != nil {
			o.Progress(p)
		}
		if end != Stopped {
			return p, nil
		}
		// The error falls with the root of the samples, as the filter shrinks
		// rather more slowly: look again shortly before it could suffice.
		check = 2 * f.rounds
		if o.Error > 0 {
			ratio := p.MedianError / o.Error
			check = min(check, max(f.rounds+1, int(0.9*float64(f.rounds)*ratio*ratio)))
		}
	}
	if f.rounds == 0 {
		return nil, ErrNothing
	}
	return f.develop(l.stage.cfg.Workers), nil
}

// round adds one pass to each batch. On an error some rows have their samples and
// others not; each pixel counts its own.
func (l *Light) round(ctx context.Context, f *film) error {
	var photons [Batches]*photonMap
	for b := range Batches {
		var err error
		if photons[b], err = l.photons(ctx, f.rounds*Batches+b, f.rounds, f.quantity == Illuminance); err != nil {
			return err
		}
	}
	err := parallel.Each(ctx, l.stage.cfg.Workers, f.height, func(y int) {
		w := &walker{Light: l}
		w.shared.bright.brights = &l.bright
		for x := range f.width {
			i := y*f.width + x
			r := &f.pixel[i]
			if !r.inside {
				continue
			}
			if r.has {
				l.world.SeeMirrors(r.p, r.n, &w.shared.portals)
				w.shared.bright.from(r.p, r.n)
			}
			for b := range Batches {
				w.batch, w.rays, w.photons = b, &l.sun[(f.rounds*Batches+b)%lanes], photons[b]
				w.sample(f, r, &f.batch[b][i], x, y, f.rounds)
			}
		}
	})
	if err != nil {
		return err
	}
	f.rounds++
	return nil
}

// rimTries bounds the search for a place of a cut pixel inside the picture;
// after that its standing line of sight serves.
const rimTries = 64

// sample adds one sample of pixel (x, y).
func (w *walker) sample(f *film, r *reference, c *cell, x, y, round int) {
	i := uint64(y*f.width + x)
	w.s = sampling.NewStream(w.stage.cfg.Seed, streamSample, i, uint64(w.batch), uint64(round))
	own := sampling.Stream4(w.stage.cfg.Seed, streamPixel, i, uint64(w.batch))
	du, dv := sampling.OwenSobol2(uint32(round), own.Uint32())
	org, dir, ok := f.camera.Through(float64(x)+du, float64(y)+dv)
	for try := 0; !ok && try < rimTries; try++ {
		org, dir, ok = f.camera.Through(float64(x)+w.s.Float64(), float64(y)+w.s.Float64())
	}
	if !ok {
		org, dir, _ = f.camera.Pixel(x, y)
	}
	u, v := w.toward(f, x, y, round)
	c.samples++
	if f.quantity == Illuminance {
		h, ok := w.firstOpaque(org, dir)
		if !ok {
			c.rest += float32(w.moment.GlobalLx)
			return
		}
		w.surface(r, c, &h, h.Side, 1, u, v)
		return
	}
	found := &w.found[0]
	found.Reset()
	w.world.Walk(org, dir, 1, 1, &w.s, found)
	rest := 0.0
	for i := range found.Exits {
		rest += found.Exits[i].Weight * w.outside(found.Exits[i].Dir)
	}
	for i := range found.Shines {
		rest += found.Shines[i].Weight * w.shine(&found.Shines[i])
	}
	c.rest += float32(rest)
	for i := range found.Landings {
		l := found.Landings[i]
		for side, m := range sides(&l.Hit) {
			w.surface(r, c, &l.Hit, side, l.Weight*w.factor(&l.Hit, m)/math.Pi, u, v)
			u, v = w.s.Float64(), w.s.Float64()
		}
	}
}

// tile is the edge, in pixels, of the squares whose gathered rays are points of
// one sequence: the filter adds them up, and so they are spread evenly over the
// hemisphere. Source: Keller & Heidrich 2001, Interleaved sampling, Rendering
// Techniques (from memory).
const tile = 8

// toward is the place in the unit square that chooses a pixel's gathered ray.
func (w *walker) toward(f *film, x, y, round int) (u, v float64) {
	at := uint64(y/tile)<<32 | uint64(x/tile)
	s := sampling.Stream4(w.stage.cfg.Seed, streamTile, at, uint64(w.batch))
	return sampling.OwenSobol2(uint32(round*tile*tile+y%tile*tile+x%tile), s.Uint32())
}

// samePlaneM is how far off a pixel's reference surface a sample may lie and
// still share its light: more than the bend of a curved surface within a pixel,
// and less than the thickness of a table top. Own choice.
const samePlaneM = 0.01

// surface adds the light of one side of a surface met, times weight.
func (w *walker) surface(r *reference, c *cell, h *trace.Hit, side materials.Side, weight, u, v float64) {
	n := normalOn(h, side)
	sun := w.sunOn(h.Point, n) + w.photons.illuminance(h.Point, n)
	c.rest += float32(weight * sun)
	shared := r.has && r.part == h.Part && r3.Dot(r.n, n) > flat && math.Abs(r3.Dot(r3.Sub(h.Point, r.p), r.n)) < samePlaneM
	a := &w.shared
	if !shared {
		a = &w.own
		w.world.SeeMirrors(h.Point, n, &a.portals)
	}
	e, inverse := w.gather(h.Point, n, a, u, v, 1)
	if shared {
		c.share += float32(weight)
		c.gathered += float32(e)
		c.inverse += float32(inverse)
		c.count++
		return
	}
	c.rest += float32(weight * e)
}
