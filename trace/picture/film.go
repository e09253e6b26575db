package picture

import (
	"context"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/trace"
	"squint/trace/parallel"
)

// film collects samples by pixel.
type film struct {
	width, height int
	camera        Camera
	quantity      Quantity
	pixel         []reference
	batch         [Batches][]cell
	rounds        int
}

// reference is the flat surface that stands for a pixel: samples that meet it
// share their gathered light with neighbours that see it too.
type reference struct {
	inside, has bool
	part        int32
	p, n        r3.Vec
}

// cell is what one batch's samples of a pixel add up to.
type cell struct {
	// rest is the light that the filter leaves alone; share the luminance per
	// illuminance of the reference surface; gathered the sum of count samples of
	// its illuminance; inverse their 1/distance.
	rest, share, gathered, inverse float32
	count                          int32
	samples                        int32
}

func (l *Light) newFilm(ctx context.Context, c Camera, q Quantity) (*film, error) {
	f := &film{camera: c, quantity: q}
	f.width, f.height = c.Size()
	f.pixel = make([]reference, f.width*f.height)
	for b := range f.batch {
		f.batch[b] = make([]cell, len(f.pixel))
	}
	err := parallel.Each(ctx, l.stage.cfg.Workers, f.height, func(y int) {
		var found trace.Found
		for x := range f.width {
			r := &f.pixel[y*f.width+x]
			org, dir, ok := c.Pixel(x, y)
			if !ok {
				continue
			}
			r.inside = true
			if q == Illuminance {
				if h, ok := l.firstOpaque(org, dir); ok {
					*r = reference{true, true, h.Part, h.Point, h.Facing()}
				}
				continue
			}
			s := sampling.Stream3(l.stage.cfg.Seed, streamReference, uint64(y*f.width+x))
			found.Reset()
			l.world.Walk(org, dir, 1, 1, &s, &found)
			most := 0.0
			for i := range found.Landings {
				h := &found.Landings[i].Hit
				for side, m := range sides(h) {
					if k := m * found.Landings[i].Weight; k > most {
						most = k
						*r = reference{true, true, h.Part, h.Point, normalOn(h, side)}
					}
				}
			}
		}
	})
	if err != nil {
		return nil, err
	}
	return f, l.leaveCuts(ctx, f)
}

// mostClear is the number of clear surfaces that one line of sight passes: many
// more than panes stand behind one another. Own choice.
const mostClear = 64

// firstOpaque is the first surface that is not clear, as glass is; none behind
// mostClear clear ones.
func (l *Light) firstOpaque(org, dir r3.Vec) (trace.Hit, bool) {
	for range mostClear {
		h, ok := l.world.Closest(org, dir)
		if !ok {
			return h, false
		}
		rho, tau := h.BSDF.Lambert(h.Side)
		if _, through := h.BSDF.Delta(h.Side, h.Cos); through <= 0 || rho > 0 || tau > 0 {
			return h, true
		}
		org = l.world.Offset(h.Point, r3.Scale(-1, h.Facing()))
	}
	return trace.Hit{}, false
}
