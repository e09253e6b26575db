package soundness

import (
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
)

func TestPlace(t *testing.T) {
	closed := func(m *model) { m.office(true) }
	open := func(m *model) { m.office(false) }
	sheets := func(inward bool) func(*model) {
		return func(m *model) {
			m.ground()
			m.box(scene.Room, matte, r3.Vec{}, r3.Vec{X: 4, Y: 6, Z: 2.8}, allSides, inward)
		}
	}
	// A facade all of glass, as high and wide as the room.
	glazed := func(inward bool) func(*model) {
		return func(m *model) {
			m.ground()
			m.box(scene.Room, matte, r3.Vec{}, r3.Vec{X: 4, Y: 6, Z: 2.8}, allSides&^(south|west|east), inward)
			m.box(scene.Pane, glass, r3.Vec{}, r3.Vec{X: 4, Y: 6, Z: 2.8}, south|west|east, false)
		}
	}
	atrium := func(m *model) {
		m.ground()
		m.box(scene.Room, matte, r3.Vec{}, r3.Vec{X: 20, Y: 20, Z: 8}, allSides&^roof, true)
		m.box(scene.Pane, glass, r3.Vec{}, r3.Vec{X: 20, Y: 20, Z: 8}, roof, false)
	}
	unroofed := func(m *model) {
		m.ground()
		m.box(scene.Room, matte, r3.Vec{}, r3.Vec{X: 20, Y: 20, Z: 8}, allSides&^roof, true)
	}
	// A roof of four slabs around a hole of 1 m by 1 m above (2, 3).
	roofHole := func(m *model) {
		m.ground()
		m.box(scene.Room, matte, r3.Vec{}, r3.Vec{X: 4, Y: 6, Z: 2.8}, allSides&^roof, true)
		m.solid(0, 0, 2.8, 1.5, 6, 3)
		m.solid(2.5, 0, 2.8, 4, 6, 3)
		m.solid(1.5, 0, 2.8, 2.5, 2.5, 3)
		m.solid(1.5, 3.5, 2.8, 2.5, 6, 3)
	}
	desk := func(m *model) {
		m.office(true)
		m.solid(1, 2, 0.7, 2.6, 2.8, 0.74)
		m.solid(0.2, 0.2, 0, 0.8, 0.8, 2)
	}
	deskInSheets := func(m *model) {
		m.ground()
		m.box(scene.Room, matte, r3.Vec{}, r3.Vec{X: 4, Y: 6, Z: 2.8}, allSides, false)
		m.solid(0.2, 0.2, 0, 0.8, 0.8, 2)
	}
	neighbour := func(m *model) {
		m.office(true)
		m.box(scene.Surroundings, matte, r3.Vec{X: -10, Y: -40}, r3.Vec{X: 10, Y: -20, Z: 15}, allSides, false)
	}
	basement := func(m *model) {
		m.ground()
		m.box(scene.Room, matte, r3.Vec{Z: -3}, r3.Vec{X: 4, Y: 6, Z: -0.3}, allSides, true)
	}
	for _, c := range []struct {
		name  string
		build func(*model)
		at    r3.Vec
		want  where
	}{
		{"room", closed, r3.Vec{X: 2, Y: 3, Z: 1.2}, inRoom},
		{"corner of the room", closed, r3.Vec{X: 0.05, Y: 0.05, Z: 0.05}, inRoom},
		{"under the ceiling", closed, r3.Vec{X: 2, Y: 3, Z: 2.79}, inRoom},
		{"wall", closed, r3.Vec{X: -0.15, Y: 3, Z: 1.2}, inSolid},
		{"close to the wall's face", closed, r3.Vec{X: -0.005, Y: 3, Z: 1.2}, inSolid},
		{"ceiling slab", closed, r3.Vec{X: 2, Y: 3, Z: 2.95}, inSolid},
		{"outdoors", closed, r3.Vec{X: 2, Y: -3, Z: 1.2}, outdoors},
		{"outdoors at the wall", closed, r3.Vec{X: 2, Y: -0.8, Z: 1.2}, outdoors},
		{"on the roof", closed, r3.Vec{X: 2, Y: 3, Z: 4}, outdoors},
		{"under the ground", closed, r3.Vec{X: 20, Y: 20, Z: -1}, underground},
		{"open front", open, r3.Vec{X: 2, Y: 3, Z: 1.2}, inRoom},
		{"half a metre from the open front", open, r3.Vec{X: 2, Y: 0.5, Z: 1.2}, inRoom},
		{"at the open front", open, r3.Vec{X: 2, Y: 0.2, Z: 1.2}, inRoom},
		{"before the open front", open, r3.Vec{X: 2, Y: -1.2, Z: 1.2}, outdoors},
		{"wall beside the open front", open, r3.Vec{X: -0.15, Y: 0.5, Z: 1.2}, inSolid},
		{"sheets facing in", sheets(true), r3.Vec{X: 2, Y: 3, Z: 1.2}, inRoom},
		{"sheets facing out", sheets(false), r3.Vec{X: 2, Y: 3, Z: 1.2}, thinShell},
		{"corner of sheets facing out", sheets(false), r3.Vec{X: 0.3, Y: 0.3, Z: 0.3}, thinShell},
		{"outside sheets", sheets(true), r3.Vec{X: 2, Y: -2, Z: 1.2}, outdoors},
		{"glass on three sides", glazed(true), r3.Vec{X: 2, Y: 3, Z: 1.2}, inRoom},
		{"at the glass", glazed(true), r3.Vec{X: 2, Y: 0.2, Z: 1.2}, inRoom},
		{"glass on three sides, sheets facing out", glazed(false), r3.Vec{X: 2, Y: 3, Z: 1.2}, thinShell},
		{"outside the glass", glazed(true), r3.Vec{X: 2, Y: -0.5, Z: 1.2}, outdoors},
		{"under a glass roof", atrium, r3.Vec{X: 10, Y: 10, Z: 1.2}, inRoom},
		{"close under a glass roof", atrium, r3.Vec{X: 10, Y: 10, Z: 7.9}, inRoom},
		{"on a glass roof", atrium, r3.Vec{X: 10, Y: 10, Z: 9}, outdoors},
		{"no roof at all", unroofed, r3.Vec{X: 10, Y: 10, Z: 1.2}, outdoors},
		{"under a hole in the roof", roofHole, r3.Vec{X: 2, Y: 3, Z: 1.2}, inRoom},
		{"in a desk top", desk, r3.Vec{X: 1.8, Y: 2.4, Z: 0.72}, inSolid},
		{"above the desk", desk, r3.Vec{X: 1.8, Y: 2.4, Z: 1.2}, inRoom},
		{"under the desk", desk, r3.Vec{X: 1.8, Y: 2.4, Z: 0.4}, inRoom},
		{"in a cupboard", desk, r3.Vec{X: 0.5, Y: 0.5, Z: 1.2}, inSolid},
		{"in a cupboard of a room inside out", deskInSheets, r3.Vec{X: 0.5, Y: 0.5, Z: 1.2}, inSolid},
		{"in a neighbour's block", neighbour, r3.Vec{Y: -30, Z: 7}, inSolid},
		{"basement", basement, r3.Vec{X: 2, Y: 3, Z: -1.5}, inRoom},
	} {
		t.Run(c.name, func(t *testing.T) {
			m := newModel(t)
			c.build(m)
			if got := place(m.world(), c.at); got != c.want {
				t.Errorf("got %d, want %d", got, c.want)
			}
		})
	}
}

// TestPlaceSweep wants the same answer all over a room, up to 0.3 m from its
// walls, and in solids of any usual thickness.
func TestPlaceSweep(t *testing.T) {
	for _, c := range []struct {
		inward bool
		want   where
	}{{true, inRoom}, {false, thinShell}} {
		m := newModel(t)
		m.ground()
		m.box(scene.Room, matte, r3.Vec{}, r3.Vec{X: 4, Y: 6, Z: 2.8}, allSides, c.inward)
		w := m.world()
		for x := 0.3; x < 3.8; x += 0.425 {
			for y := 0.3; y < 5.8; y += 0.45 {
				for _, z := range []float64{0.7, 0.85, 1.2, 1.7} {
					if got := place(w, r3.Vec{X: x, Y: y, Z: z}); got != c.want {
						t.Errorf("inward %v, at %.2f %.2f %.2f: got %d, want %d", c.inward, x, y, z, got, c.want)
					}
				}
			}
		}
	}
	for _, thick := range []float64{0.02, 0.1, 0.3, 0.5, 0.6} {
		m := newModel(t)
		m.office(true)
		m.solid(1, 1, 0.1, 1+thick, 5, 2.5)
		w := m.world()
		for _, share := range []float64{0.1, 0.5, 0.9} {
			if got := place(w, r3.Vec{X: 1 + share*thick, Y: 3, Z: 1.2}); got != inSolid {
				t.Errorf("partition of %g m, at %g of it: got %d, want in a solid", thick, share, got)
			}
		}
	}
}

// TestPlaceBesideHighWall: a wall 20 m high leaves half of the sky, also to
// one who stands close before it.
func TestPlaceBesideHighWall(t *testing.T) {
	m := newModel(t)
	m.ground()
	m.solid(-20, 0, 0, 20, 10, 20)
	w := m.world()
	for _, y := range []float64{-0.3, -1, -3, -30} {
		if got := place(w, r3.Vec{Y: y, Z: 1.2}); got != outdoors {
			t.Errorf("%g m from a wall of 20 m: got %d, want outdoors", -y, got)
		}
	}
}

func BenchmarkPlace(b *testing.B) {
	var t testing.T
	m := newModel(&t)
	m.office(true)
	w := m.world()
	for b.Loop() {
		place(w, r3.Vec{X: 2, Y: 3, Z: 1.2})
	}
}
