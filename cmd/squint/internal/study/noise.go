package study

import (
	"context"
	"math"
	"slices"

	"squint/scene"
	"squint/scene/project"
	"squint/trace/annual"
	"squint/trace/surface"
)

// noise is what sensors' errors come from: the mean squares of the relative error
// of sensors away from the sun that their own rays bring, and what they share,
// the light of the surfaces.
type noise struct {
	rays, shared float64
	batchMiB     float64 // memory of one batch
}

// variances measures that: with one batch's rays in all batches only what is
// shared is left.
func variances(ctx context.Context, in *Input, opt Options) (noise, error) {
	st := slices.MaxFunc(in.Standings, func(a, b Standing) int { return len(a.Moments) - len(b.Moments) })
	moments := []*scene.Moment{}
	for k := range min(len(st.Moments), surface.Width) {
		moments = append(moments, st.Moments[k*len(st.Moments)/min(len(st.Moments), surface.Width)])
	}
	if len(moments) == 0 {
		m, err := scene.Overcast(0)
		if err != nil {
			return noise{}, err
		}
		moments = append(moments, m)
	}
	e, err := newEngine(ctx, in, &st, opt, &Result{})
	if err != nil {
		return noise{}, err
	}
	var mean [2]float64
	for i := range mean {
		d, err := annual.Run(ctx, e.t, e.rec, moments, e.cfg, nil, nil)
		if err != nil {
			return noise{}, err
		}
		n := 0.0
		for s := range d.E {
			for k, lx := range d.E[s] {
				if lx > 0 && d.Direct[s][k] == 0 {
					x := float64(d.StdErr[s][k] / lx)
					mean[i] += x * x
					n++
				}
			}
		}
		mean[i] /= math.Max(n, 1)
		e.rec.Rows = slices.Repeat(e.rec.Rows[:1], len(e.rec.Rows))
		for s := range e.rec.Shines {
			e.rec.Shines[s] = slices.Repeat(e.rec.Shines[s][:1], len(e.rec.Shines[s]))
		}
	}
	return noise{math.Max(0, mean[0]-mean[1]), mean[1], memoryMiB(e.t, 1)}, nil
}

// mostBatches is the most that a closer look takes, the schema's own bound, and
// batchesShare the share of memory_mib that their rows may take; own choice.
const (
	mostBatches  = 64
	batchesShare = 0.25
)

// batches is the number of a closer look: refineFactor times as many, by
// doubling as far as memory allows. The number of threads has no say.
func (n *noise) batches(size project.Simulation) int {
	b := size.Batches
	for d := 2; d <= refineFactor; d *= 2 {
		if 2*b <= mostBatches && 2*float64(b)*n.batchMiB <= batchesShare*float64(size.MemoryMiB) {
			b *= 2
		}
	}
	return b
}
