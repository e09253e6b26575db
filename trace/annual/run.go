package annual

import (
	"context"
	"sync"
	"sync/atomic"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/scene/sky"
	"squint/trace"
	"squint/trace/coeff"
	"squint/trace/surface"
)

// Disc is the sun's disc, or its image in a mirror, as one viewpoint sees it:
// a source of its own, with the solid angle that nothing opaque hides, and the
// luminance that mirror, glass and cloth leave. It is found with the same
// points of the disc in all batches: where an edge crosses the disc, its solid
// angle is good to some thousandths of the disc's, of its image in a mirror to
// some per cent, which no batch error shows.
type Disc struct {
	Dir       r3.Vec // model frame, unit
	OmegaSr   float64
	Luminance float64 // cd/m2
	Mirror    int32   // part of the mirror, -1 for the sun itself
	Via       int32   // part of the first pane or cloth looked through, -1 for none
}

// Frame is what one eye sees at one moment. Its slices are reused after Sink
// returns. Images are row-major over the whole fisheye, 0 outside the circle.
type Frame struct {
	Eye    int
	Index  int // of the moment
	Moment *scene.Moment
	// Mean is the pooled luminance, cd/m2; Batch holds each batch's own, of the
	// first alone at moments out of use.
	Mean  []float32
	Batch [][]float32
	// Sunlit is the part of Mean that is sun on the first diffuse surface.
	Sunlit []float32
	// Discs are the sun's disc and its images, as far as they are seen.
	Discs []Disc
}

// Sink receives frames, from several goroutines at once (worker says which).
type Sink func(worker int, f *Frame)

// Receivers are traced eyes and sensors, bound to the transport.
type Receivers struct {
	Eyes    []*coeff.Eye
	Sensors []scene.Sensor
	Rows    []surface.Rows // by batch, one receiver per sensor
	Fine    *sky.Patches   // the patches of Rows
	// Shines holds by sensor and batch the glossy surfaces that its rays met;
	// nil where there are none.
	Shines [][][]coeff.ShineSample
}

// Daylight is the sensors' year: [sensor][moment], lx.
type Daylight struct {
	E, StdErr, Direct [][]float32
}

// Config sets how the year is run.
type Config struct {
	Workers int
	Seed    uint64
	// Glimpses has the eyes see moments out of use too, but with the first batch
	// alone: enough for a picture. Frames then have that one batch.
	Glimpses bool
}

// block is a list of moment indices solved together.
type block []int

// plan groups moments that can share a block: same ground reflectance, and
// eyes open or not, in order of time.
func plan(s *scene.Scene, moments []*scene.Moment) []block {
	type key struct {
		ground   float64
		occupied bool
	}
	order := []key{}
	groups := map[key][]int{}
	for i, m := range moments {
		k := key{s.GroundReflectance[m.Month], m.Occupied}
		if _, ok := groups[k]; !ok {
			order = append(order, k)
		}
		groups[k] = append(groups[k], i)
	}
	var out []block
	for _, k := range order {
		g := groups[k]
		for len(g) > 0 {
			n := min(surface.Width, len(g))
			out = append(out, block(g[:n]))
			g = g[n:]
		}
	}
	return out
}

// Run computes all moments. sink may be nil when there are no eyes; progress,
// if not nil, hears of moments done.
func Run(ctx context.Context, t *surface.Transport, r Receivers, moments []*scene.Moment, cfg Config, sink Sink, progress func(done int)) (*Daylight, error) {
	d := NewDaylight(len(r.Sensors), len(moments))
	blocks := plan(t.World.Scene, moments)
	mirrors := newMirrorLists(len(r.Sensors))
	var next, done atomic.Int64
	var wg sync.WaitGroup
	for worker := range max(cfg.Workers, 1) {
		wg.Add(1)
		go func() {
			defer wg.Done()
			w := newWorker(t, r, cfg, worker, sink)
			w.mirrors = mirrors
			for ctx.Err() == nil {
				k := int(next.Add(1)) - 1
				if k >= len(blocks) {
					return
				}
				w.run(ctx, moments, blocks[k], d)
				n := done.Add(int64(len(blocks[k])))
				if progress != nil {
					progress(int(n))
				}
			}
		}()
	}
	wg.Wait()
	return d, ctx.Err()
}

// NewDaylight holds zeros.
func NewDaylight(sensors, moments int) *Daylight {
	d := &Daylight{}
	for _, p := range []*[][]float32{&d.E, &d.StdErr, &d.Direct} {
		*p = make([][]float32, sensors)
		flat := make([]float32, sensors*moments)
		for i := range sensors {
			(*p)[i] = flat[i*moments : (i+1)*moments]
		}
	}
	return d
}

// worker holds one goroutine's scratch.
type worker struct {
	t       *surface.Transport
	r       Receivers
	cfg     Config
	number  int
	sink    Sink
	lights  []surface.Light
	eye     eyeScratch
	images  []trace.Image
	mirrors *mirrorLists // of the sensors, shared by the workers
	// catcher is nil where no light comes by several mirrors.
	catcher *catcher
}

func newWorker(t *surface.Transport, r Receivers, cfg Config, number int, sink Sink) *worker {
	return &worker{t: t, r: r, cfg: cfg, number: number, sink: sink,
		lights:  make([]surface.Light, t.Config.Batches),
		catcher: newCatcher(t.World, t.Config.Photons, r.Sensors)}
}

func (w *worker) run(ctx context.Context, moments []*scene.Moment, b block, d *Daylight) {
	ms := make([]*scene.Moment, len(b))
	for i, k := range b {
		ms[i] = moments[k]
	}
	seen := w.sink != nil && (ms[0].Occupied || w.cfg.Glimpses)
	if !seen && len(w.r.Sensors) == 0 {
		return // nobody reads these moments
	}
	bl := w.t.NewBlock(ms, w.r.Fine)
	var near *surface.Light
	for batch := range w.lights {
		if ctx.Err() != nil {
			return
		}
		w.t.Solve(bl, batch, &w.lights[batch], near)
		near = &w.lights[batch]
	}
	w.sensors(bl, b, d)
	if !seen {
		return
	}
	batches := len(w.lights)
	if !ms[0].Occupied {
		batches = 1
	}
	lit := w.t.LitNear(w.lights)
	for i := range w.r.Eyes {
		if ctx.Err() != nil {
			return
		}
		w.see(bl, b, i, lit, batches)
	}
}
