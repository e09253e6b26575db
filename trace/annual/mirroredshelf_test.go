package annual_test

import (
	"context"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare"
	"squint/materials"
	"squint/scene"
	"squint/scene/sky"
	"squint/scene/view"
	"squint/trace"
	"squint/trace/annual"
	"squint/trace/coeff"
	"squint/trace/surface"
)

// mirroredProfile is the section of a light shelf in the plane of y and z, from
// the outer to the inner edge.
type mirroredProfile []r3.Vec

// arcProfile bulges upwards by sag over a chord of 1.2 m, in facets whose
// normals turn by at most stepRad.
func arcProfile(sag, stepRad float64) mirroredProfile {
	r := (.36 + sag*sag) / (2 * sag)
	half := math.Asin(.6 / r)
	n := int(math.Ceil(2 * half / stepRad))
	var p mirroredProfile
	for i := range n + 1 {
		phi := half * (2*float64(i)/float64(n) - 1)
		p = append(p, r3.Vec{Y: r * math.Sin(phi), Z: 2 + sag + r*(math.Cos(phi)-1)})
	}
	return p
}

// parabolaProfile is z = 2 + sag (y/0.6)^2, in facets as above.
func parabolaProfile(sag, stepRad float64) mirroredProfile {
	slope := 2 * sag / .36 // dz/dy = slope y; its angle changes fastest at 0
	n := int(math.Ceil(1.2 * slope / stepRad))
	var p mirroredProfile
	for i := range n + 1 {
		y := .6 * (2*float64(i)/float64(n) - 1)
		p = append(p, r3.Vec{Y: y, Z: 2 + sag*y*y/.36})
	}
	return p
}

// whiteRoom is a room of 3.6 x 8.2 x 2.8 m, white (0.9), with an opening of 3.2 x
// 1.7 m in a wall of 0.3 m and a shelf through it: its top a mirror of 0.9, its
// underside matte 0.5.
func whiteRoom(t testing.TB, texelM float64, p mirroredProfile) (w *trace.World, shelf int32) {
	t.Helper()
	m := newModel(t, texelM)
	white := m.matte(.9)
	h := &hole{.9, .2, 2.6, 3.4} // face runs z, x
	x, y, z := r3.Vec{X: 3.6}, r3.Vec{Y: 8.2}, r3.Vec{Z: 2.8}
	m.face(m.part("floor", scene.Room), white, r3.Vec{}, x, y, nil)
	m.face(m.part("ceiling", scene.Room), white, z, y, x, nil)
	m.face(m.part("south", scene.Room), white, r3.Vec{}, z, x, h)
	m.face(m.part("outside", scene.Room), white, r3.Vec{Y: -.3}, z, x, h)
	m.face(m.part("west", scene.Room), white, r3.Vec{}, y, z, nil)
	m.face(m.part("east", scene.Room), white, x, z, y, nil)
	m.face(m.part("north", scene.Room), white, y, x, z, nil)
	reveal := m.part("reveal", scene.Room)
	in, up, across := r3.Vec{Y: .3}, r3.Vec{Z: 1.7}, r3.Vec{X: 3.2}
	m.face(reveal, white, r3.Vec{X: .2, Y: -.3, Z: .9}, across, in, nil)
	m.face(reveal, white, r3.Vec{X: .2, Y: -.3, Z: 2.6}, across, in, nil)
	m.face(reveal, white, r3.Vec{X: .2, Y: -.3, Z: .9}, in, up, nil)
	m.face(reveal, white, r3.Vec{X: 3.4, Y: -.3, Z: .9}, in, up, nil)
	m.opening(r3.Vec{Y: -1}, r3.Vec{X: .2, Z: .9}, r3.Vec{X: 3.4, Z: .9}, r3.Vec{X: 3.4, Z: 2.6}, r3.Vec{X: .2, Z: 2.6})
	mirror, err := materials.NewMirror(.9, 0)
	if err != nil {
		t.Fatal(err)
	}
	under, err := materials.NewMatte(.5)
	if err != nil {
		t.Fatal(err)
	}
	sheet, err := materials.NewTwoSided(mirror, under)
	if err != nil {
		t.Fatal(err)
	}
	shelf = m.part("shelf", scene.System)
	f := m.finish(sheet)
	for i := range len(p) - 1 {
		a, b := p[i], p[i+1]
		at := func(v r3.Vec, x float64) r3.Vec { v.X = x; return v }
		m.quad(shelf, f, at(a, .2), at(a, 3.4), at(b, 3.4), at(b, .2)) // front up
	}
	return m.world(), shelf
}

// shelfEngine asks the annual engine, at one moment, for sensors and for views
// of 64 pixels.
type shelfEngine struct {
	t   *surface.Transport
	rec annual.Receivers
	cfg surface.Config
}

func newShelfEngine(t testing.TB, w *trace.World, sensors []scene.Sensor, views []scene.Viewpoint, cfg surface.Config, samples, perPixel int) shelfEngine {
	t.Helper()
	tr := surface.NewTransport(w, sky.NewPatches(1), cfg)
	rec := annual.Receivers{Sensors: sensors, Fine: sky.NewPatches(sensorPatchFactor)}
	for i, v := range views {
		e, err := coeff.TraceEye(tr, v, i, coeff.EyeConfig{Pixels: shelfPixels, SamplesPerPixel: perPixel, Batches: cfg.Batches, Seed: cfg.Seed})
		if err != nil {
			t.Fatal(err)
		}
		tr.Activate(e.Sides())
		rec.Eyes = append(rec.Eyes, e)
	}
	var found trace.Found
	var rows [][]surface.Gathered
	for i, sn := range sensors {
		g, _ := coeff.TraceSensor(tr, sn, i, samples, cfg.Seed, rec.Fine, &found)
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
	for b := range cfg.Batches {
		rec.Rows = append(rec.Rows, surface.NewRows())
		for _, g := range rows {
			rec.Rows[b].Add(tr, &g[b])
		}
	}
	return shelfEngine{tr, rec, cfg}
}

const shelfPixels = 64

// picture is a copy of what the sink receives.
type picture struct {
	mean  []float32
	batch [][]float32
	discs []annual.Disc
}

func (e shelfEngine) run(t testing.TB, m *scene.Moment) (*annual.Daylight, []picture) {
	t.Helper()
	out := make([]picture, len(e.rec.Eyes))
	sink := func(_ int, f *annual.Frame) {
		p := picture{mean: append([]float32(nil), f.Mean...), discs: append([]annual.Disc(nil), f.Discs...)}
		for _, b := range f.Batch {
			p.batch = append(p.batch, append([]float32(nil), b...))
		}
		out[f.Eye] = p
	}
	d, err := annual.Run(context.Background(), e.t, e.rec, []*scene.Moment{m}, annual.Config{Workers: e.cfg.Workers, Seed: e.cfg.Seed}, sink, nil)
	if err != nil {
		t.Fatal(err)
	}
	return d, out
}

// glimpse is what a picture means to the eye.
type glimpse struct{ dgp, dgpErr, ev, evErr float64 }

// see evaluates the pooled picture; errors are the jackknife over the batches,
// and DGP is corrected by it for the bias that noise in bright pixels causes.
// Source: Tukey 1958, Bias and confidence in not quite large samples, Ann. Math.
// Statist. 29; Quenouille 1956, Notes on bias in estimation, Biometrika 43.
func (p picture) see(f *glare.Field, v view.View) glimpse {
	var discs []glare.Disc
	for _, d := range p.discs {
		discs = append(discs, glare.Disc{Dir: v.Local(d.Dir), OmegaSr: d.OmegaSr, Luminance: d.Luminance})
	}
	var s glare.Scratch
	var out glimpse
	out.dgp, out.ev = glare.DGPOnly(f, p.mean, discs, glare.Options{}, &s)
	n := float32(len(p.batch))
	rest := make([]float32, len(p.mean))
	var a, b tally
	for _, img := range p.batch {
		for i := range rest {
			rest[i] = max(0, (n*p.mean[i]-img[i])/(n-1))
		}
		x, y := glare.DGPOnly(f, rest, discs, glare.Options{}, &s)
		a.add(x)
		b.add(y)
	}
	out.dgpErr, out.evErr = a.stdErr()*float64(n-1), b.stdErr()*float64(n-1)
	out.dgp += float64(n-1) * (out.dgp - a.mean())
	return out
}
