package study

import (
	"context"
	"fmt"
	"math"
	"slices"
	"sync/atomic"

	"squint/materials"
	"squint/scene"
	"squint/scene/sky"
	"squint/trace"
	"squint/trace/annual"
	"squint/trace/bvh"
	"squint/trace/coeff"
	"squint/trace/parallel"
	"squint/trace/surface"
)

// patchFactor divides the sky for sensors and texels: 577 patches. With 145 the
// rear of a deep room under a clear sky loses 2 %. Views use the continuous
// sky where they see it.
const patchFactor = 2

// paneShare is the part of the photons that is enough where only panes mirror,
// which throw back about a tenth of the sun; own choice.
const paneShare = 5

// photons is the number shot from the sun at each moment.
func photons(in *Input, w *trace.World) int {
	sim := in.Project.Simulation
	switch {
	case sim.Photons == 0:
		return 0
	case w.Mirrors():
		return sim.Photons
	}
	return max(sim.Photons/paneShare, sim.Batches)
}

// year is what the engine computed.
type year struct {
	glare   *glareSink
	light   *annual.Daylight // [sensor][moment of the climate]
	factors []float64        // daylight factor by sensor, share
	factorE []float64        // its standard error
	clear   *annual.Daylight // [sensor][moment under a clear sky], nil for none
	looks   []int            // by work plane, further ones
}

// newYear holds zeros, and NaN where views are not evaluated.
func newYear(in *Input, opt Options) *year {
	return &year{glare: newGlareSink(in, max(opt.Workers, 1)), light: annual.NewDaylight(in.Scene.Sensors(), len(in.Climate.Moments))}
}

// computeYear is the year of an input, as far as it is not kept computed.
func computeYear(ctx context.Context, in *Input, opt Options, r *Result) (*year, error) {
	if in.Project.Simulation.Photons == 0 {
		r.Notes = once(r.Notes, "photons = 0: the sun that mirrors, glossy surfaces and panes throw on other surfaces is left out.")
	}
	if opt.Store != nil {
		return reuseYear(ctx, in, opt, r)
	}
	return traceYear(ctx, in, opt, r)
}

// traceYear runs every standing of the movable systems over its own moments
// and puts the results together.
func traceYear(ctx context.Context, in *Input, opt Options, r *Result) (*year, error) {
	y := newYear(in, opt)
	y.glare.shots, y.glare.cells, y.glare.keep = opt.shots, opt.cells, opt.keep
	total := 0
	for _, st := range in.Standings {
		total += len(st.Moments)
	}
	place := make(map[*scene.Moment]int, len(in.Climate.Moments))
	for i, m := range in.Climate.Moments {
		place[m] = i
	}
	before := 0
	for k := range in.Standings {
		st := &in.Standings[k]
		if len(st.Moments) == 0 && k > 0 {
			continue
		}
		e, err := newEngine(ctx, in, st, opt, r)
		if err != nil {
			return nil, err
		}
		if k == 0 {
			if err := y.daylightFactors(ctx, e); err != nil {
				return nil, err
			}
		}
		if err := y.runClear(ctx, in, e, k); err != nil {
			return nil, err
		}
		done := before
		light, err := annual.Run(ctx, e.t, e.rec, st.Moments, e.cfg, y.glare.sink(st.Scene, e.rec.Eyes), func(n int) { opt.Progress(StageYear, done+n, total) })
		if err != nil {
			return nil, err
		}
		before += len(st.Moments)
		for i, m := range st.Moments {
			for s := range light.E {
				h := place[m]
				y.light.E[s][h], y.light.StdErr[s][h], y.light.Direct[s][h] = light.E[s][i], light.StdErr[s][i], light.Direct[s][i]
			}
		}
	}
	for i := range y.glare.views {
		y.glare.views[i].judgeResolution()
	}
	return y, nil
}

// engine is one standing's traced receivers and surfaces.
type engine struct {
	t   *surface.Transport
	rec annual.Receivers
	cfg annual.Config
}

func newEngine(ctx context.Context, in *Input, st *Standing, opt Options, r *Result) (*engine, error) {
	sim := in.Project.Simulation
	cfg := surface.Config{Batches: sim.Batches, Samples: sim.TexelSamples, Seed: sim.Seed, Workers: opt.Workers, Coarsen: 1}
	cfg.Photons = photons(in, st.World)
	for _, v := range st.Scene.Viewpoints {
		cfg.Receivers = append(cfg.Receivers, v.Position)
	}
	for _, w := range st.Scene.WorkPlanes {
		for _, s := range w.Sensors {
			cfg.Receivers = append(cfg.Receivers, s.Position)
		}
	}
	t := surface.NewTransport(st.World, sky.NewPatches(patchFactor), cfg)
	// One worker must fit; further ones are added as memory allows, so that
	// neither texels nor results depend on their number.
	for estimate := memoryMiB(t, sim.Batches); estimate > float64(sim.MemoryMiB); estimate = memoryMiB(t, sim.Batches) {
		cfg.Coarsen *= math.Max(1.1, math.Sqrt(estimate/float64(sim.MemoryMiB)))
		if cfg.Coarsen > 100 {
			return nil, fmt.Errorf("%s: simulation.memory_mib: got %d, want more: even texels 100 times larger do not fit", in.Project.File, sim.MemoryMiB)
		}
		t = surface.NewTransport(st.World, sky.NewPatches(patchFactor), cfg)
	}
	opt.Workers = max(1, min(opt.Workers, int(float64(sim.MemoryMiB)/memoryMiB(t, sim.Batches))))
	eyes, err := traceEyes(ctx, in, st, t, opt)
	if err != nil {
		return nil, err
	}
	rec := annual.Receivers{Eyes: eyes, Fine: sky.NewPatches(patchFactor)}
	for _, w := range st.Scene.WorkPlanes {
		rec.Sensors = append(rec.Sensors, w.Sensors...)
	}
	found, shines, err := traceSensors(ctx, t, &rec, sim.SensorSamples, sim.Seed, opt)
	if err != nil {
		return nil, err
	}
	rec.Shines = shines
	for _, e := range eyes {
		t.Activate(e.Sides())
	}
	for _, g := range found {
		for b := range g {
			for _, l := range g[b].Links {
				t.Activate([]int32{l.Side})
			}
		}
	}
	if err := t.Trace(ctx, func(done, known int) { opt.Progress(StageSurfaces, done, known) }); err != nil {
		return nil, err
	}
	for _, e := range eyes {
		e.Bind(t)
	}
	rec.Rows = make([]surface.Rows, sim.Batches)
	for b := range rec.Rows {
		rec.Rows[b] = surface.NewRows()
		for _, g := range found {
			rec.Rows[b].Add(t, &g[b])
		}
	}
	r.Settings.Workers = opt.Workers
	r.tell(in, t.Len(), cfg.Coarsen)
	return &engine{t: t, rec: rec, cfg: annual.Config{Workers: opt.Workers, Seed: sim.Seed, Glimpses: opt.shots != nil && opt.shots.always}}, nil
}

// tell takes over how finely surfaces were cut.
func (r *Result) tell(in *Input, sides int, coarsen float64) {
	if coarsen > 1 {
		r.Warnings = once(r.Warnings, fmt.Sprintf("surfaces are cut %.1f times more coarsely than asked, to fit memory_mib = %d.", coarsen, in.Project.Simulation.MemoryMiB))
	}
	r.Settings.Confidence, r.Settings.Kernel = confidence, bvh.Kernel()
	r.Settings.TexelSides = max(r.Settings.TexelSides, sides)
	r.Settings.Coarsen = math.Max(r.Settings.Coarsen, coarsen)
}

// daylightFactors runs the one moment of the CIE overcast sky.
func (y *year) daylightFactors(ctx context.Context, e *engine) error {
	if len(e.rec.Sensors) == 0 {
		return nil
	}
	m, err := scene.Overcast(0)
	if err != nil {
		return err
	}
	d, err := annual.Run(ctx, e.t, e.rec, []*scene.Moment{m}, e.cfg, nil, nil)
	if err != nil {
		return err
	}
	for i := range d.E {
		y.factors = append(y.factors, float64(d.E[i][0])/m.GlobalLx)
		y.factorE = append(y.factorE, float64(d.StdErr[i][0])/m.GlobalLx)
	}
	return nil
}

// memoryMiB estimates a worker's working set: four rows a texel side and
// batch, three fifths of all sides being reached in a closed room.
func memoryMiB(t *surface.Transport, batches int) float64 {
	sides := float64(2*t.Texels.Len()) * 0.6
	return sides * float64(batches) * 4 * surface.Width * 4 / (1 << 20)
}

func traceEyes(ctx context.Context, in *Input, st *Standing, t *surface.Transport, opt Options) ([]*coeff.Eye, error) {
	sim := in.Project.Simulation
	views := st.Scene.Viewpoints
	eyes := make([]*coeff.Eye, len(views))
	cfg := coeff.EyeConfig{Pixels: sim.FisheyePixels, SamplesPerPixel: sim.SamplesPerPixel, Batches: sim.Batches, Seed: sim.Seed}
	return eyes, each(ctx, opt, StageViews, len(views), func(i int) error {
		e, err := coeff.TraceEye(t, views[i], i, cfg)
		if err != nil {
			return fmt.Errorf("%s:%d: viewpoint %q: %w", in.Project.File, views[i].Line, views[i].Name, err)
		}
		eyes[i] = e
		return nil
	})
}

func traceSensors(ctx context.Context, t *surface.Transport, rec *annual.Receivers, samples int, seed uint64, opt Options) ([][]surface.Gathered, [][][]coeff.ShineSample, error) {
	out := make([][]surface.Gathered, len(rec.Sensors))
	shines := make([][][]coeff.ShineSample, len(rec.Sensors))
	any := false
	for _, f := range t.World.Scene.Finishes {
		any = any || f.BSDF.Gloss(materials.Front) != nil || f.BSDF.Gloss(materials.Back) != nil
	}
	err := each(ctx, opt, StageSensors, len(rec.Sensors), func(i int) error {
		var found trace.Found
		out[i], shines[i] = coeff.TraceSensor(t, rec.Sensors[i], i, samples, seed, rec.Fine, &found)
		return nil
	})
	if !any {
		shines = nil
	}
	return out, shines, err
}

// each runs work for 0..n-1 on the workers and reports progress.
func each(ctx context.Context, opt Options, stage Stage, n int, work func(i int) error) error {
	var done atomic.Int64
	return parallel.Try(ctx, opt.Workers, n, func(i int) error {
		err := work(i)
		opt.Progress(stage, int(done.Add(1)), n)
		return err
	})
}

// once adds a sentence that is not there yet.
func once(list []string, text string) []string {
	if slices.Contains(list, text) {
		return list
	}
	return append(list, text)
}
