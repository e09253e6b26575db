package sunpath

import (
	"context"
	"math"
	"testing"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/daylight"
	"squint/materials"
	"squint/scene"
	"squint/scene/sky"
	"squint/trace"
)

// model collects the rectangles of a test scene.
type model struct {
	t testing.TB
	s *scene.Scene
}

// newModel starts with a level ground at z = -1.
func newModel(t testing.TB) *model {
	m := &model{t, &scene.Scene{}}
	m.rect(m.matte(), scene.GroundPlane, r3.Vec{X: -50, Y: -50, Z: -1}, r3.Vec{X: 100}, r3.Vec{Y: 100})
	return m
}

func (m *model) matte() materials.BSDF {
	b, err := materials.NewMatte(.5)
	if err != nil {
		m.t.Fatal(err)
	}
	return b
}

// rect adds a rectangle from org along u and v, its front towards u x v.
func (m *model) rect(b materials.BSDF, kind scene.Kind, org, u, v r3.Vec) {
	m.s.Finishes = append(m.s.Finishes, scene.Finish{BSDF: b})
	m.s.Parts = append(m.s.Parts, scene.Part{Name: "part", Kind: kind, Opening: -1, TexelM: 1})
	finish, part := int32(len(m.s.Finishes)-1), int32(len(m.s.Parts)-1)
	p, q := r3.Add(org, u), r3.Add(org, v)
	c := r3.Add(p, v)
	m.s.Triangles = append(m.s.Triangles,
		scene.Triangle{V: [3]r3.Vec{org, p, c}, Finish: finish, Part: part},
		scene.Triangle{V: [3]r3.Vec{org, c, q}, Finish: finish, Part: part})
}

// window adds an opaque wall in the plane y = 0 about a hole from x0 to x1 and
// z0 to z1.
func (m *model) window(x0, x1, z0, z1 float64) {
	const far = 40.0
	wall := func(xa, xb, za, zb float64) {
		m.rect(m.matte(), scene.Room, r3.Vec{X: xa, Z: za}, r3.Vec{X: xb - xa}, r3.Vec{Z: zb - za})
	}
	wall(-far, far, -1, z0)
	wall(-far, far, z1, far)
	wall(-far, x0, z0, z1)
	wall(x1, far, z0, z1)
}

// testSite is invented.
var testSite = sky.Site{LatitudeDeg: 47.6, LongitudeDeg: 1.5}

// input looks from a point to the south, or where the caller turns it.
func (m *model) input(p r3.Vec) *Input {
	w := trace.Accelerate(m.s, 1)
	return &Input{
		Point: Point{Name: "point", Position: p, Ahead: r3.Vec{Y: -1}},
		World: func(r3.Vec) *trace.World { return w },
		Sun:   func(t time.Time) (r3.Vec, error) { return scene.SunAt(testSite, 0, t) },
		Year:  2022, Zone: time.UTC, Workers: 2,
		Calendar: daylight.Calendar{Days: [7]bool{true, true, true, true, true}, FromH: 8, ToH: 18},
	}
}

func compute(t testing.TB, in *Input) *Year {
	t.Helper()
	y, err := Compute(context.Background(), in)
	if err != nil {
		t.Fatal(err)
	}
	return y
}

func degrees(x float64) float64 { return x * math.Pi / 180 }
