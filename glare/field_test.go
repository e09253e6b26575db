package glare

import (
	"math"
	"testing"

	"squint/scene/view"
)

// A field of which one half is hidden has half the illuminance and the same
// mean.
func TestWithout(t *testing.T) {
	v := fisheye(t, view.Equisolid, 180, 64)
	f := NewField(v)
	hidden, lum := make([]bool, 64*64), make([]float32, 64*64)
	for i := range hidden {
		if hidden[i] = i%64 < 32; !hidden[i] {
			lum[i] = 500
		}
	}
	g := f.Without(hidden)
	r := Evaluate(g, lum, nil, Options{}, nil)
	near(t, "Ev", r.Ev, 500*math.Pi/2, 1e-7*1571) // exact: pi L, half of it
	near(t, "mean", r.MeanLuminance, 500, 1e-9*500)
	near(t, "solid angle", g.TotalOmega, math.Pi, 1e-9)
	near(t, "projected", g.Projected(), math.Pi/2, 1e-9)
	near(t, "projected, all", f.Projected(), math.Pi, 1e-9) // the first field is as it was
	near(t, "Ev, all", Evaluate(f, lum, nil, Options{}, nil).Ev, 500*math.Pi/2, 1e-7*1571)
}
