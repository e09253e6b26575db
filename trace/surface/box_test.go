package surface

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/scene/scenetest"
	"squint/scene/sky"
	"squint/trace"
)

// room collects the triangles of a test scene.
type room struct {
	t testing.TB
	s *scene.Scene
}

func newRoom(t testing.TB) *room {
	return &room{t, scenetest.New()}
}

func (r *room) matte(rho float64) int32 { return scenetest.Matte(r.t, r.s, rho) }

func (r *room) part(name string, texelM float64) int32 {
	return scenetest.Part(r.s, name, scene.Room, texelM)
}

func (r *room) tri(part, finish int32, a, b, c r3.Vec) {
	scenetest.Triangle(r.s, part, finish, a, b, c)
}

// rect adds a rectangle from org along u and v.
func (r *room) rect(part, finish int32, org, u, v r3.Vec) {
	scenetest.Rect(r.s, part, finish, org, u, v)
}

// solid adds a closed box whose fronts look outwards.
func (r *room) solid(part, finish int32, lo, hi r3.Vec) {
	d := r3.Sub(hi, lo)
	x, y, z := r3.Vec{X: d.X}, r3.Vec{Y: d.Y}, r3.Vec{Z: d.Z}
	r.rect(part, finish, lo, y, x)
	r.rect(part, finish, r3.Add(lo, z), x, y)
	r.rect(part, finish, lo, z, y)
	r.rect(part, finish, r3.Add(lo, x), y, z)
	r.rect(part, finish, lo, x, z)
	r.rect(part, finish, r3.Add(lo, y), z, x)
}

// opening names the rectangle from org along across and up, seen from indoors.
func (r *room) opening(org, across, up r3.Vec) {
	scenetest.Opening(r.s, "opening", org, across, up)
}

// facadeRoom is a room of 3.6 x 8.2 x 2.8 m like the demo's: walls of solids
// 0.3 m thick, a window 3.2 m wide from 0.9 to 2.6 m in the facade at y = 0, a
// desk, slats at 45 degrees before the window's upper part where asked for.
func facadeRoom(t testing.TB, texelM float64, slats bool) *room {
	r := newRoom(t)
	wall, floor, ceiling := r.matte(.5), r.matte(.2), r.matte(.7)
	v := func(x, y, z float64) r3.Vec { return r3.Vec{X: x, Y: y, Z: z} }
	r.solid(r.part("floor", texelM), floor, v(-.3, -.3, -.3), v(3.9, 8.5, 0))
	r.solid(r.part("ceiling", texelM), ceiling, v(-.3, -.3, 2.8), v(3.9, 8.5, 3.1))
	r.solid(r.part("west", texelM), wall, v(-.3, -.3, 0), v(0, 8.5, 2.8))
	r.solid(r.part("east", texelM), wall, v(3.6, -.3, 0), v(3.9, 8.5, 2.8))
	r.solid(r.part("north", texelM), wall, v(0, 8.2, 0), v(3.6, 8.5, 2.8))
	r.solid(r.part("sill", texelM), wall, v(0, -.3, 0), v(3.6, 0, .9))
	r.solid(r.part("head", texelM), wall, v(0, -.3, 2.6), v(3.6, 0, 2.8))
	r.solid(r.part("jamb west", texelM), wall, v(0, -.3, .9), v(.2, 0, 2.6))
	r.solid(r.part("jamb east", texelM), wall, v(3.4, -.3, .9), v(3.6, 0, 2.6))
	r.solid(r.part("desk", texelM), wall, v(1, 2, .72), v(2.6, 2.8, .75))
	if slats {
		p := r.part("slats", .1)
		for z := 1.8; z < 2.6; z += .07 {
			r.rect(p, ceiling, v(.2, -.2, z), v(3.2, 0, 0), v(0, .057, .057))
		}
	}
	r.opening(v(3.4, -.3, .9), v(-3.2, 0, 0), v(0, 0, 1.7))
	return r
}

func (r *room) world() *trace.World { return trace.Accelerate(r.s, 1) }

func black(t testing.TB) *sky.Sky {
	s, err := sky.NewCIE(5, r3.Vec{Z: 1}, sky.ByZenithLuminance(0))
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// sunAt is a moment of sun alone, azimuth counted from -y towards -x.
func sunAt(t testing.TB, hour int, altDeg, azDeg, normalLx float64) *scene.Moment {
	sa, ca := math.Sincos(altDeg * math.Pi / 180)
	sz, cz := math.Sincos(azDeg * math.Pi / 180)
	d := r3.Vec{X: -ca * sz, Y: -ca * cz, Z: sa}
	return &scene.Moment{Step: hour, Sun: d, SunNormalLx: normalLx, Sky: black(t), GlobalLx: normalLx * sa}
}

// everySide asks for both sides of all texels and traces them.
func everySide(t testing.TB, w *trace.World, cfg Config) *Transport {
	tr := NewTransport(w, sky.NewPatches(1), cfg)
	all := make([]int32, 2*tr.Texels.Len())
	for i := range all {
		all[i] = int32(i)
	}
	tr.Activate(all)
	if err := tr.Trace(t.Context(), nil); err != nil {
		t.Fatal(err)
	}
	return tr
}

// skies is one moment of a uniform sky.
func skies(t testing.TB) []*scene.Moment {
	s, err := sky.NewCIE(5, r3.Vec{Z: 1}, sky.ByHorizontalIlluminance(10000))
	if err != nil {
		t.Fatal(err)
	}
	return []*scene.Moment{{Step: 1, Sun: r3.Vec{Z: 1}, Sky: s, DiffuseLx: 10000, GlobalLx: 10000}}
}
