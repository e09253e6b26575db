package trace_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
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
