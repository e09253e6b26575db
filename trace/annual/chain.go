package annual

import (
	"math"

	"squint/materials/sampling"
	"squint/scene"
	"squint/trace"
	"squint/trace/surface"
)

// catcher estimates the sun that comes to level sensors by two and more
// mirrors in a row, as from the outlet of an anidolic ceiling. One mirror is
// found exactly (World.Images); longer chains are photons, caught where they
// cross the square about a sensor that has the area it stands for. So that
// light is blurred over a sensor's own cell.
type catcher struct {
	cell  float64
	level map[[3]int32][]int32 // sensors by height and cell
	s     []scene.Sensor
	z     []float64 // the heights that occur
}

// newCatcher returns nil where no sensor can catch: without mirrors, or
// without level sensors that stand for an area.
func newCatcher(w *trace.World, photons int, sensors []scene.Sensor) *catcher {
	if photons <= 0 || !w.Mirrors() {
		return nil
	}
	c := &catcher{s: sensors, level: map[[3]int32][]int32{}}
	for _, s := range sensors {
		if catches(&s) {
			c.cell = math.Max(c.cell, math.Sqrt(s.AreaM2))
		}
	}
	if c.cell == 0 {
		return nil
	}
	for i := range sensors {
		s := &sensors[i]
		if !catches(s) {
			continue
		}
		k := -1
		for j, z := range c.z {
			if z == s.Position.Z {
				k = j
			}
		}
		if k < 0 {
			k = len(c.z)
			c.z = append(c.z, s.Position.Z)
		}
		key := c.key(k, s.Position.X, s.Position.Y)
		c.level[key] = append(c.level[key], int32(i))
	}
	return c
}

func catches(s *scene.Sensor) bool { return s.AreaM2 > 0 && s.Normal.Z > 0.999 }

func (c *catcher) key(level int, x, y float64) [3]int32 {
	return [3]int32{int32(level), int32(math.Floor(x / c.cell)), int32(math.Floor(y / c.cell))}
}

// catch adds to e[sensor] what one batch's photons bring.
func (c *catcher) catch(w *worker, bl *surface.Block, batch int, e []surface.Row) {
	n := w.t.Config.Photons / w.t.Config.Batches
	for h, m := range bl.Moments {
		rays := &bl.Sun[h]
		if rays.NormalLx <= 0 {
			continue
		}
		photons := w.t.World.Aim(m.Sun).Only(false)
		if photons.Empty() {
			continue
		}
		s := sampling.Stream4(w.cfg.Seed, streamChain, uint64(m.Step), uint64(batch))
		photons.Beams(n, rays.Draw, &s, func(b *trace.Beam) {
			if b.Mirrors >= 2 && b.Glossy == 0 && b.Dir.Z < 0 {
				c.cross(b, rays.NormalLx, h, e)
			}
		})
	}
}

// cross looks which sensors' squares a beam goes down through.
func (c *catcher) cross(b *trace.Beam, normalLx float64, h int, e []surface.Row) {
	for k, z := range c.z {
		t := (z - b.From.Z) / b.Dir.Z
		if t < 0 || t > b.LengthM {
			continue
		}
		x, y := b.From.X+t*b.Dir.X, b.From.Y+t*b.Dir.Y
		at := c.key(k, x, y)
		for dx := int32(-1); dx <= 1; dx++ {
			for dy := int32(-1); dy <= 1; dy++ {
				for _, i := range c.level[[3]int32{at[0], at[1] + dx, at[2] + dy}] {
					s := &c.s[i]
					half := math.Sqrt(s.AreaM2) / 2
					if math.Abs(x-s.Position.X) <= half && math.Abs(y-s.Position.Y) <= half {
						e[i][h] += float32(b.FluxM2 * normalLx / s.AreaM2)
					}
				}
			}
		}
	}
}
