package soundness

import (
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/scenetest"
	"squint/scene/system"
	"squint/trace"
)

// The finishes and parts of a model in the tests.
const (
	matte int32 = iota
	glass
)

// model is a small building in the making.
type model struct {
	t *testing.T
	s *scene.Scene
}

func newModel(t *testing.T) *model {
	t.Helper()
	s := scenetest.New()
	s.Project.File = "p.toml"
	scenetest.Matte(t, s, 0.5) // matte
	pane, err := materials.NewGlazing(0.8, 2)
	scenetest.Finish(t, s, pane, err) // glass
	return &model{t, s}
}

// quad is wound counter-clockwise seen from its front.
func (m *model) quad(kind scene.Kind, finish int32, a, b, c, d r3.Vec) {
	scenetest.Quad(m.s, scenetest.Part(m.s, "", kind, 0), finish, a, b, c, d)
}

// sides of a box.
const (
	west = 1 << iota
	east
	south
	north
	floor
	roof
	allSides = 63
)

// box has the faces named in sides, their fronts outside or inside.
func (m *model) box(kind scene.Kind, finish int32, lo, hi r3.Vec, sides int, inward bool) {
	v := func(i int) r3.Vec {
		p := lo
		if i&1 != 0 {
			p.X = hi.X
		}
		if i&2 != 0 {
			p.Y = hi.Y
		}
		if i&4 != 0 {
			p.Z = hi.Z
		}
		return p
	}
	// counter-clockwise seen from outside
	for i, f := range [6][4]int{{0, 4, 6, 2}, {1, 3, 7, 5}, {0, 1, 5, 4}, {2, 6, 7, 3}, {0, 2, 3, 1}, {4, 5, 7, 6}} {
		if sides&(1<<i) == 0 {
			continue
		}
		if inward {
			f[1], f[3] = f[3], f[1]
		}
		m.quad(kind, finish, v(f[0]), v(f[1]), v(f[2]), v(f[3]))
	}
}

func (m *model) solid(x0, y0, z0, x1, y1, z1 float64) {
	m.box(scene.Room, matte, r3.Vec{X: x0, Y: y0, Z: z0}, r3.Vec{X: x1, Y: y1, Z: z1}, allSides, false)
}

// ground at z = 0, far around.
func (m *model) ground() {
	const far = 100.0
	m.quad(scene.GroundPlane, matte, r3.Vec{X: -far, Y: -far, Z: -0.01}, r3.Vec{X: far, Y: -far, Z: -0.01}, r3.Vec{X: far, Y: far, Z: -0.01}, r3.Vec{X: -far, Y: far, Z: -0.01})
}

func (m *model) world() *trace.World { return trace.Accelerate(m.s, 1) }

// office is a room of 4 m by 6 m by 2.8 m inside walls of 0.3 m, whose south
// side is left open where front is false.
func (m *model) office(front bool) {
	m.ground()
	m.solid(-0.3, -0.3, -0.3, 4.3, 6.3, 0)
	m.solid(-0.3, -0.3, 2.8, 4.3, 6.3, 3.1)
	m.solid(-0.3, 0, 0, 0, 6, 2.8)
	m.solid(4, 0, 0, 4.3, 6, 2.8)
	m.solid(-0.3, 6, 0, 4.3, 6.3, 2.8)
	if front {
		m.solid(-0.3, -0.3, 0, 4.3, 0, 2.8)
	}
}

func (m *model) opening(x0, x1, y, z0, z1 float64) {
	r, err := system.RectFromCorners([4]r3.Vec{{X: x0, Y: y, Z: z0}, {X: x1, Y: y, Z: z0}, {X: x1, Y: y, Z: z1}, {X: x0, Y: y, Z: z1}}, r3.Vec{})
	if err != nil {
		m.t.Fatal(err)
	}
	m.s.Openings = append(m.s.Openings, scene.Opening{Name: "window", Rect: r})
	c := r.Corners()
	m.quad(scene.Pane, glass, c[0], c[1], c[2], c[3])
	m.s.Parts[len(m.s.Parts)-1].Opening = len(m.s.Openings) - 1
}
