package surface

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
)

// stdErr is the standard error of a mean from the sums of n values.
func stdErr(sum, square float64, n int) float64 {
	m := sum / float64(n)
	return math.Sqrt(math.Max(0, square/float64(n)-m*m) / float64(n-1))
}

// TestDarkSides: no light reaches the inside of closed solids, whose sides are
// dropped; those in the room's air are kept.
func TestDarkSides(t *testing.T) {
	v := func(x, y, z float64) r3.Vec { return r3.Vec{X: x, Y: y, Z: z} }
	r := newRoom(t)
	f := r.matte(.5)
	shell := r.part("shell", .2) // open at y = 0
	r.rect(shell, f, v(0, 0, 0), v(4, 0, 0), v(0, 6, 0))
	r.rect(shell, f, v(0, 0, 3), v(0, 6, 0), v(4, 0, 0))
	r.rect(shell, f, v(0, 0, 0), v(0, 6, 0), v(0, 0, 3))
	r.rect(shell, f, v(4, 0, 0), v(0, 0, 3), v(0, 6, 0))
	r.rect(shell, f, v(0, 6, 0), v(4, 0, 0), v(0, 0, 3))
	r.opening(v(4, 0, 0), v(-4, 0, 0), v(0, 0, 3))
	solids := r.part("solids", .2)
	r.solid(solids, f, v(1, 1, .7), v(3, 2, .73))  // a desk's top
	r.solid(solids, f, v(.1, 4, .05), v(.6, 5, 2)) // a cupboard
	r.solid(solids, f, v(2, 3, .5), v(2.9, 3.9, 1.4))
	r.solid(solids, f, v(2.2, 3.2, .7), v(2.7, 3.7, 1.2)) // a solid inside a solid: both its sides are dark
	tr := everySide(t, r.world(), Config{Batches: 4, Samples: 64, Seed: 1, Workers: 1})
	inner := func(p r3.Vec) bool {
		return p.X > 2.1 && p.X < 2.8 && p.Y > 3.1 && p.Y < 3.8 && p.Z > .6 && p.Z < 1.3
	}
	var dark, lit int
	for k := range int32(tr.Texels.Len()) {
		p, _ := tr.Texels.Sample(k, .5, .5, .5)
		front, back := tr.Index(2*k+int32(materials.Front)) >= 0, tr.Index(2*k+int32(materials.Back)) >= 0
		if tr.Texels.Part(k) == shell {
			lit++
			if !front {
				t.Errorf("texel %d at %v: a side in the room is dropped", k, p)
			}
			continue
		}
		dark++
		if back || (inner(p) && front) {
			t.Errorf("texel %d at %v: the inside of a solid is kept", k, p)
		}
		if !inner(p) && !front {
			t.Errorf("texel %d at %v: a solid's side in the room is dropped", k, p)
		}
	}
	if dark == 0 || lit == 0 {
		t.Fatalf("got %d texels of solids and %d of the room, want some of both", dark, lit)
	}
	// Solids that touch, as walls on a slab do: cells of the slab reach into the
	// room from under the wall and carry light there. That costs time, not truth.
	tr = everySide(t, facadeRoom(t, .2, false).world(), Config{Batches: 4, Samples: 64, Seed: 1, Workers: 1})
	kept := 0
	for k := range int32(tr.Texels.Len()) {
		if tr.Index(2*k+int32(materials.Back)) >= 0 {
			kept++
		}
	}
	t.Logf("walls of touching solids: %d of %d inner sides are kept", kept, tr.Texels.Len())
}

// TestClosedRoomStaysDark: a windowless room receives nothing, although its
// floor and walls run on below and past the wall that parts it from a bright
// room, or from outdoors, as those of many models do. Texels of 0.2 m that reach
// under that wall must not carry light to its other side. The limit is 1e-4 of
// the illuminance outdoors: a hundredth of a point of daylight factor.
func TestClosedRoomStaysDark(t *testing.T) {
	const most, outdoorsLx = 1e-4, 10000
	v := func(x, y, z float64) r3.Vec { return r3.Vec{X: x, Y: y, Z: z} }
	for _, c := range []struct {
		name    string
		thick   float64
		outside bool // no ceiling and walls on the bright side
	}{
		{"bright room, partition of 0.3 m", .3, false},
		{"bright room, partition of 0.1 m", .1, false},
		{"bright room, partition without thickness", 0, false},
		{"terrace, wall of 0.3 m", .3, true},
		{"terrace, wall of 0.1 m", .1, true},
		{"terrace, wall without thickness", 0, true},
	} {
		if testing.Short() && c.thick != .1 {
			continue
		}
		r := newRoom(t)
		f := r.matte(.5)
		y := 0.0
		if c.outside {
			y = 4
		}
		r.rect(r.part("floor", .2), f, v(0, 1, 0), v(4, 0, 0), v(0, 7, 0))
		r.rect(r.part("ceiling", .2), f, v(0, y, 3), v(0, 8-y, 0), v(4, 0, 0))
		walls := r.part("walls", .2)
		r.rect(walls, f, v(0, y, 0), v(0, 8-y, 0), v(0, 0, 3))
		r.rect(walls, f, v(4, y, 0), v(0, 0, 3), v(0, 8-y, 0))
		r.rect(walls, f, v(0, 8, 0), v(4, 0, 0), v(0, 0, 3))
		partition := r.part("partition", .2)
		if c.thick > 0 {
			r.solid(partition, f, v(0, 4, 0), v(4, 4+c.thick, 3))
		} else {
			r.rect(partition, f, v(0, 4, 0), v(4, 0, 0), v(0, 0, 3))
		}
		tr := everySide(t, r.world(), Config{Batches: 2, Samples: 128, Seed: 1, Workers: 1})
		bl := tr.NewBlock(skies(t), nil)
		var light Light
		tr.Solve(bl, 0, &light, nil)
		var bright, dark, nb, nd float64
		for i, side := range tr.sides {
			p, _ := tr.Texels.Sample(side/2, .5, .5, .5)
			if side&1 == 1 || tr.World.Scene.Parts[tr.Part(int32(i))].Name != "floor" {
				continue
			}
			switch {
			case p.Y < 4:
				bright, nb = bright+float64(light.E[i][0]), nb+1
			case p.Y > 5:
				dark, nd = dark+float64(light.E[i][0]), nd+1
			}
		}
		if nb == 0 || !(bright/nb > .01*outdoorsLx) {
			t.Fatalf("%s: the bright side is dark", c.name)
		}
		share := dark / max(nd, 1) / outdoorsLx
		t.Logf("%s: the windowless room's floor has %.2g of the illuminance outdoors", c.name, share)
		if share > most {
			t.Errorf("%s: the windowless room's floor has %.3g of the illuminance outdoors, want at most %g", c.name, share, most)
		}
	}
}
