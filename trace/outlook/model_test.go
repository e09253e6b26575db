package outlook_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/scenetest"
	"squint/scene/system"
	"squint/trace"
)

const degree = math.Pi / 180

func vec(x, y, z float64) r3.Vec { return r3.Vec{X: x, Y: y, Z: z} }

// model is a scene made by hand. Openings lie in the plane y = 0 and face +y.
type model struct {
	t testing.TB
	s *scene.Scene
}

func newModel(t testing.TB) *model {
	m := &model{t, scenetest.New()}
	m.s.GroundLevelM = -100
	m.finish(materials.NewMatte(.5)) // 0
	// A far corner, so that a scene of openings alone has a tree.
	m.rect(scene.Room, 0, vec(-40, -40, 40), vec(.1, 0, 0), vec(0, .1, 0))
	return m
}

func (m *model) finish(b materials.BSDF, err error) int32 {
	m.t.Helper()
	return scenetest.Finish(m.t, m.s, b, err)
}

func (m *model) glass() int32 { return m.finish(materials.NewGlazing(.8, 1)) }

func (m *model) part(kind scene.Kind) int32 {
	return scenetest.Part(m.s, "", kind, 1)
}

func (m *model) rect(kind scene.Kind, finish int32, org, u, v r3.Vec) {
	scenetest.Rect(m.s, m.part(kind), finish, org, u, v)
}

// window is an opening from (x0, z0) to (x1, z1).
func (m *model) window(x0, z0, x1, z1 float64) system.Rect {
	r := system.Rect{Origin: vec(x0, 0, z0), Across: vec(1, 0, 0), Up: vec(0, 0, 1), Outward: vec(0, 1, 0), WidthM: x1 - x0, HeightM: z1 - z0}
	m.s.Openings = append(m.s.Openings, scene.Opening{Name: "window", Rect: r})
	return r
}

// shelf is a light shelf at an opening, of one finish.
func (m *model) shelf(s system.LightShelf, r system.Rect, finish int32) {
	m.t.Helper()
	s.Top, s.Underside = "board", "board"
	faces, err := s.Build(r)
	if err != nil {
		m.t.Fatal(err)
	}
	p := m.part(scene.System)
	for _, f := range faces {
		m.s.Triangles = append(m.s.Triangles, scene.Triangle{V: f.V, Finish: finish, Part: p})
	}
}

func (m *model) world() *trace.World { return trace.Accelerate(m.s, 1) }

// near fails the test where got is further from want than within.
func near(t *testing.T, what string, got, want, within float64) {
	t.Helper()
	if !(math.Abs(got-want) <= within) {
		t.Errorf("%s: got %.6f, want %.6f within %.2g", what, got, want, within)
	}
}
