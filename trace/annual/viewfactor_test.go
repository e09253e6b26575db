package annual_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/scene"
	"squint/trace"
)

// scaleM is the unit length of the view-factor scenes: rooms are metres.
const scaleM = 3.0

// exchange is a black enclosure with one opening to a sky of luminance 1; the
// receiving rectangle's mean illuminance is pi times its view factor to the
// opening. A point is a rectangle without edges.
type exchange struct {
	w         *trace.World
	org, u, v r3.Vec
}

// exchangeOf builds the configuration of a row of 08a, false where it is
// not one of rectangles.
func exchangeOf(t *testing.T, kind string, p []float64) (exchange, bool) {
	m := newModel(t, 1)
	black := m.matte(0)
	s := scaleM
	switch {
	case strings.HasPrefix(kind, "parallel_opposed_rect"), strings.HasPrefix(kind, "dA_to_parallel_rect_corner"):
		x, y := s*p[0], s*p[1]
		m.box(r3.Vec{X: -1, Y: -1, Z: -1}, r3.Vec{X: x + 1, Y: y + 1, Z: s}, black, black, black, aperture{true, hole{0, 0, x, y}})
		e := exchange{w: m.world()}
		if strings.HasPrefix(kind, "parallel") {
			e.u, e.v = r3.Vec{X: x}, r3.Vec{Y: y}
		}
		return e, true
	case strings.HasPrefix(kind, "perpendicular_rect_common_edge"):
		w, h := s*p[0], s*p[1]
		m.box(r3.Vec{X: -1, Z: -1}, r3.Vec{X: s + 1, Y: w + 1, Z: h + 1}, black, black, black, aperture{false, hole{0, 0, s, h}})
		return exchange{w: m.world(), u: r3.Vec{X: s}, v: r3.Vec{Y: w}}, true
	case strings.HasPrefix(kind, "dA_horizontal_to_vertical_rect"):
		m.box(r3.Vec{X: -1, Y: -p[2], Z: -1}, r3.Vec{X: p[0] + 1, Y: 1, Z: p[1] + 1}, black, black, black, aperture{false, hole{0, 0, p[0], p[1]}})
		return exchange{w: m.world()}, true
	}
	// Discs: the opening is a regular polygon of the disc's area.
	r, h := p[0], p[1]
	if strings.HasPrefix(kind, "coaxial_discs") {
		r, h = p[1], p[2]
	}
	discOpening(m, black, r, h)
	return exchange{w: m.world()}, false
}

// discSides is the number of sides that stand for a circle.
const discSides = 256

// discOpening is a black box around the origin with a round hole at height h.
func discOpening(m *model, black int32, r, h float64) {
	// Equal area: n/2 R^2 sin(2 pi/n) = pi r^2.
	ring := r * math.Sqrt(2*math.Pi/discSides/math.Sin(2*math.Pi/discSides))
	big := 2 * (r + 1)
	lo, hi := r3.Vec{X: -big, Y: -big, Z: -1}, r3.Vec{X: big, Y: big, Z: h}
	m.box(lo, hi, black, black, black, aperture{true, hole{-big, -big, big, big}})
	m.s.Openings = nil // the bounding square is no portal for all of it
	part := m.part("ring", scene.Room)
	at := func(i int) (inner, outer r3.Vec) {
		s, c := math.Sincos(2 * math.Pi * float64(i%discSides) / discSides)
		k := big / math.Max(math.Abs(s), math.Abs(c))
		return r3.Vec{X: ring * c, Y: ring * s, Z: h}, r3.Vec{X: k * c, Y: k * s, Z: h}
	}
	for i := range discSides {
		a, b := at(i)
		c, d := at(i + 1)
		m.quad(part, black, a, b, d, c)
	}
	m.opening(r3.Vec{Z: 1}, r3.Vec{X: -r, Y: -r, Z: h}, r3.Vec{X: r, Y: -r, Z: h}, r3.Vec{X: r, Y: r, Z: h}, r3.Vec{X: -r, Y: r, Z: h})
}

// discBound bounds the relative error of a polygon of equal area: its edge
// departs from the circle by at most (pi/n)^2/2 of the radius, half of that
// each way.
const discBound = math.Pi * math.Pi / discSides / discSides

// TestViewFactors holds both engines against the view factors of 08a.
func TestViewFactors(t *testing.T) {
	oracle := parity{group: "8.1 view factors, path tracer"}
	engine := parity{group: "8.1 view factors, annual engine"}
	moments := []*scene.Moment{skyMoment(1, uniform(t))}
	for i, row := range table(t, "08a_view_factors.csv") {
		if testing.Short() && i%9 != 0 {
			continue
		}
		p, want := numbers(t, row[1:4]), number(t, row[4])
		name := fmt.Sprintf("%s %v", strings.SplitN(row[0], " ", 2)[0], p)
		ex, rects := exchangeOf(t, row[0], p)
		allow := 2e-7 // the two routes of the reference
		if !rects {
			allow += want * discBound
		}
		receiver := func(n int, seed uint64) []scene.Sensor {
			if strings.HasPrefix(row[0], "coaxial_discs") {
				return onDisc(n, seed, p[0])
			}
			return scattered(n, seed, ex.org, ex.u, ex.v, r3.Vec{Z: 1})
		}
		// Black walls and a sky of luminance 1: a sample is 0 or pi, so its
		// variance is F (1-F) pi^2, known beforehand.
		n := int(math.Min(40000, 4000+2000/want))
		a := overSensors(plain(ex.w, receiver(n, uint64(2*i+1)), moments, 1, 1), 0)
		oracle.add(outcome{name: name, want: want, got: a.mean / math.Pi, stdErr: math.Sqrt(want * (1 - want) / float64(n)), allow: allow, dof: n - 1})
		b := overSensors(year(t, ex.w, receiver(1000, uint64(2*i+2)), moments, effort{batches: 2, texelSamples: 2, sensorSamples: 32, seed: 2}), 0)
		engine.add(outcome{name: name, want: want, got: b.mean / math.Pi, stdErr: b.stdErr / math.Pi, allow: allow, dof: b.dof})
	}
	oracle.judge(t, 0.1)
	engine.judge(t, 0.05)
}

// onDisc places sensors at random on a disc about the origin.
func onDisc(n int, seed uint64, r float64) []scene.Sensor {
	s := sampling.NewStream(seed, 903)
	out := make([]scene.Sensor, n)
	for i := range out {
		x, y := sampling.Disc(s.Float64(), s.Float64())
		out[i] = up(r*x, r*y, 0)
	}
	return out
}
