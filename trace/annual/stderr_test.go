package annual_test

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/scene/sky"
	"squint/trace/annual"
	"squint/trace/surface"
)

// TestStdErrDigits: the standard error that a run states is that of its
// batches, to the digits that float32 batch values have. It is found here from
// the same batches in float64, read one by one from the solved blocks, under a
// sky only, so that nothing else is random. Float32 carries a batch's value to 6e-8
// and its sum of some thousand weights to 1e-6, which is what the error may be
// off by, beside 1 % of itself.
func TestStdErrDigits(t *testing.T) {
	w, sensors := office(t, .4)
	// Out of doors, under an open sky: here batches agree to 1e-3 and better.
	sensors = append(sensors, scene.Sensor{Position: r3.Vec{X: 1.5, Y: 2.5, Z: 6}, Normal: r3.Vec{Z: 1}})
	var moments []*scene.Moment
	for i, s := range []*sky.Sky{uniformOf(t, 10000), uniformOf(t, 60000)} {
		m := skyMoment(i, s)
		m.Month = 1
		moments = append(moments, m)
	}
	for _, samples := range []int{512, 16384} {
		f := effort{batches: 8, texelSamples: 64, sensorSamples: samples, seed: 3}
		e := prepare(t, w, sensors, nil, 0, f)
		d := e.run(t, moments, f, nil)
		bl := e.t.NewBlock(moments, e.rec.Fine)
		values := make([][][]float64, len(sensors))
		for i := range values {
			values[i] = make([][]float64, len(moments))
		}
		var light surface.Light
		for b := range f.batches {
			e.t.Solve(bl, b, &light, nil)
			for i := range sensors {
				var row surface.Row
				bl.Gather(&e.rec.Rows[b], &light, i, &row)
				for k := range moments {
					values[i][k] = append(values[i][k], float64(row[k]))
				}
			}
		}
		for i := range sensors {
			for k := range moments {
				var a tally
				for _, v := range values[i][k] {
					a.add(v)
				}
				got, want := float64(d.StdErr[i][k]), a.stdErr()
				t.Logf("%d samples, sensor %d, moment %d: E %.1f lx, standard error of the batches %.4g (%.2g of E), stated %.4g", samples, i+1, k, a.mean(), want, want/a.mean(), got)
				if math.Abs(got-want) > .01*want+1e-6*a.mean() {
					t.Errorf("%d samples, sensor %d, moment %d: got a standard error of %.4g lx, want %.4g (the batches in float64); E is %.1f lx", samples, i+1, k, got, want, a.mean())
				}
			}
		}
	}
}

func uniformOf(t testing.TB, lx float64) *sky.Sky {
	s, err := sky.NewCIE(5, r3.Vec{Z: 1}, sky.ByHorizontalIlluminance(lx))
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// TestImagesAddUp: a view's image and discs, weighed by cosine and solid angle,
// give the illuminance on the plane of the eye that a sensor there finds by other
// rays. Pixels are weighed by their middle: half a pixel of 180/32 degrees
// squared, 2.4e-3, on a luminance that varies.
func TestImagesAddUp(t *testing.T) {
	w, _ := office(t, .4)
	moments := officeMoments(t, 12)
	for _, m := range moments {
		m.Occupied = true
	}
	views := []scene.Viewpoint{
		{Position: r3.Vec{X: 1.5, Y: 3, Z: 1.2}, Direction: r3.Vec{Y: -1}},
		{Position: r3.Vec{X: .8, Y: 1.6, Z: 1.3}, Direction: r3.Unit(r3.Vec{X: .6, Y: -.7, Z: .1})},
		{Position: r3.Vec{X: 1.5, Y: 1, Z: 1.2}, Direction: r3.Vec{Y: 1}},
	}
	var sensors []scene.Sensor
	for _, v := range views {
		sensors = append(sensors, scene.Sensor{Position: v.Position, Normal: v.Direction})
	}
	f := effort{batches: 16, texelSamples: 128, sensorSamples: 8192, fine: 4, seed: 9}
	// Two runs with their own seeds, since one run's eyes and sensors share the
	// surfaces.
	d := prepare(t, w, sensors, nil, 0, f).run(t, moments, f, nil)
	const pixels = 32
	f.seed = 10
	e := prepare(t, w, nil, views, pixels, f)
	p := parity{group: "illuminance at the eye: image against sensor, annual engine"}
	rows := make([]outcome, len(views)*len(moments))
	e.run(t, moments, f, func(_ int, fr *annual.Frame) {
		v := e.rec.Eyes[fr.Eye].View
		var discs float64
		for _, x := range fr.Discs {
			discs += x.Luminance * x.OmegaSr * r3.Dot(x.Dir, v.Direction)
		}
		var a tally
		for _, b := range fr.Batch {
			sum := discs
			for _, px := range e.rec.Eyes[fr.Eye].Inside {
				ix, iy := int(px)%pixels, int(px)/pixels
				if dir, ok := v.Ray(float64(ix)+.5, float64(iy)+.5); ok {
					sum += float64(b[px]) * v.SolidAngle(ix, iy) * r3.Dot(dir, v.Direction)
				}
			}
			a.add(sum)
		}
		want := float64(d.E[fr.Eye][fr.Index])
		rows[fr.Eye*len(moments)+fr.Index] = outcome{
			name: fmt.Sprintf("view %d, moment %d, sun %.0f lx", fr.Eye+1, fr.Index, fr.Moment.SunNormalLx), want: want, got: a.mean(),
			stdErr: math.Hypot(a.stdErr(), float64(d.StdErr[fr.Eye][fr.Index])), allow: want * 2.4e-3, dof: f.batches - 1,
		}
	})
	p.rows = rows
	p.judge(t, .1)
}
