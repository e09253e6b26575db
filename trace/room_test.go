package trace_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
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

func (r *room) finish(b materials.BSDF, err error) int32 {
	return scenetest.Finish(r.t, r.s, b, err)
}

func (r *room) matte(rho float64) int32 { return scenetest.Matte(r.t, r.s, rho) }

func (r *room) part(name string) int32 { return scenetest.Part(r.s, name, scene.Room, .2) }

// rect adds a rectangle from org along u and v.
func (r *room) rect(part, finish int32, org, u, v r3.Vec) {
	scenetest.Rect(r.s, part, finish, org, u, v)
}

func vec(x, y, z float64) r3.Vec { return r3.Vec{X: x, Y: y, Z: z} }

// shell adds a closed box of 4 x 8 x 3 m but for a window of 2 x 1.2 m, sill
// 1 m, in the wall at y = 0.
func (r *room) shell(finish int32) {
	p := r.part("shell")
	r.rect(p, finish, vec(0, 0, 0), vec(4, 0, 0), vec(0, 8, 0))
	r.rect(p, finish, vec(0, 0, 3), vec(0, 8, 0), vec(4, 0, 0))
	r.rect(p, finish, vec(0, 0, 0), vec(0, 8, 0), vec(0, 0, 3))
	r.rect(p, finish, vec(4, 0, 0), vec(0, 0, 3), vec(0, 8, 0))
	r.rect(p, finish, vec(0, 8, 0), vec(4, 0, 0), vec(0, 0, 3))
	r.rect(p, finish, vec(0, 0, 0), vec(4, 0, 0), vec(0, 0, 1))
	r.rect(p, finish, vec(0, 0, 2.2), vec(4, 0, 0), vec(0, 0, .8))
	r.rect(p, finish, vec(0, 0, 1), vec(1, 0, 0), vec(0, 0, 1.2))
	r.rect(p, finish, vec(3, 0, 1), vec(1, 0, 0), vec(0, 0, 1.2))
}

// opening names the rectangle from org along across and up, seen from indoors.
func (r *room) opening(org, across, up r3.Vec) {
	scenetest.Opening(r.s, "opening", org, across, up)
}

func (r *room) world() *trace.World { return trace.Accelerate(r.s, 1) }

// moment is a sky without sun.
func moment(t testing.TB, kind int, month int) *scene.Moment {
	s, err := sky.NewCIE(kind, r3.Unit(vec(.2, -.6, .7)), sky.ByHorizontalIlluminance(math.Pi))
	if err != nil {
		t.Fatal(err)
	}
	return &scene.Moment{Step: kind, Month: month, Sun: vec(0, 0, 1), Sky: s, DiffuseLx: math.Pi, GlobalLx: math.Pi}
}

// tally is a mean with its standard error.
type tally struct {
	n           float64
	sum, square float64
}

func (a *tally) add(x float64) { a.n++; a.sum += x; a.square += x * x }
func (a *tally) mean() float64 { return a.sum / a.n }
func (a *tally) variance() float64 {
	m := a.mean()
	return math.Max(0, a.square/a.n-m*m) * a.n / (a.n - 1)
}
func (a *tally) stdErr() float64 { return math.Sqrt(a.variance() / a.n) }
