package trace_test

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/photometry"
	"squint/trace"
)

const sunRadius = photometry.SunDiameterRad / 2

func aboveAll(r3.Vec) bool { return false }

// findImages looks for the sun's images.
func findImages(m *mirroredModel, eye, sun r3.Vec) []trace.Image {
	w := m.world()
	return w.Images(eye, sun, w.MirrorsFrom(eye), aboveAll, nil)
}

// TestMirroredImage: what an eye 1 m above a level mirror sees of the sun in
// it, whole. Sources: the law of reflection; shares as in TestMirroredFlux.
func TestMirroredImage(t *testing.T) {
	const tau = 0.88
	glass, err := materials.NewGlazing(tau, 1)
	if err != nil {
		t.Fatal(err)
	}
	sun := mirroredSun(40, 20)
	image := r3.Vec{X: sun.X, Y: sun.Y, Z: -sun.Z}
	up, _ := mirroredPane(tau, -sun.Y)
	_, lr := mirroredPane(tau, sun.Z)
	eye := r3.Vec{Z: 1}
	mirror := func(m *mirroredModel) { m.level(m.mirror(.85), -5, 5, -5, 5, 0) }
	for _, c := range []struct {
		name  string
		eye   r3.Vec
		want  float64 // share of the luminance; 0: no image
		pane  bool    // seen through a pane
		build func(m *mirroredModel)
	}{
		{"mirror", eye, .85, false, mirror},
		{"mirror on its back", eye, .85, false, func(m *mirroredModel) {
			m.quad(m.mirror(.85), r3.Vec{X: -5, Y: -5}, r3.Vec{X: -5, Y: 5}, r3.Vec{X: 5, Y: 5}, r3.Vec{X: 5, Y: -5})
		}},
		{"mirror seen through a pane", eye, .85 * up, true, func(m *mirroredModel) {
			mirror(m)
			m.upright(glass, -5, 5, -.2, .01, 1.1) // above it the sun's way is free
		}},
		{"sun through a pane", eye, .85 * up, false, func(m *mirroredModel) {
			mirror(m)
			m.upright(glass, -5, 5, -2, .01, 3)
		}},
		{"both through panes", eye, .85 * up * up, true, func(m *mirroredModel) {
			mirror(m)
			m.upright(glass, -5, 5, -.2, .01, 1.1)
			m.upright(glass, -5, 5, -2, .01, 3)
		}},
		{"pane", eye, lr, false, func(m *mirroredModel) { m.level(glass, -5, 5, -5, 5, 0) }},
		{"screen before the mirror", eye, 0, false, func(m *mirroredModel) { mirror(m); m.upright(m.matte(0), -5, 5, -.2, .01, 1.1) }},
		{"screen before the sun", eye, 0, false, func(m *mirroredModel) { mirror(m); m.upright(m.matte(0), -5, 5, -2, .01, 3) }},
		{"eye below the mirror", r3.Vec{Z: -1}, 0, false, mirror},
		{"a matte sheet on the mirror", eye, 0, false, func(m *mirroredModel) { mirror(m); m.level(m.matte(.5), -5, 5, -5, 5, .001) }},
		{"no mirror", eye, 0, false, func(m *mirroredModel) { m.level(m.matte(.9), -5, 5, -5, 5, 0) }},
	} {
		m := newMirroredModel(t)
		c.build(m)
		got := findImages(m, c.eye, sun)
		if c.want == 0 {
			if len(got) != 0 {
				t.Errorf("%s: got %v, want no image", c.name, got)
			}
			continue
		}
		if len(got) != 1 {
			t.Errorf("%s: got %d images, want 1", c.name, len(got))
			continue
		}
		im := got[0]
		if d := r3.Norm(r3.Sub(im.Dir, image)); d > 1e-9 {
			t.Errorf("%s: direction is off by %.2g rad", c.name, d)
		}
		if im.Share != 1 {
			t.Errorf("%s: share: got %v, want the whole disc", c.name, im.Share)
		}
		// Shares vary over the disc: glass by dT/dtheta x 0.27 degrees, below
		// 0.003 at these incidences, and evenly about the centre.
		if math.Abs(im.Luminous-c.want) > 2e-4*c.want+1e-9 {
			t.Errorf("%s: luminance: got %.6f of the sun's, want %.6f", c.name, im.Luminous, c.want)
		}
		if (im.Via >= 0) != c.pane {
			t.Errorf("%s: via part %d, want a pane: %v", c.name, im.Via, c.pane)
		}
	}
}

// capShare is the part of a disc on the near side of a straight line at a
// distance of x radii from its centre: the circular segment.
func capShare(x float64) float64 {
	if math.Abs(x) >= 1 {
		return math.Max(0, math.Copysign(1, x))
	}
	return 1 - (math.Acos(x)-x*math.Sqrt(1-x*x))/math.Pi
}

// TestMirroredImageAtEdge: a straight edge of the mirror, or of a screen before
// the sun, cuts the disc. The eye stands so that the edge is x radii off the
// image's centre. What the mirror's edge cuts is computed and must be exact but
// for the polygon of 48 corners; what a screen hides is asked of 24 lines of
// sight, each for a 24th of the disc: an edge may pass through a fifth of the
// cells of such a grid, some 5, and errs by half of each at most: 0.1.
func TestMirroredImageAtEdge(t *testing.T) {
	sun := mirroredSun(40, 0)
	alt := 40 * math.Pi / 180
	var rows []mirroredRow
	{
		for _, x := range []float64{-1.2, -.9, -.5, -.2, 0, .1, .4, .7, .95, 1.1} {
			// The eye looks down at alt - x r to see the edge at y = 0; the mirror
			// lies beyond it, so that x > 0 shows more than half.
			down := alt + x*sunRadius
			for j, c := range []struct {
				name  string
				build func(m *mirroredModel)
			}{
				{"mirror's edge", func(m *mirroredModel) { m.level(m.mirror(.9), -5, 5, -5, 0, 0) }},
				{"screen's edge", func(m *mirroredModel) {
					m.level(m.mirror(.9), -5, 5, -9, 9, 0)
					// Mirrored in the floor, the screen's upper edge lies where the
					// other edge did: at y = -3, below it by the same line of sight.
					z := 3 * math.Tan(down)
					m.upright(m.matte(0), -5, 5, -3, .1, z)
				}},
			} {
				eye := r3.Vec{Y: 1 * math.Cos(down), Z: 1 * math.Sin(down)}
				m := newMirroredModel(t)
				c.build(m)
				want := capShare(x)
				if j == 1 {
					want = 1 - want // rays steeper than the edge's pass the screen
				}
				var got float64
				for _, im := range findImages(m, eye, sun) {
					got += im.Share
				}
				// The polygon departs from the disc by at most 1 - cos(pi/48) of its
				// radius along the edge: 0.002 of it, times the chord, below 0.003.
				allowed := 0.003
				if j == 1 {
					allowed = 0.1
				}
				rows = append(rows, mirroredRow{fmt.Sprintf("%s at %+.2f radii", c.name, x), want, got, 0, allowed, 1000})
			}
		}
	}
	mirroredJudge(t, "share of the disc at an edge", rows, .1)
}

// mirroredTrough is a cylinder of radius r along x about (0, 0, -r), a vault
// seen from outside, or about (0, 0, r), a trough seen from inside.
type mirroredTrough struct {
	r      float64
	hollow bool
}

// at gives the profile's point and its normal at angle phi from its lowest or
// highest point.
func (c mirroredTrough) at(phi float64) (p, n r3.Vec) {
	s, k := math.Sincos(phi)
	if c.hollow {
		return r3.Vec{Y: c.r * s, Z: c.r - c.r*k}, r3.Vec{Y: -s, Z: k}
	}
	return r3.Vec{Y: c.r * s, Z: c.r*k - c.r}, r3.Vec{Y: s, Z: k}
}

// mesh cuts the arc of half-angle arc about phi = 0 into facets of step, shifted
// by a share of one.
func (c mirroredTrough) mesh(m *mirroredModel, rho, arc, step, shift, halfX float64) {
	f := m.mirror(rho)
	fin := int32(len(m.s.Finishes))
	part := m.quad(f, r3.Vec{Z: -50}, r3.Vec{X: 1, Z: -50}, r3.Vec{X: 1, Y: 1, Z: -50}, r3.Vec{Y: 1, Z: -50})
	m.s.Triangles = m.s.Triangles[:len(m.s.Triangles)-2] // only the part and its finish
	for phi := -arc + shift*step; phi < arc; phi += step {
		a, _ := c.at(phi)
		b, _ := c.at(phi + step)
		q := [4]r3.Vec{a, a, b, b}
		q[0].X, q[1].X, q[2].X, q[3].X = -halfX, halfX, halfX, -halfX
		for _, v := range [2][3]r3.Vec{{q[0], q[1], q[2]}, {q[0], q[2], q[3]}} {
			m.s.Triangles = append(m.s.Triangles, scene.Triangle{V: v, Finish: fin, Part: part})
		}
	}
}

// paraxial is the solid angle of the image over the sun's, to first order:
// turning the line of sight by dpsi moves its foot by D dpsi/cos i along the
// arc, the normal by that over R, and the mirrored ray by 2 dphi + dpsi (vault)
// or 2 dphi - dpsi (trough); along the axis the mirror is plane.
// Source: derived here; it is Coddington's equation of tangential rays
// (Born & Wolf, Principles of optics, 1999, section 4.6) for a distant source.
func (c mirroredTrough) paraxial(d, cosI float64) float64 {
	x := 2 * d / (c.r * cosI)
	if c.hollow {
		return 1 / math.Abs(x-1)
	}
	return 1 / (x + 1)
}

// exact integrates the disc's chord over the lines of sight in the plane of
// the profile: the offset b of the mirrored ray from the sun's centre by exact
// intersection with the circle, chord 2 sqrt(r^2 - b^2).
func (c mirroredTrough) exact(eye, sun r3.Vec) (share float64) {
	centre := r3.Vec{Z: -c.r}
	if c.hollow {
		centre.Z = c.r
	}
	mid := math.Atan2(-eye.Z, -eye.Y) // towards the profile's middle
	const span, n = .06, 400000
	for i := range n {
		psi := mid + span*(2*(float64(i)+.5)/n-1)
		d := r3.Vec{Y: math.Cos(psi), Z: math.Sin(psi)}
		// The vault is met at the nearer crossing, the trough at the farther.
		o := r3.Sub(eye, centre)
		b := r3.Dot(o, d)
		q := b*b - r3.Dot(o, o) + c.r*c.r
		if q < 0 {
			continue
		}
		s := -b - math.Sqrt(q)
		if c.hollow {
			s = -b + math.Sqrt(q)
		}
		n1 := r3.Unit(r3.Sub(r3.Add(eye, r3.Scale(s, d)), centre))
		out := r3.Sub(d, r3.Scale(2*r3.Dot(d, n1), n1))
		off := math.Asin(out.Y*sun.Z - out.Z*sun.Y)
		if math.Abs(off) < sunRadius && r3.Dot(out, sun) > 0 {
			share += 2 * math.Sqrt(sunRadius*sunRadius-off*off) * 2 * span / n
		}
	}
	return share / (math.Pi * sunRadius * sunRadius)
}

func mirroredTroughCases() []struct {
	name string
	c    mirroredTrough
	d    float64
} {
	return []struct {
		name string
		c    mirroredTrough
		d    float64
	}{
		{"vault, R 1.85 m, eye 3 m off", mirroredTrough{1.85, false}, 3},
		{"vault, R 5 m, eye 1 m off", mirroredTrough{5, false}, 1},
		{"trough, R 8 m, eye 1 m off, enlarged", mirroredTrough{8, true}, 1},
		{"trough, R 8 m, eye 1.8 m off, enlarged", mirroredTrough{8, true}, 1.8},
		{"trough, R 2 m, eye 3 m off, upside down", mirroredTrough{2, true}, 3},
	}
}

// TestMirroredImageCurved: the images in the facets of a cylinder add up to the
// solid angle that a curved mirror shows.
func TestMirroredImageCurved(t *testing.T) {
	sun := mirroredSun(40, 0)
	var rows []mirroredRow
	for _, c := range mirroredTroughCases() {
		eye := r3.Vec{Y: c.d * -sun.Y, Z: c.d * sun.Z}
		want, first := c.c.exact(eye, sun), c.c.paraxial(c.d, sun.Z)
		// The magnification changes along the image, evenly about its middle to
		// first order: second order in its half width over the distance to focus.
		if math.Abs(want/first-1) > .05 {
			t.Errorf("%s: two derivations differ: exact %.4f, first order %.4f", c.name, want, first)
		}
		for _, stepDeg := range []float64{.1, .01} {
			var a mirroredTally
			tries := 24
			if stepDeg < .1 {
				tries = 4
			}
			for k := range tries {
				s := sampling.Stream3(300, uint64(k), uint64(c.d*1000))
				m := newMirroredModel(t)
				c.c.mesh(m, .9, 1.5*math.Pi/180, stepDeg*math.Pi/180, s.Float64(), 1)
				got := 0.0
				for _, im := range findImages(m, eye, sun) {
					got += im.Share
					if math.Abs(im.Luminous-.9) > 1e-9 {
						t.Errorf("%s: luminance: got %.4f, want 0.9", c.name, im.Luminous)
					}
				}
				a.add(got)
			}
			// A chord's normal is that of its middle: second order, below 1e-3 with
			// the facets' steps of image at the disc's rim.
			rows = append(rows, mirroredRow{fmt.Sprintf("%s, facets of %g degrees", c.name, stepDeg), want, a.mean(), a.stdErr(), 5e-3 * want, tries - 1})
		}
	}
	mirroredJudge(t, "solid angle of images in cylinders, times the sun's", rows, .2)
}
