package trace_test

import (
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/scenetest"
	"squint/trace"
)

// Two parallel mirrors of one part, a metre apart in height, are aimed at each
// in its own place, and not as one that spans both.
func TestParallelMirrorsAreApart(t *testing.T) {
	m := newMirroredModel(t)
	part := m.level(m.mirror(.9), 0, 1, 0, 1, 0)
	f := m.s.Triangles[0].Finish
	scenetest.Rect(m.s, part, f, r3.Vec{X: 3, Z: 1}, r3.Vec{X: 1}, r3.Vec{Y: 1})
	eye := r3.Vec{X: 2, Y: 0.5, Z: 3}
	var ps trace.Portals
	m.world().SeeMirrors(eye, r3.Vec{Z: -1}, &ps)
	for _, c := range []struct {
		at   r3.Vec
		seen bool
	}{{r3.Vec{X: 0.5, Y: 0.5}, true}, {r3.Vec{X: 3.5, Y: 0.5, Z: 1}, true}, {r3.Vec{X: 2, Y: 0.5}, false}} {
		if pdf := ps.PDF(eye, r3.Unit(r3.Sub(c.at, eye))); (pdf > 0) != c.seen {
			t.Errorf("towards %v: density %g, want above 0: %v", c.at, pdf, c.seen)
		}
	}
}
