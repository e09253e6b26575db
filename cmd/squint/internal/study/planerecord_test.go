package study

import (
	"testing"

	"squint/scene"
	"squint/trace/annual"
)

// Two moments under a clear sky that hold the same are two all the same, and
// each keeps its own illuminances.
func TestClearMomentsKeptApart(t *testing.T) {
	in := &Input{Clear: []*scene.Moment{{Step: 9}, {Step: 9}}}
	names := []string{clearName(in, in.Clear[0]), clearName(in, in.Clear[1])}
	y := &year{factors: []float64{0.02}, factorE: []float64{0.001},
		clear: &annual.Daylight{E: [][]float32{{100, 200}}, StdErr: [][]float32{{1, 2}}}}
	var p planeRecord
	p.learn(y, 0, 1, nil, names, &Settings{})
	for k, want := range []float32{100, 200} {
		if c := p.clear(names[k]); c == nil || c.E[0] != want {
			t.Errorf("moment %d: got %+v, want %g lx", k, c, want)
		}
	}
}
