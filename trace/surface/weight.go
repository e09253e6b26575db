package surface

import (
	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/scene"
	"squint/trace"
)

// Parts that receivers hardly see are cut more coarsely: the outside of the
// walls matters to a desk only as a reflector of light that comes in again.
const (
	rareShare, rareFactor     = 1e-3, 2.0
	unseenShare, unseenFactor = 1e-4, 4.0
	lookPoints, lookRays      = 256, 128
)

// cellFactors looks around from the receivers and says by part how much more
// coarsely than asked it may be cut. Systems and the ground keep their cells.
func cellFactors(w *trace.World, from []r3.Vec, seed uint64) []float64 {
	parts := w.Scene.Parts
	out := make([]float64, len(parts))
	for i := range out {
		out[i] = 1
	}
	if len(from) == 0 {
		return out
	}
	seen := make([]float64, len(parts))
	var total float64
	var found trace.Found
	step := max(1, len(from)/lookPoints)
	for i := 0; i < len(from); i += step {
		s := sampling.Stream3(seed, streamLook, uint64(i))
		found.Reset()
		for range lookRays {
			w.Walk(from[i], sampling.UniformSphere(s.Float64(), s.Float64()), 1, 0, &s, &found)
		}
		for _, l := range found.Landings {
			seen[l.Hit.Part] += l.Weight
			total += l.Weight
		}
	}
	if total == 0 {
		return out
	}
	for i, p := range parts {
		if p.Kind != scene.Room && p.Kind != scene.Surroundings {
			continue
		}
		switch share := seen[i] / total; {
		case share < unseenShare:
			out[i] = unseenFactor
		case share < rareShare:
			out[i] = rareFactor
		}
	}
	return out
}
