package surface

import (
	"squint/materials/sampling"
	"squint/trace"
)

// mirrored adds to e the sun that mirrors, glossy surfaces and panes throw on
// the active sides in batch b, by photons shot from the sun at each moment.
// The exchange between surfaces does the rest: a photon ends at the first
// diffuse surface and its light goes on along the links.
func (t *Transport) mirrored(bl *Block, b int, e []Row) {
	n := t.Config.Photons / t.Config.Batches
	if n <= 0 {
		return
	}
	for h := range bl.Sun {
		rays := &bl.Sun[h]
		if rays.NormalLx <= 0 {
			continue
		}
		photons := t.World.Aim(bl.Moments[h].Sun)
		if photons.Empty() {
			continue
		}
		s := sampling.Stream4(t.Config.Seed, streamPhoton, uint64(bl.Moments[h].Step), uint64(b))
		photons.Shoot(rays.NormalLx, n, rays.Draw, &s, func(hit *trace.Hit, flux float64) {
			side := t.SideAt(hit)
			if i := t.Index(side); i >= 0 {
				e[i][h] += float32(flux / t.Texels.AreaM2(side/2))
			}
		})
	}
}
