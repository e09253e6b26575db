package soundness

import (
	"slices"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/scene/project"
)

// Positions of grids are left out by their number, two viewpoints each here;
// viewpoints of no grid are not.
func TestOfGrids(t *testing.T) {
	m := newModel(t)
	m.office(true)
	m.solid(1, 2, 0, 1.6, 4, 2) // a cupboard
	m.s.Project.ViewGrids = []project.ViewGrid{{Name: "sound", Line: 10}, {Name: "some", Line: 20}, {Name: "none", Line: 30}}
	add := func(grid string, x, z float64) {
		for range 2 {
			m.s.Viewpoints = append(m.s.Viewpoints, scene.Viewpoint{Grid: grid, Position: r3.Vec{X: x, Y: 3, Z: z}})
		}
	}
	add("", 1.3, 1.2)
	add("sound", 2.5, 1.2)
	add("some", 1.3, 1.2) // in the cupboard
	add("some", 2.5, 1.2)
	add("some", 9, 1.2) // in the garden
	add("some", 9, -1)  // below it
	add("none", 9, 1.2)
	out, notes, errs := OfGrids(m.world())
	if want := []int{4, 5, 8, 9, 10, 11, 12, 13}; !slices.Equal(out, want) {
		t.Errorf("got viewpoints %v, want %v", out, want)
	}
	if want := `view grid "some" leaves out 3 of 4 positions: 1 inside walls, furniture or other solids, 1 outside the building, 1 below the ground.`; len(notes) != 1 || notes[0] != want {
		t.Errorf("got notes %q, want %q", notes, want)
	}
	if len(errs) != 1 || !strings.HasPrefix(errs[0].Error(), `p.toml:30: view_grid "none": none of 1 positions lies in a room; `) {
		t.Errorf("got errors %v", errs)
	}
}
