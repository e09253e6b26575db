package picture

import (
	"context"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/sky"
	"squint/trace"
	"squint/trace/surface"
)

// Batches is the number of independent repetitions of everything random.
const Batches = 8

// Camera gives the lines of sight of a picture; view.View and view.Plan are
// cameras.
type Camera interface {
	Size() (width, height int)
	// Through returns the start and unit direction of the line of sight at
	// continuous pixel coordinates; ok is false outside of the picture.
	Through(px, py float64) (org, dir r3.Vec, ok bool)
	// Pixel returns a line of sight that stands for a pixel; ok is false for
	// pixels outside of the picture.
	Pixel(ix, iy int) (org, dir r3.Vec, ok bool)
}

// Config sets how the surfaces are solved.
type Config struct {
	TexelSamples int // rays from a texel side, over all batches
	Seed         uint64
	Workers      int
	Coarsen      float64 // of every texel edge; 0 means 1
}

// patchFactor divides the sky for the texels: 577 patches, as in a year. Own
// choice.
const patchFactor = 2

// Stage is a world with the exchange between the surfaces that cameras need.
type Stage struct {
	world *trace.World
	t     *surface.Transport
	cfg   Config
	// edgeM is the texel edge by part.
	edgeM []float64
}

// Random streams of this package.
const (
	streamScout     = 41
	streamPixel     = 42
	streamSample    = 43
	streamPhotons   = 45
	streamReference = 46
	streamTile      = 47
)

// Scouts look about before the exchange is traced: scoutPixels lines of sight
// at most a camera, scoutRays gathered from each surface that they meet. Own
// choices.
const (
	scoutPixels = 1 << 14
	scoutRays   = 6
	// receivers tell the cutter which parts are seen.
	receivers = 256
)

// Prepare traces the exchange for pictures by some cameras. progress, if not
// nil, hears of the texel sides done.
func Prepare(ctx context.Context, w *trace.World, cameras []Camera, cfg Config, progress func(done, known int)) (*Stage, error) {
	met := scout(w, cameras, cfg.Seed)
	sc := surface.Config{Batches: Batches, Samples: cfg.TexelSamples, Seed: cfg.Seed, Workers: cfg.Workers, Coarsen: cfg.Coarsen}
	for i := 0; i < len(met); i += max(1, len(met)/receivers) {
		sc.Receivers = append(sc.Receivers, w.Offset(met[i].Point, met[i].Facing()))
	}
	s := &Stage{world: w, cfg: cfg, t: surface.NewTransport(w, sky.NewPatches(patchFactor), sc)}
	for _, p := range w.Scene.Parts {
		s.edgeM = append(s.edgeM, max(1, cfg.Coarsen)*shortEdge(p))
	}
	if err := s.reach(ctx, met); err != nil {
		return nil, err
	}
	return s, s.t.Trace(ctx, progress)
}

// shortEdge is the shortest edge of a part's cells.
func shortEdge(p scene.Part) float64 {
	if p.Grid == nil {
		return p.TexelM
	}
	return min(p.Grid.EdgeM[0], p.Grid.EdgeM[1], p.Grid.EdgeM[2])
}

// scout lists diffuse surfaces in view.
func scout(w *trace.World, cameras []Camera, seed uint64) []trace.Hit {
	var met []trace.Hit
	var found trace.Found
	for c, cam := range cameras {
		width, height := cam.Size()
		step := 1
		for (width/step)*(height/step) > scoutPixels {
			step++
		}
		for y := step / 2; y < height; y += step {
			for x := step / 2; x < width; x += step {
				org, dir, ok := cam.Pixel(x, y)
				if !ok {
					continue
				}
				s := sampling.Stream4(seed, streamScout, uint64(c), uint64(y*width+x))
				found.Reset()
				w.Walk(org, dir, 1, 1, &s, &found)
				for _, l := range found.Landings {
					met = append(met, l.Hit)
				}
			}
		}
	}
	return met
}

// reach activates the sides that rays from the surfaces in view meet.
func (s *Stage) reach(ctx context.Context, met []trace.Hit) error {
	var found trace.Found
	for i := range met {
		if i%1024 == 0 && ctx.Err() != nil {
			return ctx.Err()
		}
		h := &met[i]
		r := sampling.Stream3(s.cfg.Seed, streamScout, uint64(i))
		for side := range sides(h) {
			found.Reset()
			n := normalOn(h, side)
			ps := s.world.PortalsSeen(h.Point, n)
			s.world.Gather(h.Point, n, &ps, scoutRays/2, scoutRays/2, &r, &found)
			for _, l := range found.Landings {
				for side := range sides(&l.Hit) {
					hit := l.Hit
					hit.Side = side
					s.t.Activate([]int32{s.t.SideAt(&hit)})
				}
			}
		}
	}
	return nil
}

// sides yields the sides of a hit whose illuminance makes the side met shine:
// that side by reflection, the other by transmission; each with luminance times
// pi over illuminance.
func sides(h *trace.Hit) func(yield func(materials.Side, float64) bool) {
	return func(yield func(materials.Side, float64) bool) {
		if rho, _ := h.BSDF.Lambert(h.Side); rho > 0 && !yield(h.Side, rho) {
			return
		}
		if _, tau := h.BSDF.Lambert(1 - h.Side); tau > 0 {
			yield(1-h.Side, tau)
		}
	}
}

// normalOn is the unit normal on a side of a hit's surface.
func normalOn(h *trace.Hit, side materials.Side) r3.Vec {
	if side == materials.Back {
		return r3.Scale(-1, h.Normal)
	}
	return h.Normal
}
