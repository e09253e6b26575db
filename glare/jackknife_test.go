package glare

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/view"
)

// TestPooled: without sources DGP is linear in the illuminance at the eye, and
// the jackknife of a mean is its standard error, exactly; with one batch it knows
// nothing.
func TestPooled(t *testing.T) {
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
	_, _, got, gotEv := Pooled(f, mean, batch, nil, Options{}, 0, &scratch)
	// Sum of squared differences from 410 is 2000; over 4 x 3 the root is 12.91
	// cd/m2, times pi the error of the illuminance, times 5.87e-5 that of DGP
	// (Wienold & Christoffersen 2006, as in DGP).
	wantEv := math.Pi * math.Sqrt(2000.0/12)
	want := 5.87e-5 * wantEv
	// Solid angles add up to the half space to far less; levels are exact in
	// float32.
	if math.Abs(gotEv/wantEv-1) > 1e-5 {
		t.Errorf("Ev: got %g, want %g", gotEv, wantEv)
	}
	if math.Abs(got/want-1) > 1e-5 {
		t.Errorf("got %g, want %g", got, want)
	}
	if _, _, got, _ := Pooled(f, mean, batch[:1], nil, Options{}, 0, &scratch); !math.IsNaN(got) {
		t.Errorf("one batch: got %g, want NaN", got)
	}
}

// TestFar: where no pixel is near the threshold, what a far-off limit leaves out
// is nothing, so both ways give one error; with a pixel that crosses it in half
// of the batches they must differ.
func TestFar(t *testing.T) {
	v, err := view.New(r3.Vec{}, r3.Vec{Y: 1}, r3.Vec{Z: 1}, view.Equidistant, math.Pi, 32, 32)
	if err != nil {
		t.Fatal(err)
	}
	f := NewField(v)
	errors := func(crossing bool) (near, far float64) {
		mean := make([]float32, len(f.Omega))
		var batch [][]float32
		for b := range 8 {
			img := make([]float32, len(mean))
			for i := range img {
				// A window above on the left, one on the right, a dim rest.
				l := 100 + float32(b%3)
				if x, y := i%32, i/32; y > 8 && y < 14 && (x > 8 && x < 13 || x > 20 && x < 24) {
					l = 5000 + 100*float32(b*3%7)
					if crossing {
						l = 1000 + 2001*float32(b%2)
					}
				}
				img[i] = l
				mean[i] += l / 8
			}
			batch = append(batch, img)
		}
		var s Scratch
		_, _, near, _ = Pooled(f, mean, batch, nil, Options{}, 0, &s)
		_, _, far, _ = Pooled(f, mean, batch, nil, Options{}, 1, &s)
		return near, far
	}
	if near, far := errors(false); near <= 0 || math.Abs(far/near-1) > 1e-3 { // float32 images
		t.Errorf("nothing near the threshold: got %g by the short way and %g by the long one, want the same", far, near)
	}
	if near, far := errors(true); math.Abs(far/near-1) < 0.1 {
		t.Errorf("pixels that cross the threshold: got %g by the short way and %g by the long one, want them to differ", far, near)
	}
}
