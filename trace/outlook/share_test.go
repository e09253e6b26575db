package outlook_test

import (
	"math"
	"testing"

	"squint/materials"
	"squint/scene"
	"squint/scene/system"
	"squint/trace/outlook"
)

// A fully wide shelf at the height of the eye hides the strip that its near
// edge spans: between the altitudes atan(z/d) of the edge's upper and lower
// arris, carried on to the glass. The strip of an opening has the solid angle
// of corner rectangles; its edges are found to within half of 1/n of the height.
func TestViewShareOfShelf(t *testing.T) {
	const n = 200
	const thickness, inside, distance = 0.1, 0.4, 2.0
	m := newModel(t)
	r := m.window(-1, 0, 1, 2)
	without := m.world()
	with := newModel(t)
	with.window(-1, 0, 1, 2)
	s := system.LightShelf{HeightM: 1 + thickness/2, InsideDepthM: inside, OutsideDepthM: 0.5, ThicknessM: thickness, ExtendM: 2, GapM: .001}
	with.shelf(s, r, 0)
	shelved := with.world()
	eye := vec(0, -distance, 1)
	got := outlook.ViewShare(shelved, without, eye, r, n)

	half := thickness / 2 * distance / (distance - inside) // on the glass
	whole := 4 * corner(1, 1, distance)
	hidden := 4 * corner(1, half, distance)
	// Two edges, each off by half a cell of 2 m / n, as a share of the height,
	// with the central rows' weight over the mean.
	bound := 2 * (0.5 * 2 / n) * 2 / (distance * distance) / whole
	near(t, "left beside a shelf", got, 1-hidden/whole, bound)
	// Twin: a shelf 2 cm thicker.
	s.ThicknessM, s.HeightM = thickness+.02, 1+thickness/2+.01
	thick := newModel(t)
	thick.window(-1, 0, 1, 2)
	thick.shelf(s, r, 0)
	if other := outlook.ViewShare(thick.world(), without, eye, r, n); math.Abs(other-(1-hidden/whole)) <= bound {
		t.Errorf("a shelf 2 cm thicker leaves the same: %.5f", other)
	}
	near(t, "without the shelf", outlook.ViewShare(without, without, eye, r, 20), 1, 0)
	if v := outlook.ViewShare(shelved, without, vec(0, 3, 1), r, 8); !math.IsNaN(v) {
		t.Errorf("an eye outdoors: %g, want NaN", v)
	}
}

// A perforated sheet at normal incidence leaves its openness, at 30 degrees
// what the rims of its holes leave. Reference sheet 11.2, thickness over
// diameter 0.5: 0.637618 of the openness, exact overlap of two circles.
func TestViewShareOfPerforation(t *testing.T) {
	const openness = 0.3
	m := newModel(t)
	r := m.window(-.01, .99, .01, 1.01) // small: nearly one direction
	m.rect(scene.Pane, m.glass(), vec(-1, 0, 0), vec(2, 0, 0), vec(0, 0, 2))
	without := m.world()
	sheet := m.finish(materials.NewPerforated(materials.Perforated{OpenShare: openness, HoleDiameterM: .002, ThicknessM: .001, Base: matte(t)}))
	m.rect(scene.System, sheet, vec(-1, .05, 0), vec(2, 0, 0), vec(0, 0, 2))
	with := m.world()
	front := outlook.ViewShare(with, without, vec(0, -4, 1), r, 8)
	// The window spans 0.15 degrees to each side; the overlap falls by 4/pi of
	// k = 0.5 tan theta, 0.0017 at most.
	near(t, "at normal incidence", front, openness, openness*.002)
	sin, cos := math.Sincos(30 * degree)
	slant := outlook.ViewShare(with, without, vec(4*sin, -4*cos, 1), r, 8)
	near(t, "at 30 degrees", slant, openness*.637618, openness*.002)
	if math.Abs(slant-openness*.829930) < openness*.002 { // the table's value at 15 degrees
		t.Error("the incidence does not matter")
	}
}

// A neighbour beyond the system is view; a wall of the room is none.
func TestViewShareOfNeighbour(t *testing.T) {
	m := newModel(t)
	r := m.window(-1, 0, 1, 2)
	m.rect(scene.Surroundings, 0, vec(-50, 20, -50), vec(100, 0, 0), vec(0, 0, 100))
	without := m.world()
	m.rect(scene.System, 0, vec(-1, .1, 0), vec(1, 0, 0), vec(0, 0, 2)) // a board over the left half
	eye := vec(0, -2, 1)
	// On the glass the board reaches 2/2.1 m from the axis. Four edges, each off by
	// half a cell of 1/100.
	a := 2 / 2.1
	near(t, "half behind a board", outlook.ViewShare(m.world(), without, eye, r, 100), 1-2*corner(a, a, 2)/(4*corner(1, 1, 2)), .02)
	m.rect(scene.Room, 0, vec(-5, -1, -5), vec(10, 0, 0), vec(0, 0, 10))
	if v := outlook.ViewShare(without, m.world(), eye, r, 10); !math.IsNaN(v) {
		t.Errorf("behind a wall: %g, want NaN", v)
	}
}
