package outlook_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/trace/outlook"
)

// A window of width b at the distance d on its axis spans 2 atan(b/2d):
// elementary geometry; the two values are those of the reference sheet on EN
// 17037:2018, horizontal sight angle, derived there.
func TestSightAngle(t *testing.T) {
	for _, c := range []struct{ width, distance, want float64 }{
		{1, 2, 28.0725}, // 2 atan 0.25
		{4, 4, 53.1301}, // 2 atan 0.5
	} {
		m := newModel(t)
		m.window(-c.width/2, 1, c.width/2, 2)
		m.rect(scene.Pane, m.glass(), vec(-c.width/2, 0, 1), vec(c.width, 0, 0), vec(0, 0, 1))
		w := m.world()
		look := func(y float64) float64 {
			v := outlook.Look(w, vec(0, -y, 1.2))
			a, bound := v.AngleRad(50)
			if bound != 0 {
				t.Errorf("a free window: bound %g, want 0", bound)
			}
			return a / degree
		}
		near(t, "sight angle", look(c.distance), c.want, 5e-5) // four decimals given
		// Twin: an eye that stands 1 cm off.
		if got := look(c.distance + 0.01); math.Abs(got-c.want) < 5e-5 {
			t.Errorf("1 cm further off the angle is the same, %.5f", got)
		}
	}
}

// Azimuths count once and only where outdoors is seen, past walls in the room.
func TestSightAngleOfSeveral(t *testing.T) {
	m := newModel(t)
	m.window(-1, 1, 1, 2)
	m.window(-1, 2.2, 1, 3)  // above the first: the same azimuths
	m.window(3, 1, 4, 2)     // further right
	m.window(-9, -3, -8, -2) // hidden by a wall
	m.rect(scene.Room, 0, vec(-10, -0.5, -4), vec(6, 0, 0), vec(0, 0, 3.9))
	w := m.world()
	v := outlook.Look(w, vec(0, -2, 1.2))
	got, _ := v.AngleRad(0)
	want := 2*math.Atan(.5) + math.Atan(2) - math.Atan(1.5)
	near(t, "sight angle of three windows", got, want, 1e-9)

	behind := outlook.Look(w, vec(0, 2, 1.2))
	if a, _ := behind.AngleRad(0); a != 0 {
		t.Errorf("outdoors, behind the glass: %g", a)
	}
}

// A neighbour over the right half of the window, 15 m from the glass, leaves
// half of the angle beyond 20 m and takes nothing nearer.
func TestOutsideDistance(t *testing.T) {
	m := newModel(t)
	m.window(-1, 1, 1, 2)
	m.rect(scene.Surroundings, 0, vec(0, 15, -50), vec(80, 0, 0), vec(0, 0, 100))
	v := outlook.Look(m.world(), vec(0.1, -2, 1.5))
	all, _ := v.AngleRad(6)
	near(t, "beyond 6 m", all, math.Atan(.45)+math.Atan(.55), 1e-9)
	far, bound := v.AngleRad(20)
	// The neighbour's edge shows at x = 0 and y = 15 from (0.1, -2).
	want := math.Atan(.55) - math.Atan(.1/17)
	near(t, "beyond 20 m", far, want, bound)
	if !(bound > 0 && bound < 0.3*degree) {
		t.Errorf("bound %.3f degrees, want half a column of 0.5 degrees", bound/degree)
	}
	// 15 m from the glass, not from the eye.
	if a, _ := v.AngleRad(15.2); math.Abs(a-all) < bound {
		t.Error("the distance is counted from the eye")
	}
	near15, _ := v.AngleRad(14.9)
	near(t, "beyond 14.9 m", near15, all, 1e-9)
}

// Layers with their solid angles: from 1.5 m above a wide ground, a window
// whose lower edge shows the near ground, a neighbour of given angle, the sky.
func TestLayers(t *testing.T) {
	m := newModel(t)
	m.s.GroundLevelM = 0
	m.window(-1, 0.5, 1, 2.5)
	eye := vec(0, -2, 1.5)
	free := outlook.Look(m.world(), eye)
	sum := free.SkySr + free.GroundSr + free.LandscapeSr
	// The window's solid angle, twice its upper half: 4 corners.
	near(t, "all layers", sum, 4*corner(1, 1, 2), 1e-4)
	near(t, "sky", free.SkySr, 2*corner(1, 1, 2), 0.01)
	// Ground beyond 50 m lies within atan(1.5/50) of the horizon, less than two
	// rows; rows of one degree find it to within one row over the whole width.
	near(t, "far ground", free.LandscapeSr, math.Atan(1.5/50)*2*math.Atan(.5), degree*2*math.Atan(.5))
	if n, land := free.Layers(); n != 3 || !land {
		t.Errorf("a plain: %d layers, landscape %v, want 3 with it", n, land)
	}

	m.rect(scene.Surroundings, 0, vec(-50, 30, -1), vec(100, 0, 0), vec(0, 0, 40))
	wall := outlook.Look(m.world(), eye)
	if wall.SkySr != 0 || wall.GroundSr == 0 {
		t.Errorf("before a high wall: sky %g, ground %g", wall.SkySr, wall.GroundSr)
	}
	if n, land := wall.Layers(); n != 2 || !land {
		t.Errorf("before a high wall: %d layers, landscape %v, want 2 with it", n, land)
	}

	high := newModel(t)
	high.s.GroundLevelM = 0
	high.window(-1, 2, 1, 2.5)
	up := outlook.Look(high.world(), eye)
	if n, land := up.Layers(); n != 1 || land {
		t.Errorf("a high strip: %d layers, landscape %v, want the sky alone", n, land)
	}
}

// A window seen through a wider opening in front of it shows what it shows
// alone: each direction counts once.
func TestLayersThroughTwoOpenings(t *testing.T) {
	for _, inner := range []float64{0.5, 2, 1e-3} { // half width of the opening in front
		m := newModel(t)
		m.s.GroundLevelM = 0
		r := m.window(-inner, 1, inner, 2)
		m.s.Openings[0].Rect.Origin = r3.Add(r.Origin, vec(0, -1, 0)) // at y = -1
		m.window(-1, 0.5, 1, 2.5)
		v := outlook.Look(m.world(), vec(0, -2, 1.5))
		// Nothing is in the way beside the openings, so that each is seen whole.
		// What both show is 4 corners of the smaller in either direction as seen
		// from 1 m; all is the sum without it.
		front, back := corner(inner, .5, 1), corner(1, 1, 2)
		want := 4 * (front + back - corner(math.Min(inner, .5), .5, 1))
		// Rows and columns lie in both or not: half of one at each edge.
		near(t, "all layers", v.SkySr+v.GroundSr+v.LandscapeSr, want, 0.03)
		if twice := 4 * (front + back); inner > .1 && math.Abs(twice-want) < 0.5 {
			t.Errorf("twin: what is seen twice makes no difference, %g and %g", twice, want)
		}
	}
}

// Glass lets a view pass, dense cloth does not.
func TestClothIsNoView(t *testing.T) {
	for _, c := range []struct {
		name string
		tau  float64
		seen bool
	}{{"open weave", .2, true}, {"dense cloth", .03, false}} {
		m := newModel(t)
		m.window(-1, 1, 1, 2)
		sheet := m.finish(materials.NewPerforated(materials.Perforated{OpenShare: c.tau, HoleDiameterM: .001, Base: matte(t)}))
		m.rect(scene.System, sheet, vec(-2, -.1, 0), vec(4, 0, 0), vec(0, 0, 4))
		v := outlook.Look(m.world(), vec(0, -2, 1.2))
		if a, _ := v.AngleRad(0); (a > 0) != c.seen {
			t.Errorf("%s: sight angle %g", c.name, a)
		}
	}
}

func matte(t testing.TB) materials.BSDF {
	b, err := materials.NewMatte(.5)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// A leaning window spans what its upright shadow would: the azimuths of its
// corners, seen from the eye.
func TestLeaningWindow(t *testing.T) {
	m := newModel(t)
	r := m.window(-1, 1, 1, 2)
	r.Up, r.Outward = vec(0, -math.Sin(.5), math.Cos(.5)), vec(0, math.Cos(.5), math.Sin(.5))
	m.s.Openings[0].Rect = r
	eye := vec(0, -3, 1.2)
	v := outlook.Look(m.world(), eye)
	got, _ := v.AngleRad(0)
	// Nearest is the top: at y = -sin 0.5, 1 m to either side. The columns
	// find its slanting edges to within half a column each.
	want := 2 * math.Atan(1/(3-math.Sin(.5)))
	near(t, "leaning window", got, want, 2*0.25*degree)
	sum := v.SkySr + v.GroundSr + v.LandscapeSr
	c := r.Corners()
	exact := triangleSr(eye, c[0], c[1], c[2]) + triangleSr(eye, c[0], c[2], c[3])
	near(t, "its solid angle", sum, exact, 0.01*exact)
}

// triangleSr: Van Oosterom and Strackee 1983, The solid angle of a plane
// triangle, IEEE Trans. Biomed. Eng. 30(2), equation 8 (number from memory).
func triangleSr(eye, p, q, s r3.Vec) float64 {
	a, b, c := r3.Sub(p, eye), r3.Sub(q, eye), r3.Sub(s, eye)
	la, lb, lc := r3.Norm(a), r3.Norm(b), r3.Norm(c)
	num := math.Abs(r3.Dot(a, r3.Cross(b, c)))
	den := la*lb*lc + r3.Dot(a, b)*lc + r3.Dot(a, c)*lb + r3.Dot(b, c)*la
	return 2 * math.Atan2(num, den)
}

// corner is the solid angle of an a by b rectangle seen from a point at
// distance d over one of its corners: the formula above for two triangles, in
// closed form atan(ab / (d sqrt(a^2+b^2+d^2))).
func corner(a, b, d float64) float64 {
	return math.Atan(a * b / (d * math.Sqrt(a*a+b*b+d*d)))
}
