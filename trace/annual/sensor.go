package annual

import (
	"math"
	"sync"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/trace"
	"squint/trace/surface"
)

// Random streams of this package.
const (
	streamSensorSun   = 21
	streamEyeSun      = 22
	streamSensorShine = 23
	streamChain       = 24
)

// sensors reads every sensor against the solved block.
func (w *worker) sensors(bl *surface.Block, b block, d *Daylight) {
	batches := len(w.lights)
	var chains [][]surface.Row
	if w.catcher != nil {
		chains = make([][]surface.Row, batches)
		for batch := range chains {
			chains[batch] = make([]surface.Row, len(w.r.Sensors))
			w.catcher.catch(w, bl, batch, chains[batch])
		}
	}
	e := make([]surface.Row, batches)
	for i, s := range w.r.Sensors {
		var direct surface.Row
		images := w.imagesOn(bl, i)
		for batch := range w.lights {
			row := &e[batch]
			bl.Gather(&w.r.Rows[batch], &w.lights[batch], i, row)
			for h, m := range bl.Moments {
				if bl.Sun[h].NormalLx > 0 {
					sun := w.sunOn(s.Position, s.Normal, &bl.Sun[h], i, m.Step, batch)
					row[h] += sun
					direct[h] += sun
				}
			}
			if w.r.Shines != nil {
				w.sensorShine(bl, i, batch, row)
			}
			for h := range row {
				row[h] += images[h]
				if chains != nil {
					row[h] += chains[batch][i][h]
				}
			}
		}
		for h, k := range b {
			mean, se := meanAndError(e, h)
			d.E[i][k], d.StdErr[i][k] = float32(mean), float32(se)
			d.Direct[i][k] = direct[h] / float32(batches)
		}
	}
}

// meanAndError of entry h over batches, and the standard error of the mean;
// two passes in float64, since the batches may agree to many digits.
func meanAndError(e []surface.Row, h int) (mean, se float64) {
	n := float64(len(e))
	for b := range e {
		mean += float64(e[b][h])
	}
	mean /= n
	var square float64
	for b := range e {
		d := float64(e[b][h]) - mean
		square += d * d
	}
	if n < 2 {
		return mean, math.NaN()
	}
	return mean, math.Sqrt(square / (n * (n - 1)))
}

// imagesOn is the sun that mirrors throw straight on sensor i, lx.
func (w *worker) imagesOn(bl *surface.Block, i int) (e surface.Row) {
	s := &w.r.Sensors[i]
	facets := w.mirrors.from(w.t.World, i, s.Position)
	for h := range bl.Moments {
		rays := &bl.Sun[h]
		if rays.NormalLx <= 0 {
			continue
		}
		w.images = w.t.World.Images(s.Position, bl.Moments[h].Sun, facets, w.t.Hidden, w.images[:0])
		for _, im := range w.images {
			if cos := r3.Dot(im.Dir, s.Normal); cos > 0 {
				e[h] += float32(rays.NormalLx * im.Share * im.Luminous * cos)
			}
		}
	}
	return e
}

// sensorShine adds the sun that glossy surfaces throw on sensor i.
func (w *worker) sensorShine(bl *surface.Block, i, batch int, e *surface.Row) {
	shines := w.r.Shines[i][batch]
	if len(shines) == 0 {
		return
	}
	var random [surface.Width]sampling.Stream
	for h, m := range bl.Moments {
		random[h] = sampling.NewStream(w.cfg.Seed, streamSensorShine, uint64(i), uint64(m.Step), uint64(batch))
	}
	for k := range shines {
		w.shine(bl, &shines[k], &random, e)
	}
}

// sunOn samples the direct sun at p on a plane with unit normal n by one ray
// to a random point of the disc, in lx.
func (w *worker) sunOn(p, n r3.Vec, rays *surface.SunRays, receiver, hour, batch int) float32 {
	s := sampling.NewStream(w.cfg.Seed, streamSensorSun, uint64(receiver), uint64(hour), uint64(batch))
	dir, ok := rays.Draw(s.Uint64())
	if !ok {
		return 0
	}
	cos := r3.Dot(n, dir)
	if cos <= 0 {
		return 0
	}
	world := w.t.World
	return float32(rays.NormalLx * cos * world.Transmittance(world.Offset(p, n), dir, math.Inf(1)))
}

// mirrorLists holds by sensor the facets that it may see the sun in, found
// when first asked for.
type mirrorLists struct {
	once   []sync.Once
	facets [][]int32
}

func newMirrorLists(sensors int) *mirrorLists {
	return &mirrorLists{make([]sync.Once, sensors), make([][]int32, sensors)}
}

func (l *mirrorLists) from(w *trace.World, i int, p r3.Vec) []int32 {
	l.once[i].Do(func() { l.facets[i] = w.MirrorsFrom(p) })
	return l.facets[i]
}
