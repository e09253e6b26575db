package annual_test

import (
	"context"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/sky"
	"squint/trace"
	"squint/trace/annual"
	"squint/trace/coeff"
	"squint/trace/surface"
)

func up(x, y, z float64) scene.Sensor {
	return scene.Sensor{Position: r3.Vec{X: x, Y: y, Z: z}, Normal: r3.Vec{Z: 1}}
}

// estimate is a value with its standard error.
type estimate struct {
	mean, stdErr float64
	dof          int
}

// plain asks the path tracer for the illuminance of sensors, [sensor][moment].
func plain(w *trace.World, sensors []scene.Sensor, moments []*scene.Moment, samples int, seed uint64) [][]estimate {
	tr := trace.NewTracer(w, moments)
	out := make([][]estimate, len(sensors))
	one := make([]float64, len(moments))
	for i, sn := range sensors {
		sums := make([]tally, len(moments))
		for k := range samples {
			s := sampling.Stream4(seed, 901, uint64(i), uint64(k))
			clear(one)
			tr.Illuminance(sn.Position, sn.Normal, &s, one)
			for h, e := range one {
				sums[h].add(e)
			}
		}
		for h := range sums {
			out[i] = append(out[i], estimate{sums[h].mean(), sums[h].stdErr(), samples - 1})
		}
	}
	return out
}

// effort sets the annual engine.
type effort struct {
	batches, texelSamples, sensorSamples int
	fine                                 int // patch factor of sensors
	texels                               int // patch factor of texels
	coarsen                              float64
	seed                                 uint64
	workers                              int
}

// What the program uses for sensors and for texels.
const (
	sensorPatchFactor = 2
	texelPatchFactor  = 2
)

// fineTexels is a division at which the texels' patches cost less than 0.3 % of
// the light reflected deep in a room: TestTexelPatches shows the trend.
const fineTexels = 4

type engine struct {
	t   *surface.Transport
	rec annual.Receivers
}

// prepare traces sensors and surfaces as a run of the program does.
func prepare(t testing.TB, w *trace.World, sensors []scene.Sensor, views []scene.Viewpoint, pixels int, f effort) engine {
	t.Helper()
	if f.fine == 0 {
		f.fine = sensorPatchFactor
	}
	if f.texels == 0 {
		f.texels = texelPatchFactor
	}
	f.workers = max(f.workers, 1)
	cfg := surface.Config{Batches: f.batches, Samples: f.texelSamples, Seed: f.seed, Workers: f.workers, Coarsen: max(f.coarsen, 1)}
	for _, s := range sensors {
		cfg.Receivers = append(cfg.Receivers, s.Position)
	}
	tr := surface.NewTransport(w, sky.NewPatches(f.texels), cfg)
	rec := annual.Receivers{Sensors: sensors, Fine: sky.NewPatches(f.fine)}
	var found trace.Found
	var rows [][]surface.Gathered
	for i, v := range views {
		e, err := coeff.TraceEye(tr, v, i, coeff.EyeConfig{Pixels: pixels, SamplesPerPixel: 16, Batches: f.batches, Seed: f.seed})
		if err != nil {
			t.Fatal(err)
		}
		tr.Activate(e.Sides())
		rec.Eyes = append(rec.Eyes, e)
	}
	for i, sn := range sensors {
		g, _ := coeff.TraceSensor(tr, sn, i, f.sensorSamples, f.seed, rec.Fine, &found)
		for b := range g {
			for _, l := range g[b].Links {
				tr.Activate([]int32{l.Side})
			}
		}
		rows = append(rows, g)
	}
	if err := tr.Trace(context.Background(), nil); err != nil {
		t.Fatal(err)
	}
	for _, e := range rec.Eyes {
		e.Bind(tr)
	}
	for b := range f.batches {
		rec.Rows = append(rec.Rows, surface.NewRows())
		for _, g := range rows {
			rec.Rows[b].Add(tr, &g[b])
		}
	}
	return engine{tr, rec}
}

func (e engine) run(t testing.TB, moments []*scene.Moment, f effort, sink annual.Sink) *annual.Daylight {
	t.Helper()
	d, err := annual.Run(context.Background(), e.t, e.rec, moments, annual.Config{Workers: max(f.workers, 1), Seed: f.seed}, sink, nil)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// year asks the annual engine for the illuminance of sensors.
func year(t testing.TB, w *trace.World, sensors []scene.Sensor, moments []*scene.Moment, f effort) [][]estimate {
	t.Helper()
	d := prepare(t, w, sensors, nil, 0, f).run(t, moments, f, nil)
	out := make([][]estimate, len(sensors))
	for i := range sensors {
		for k := range moments {
			out[i] = append(out[i], estimate{float64(d.E[i][k]), float64(d.StdErr[i][k]), f.batches - 1})
		}
	}
	return out
}

// scattered places n sensors at random on a rectangle, for area means.
func scattered(n int, seed uint64, org, u, v, normal r3.Vec) []scene.Sensor {
	s := sampling.NewStream(seed, 902)
	out := make([]scene.Sensor, n)
	for i := range out {
		p := r3.Add(org, r3.Add(r3.Scale(s.Float64(), u), r3.Scale(s.Float64(), v)))
		out[i] = scene.Sensor{Position: p, Normal: normal}
	}
	return out
}

// overSensors is the mean of independent sensors at moment k, its error from
// their spread.
func overSensors(e [][]estimate, k int) estimate {
	var a tally
	for i := range e {
		a.add(e[i][k].mean)
	}
	return estimate{a.mean(), a.stdErr(), a.n - 1}
}
