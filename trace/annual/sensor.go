package annual

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/trace/surface"
)

// Random streams of this package.
const (
	streamSensorSun   = 21
	streamEyeSun      = 22
	streamSensorShine = 23
)

// sensors reads every sensor against the solved block.
func (w *worker) sensors(bl *surface.Block, b block, d *Daylight) {
	batches := len(w.lights)
	for i, s := range w.r.Sensors {
		var sum, square, direct surface.Row
		images := w.imagesOn(bl, i)
		for batch := range w.lights {
			var e surface.Row
			bl.Gather(&w.r.Rows[batch], &w.lights[batch], i, &e)
			for h, m := range bl.Moments {
				if bl.Sun[h].NormalLx > 0 {
					sun := w.sunOn(s.Position, s.Normal, &bl.Sun[h], i, m.Hour, batch)
					e[h] += sun
					direct[h] += sun
				}
			}
			if w.r.Shines != nil {
				w.sensorShine(bl, i, batch, &e)
			}
			for h := range e {
				e[h] += images[h]
				sum[h] += e[h]
				square[h] += e[h] * e[h]
			}
		}
		n := float32(batches)
		for h, k := range b {
			mean := sum[h] / n
			d.E[i][k] = mean
			d.Direct[i][k] = direct[h] / n
			if batches > 1 {
				v := (square[h]/n - mean*mean) / (n - 1)
				d.StdErr[i][k] = float32(math.Sqrt(math.Max(0, float64(v))))
			}
		}
	}
}

// imagesOn is the sun that mirrors throw straight on sensor i, lx.
func (w *worker) imagesOn(bl *surface.Block, i int) (e surface.Row) {
	s := &w.r.Sensors[i]
	finder := w.finderOf(len(w.r.Eyes)+i, s.Position)
	for h := range bl.Moments {
		rays := &bl.Sun[h]
		if rays.NormalLx <= 0 {
			continue
		}
		w.images = finder.Find(bl.Moments[h].Sun, rays.Dirs(), rays.Visible, w.images[:0])
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
		random[h] = sampling.NewStream(w.cfg.Seed, streamSensorShine, uint64(i), uint64(m.Hour), uint64(batch))
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
