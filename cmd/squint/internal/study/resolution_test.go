package study

import (
	"math"
	"testing"

	"squint/scene"
)

// The bias is the root mean square over the hours bright enough to count;
// hours below, and those not evaluated, do not.
func TestJudgeResolution(t *testing.T) {
	nan := nan32()
	v := ViewResult{
		DGP:    []float32{0.3, 0.5, 0.1, nan, 0},
		Coarse: []float32{0.33, 0.46, 0.2, nan, 0},
		Bias:   make([]float32, 5),
	}
	v.judgeResolution()
	want := math.Sqrt((0.03*0.03 + 0.04*0.04) / 2)
	for h, b := range v.Bias {
		if math.Abs(float64(b)-want) > 1e-7 {
			t.Errorf("hour %d: %g, want %g", h, b, want)
		}
	}
	dim := ViewResult{DGP: []float32{0.1}, Coarse: []float32{0.2}, Bias: make([]float32, 1)}
	if dim.judgeResolution(); dim.Bias[0] != 0 {
		t.Errorf("a view without an hour that counts: %g, want 0", dim.Bias[0])
	}
}

// An hour nearer to the limit than the bias is open however small its noise.
func TestBiasKeepsHoursOpen(t *testing.T) {
	r := &Result{Occupied: []int{0, 1, 2}, Climate: &scene.Climate{}}
	v := &ViewResult{
		DGP:    []float32{0.46, 0.5, 0},
		StdErr: []float32{0.001, 0.001, 0},
		Bias:   []float32{0.02, 0.02, 0.02},
	}
	if got := r.openHours(v, 0.45, 3); len(got) != 1 || got[0] != 0 {
		t.Errorf("open hours %v, want the first", got)
	}
	g := r.glareHours(v, 0.45, 3).Hours
	if g.Surely != 1 || g.Estimate != 2 || g.Possibly != 2 {
		t.Errorf("got %+v, want 1 surely, 2, 2 possibly: the dark hour has no bias", g)
	}
	v.Bias = make([]float32, 3) // the twin: without it the first hour is decided
	if got := r.openHours(v, 0.45, 3); len(got) != 0 {
		t.Errorf("open without a bias: %v", got)
	}
}
