package annual_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/scenetest"
	"squint/scene/sky"
	"squint/scene/system"
	"squint/trace"
)

// model builds scenes for tests from quads.
type model struct {
	t testing.TB
	s *scene.Scene
	// texelM is given to the parts that follow.
	texelM float64
}

func newModel(t testing.TB, texelM float64) *model {
	return &model{t: t, s: scenetest.New(), texelM: texelM}
}

func (m *model) finish(b materials.BSDF) int32 {
	return scenetest.Finish(m.t, m.s, b, nil)
}

func (m *model) matte(rho float64) int32 { return scenetest.Matte(m.t, m.s, rho) }

func (m *model) part(name string, kind scene.Kind) int32 {
	return scenetest.Part(m.s, name, kind, m.texelM)
}

func (m *model) tri(part, finish int32, a, b, c r3.Vec) {
	scenetest.Triangle(m.s, part, finish, a, b, c)
}

func (m *model) quad(part, finish int32, a, b, c, d r3.Vec) {
	scenetest.Quad(m.s, part, finish, a, b, c, d)
}

// hole is a rectangle in a face's own coordinates.
type hole struct{ u0, v0, u1, v1 float64 }

// face is a rectangle from org along u and v (whole edges) with an optional
// hole; its front looks along u x v.
func (m *model) face(part, finish int32, org, u, v r3.Vec, h *hole) {
	lu, lv := r3.Norm(u), r3.Norm(v)
	uu, vv := r3.Unit(u), r3.Unit(v)
	at := func(a, b float64) r3.Vec { return r3.Add(org, r3.Add(r3.Scale(a, uu), r3.Scale(b, vv))) }
	rect := func(a0, b0, a1, b1 float64) {
		if a1-a0 > 1e-12 && b1-b0 > 1e-12 {
			m.quad(part, finish, at(a0, b0), at(a1, b0), at(a1, b1), at(a0, b1))
		}
	}
	if h == nil {
		rect(0, 0, lu, lv)
		return
	}
	rect(0, 0, lu, h.v0)
	rect(0, h.v1, lu, lv)
	rect(0, h.v0, h.u0, h.v1)
	rect(h.u1, h.v0, lu, h.v1)
}

// opening adds the portal of a rectangle and returns its index.
func (m *model) opening(out r3.Vec, c ...r3.Vec) int {
	r, err := system.RectFromCorners([4]r3.Vec{c[0], c[1], c[2], c[3]}, out)
	if err != nil {
		m.t.Fatal(err)
	}
	m.s.Openings = append(m.s.Openings, scene.Opening{Name: "opening", Rect: r})
	return len(m.s.Openings) - 1
}

// aperture is the hole of a box: in the roof or in the facade (the wall at the
// box's smallest y), in coordinates of the model: x and y, or x and z.
type aperture struct {
	roof bool
	hole
}

// rect gives the aperture's corner and edges in the box.
func (a aperture) rect(lo, hi r3.Vec) (org, u, v, out r3.Vec) {
	if a.roof {
		return r3.Vec{X: a.u0, Y: a.v0, Z: hi.Z}, r3.Vec{X: a.u1 - a.u0}, r3.Vec{Y: a.v1 - a.v0}, r3.Vec{Z: 1}
	}
	return r3.Vec{X: a.u0, Y: lo.Y, Z: a.v0}, r3.Vec{X: a.u1 - a.u0}, r3.Vec{Z: a.v1 - a.v0}, r3.Vec{Y: -1}
}

// box is a closed room with one aperture; fronts look inwards. Finishes: floor,
// ceiling, walls.
func (m *model) box(lo, hi r3.Vec, floor, ceiling, wall int32, a aperture) {
	d := r3.Sub(hi, lo)
	x, y, z := r3.Vec{X: d.X}, r3.Vec{Y: d.Y}, r3.Vec{Z: d.Z}
	var roof, facade *hole
	if a.roof {
		roof = &hole{a.v0 - lo.Y, a.u0 - lo.X, a.v1 - lo.Y, a.u1 - lo.X} // face runs y, x
	} else {
		facade = &hole{a.v0 - lo.Z, a.u0 - lo.X, a.v1 - lo.Z, a.u1 - lo.X} // face runs z, x
	}
	m.face(m.part("floor", scene.Room), floor, lo, x, y, nil)
	m.face(m.part("ceiling", scene.Room), ceiling, r3.Add(lo, z), y, x, roof)
	m.face(m.part("facade", scene.Room), wall, lo, z, x, facade)
	m.face(m.part("west", scene.Room), wall, lo, y, z, nil)
	m.face(m.part("east", scene.Room), wall, r3.Add(lo, x), z, y, nil)
	m.face(m.part("north", scene.Room), wall, r3.Add(lo, y), x, z, nil)
	o, u, v, out := a.rect(lo, hi)
	m.opening(out, o, r3.Add(o, u), r3.Add(o, r3.Add(u, v)), r3.Add(o, v))
}

// pane closes the aperture of a box by glass.
func (m *model) pane(lo, hi r3.Vec, a aperture, g materials.BSDF) {
	o, u, v, _ := a.rect(lo, hi)
	m.face(m.part("pane", scene.Pane), m.finish(g), o, u, v, nil)
}

func (m *model) world() *trace.World { return trace.Accelerate(m.s, 1) }

// skyMoment is a moment without sun.
func skyMoment(hour int, s *sky.Sky) *scene.Moment {
	e := s.HorizontalIlluminance()
	return &scene.Moment{Step: hour, Sun: r3.Vec{Z: 1}, Sky: s, DiffuseLx: e, GlobalLx: e}
}

// sunMoment is a moment with a black sky. The sun stands at an altitude and at
// an azimuth counted from the facade's normal (-y) towards west (-x).
func sunMoment(t testing.TB, hour int, altitudeRad, fromFacadeRad, normalLx float64) *scene.Moment {
	s, err := sky.NewCIE(5, r3.Vec{Z: 1}, sky.ByZenithLuminance(0))
	if err != nil {
		t.Fatal(err)
	}
	d := direction(altitudeRad, fromFacadeRad)
	return &scene.Moment{Step: hour, Sun: d, SunNormalLx: normalLx, Sky: s, GlobalLx: normalLx * d.Z}
}

func direction(altitudeRad, fromFacadeRad float64) r3.Vec {
	sa, ca := math.Sincos(altitudeRad)
	sf, cf := math.Sincos(fromFacadeRad)
	return r3.Vec{X: -ca * sf, Y: -ca * cf, Z: sa}
}

// uniform is a sky of luminance 1, hence of pi lx.
func uniform(t testing.TB) *sky.Sky {
	s, err := sky.NewCIE(5, r3.Vec{Z: 1}, sky.ByZenithLuminance(1))
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// overcast is the sky of Moon & Spencer with 1 lx on a level plane.
func overcast(t testing.TB) *sky.Sky {
	s, err := sky.NewOvercastTraditional(sky.ByHorizontalIlluminance(1))
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func deg(x float64) float64 { return x * math.Pi / 180 }
