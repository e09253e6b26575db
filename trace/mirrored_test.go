package trace_test

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
	"gonum.org/v1/gonum/stat/distuv"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/photometry"
	"squint/scene/scenetest"
	"squint/trace"
)

// mirroredModel builds small scenes of sheets for the checks of the sun in
// mirrors. Finishes: matte sheets catch photons, black ones only stand in the
// way.
type mirroredModel struct {
	t testing.TB
	s *scene.Scene
}

func newMirroredModel(t testing.TB) *mirroredModel {
	return &mirroredModel{t, scenetest.New()}
}

// quad adds a rectangle as a part of its own and returns the part.
func (m *mirroredModel) quad(f materials.BSDF, a, b, c, d r3.Vec) int32 {
	part := scenetest.Part(m.s, "", scene.Room, 1)
	scenetest.Quad(m.s, part, scenetest.Finish(m.t, m.s, f, nil), a, b, c, d)
	return part
}

// level is a horizontal rectangle, front up.
func (m *mirroredModel) level(f materials.BSDF, x0, x1, y0, y1, z float64) int32 {
	return m.quad(f, r3.Vec{X: x0, Y: y0, Z: z}, r3.Vec{X: x1, Y: y0, Z: z}, r3.Vec{X: x1, Y: y1, Z: z}, r3.Vec{X: x0, Y: y1, Z: z})
}

// upright is a rectangle in a plane of constant y, front to -y.
func (m *mirroredModel) upright(f materials.BSDF, x0, x1, y, z0, z1 float64) int32 {
	return m.quad(f, r3.Vec{X: x0, Y: y, Z: z0}, r3.Vec{X: x1, Y: y, Z: z0}, r3.Vec{X: x1, Y: y, Z: z1}, r3.Vec{X: x0, Y: y, Z: z1})
}

func (m *mirroredModel) world() *trace.World { return trace.Accelerate(m.s, 1) }

func (m *mirroredModel) matte(rho float64) materials.BSDF {
	b, err := materials.NewMatte(rho)
	if err != nil {
		m.t.Fatal(err)
	}
	return b
}

func (m *mirroredModel) mirror(rho float64) materials.BSDF {
	b, err := materials.NewMirror(rho, 0)
	if err != nil {
		m.t.Fatal(err)
	}
	return b
}

// mirroredSun is the direction to a sun at an altitude, south (-y) and turned
// by an azimuth towards west (-x).
func mirroredSun(altitudeDeg, azimuthDeg float64) r3.Vec {
	sa, ca := math.Sincos(altitudeDeg * math.Pi / 180)
	sf, cf := math.Sincos(azimuthDeg * math.Pi / 180)
	return r3.Vec{X: -ca * sf, Y: -ca * cf, Z: sa}
}

// mirroredDraw draws uniform directions to the disc from 64 random bits.
func mirroredDraw(sun r3.Vec) func(bits uint64) (r3.Vec, bool) {
	return func(bits uint64) (r3.Vec, bool) {
		u, v := float64(bits>>32)/(1<<32), float64(bits&0xffffffff)/(1<<32)
		return trace.ConeDirection(sun, photometry.SunDiameterRad/2, u, v), true
	}
}

// mirroredRow is a comparison: stdErr with dof degrees of freedom, allow for
// what is known to differ other than by chance.
type mirroredRow struct {
	name              string
	want, got, stdErr float64
	allow             float64
	dof               int
}

// mirroredRejects counts rows outside of Student's two-sided limit for a family
// of this size at family error 0.01. Source: Sidak 1967, Rectangular confidence
// regions for the means of multivariate normal distributions, JASA 62.
func mirroredRejects(rows []mirroredRow, factor float64) (n int, worst float64, at mirroredRow) {
	tail := (1 - math.Pow(0.99, 1/float64(len(rows)))) / 2
	for _, r := range rows {
		lim := distuv.StudentsT{Sigma: 1, Nu: float64(r.dof)}.Quantile(1 - tail)
		z := math.Max(0, math.Abs(r.got*factor-r.want)-r.allow) / math.Max(r.stdErr, 1e-300)
		if !(z <= lim) {
			n++
		}
		if z/lim >= worst {
			worst, at = z/lim, r
		}
	}
	return n, worst, at
}

// mirroredJudge fails on rejected rows and demands that the same rows, larger
// by the share defect, are rejected.
func mirroredJudge(t *testing.T, group string, rows []mirroredRow, defect float64) {
	t.Helper()
	table := ""
	for _, r := range rows {
		table += fmt.Sprintf("\n%-46s want %12.6g got %12.6g +- %.2g, allowed %.2g", r.name, r.want, r.got, r.stdErr, r.allow)
	}
	n, worst, at := mirroredRejects(rows, 1)
	t.Logf("%s: worst %.2f of its limit: %s%s", group, worst, at.name, table)
	if n > 0 {
		t.Errorf("%s: %d of %d values lie outside of the limits (family error 0.01), worst %s: got %.6g, want %.6g, standard error %.2g, allowed %.2g",
			group, n, len(rows), at.name, at.got, at.want, at.stdErr, at.allow)
	}
	if n, _, _ := mirroredRejects(rows, 1+defect); n == 0 {
		t.Errorf("%s: twin: values larger by %.3g were not rejected", group, defect)
	}
}

// mirroredTally is the mean of independent values and its standard error.
type mirroredTally struct {
	n           int
	sum, square float64
}

func (a *mirroredTally) add(x float64) { a.n++; a.sum += x; a.square += x * x }

func (a *mirroredTally) mean() float64 { return a.sum / float64(a.n) }

func (a *mirroredTally) stdErr() float64 {
	m := a.mean()
	return math.Sqrt(math.Max(0, a.square/float64(a.n)-m*m) / float64(a.n-1))
}

// mirroredShots shoots the sun some times, independently, and hands every
// landing on to take, with the number of the shot.
func mirroredShots(w *trace.World, sun r3.Vec, normalLx float64, shots, photons int, seed uint64, take func(shot int, h *trace.Hit, flux float64)) {
	p := w.Aim(sun)
	for k := range shots {
		s := sampling.Stream3(seed, 801, uint64(k))
		p.Shoot(normalLx, photons, mirroredDraw(sun), &s, func(h *trace.Hit, flux float64) { take(k, h, flux) })
	}
}
