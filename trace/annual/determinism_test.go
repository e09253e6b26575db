package annual_test

import (
	"bytes"
	"encoding/binary"
	"math"
	"sync"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/trace"
	"squint/trace/annual"
)

func glazing(t testing.TB, tau float64, panes int) materials.BSDF {
	g, err := materials.NewGlazing(tau, panes)
	if err != nil {
		t.Fatal(err)
	}
	return g
}

// wholeRun is everything annual.Run hands out, as bytes: the sensors' year and
// every frame of every eye.
func wholeRun(t *testing.T, w *trace.World, sensors []scene.Sensor, moments []*scene.Moment, workers int) (*annual.Daylight, []byte) {
	views := []scene.Viewpoint{
		{Name: "window", Position: r3.Vec{X: 1.5, Y: 3, Z: 1.2}, Direction: r3.Vec{Y: -1}},
		{Name: "side", Position: r3.Vec{X: 1, Y: 2, Z: 1.2}, Direction: r3.Vec{X: 1}},
	}
	f := effort{batches: 4, texelSamples: 64, sensorSamples: 256, seed: 5, workers: workers}
	e := prepare(t, w, sensors, views, 16, f)
	frames := make([][]byte, len(views)*len(moments))
	var mu sync.Mutex
	d := e.run(t, moments, f, func(_ int, fr *annual.Frame) {
		var b bytes.Buffer
		for _, x := range append([][]float32{fr.Mean, fr.Sunlit}, fr.Batch...) {
			binary.Write(&b, binary.LittleEndian, x)
		}
		for _, disc := range fr.Discs {
			binary.Write(&b, binary.LittleEndian, []float64{disc.Dir.X, disc.Dir.Y, disc.Dir.Z, disc.OmegaSr, disc.Luminance})
		}
		mu.Lock()
		defer mu.Unlock()
		frames[fr.Eye*len(moments)+fr.Index] = b.Bytes()
	})
	var all bytes.Buffer
	for _, x := range [][][]float32{d.E, d.StdErr, d.Direct} {
		for _, row := range x {
			binary.Write(&all, binary.LittleEndian, row)
		}
	}
	for _, f := range frames {
		all.Write(f)
	}
	return d, all.Bytes()
}

// TestSameBytes: 1 and 7 workers, in tracing and in the year, give the same
// bytes; another seed does not.
func TestSameBytes(t *testing.T) {
	w, sensors := office(t, .4)
	moments := officeMoments(t, 150)
	_, a := wholeRun(t, w, sensors, moments, 1)
	_, b := wholeRun(t, w, sensors, moments, 7)
	if !bytes.Equal(a, b) {
		t.Errorf("1 and 7 workers differ: got %d and %d bytes, want the same", len(a), len(b))
	}
	moments[1].Step += 1000 // twin: other random numbers for one moment with sun
	_, c := wholeRun(t, w, sensors, moments, 7)
	if bytes.Equal(a, c) {
		t.Error("twin: one moment with other random numbers gave the same bytes")
	}
}

// TestHalvesMakeTheWhole: moments run in two parts give what they give when
// run together, to the rounding of float32 sums (some hundred terms, 24 bits),
// whether every second moment is taken or those without sun are parted from
// those with it. The room is bright, so that many sweeps are needed.
func TestHalvesMakeTheWhole(t *testing.T) {
	const rounding = 1e-5
	w, sensors := office(t, .4)
	moments := officeMoments(t, 150)
	f := effort{batches: 4, texelSamples: 64, sensorSamples: 256, seed: 5}
	e := prepare(t, w, sensors, nil, 0, f)
	whole := e.run(t, moments, f, nil)
	for _, c := range []struct {
		name string
		half func(i int) int
	}{
		{"every second moment", func(i int) int { return i % 2 }},
		{"with sun and without", func(i int) int { return min(i%3, 1) }},
		{"one alone", func(i int) int { return min(i, 1) }},
	} {
		var halves [2][]*scene.Moment
		var at [2][]int
		for i, m := range moments {
			h := c.half(i)
			halves[h] = append(halves[h], m)
			at[h] = append(at[h], i)
		}
		var worst float64
		for h, half := range halves {
			part := e.run(t, half, f, nil)
			for i := range sensors {
				for j, k := range at[h] {
					a, b := float64(whole.E[i][k]), float64(part.E[i][j])
					worst = math.Max(worst, math.Abs(a-b)/a)
				}
			}
		}
		t.Logf("%s: largest relative difference %.2g", c.name, worst)
		if worst > rounding {
			t.Errorf("%s: two parts against the whole: got a relative difference of %.3g, want at most %g (rounding)", c.name, worst, rounding)
		}
	}
}
