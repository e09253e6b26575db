package picture

import (
	"context"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/scenetest"
	"squint/scene/sky"
	"squint/scene/view"
	"squint/trace"
)

// model builds scenes for tests from rectangles.
type model struct {
	t testing.TB
	s *scene.Scene
}

func newModel(t testing.TB) *model {
	return &model{t, scenetest.New()}
}

func (m *model) finish(b materials.BSDF, err error) int32 {
	return scenetest.Finish(m.t, m.s, b, err)
}

func (m *model) matte(rho float64) int32 { return scenetest.Matte(m.t, m.s, rho) }

// rect adds a rectangle from org along u and v, its front on the side of u x v,
// as a part of its own.
func (m *model) rect(finish int32, texelM float64, org, u, v r3.Vec) {
	scenetest.Rect(m.s, scenetest.Part(m.s, "part", scene.Room, texelM), finish, org, u, v)
}

func at(x, y, z float64) r3.Vec { return r3.Vec{X: x, Y: y, Z: z} }

// office is a room of 4 x 5 x 3 m, its southern wall (y = 0) open from 1 m to
// 2.4 m but for half a metre at each end, with a desk and a white shelf across
// the opening.
func office(t testing.TB) *trace.World {
	m := newModel(t)
	wall, floor, ceiling := m.matte(0.5), m.matte(0.3), m.matte(0.7)
	const texel = 0.2
	m.rect(floor, texel, at(0, 0, 0), at(4, 0, 0), at(0, 5, 0))
	m.rect(ceiling, texel, at(0, 0, 3), at(0, 5, 0), at(4, 0, 0))
	m.rect(wall, texel, at(0, 0, 0), at(0, 5, 0), at(0, 0, 3))
	m.rect(wall, texel, at(4, 0, 0), at(0, 0, 3), at(0, 5, 0))
	m.rect(wall, texel, at(0, 5, 0), at(4, 0, 0), at(0, 0, 3))
	m.rect(wall, texel, at(0, 0, 0), at(0, 0, 1), at(4, 0, 0))
	m.rect(wall, texel, at(0, 0, 2.4), at(0, 0, 0.6), at(4, 0, 0))
	m.rect(wall, texel, at(0, 0, 1), at(0, 0, 1.4), at(0.5, 0, 0))
	m.rect(wall, texel, at(3.5, 0, 1), at(0, 0, 1.4), at(0.5, 0, 0))
	m.rect(floor, 0.1, at(1, 2, 0.75), at(1.6, 0, 0), at(0, 0.8, 0))
	m.rect(m.matte(0.8), 0.1, at(0.5, -0.3, 1.9), at(3, 0, 0), at(0, 0.6, 0))
	scenetest.Opening(m.s, "opening", at(3.5, 0, 1), at(-3, 0, 0), at(0, 0, 1.4))
	return trace.Accelerate(m.s, 2)
}

// sunny is a clear sky with the sun to the south-west, its altitude 35 degrees.
func sunny(t testing.TB) *scene.Moment {
	sun := r3.Unit(at(-0.3, -0.76, 0.57))
	dome, err := sky.NewCIE(12, sun, sky.ByHorizontalIlluminance(12000))
	if err != nil {
		t.Fatal(err)
	}
	return &scene.Moment{Step: 7, Sun: sun, SunNormalLx: 70000, Sky: dome, DiffuseLx: 12000, GlobalLx: 12000 + 70000*sun.Z}
}

func eye(t testing.TB, pixels int) view.View {
	v, err := view.New(at(3.2, 4.2, 1.3), at(-0.35, -1, 0), at(0, 0, 1), view.Equidistant, math.Pi, pixels, pixels)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

func light(t testing.TB, w *trace.World, m *scene.Moment, workers int, cameras ...Camera) *Light {
	t.Helper()
	s, err := Prepare(context.Background(), w, cameras, Config{TexelSamples: 256, Seed: 3, Workers: workers}, nil)
	if err != nil {
		t.Fatal(err)
	}
	l, err := s.Light(context.Background(), m)
	if err != nil {
		t.Fatal(err)
	}
	return l
}
