package trace_test

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/photometry"
	"squint/trace"
)

// mirroredShelf holds the numbers of a level mirror through an opening in a
// thick wall, under a ceiling: the derived room beside the reference, and a sun
// turned by 20 degrees that its reveals shade.
type mirroredShelf struct {
	x0, x1, y0, y1, z    float64 // mirror, between the reveals
	wall, head, ceilingZ float64 // wall from -wall to 0, opening up to head
	depth, width         float64 // of the room
	rho, lx              float64
}

func derivedShelf() mirroredShelf {
	return mirroredShelf{.2, 3.4, -.6, .6, 2, .3, 2.6, 2.8, 8.2, 3.6, .85, 50}
}

// build makes the mirror, what shades it, and the ceiling, whose part it
// returns.
func (g mirroredShelf) build(m *mirroredModel) int32 {
	black := m.matte(0)
	m.level(m.mirror(g.rho), g.x0, g.x1, g.y0, g.y1, g.z)
	m.upright(black, 0, g.width, -g.wall, g.head, g.ceilingZ)
	m.upright(black, 0, g.width, 0, g.head, g.ceilingZ)
	m.level(black, 0, g.width, -g.wall, 0, g.head)
	for _, x := range [2]float64{g.x0, g.x1} {
		m.quad(black, r3.Vec{X: x, Y: -g.wall}, r3.Vec{X: x}, r3.Vec{X: x, Z: g.head}, r3.Vec{X: x, Y: -g.wall, Z: g.head})
	}
	for _, x := range [2][2]float64{{0, g.x0}, {g.x1, g.width}} {
		m.upright(black, x[0], x[1], 0, 0, g.head)
		m.upright(black, x[0], x[1], -g.wall, 0, g.head)
	}
	for _, x := range [2]float64{0, g.width} {
		m.quad(black, r3.Vec{X: x}, r3.Vec{X: x, Y: g.depth}, r3.Vec{X: x, Y: g.depth, Z: g.ceilingZ}, r3.Vec{X: x, Z: g.ceilingZ})
	}
	return m.level(m.matte(.5), 0, g.width, 0, g.depth, g.ceilingZ)
}

// shows tells whether point (x, y) of the ceiling sees, in the mirror, a point
// of the sun in direction d: the law of reflection and straight lines. The
// opening is a convex prism, so that a line is in it where its ends are.
func (g mirroredShelf) shows(x, y float64, d r3.Vec) bool {
	t := (g.ceilingZ - g.z) / d.Z
	mx, my := x+d.X*t, y+d.Y*t // on the mirror's plane
	if mx < g.x0 || mx > g.x1 || my < g.y0 || my > g.y1 {
		return false
	}
	for _, plane := range [2]float64{0, -g.wall} {
		run := (plane - my) / d.Y // along the way to the sun where positive
		if !inBetween(g.z+math.Abs(run)*d.Z, 0, g.head) || !inBetween(mx+run*d.X, g.x0, g.x1) {
			return false
		}
	}
	return x > 0 && x < g.width
}

func inBetween(x, lo, hi float64) bool { return x >= lo && x <= hi }

// meanLx is the exact illuminance of the ceiling averaged over a rectangle, by
// quadrature over it (n x n) and over the disc (a sunflower of points: Vogel
// 1979, A better way to construct the sunflower head, Math. Biosciences 44).
func (g mirroredShelf) meanLx(sun r3.Vec, x0, x1, y0, y1 float64, nx, ny, discs int) float64 {
	var sum float64
	for i := range discs {
		u := (float64(i) + .5) / float64(discs)
		d := trace.ConeDirection(sun, photometry.SunDiameterRad/2, u, math.Mod(float64(i)*.6180339887498949, 1))
		for a := range nx {
			for b := range ny {
				if g.shows(x0+(x1-x0)*(float64(a)+.5)/float64(nx), y0+(y1-y0)*(float64(b)+.5)/float64(ny), d) {
					sum += g.rho * g.lx * d.Z
				}
			}
		}
	}
	return sum / float64(discs*nx*ny)
}

// TestMirroredPatch holds the landings of photons on a ceiling against the
// image source: the illuminance of small rectangles in the patch, across both
// penumbras and, with a turned sun, everywhere.
func TestMirroredPatch(t *testing.T) {
	g := derivedShelf()
	tan := math.Tan(40 * math.Pi / 180)
	// The law of reflection: a ray over the mirror's outer edge, and one under
	// the head's outer edge.
	near := g.y0 + (g.ceilingZ-g.z)/tan
	far := -g.wall + (g.head-g.z)/tan + (g.ceilingZ-g.z)/tan
	flat := g.rho * g.lx * math.Sin(40*math.Pi/180)
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"near edge", near, 0.3534}, {"far edge", far, 1.3685}, {"illuminance", flat, 27.32}, // want: derived, rooms with answers beside the reference
	} {
		if d := math.Abs(c.got - c.want); d > 5e-3 && c.want > 2 || d > 5e-5 && c.want < 2 {
			t.Errorf("%s by the law of reflection: got %.5f, want %.4f to its last digit", c.name, c.got, c.want)
		}
	}
	type bin struct {
		x0, x1, y0, y1, want float64
		nx, ny, discs        int
	}
	cases := []struct {
		name string
		sun  r3.Vec
		bins []bin
	}{{name: "sun due south", sun: mirroredSun(40, 0)}, {name: "sun turned by 20", sun: mirroredSun(40, 20)}}
	strip := func(y0, y1 float64) { cases[0].bins = append(cases[0].bins, bin{1, 2.6, y0, y1, 0, 1, 40, 2000}) }
	for _, edge := range [2]float64{near, far} {
		for k := -5.0; k < 5; k++ {
			strip(edge+k*.004, edge+(k+1)*.004)
		}
		strip(edge-.02, edge+.02) // the whole penumbra
	}
	for k := range 9 {
		strip(.38+.1*float64(k), .48+.1*float64(k))
	}
	strip(.1, .33)
	strip(1.4, 8)
	for x := range 18 {
		for y := range 16 {
			cases[1].bins = append(cases[1].bins, bin{.2 * float64(x), .2 * float64(x+1), .1 * float64(y), .1 * float64(y+1), 0, 40, 40, 100})
		}
	}
	shots, photons, defect := 48, 12000, .05
	if testing.Short() {
		photons, defect = 3000, .1
	}
	for i, c := range cases {
		m := newMirroredModel(t)
		part := g.build(m)
		sums := make([][]float64, len(c.bins))
		for k := range sums {
			sums[k] = make([]float64, shots)
		}
		mirroredShots(m.world(), c.sun, g.lx, shots, photons, uint64(200+i), func(shot int, h *trace.Hit, flux float64) {
			if h.Part != part {
				return
			}
			for k := range c.bins {
				b := &c.bins[k]
				if inBetween(h.Point.X, b.x0, b.x1) && inBetween(h.Point.Y, b.y0, b.y1) {
					sums[k][shot] += flux / (b.x1 - b.x0) / (b.y1 - b.y0)
				}
			}
		})
		var rows []mirroredRow
		for k, b := range c.bins {
			want := g.meanLx(c.sun, b.x0, b.x1, b.y0, b.y1, b.nx, b.ny, b.discs)
			var a mirroredTally
			for _, e := range sums[k] {
				a.add(e)
			}
			name := fmt.Sprintf("x %.2f to %.2f, y %.4f to %.4f m", b.x0, b.x1, b.y0, b.y1)
			// The quadrature leaves 1/80 of a rectangle's edge where a border
			// without penumbra of its own (a wall) crosses it: 1/n of n x n points.
			row := mirroredRow{name, want, a.mean(), a.stdErr(), 2e-3 * flat, shots - 1}
			// The variance of a count of photons is its mean's, or less where strata
			// divide the mirror: a floor under the spread of few landings.
			each := flat * 3.2 * 1.2 / float64(photons*shots) // lm of a photon
			row.stdErr = math.Max(row.stdErr, math.Sqrt(want*each/(b.x1-b.x0)/(b.y1-b.y0)))
			rows = append(rows, row)
			if want == 0 && row.got != 0 {
				t.Errorf("%s: %s: got %.4g lx, want none", c.name, name, row.got)
			}
		}
		mirroredJudge(t, c.name, rows, defect)
	}
}
