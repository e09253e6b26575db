package sunpath

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/photometry"
)

// rectangle is a hole in the plane y = 0.
type rectangle struct{ x0, x1, z0, z1 float64 }

// holds reports whether the line from p along dir runs through the rectangle, and
// whether it passes all edges by more than the sun's apparent radius. Source:
// intersection of a line and a plane.
func (r rectangle) holds(p, dir r3.Vec) (inside, clear bool) {
	if dir.Y >= 0 {
		return false, dir.Y > sunRadius
	}
	k := p.Y / -dir.Y
	x, z := p.X+k*dir.X, p.Z+k*dir.Z
	inside = x > r.x0 && x < r.x1 && z > r.z0 && z < r.z1
	// A point of an edge is seen under the radius from the line at the nearest:
	// the angle between the line and the plane through p and the edge.
	clear = true
	corners := [4]r3.Vec{{X: r.x0, Z: r.z0}, {X: r.x1, Z: r.z0}, {X: r.x1, Z: r.z1}, {X: r.x0, Z: r.z1}}
	for i, a := range corners {
		n := r3.Unit(r3.Cross(r3.Sub(a, p), r3.Sub(corners[(i+1)%4], p)))
		clear = clear && math.Abs(r3.Dot(n, dir)) > sunRadius
	}
	return inside, clear
}

const sunRadius = photometry.SunDiameterRad / 2

// checkWindow holds the samples of a year against a rectangle in closed form.
func checkWindow(y *Year, r rectangle) error {
	p := y.Input.Point.Position
	inSun, shade, edges := 0, 0, 0
	sum, want := 0.0, 0.0
	for i := range y.Samples {
		s := &y.Samples[i]
		if s.Sun.Z <= sunRadius {
			continue // the ground cuts the disc as well
		}
		inside, clear := r.holds(p, s.Sun)
		sum += s.Free
		if inside {
			want++
		}
		switch {
		case !clear:
			edges++
		case inside:
			if inSun++; s.Free != 1 {
				return fmt.Errorf("%s: got %g of the disc, want all of it through the window", s.Time, s.Free)
			}
		default:
			if shade++; s.Free != 0 {
				return fmt.Errorf("%s: got %g of the disc, want none past the window", s.Time, s.Free)
			}
		}
	}
	if inSun < 100 || shade < 1000 {
		return fmt.Errorf("got %d samples in the sun and %d in the shade, want enough to tell", inSun, shade)
	}
	// A sample by an edge counts by its share here and whole or not there: even
	// about 0 and one half at most. 4 standard errors; no bound on truncation is
	// added, since both look at the same moments.
	if tolerance := 4 * .5 * math.Sqrt(float64(edges)); math.Abs(sum-want) > tolerance {
		return fmt.Errorf("got %.1f samples in the sun, want %.0f within %.1f", sum, want, tolerance)
	}
	return nil
}

// TestWindow: a point 2 m behind a hole in an opaque wall has sun when the line
// to it runs through the hole, and only then.
func TestWindow(t *testing.T) {
	r := rectangle{-.8, .6, .8, 1.5}
	m := newModel(t)
	m.window(r.x0, r.x1, r.z0, r.z1)
	// The room behind it is closed.
	for _, x := range []float64{-10, 10} {
		m.rect(m.matte(), scene.Room, r3.Vec{X: x, Z: -1}, r3.Vec{Y: 4}, r3.Vec{Z: 6})
	}
	m.rect(m.matte(), scene.Room, r3.Vec{X: -10, Y: 4, Z: -1}, r3.Vec{X: 20}, r3.Vec{Z: 6})
	m.rect(m.matte(), scene.Room, r3.Vec{X: -10, Z: 5}, r3.Vec{X: 20}, r3.Vec{Y: 4})
	y := compute(t, m.input(r3.Vec{Y: 2}))
	if err := checkWindow(y, r); err != nil {
		t.Error(err)
	}
	if y.Direct.InView != y.Direct.All {
		t.Errorf("got %g of %g h from before the line of sight, want all: the wall is closed elsewhere", y.Direct.InView, y.Direct.All)
	}
	for _, twin := range []rectangle{
		{r.x0 + .1, r.x1 + .1, r.z0, r.z1}, {r.x0, r.x1, r.z0 + .1, r.z1}, {r.x0, r.x1, r.z0, r.z1 - .1},
	} {
		if checkWindow(y, twin) == nil {
			t.Errorf("a window of %v passes as well", twin)
		}
	}
}

// TestVeils: glass takes from the luminance and not from the disc, cloth is
// told from glass, and what is behind an opening does not count.
func TestVeils(t *testing.T) {
	glass, err := materials.NewGlazing(.8, 1)
	if err != nil {
		t.Fatal(err)
	}
	cloth, err := materials.NewCloth(materials.Cloth{Openness: .05, DiffuseTransmittance: .1, ReflectanceFront: .5, ReflectanceBack: .5, CutOffRad: degrees(70)})
	if err != nil {
		t.Fatal(err)
	}
	sun := r3.Unit(r3.Vec{Y: -1, Z: .3})
	for _, c := range []struct {
		name        string
		sheet       materials.BSDF
		ahead       r3.Vec
		opening     bool
		free, cloth float64
		least, most float64 // of tau
	}{
		{"open", nil, r3.Vec{Y: -1}, false, 1, 0, 1, 1},
		// At 16.70 degrees: Fresnel and Bouguer with n = 1.526 and the extinction
		// that gives 0.8 straight on (Duffie, Beckman, 2013, chapter 5) give
		// 0.79784, worked by hand; Kotey, Wright, Collins 2009 as materials has
		// them, 0.05 cos(90 x 16.70/70)^0.5994 = 0.04789.
		{"glass", glass, r3.Vec{Y: -1}, false, 1, 0, .7977, .7979},
		{"cloth", cloth, r3.Vec{Y: -1}, false, 1, 1, .0478, .0480},
		{"behind a viewpoint", nil, r3.Vec{Y: 1}, false, 1, 0, 1, 1},
		{"out of an opening", nil, r3.Vec{Y: -1}, true, 1, 0, 1, 1},
		{"behind an opening", nil, r3.Vec{Y: 1}, true, 0, 0, 0, 0},
	} {
		m := newModel(t)
		if c.sheet != nil {
			m.rect(c.sheet, scene.Room, r3.Vec{X: -5, Z: -1}, r3.Vec{X: 10}, r3.Vec{Z: 9})
		}
		in := m.input(r3.Vec{Y: 2})
		in.Point.Ahead, in.Point.Opening = c.ahead, c.opening
		s := newWatcher(in.Point).sample(in.World(sun), y2022, sun)
		if s.Free != c.free || s.Cloth != c.cloth || s.Tau < c.least || s.Tau > c.most {
			t.Errorf("%s: got free %g, cloth %g, tau %g, want %g, %g, %g to %g", c.name, s.Free, s.Cloth, s.Tau, c.free, c.cloth, c.least, c.most)
		}
	}
}
