package glare

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/view"
)

// TestJackknife: without sources DGP is linear in the illuminance at the eye, and
// the jackknife of a mean is its standard error, exactly; with one batch it knows
// nothing.
func TestJackknife(t *testing.T) {
	v, err := view.New(r3.Vec{}, r3.Vec{Y: 1}, r3.Vec{Z: 1}, view.Equidistant, math.Pi, 16, 16)
	if err != nil {
		t.Fatal(err)
	}
	f := NewField(v)
	levels := []float32{400, 420, 380, 440}
	mean := make([]float32, 256)
	var batch [][]float32
	for _, l := range levels {
		b := make([]float32, 256)
		for i := range b {
			b[i] = l
			mean[i] += l / 4
		}
		batch = append(batch, b)
	}
	var scratch Scratch
	got, gotEv := Jackknife(f, mean, batch, nil, Options{}, &scratch)
	// Sum of squared differences from 410 is 2000; over 4 x 3 the root is 12.91
	// cd/m2, times pi the error of the illuminance; DGP's slope is that between
	// two levels.
	a, ev1 := DGPOnly(f, batch[0], nil, Options{}, &scratch)
	b, ev2 := DGPOnly(f, batch[1], nil, Options{}, &scratch)
	want := (b - a) / (ev2 - ev1) * math.Pi * math.Sqrt(2000.0/12)
	if wantEv := math.Pi * math.Sqrt(2000.0/12); math.Abs(gotEv/wantEv-1) > 1e-2 { // pixels at the rim
		t.Errorf("Ev: got %g, want %g", gotEv, wantEv)
	}
	if math.Abs(got/want-1) > 1e-3 { // float32 images
		t.Errorf("got %g, want %g", got, want)
	}
	if got, _ := Jackknife(f, mean, batch[:1], nil, Options{}, &scratch); !math.IsNaN(got) {
		t.Errorf("one batch: got %g, want NaN", got)
	}
}
