package trace_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
)

// A curved mirror of many facets is listed where a part of it is in sight, and
// left out where a wall hides all of it; flat mirrors are always listed.
func TestMirrorsFrom(t *testing.T) {
	m := newMirroredModel(t)
	mirroredTrough{1.85, false}.mesh(m, .9, 18.9*math.Pi/180, .1*math.Pi/180, 0, 1.6)
	curved := len(m.s.Triangles)
	m.level(m.mirror(.9), 8, 9, 8, 9, 0)
	m.upright(m.matte(.5), -20, 20, 2, -20, 20) // a wall north of the trough
	m.upright(m.matte(.5), 3, 20, -2, -20, 20)  // and half a one south of it
	w := m.world()
	for _, c := range []struct {
		name string
		eye  r3.Vec
		want int
	}{
		{"in sight", r3.Vec{Y: -5, Z: 0.5}, curved + 2},
		{"behind the wall", r3.Vec{Y: 5, Z: 0.5}, 2},
		{"past the edge of the half wall", r3.Vec{X: 8, Y: -5, Z: 0.5}, curved + 2},
	} {
		if got := len(w.MirrorsFrom(c.eye)); got != c.want {
			t.Errorf("%s: %d facets, want %d", c.name, got, c.want)
		}
	}
}

// Half a hundredth of a curved mirror, seen through slits at twenty places in
// turn, keeps it every time; a slit that is closed never does.
func TestMirrorsFromThroughSlit(t *testing.T) {
	const half = 1.6 // of the mirror's width, m
	eye := r3.Vec{Y: -5, Z: 0.5}
	slit := func(x, width float64) (got, curved int, share float64) {
		m := newMirroredModel(t)
		mirroredTrough{1.85, false}.mesh(m, .9, 18.9*math.Pi/180, .1*math.Pi/180, 0, half)
		curved = len(m.s.Triangles)
		m.upright(m.matte(.5), -20, x-width/2, -2, -20, 20)
		m.upright(m.matte(.5), x+width/2, 20, -2, -20, 20)
		w := m.world()
		// The share in sight by random points, facets of equal area to 0.1 %.
		const n = 40000
		s := sampling.NewStream(1, uint64(1e6*(x+9)))
		clear := 0
		for range n {
			v := m.s.Triangles[s.Intn(curved)].V
			d := r3.Sub(sampling.Triangle(s.Float64(), s.Float64(), v[0], v[1], v[2]), eye)
			if l := r3.Norm(d); w.Transmittance(eye, r3.Scale(1/l, d), l*0.999) > 0 {
				clear++
			}
		}
		return len(w.MirrorsFrom(eye)), curved, float64(clear) / n
	}
	mean := 0.0
	const places = 20
	for i := range places {
		// The wall stands at 3/5 of the way and the slit shows 5/3 of its width.
		x := (float64(i)+0.5)/places*1.6 - 0.8
		got, curved, share := slit(x, 0.005*2*half*3/5)
		if got != curved {
			t.Errorf("slit at x = %.2f: %d facets, want %d", x, got, curved)
		}
		mean += share / places
		if got, _, share := slit(x, 0); got != 0 || share != 0 {
			t.Errorf("no slit at x = %.2f: %d facets and a share of %g in sight, want none", x, got, share)
		}
	}
	if mean < 0.003 || mean > 0.006 {
		t.Errorf("the slits show %.4f of the mirror, want about 0.005", mean)
	}
}
