package annual_test

import (
	"context"
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/sky"
	"squint/trace"
	"squint/trace/annual"
	"squint/trace/coeff"
	"squint/trace/surface"
)

// TestMirroredGloss: sensors see the sun in a glossy sheet of 1 m2. Exact: the
// integral over the sheet of lobe x E_n cos(sun) x cos cos / r2, by quadrature;
// the disc is small against the lobe. What the sheet reflects diffusely is added,
// E_n cos rho/pi as the same integral (rho: Lambert's share).
func TestMirroredGloss(t *testing.T) {
	const lx = 10000.0
	moment := sunMoment(t, 5, deg(40), deg(10), lx)
	sensors := []scene.Sensor{
		{Position: r3.Vec{X: .5, Y: 2.5, Z: 2}, Normal: r3.Vec{Y: -1}}, // in the lobe's axis
		{Position: r3.Vec{X: .5, Y: 2, Z: 3}, Normal: r3.Unit(r3.Vec{Y: -1, Z: -1})},
		{Position: r3.Vec{X: .5, Y: .5, Z: 1.5}, Normal: r3.Vec{Z: -1}},
	}
	p := parity{group: "sun in a glossy sheet on sensors"}
	for i, c := range []struct{ share, spread float64 }{{.5, 5}, {.3, 12}} {
		f, err := materials.NewGlossy(.8, c.share, deg(c.spread))
		if err != nil {
			t.Fatal(err)
		}
		m := newModel(t, .25)
		m.face(m.part("sheet", scene.Room), m.finish(f), r3.Vec{}, r3.Vec{X: 1}, r3.Vec{Y: 1}, nil)
		w := m.world()
		cfg := surface.Config{Batches: 16, Samples: 16, Seed: uint64(800 + i), Workers: 1}
		tr := surface.NewTransport(w, sky.NewPatches(1), cfg)
		rec := annual.Receivers{Sensors: sensors, Fine: sky.NewPatches(1)}
		var found trace.Found
		var rows [][]surface.Gathered
		for k, sn := range sensors {
			g, shines := coeff.TraceSensor(tr, sn, k, 65536, cfg.Seed, rec.Fine, &found)
			for b := range g {
				for _, l := range g[b].Links {
					tr.Activate([]int32{l.Side})
				}
			}
			rows = append(rows, g)
			rec.Shines = append(rec.Shines, shines)
		}
		if err := tr.Trace(context.Background(), nil); err != nil {
			t.Fatal(err)
		}
		for b := range cfg.Batches {
			rec.Rows = append(rec.Rows, surface.NewRows())
			for _, g := range rows {
				rec.Rows[b].Add(tr, &g[b])
			}
		}
		d, err := annual.Run(context.Background(), tr, rec, []*scene.Moment{moment}, annual.Config{Workers: 1, Seed: cfg.Seed}, nil, nil)
		if err != nil {
			t.Fatal(err)
		}
		rho, _ := f.Lambert(materials.Front)
		for k, sn := range sensors {
			var want float64
			const n = 400
			for a := range n {
				for b := range n {
					to := r3.Sub(sn.Position, r3.Vec{X: (float64(a) + .5) / n, Y: (float64(b) + .5) / n})
					r2 := r3.Norm2(to)
					to = r3.Unit(to)
					bsdf := f.Gloss(materials.Front).Eval(to, moment.Sun) + rho/math.Pi
					want += lx * moment.Sun.Z * bsdf * to.Z * math.Max(0, -r3.Dot(to, sn.Normal)) / r2 / n / n
				}
			}
			got, se := float64(d.E[k][0]-d.Direct[k][0]), float64(d.StdErr[k][0])
			// The disc's radius over the lobe's width, squared, over two.
			allow := want * math.Pow(.2665/c.spread, 2)
			p.add(outcome{fmt.Sprintf("lobe of %g degrees, sensor %d", c.spread, k+1), want, got, se, allow, cfg.Batches - 1})
		}
	}
	p.judge(t, .1)
}
