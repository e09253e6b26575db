package soundness

import (
	"slices"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
)

// plane has its sensors along x at y = 3, 0.85 m above the floor.
func plane(name string, line int, xs ...float64) scene.WorkPlane {
	p := scene.WorkPlane{Name: name, Line: line}
	for _, x := range xs {
		p.Sensors = append(p.Sensors, scene.Sensor{Position: r3.Vec{X: x, Y: 3, Z: 0.85}, Normal: r3.Vec{Z: 1}})
	}
	return p
}

func TestReceivers(t *testing.T) {
	m := newModel(t)
	m.office(true)
	m.s.Viewpoints = []scene.Viewpoint{
		{Name: "good", Position: r3.Vec{X: 2, Y: 3, Z: 1.2}, Line: 10},
		{Name: "walled in", Position: r3.Vec{X: 4.15, Y: 3, Z: 1.2}, Line: 20},
		{Name: "garden", Position: r3.Vec{X: 9, Y: 3, Z: 1.2}, Line: 30},
		{Name: "mole", Position: r3.Vec{X: 9, Y: 3, Z: -1.2}, Line: 40},
	}
	m.s.WorkPlanes = []scene.WorkPlane{
		plane("desks", 50, 1, 2, 3),
		plane("all out", 60, 6, 7, 3),
		plane("in the wall", 70, 4.1, 4.2, 4.15, 2),
		plane("one out", 80, 1, 2, 3, 7),
		plane("half", 90, 1, 7), // not more than half: a note
	}
	errs, notes := Receivers(m.world())
	want := []string{
		`p.toml:20: viewpoint "walled in": [4.15, 3.00, 1.20] is inside a wall`,
		`p.toml:30: viewpoint "garden": [9.00, 3.00, 1.20] is outside the building, under the open sky`,
		`p.toml:40: viewpoint "mole": [9.00, 3.00, -1.20] is below the ground`,
		`p.toml:60: work_plane "all out": 2 of 3 sensors do not lie in a room, most of them outside the building`,
		`p.toml:70: work_plane "in the wall": 3 of 4 sensors do not lie in a room, most of them inside a wall`,
	}
	if len(errs) != len(want) {
		t.Fatalf("got %d errors, want %d: %v", len(errs), len(want), errs)
	}
	for i, w := range want {
		if !strings.HasPrefix(errs[i].Error(), w) {
			t.Errorf("got %q, want it to begin with %q", errs[i], w)
		}
	}
	if len(notes) != 2 || !strings.Contains(notes[0], `"one out": 1 of 4 sensors`) || !strings.Contains(notes[1], `"half": 1 of 2`) {
		t.Errorf("notes: got %q", notes)
	}
}

// A room inside out is no error: one note says what cannot be told.
func TestReceiversInsideOut(t *testing.T) {
	for _, inward := range []bool{true, false} {
		m := newModel(t)
		m.ground()
		m.box(scene.Room, matte, r3.Vec{}, r3.Vec{X: 4, Y: 6, Z: 2.8}, allSides, inward)
		m.s.Viewpoints = []scene.Viewpoint{{Name: "eye", Position: r3.Vec{X: 2, Y: 3, Z: 1.2}}}
		m.s.WorkPlanes = []scene.WorkPlane{plane("desks", 1, 1, 2, 3)}
		errs, notes := Receivers(m.world())
		told := slices.ContainsFunc(notes, func(n string) bool {
			return strings.HasPrefix(n, "4 viewpoints and sensors see surfaces from behind only")
		})
		if len(errs) > 0 || told == inward {
			t.Errorf("inward %v: got errors %v and notes %q", inward, errs, notes)
		}
	}
}

func TestOpenings(t *testing.T) {
	for _, c := range []struct {
		name  string
		build func(*model)
		want  string
	}{
		{"hole in the wall", func(m *model) { m.office(false) }, ""},
		{"no hole", func(m *model) { m.office(true) }, "closes 100 %"},
		{"sheet in the plane of the glass", func(m *model) {
			m.quad(scene.Room, matte, r3.Vec{Y: -0.1}, r3.Vec{X: 4, Y: -0.1}, r3.Vec{X: 4, Y: -0.1, Z: 2.8}, r3.Vec{Y: -0.1, Z: 2.8})
		}, "closes 100 %"},
		{"frame about it", func(m *model) { m.solid(1, -0.2, 1, 1.2, 0, 2.4); m.solid(2.8, -0.2, 1, 3, 0, 2.4) }, ""},
		{"glass of the mesh", func(m *model) {
			m.quad(scene.Room, glass, r3.Vec{Y: -0.12}, r3.Vec{X: 4, Y: -0.12}, r3.Vec{X: 4, Y: -0.12, Z: 2.8}, r3.Vec{Y: -0.12, Z: 2.8})
		}, "glass of its own"},
		{"roller before it", func(m *model) {
			m.quad(scene.System, matte, r3.Vec{Y: -0.05}, r3.Vec{X: 4, Y: -0.05}, r3.Vec{X: 4, Y: -0.05, Z: 2.8}, r3.Vec{Y: -0.05, Z: 2.8})
		}, ""},
		{"desk at the window", func(m *model) { m.solid(1, 0.1, 0, 3, 0.8, 1.3) }, ""}, // covers the lowest of four rows
		{"house across the street", func(m *model) { m.solid(-10, -20, 0, 10, -15, 20) }, ""},
	} {
		t.Run(c.name, func(t *testing.T) {
			m := newModel(t)
			m.opening(1, 3, -0.1, 1, 2.4)
			c.build(m)
			notes := Openings(m.world())
			switch {
			case c.want == "" && len(notes) > 0:
				t.Errorf("got %q, want none", notes)
			case c.want != "" && (len(notes) != 1 || !strings.Contains(notes[0], c.want)):
				t.Errorf("got %q, want one with %q", notes, c.want)
			}
		})
	}
}
