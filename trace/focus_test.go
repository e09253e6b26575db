package trace_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/trace"
)

// profile adds a mirror that is drawn along x from -half to half: its section
// in the plane of y and z runs through the points, the front to the left of
// the way.
func (m *mirroredModel) profile(f materials.BSDF, half float64, yz [][2]float64) int32 {
	part := int32(len(m.s.Parts))
	fin := int32(len(m.s.Finishes))
	m.s.Parts = append(m.s.Parts, scene.Part{Opening: -1, TexelM: 1})
	m.s.Finishes = append(m.s.Finishes, scene.Finish{BSDF: f})
	for i := range len(yz) - 1 {
		a, b := yz[i], yz[i+1]
		v := [4]r3.Vec{{X: -half, Y: a[0], Z: a[1]}, {X: half, Y: a[0], Z: a[1]}, {X: half, Y: b[0], Z: b[1]}, {X: -half, Y: b[0], Z: b[1]}}
		m.s.Triangles = append(m.s.Triangles,
			scene.Triangle{V: [3]r3.Vec{v[0], v[1], v[2]}, Finish: fin, Part: part},
			scene.Triangle{V: [3]r3.Vec{v[0], v[2], v[3]}, Finish: fin, Part: part})
	}
	return part
}

// parabolic is the section of a trough of focal length f and rim angle rim
// with its vertex at the origin, open to +z, in n facets that turn evenly.
func parabolic(f, rim float64, n int) (yz [][2]float64) {
	for i := range n + 1 {
		// A ray from the focus at the angle a to the axis meets the parabola
		// where y = 2 f tan(a/2).
		y := 2 * f * math.Tan(rim/2*(2*float64(i)/float64(n)-1))
		yz = append(yz, [2]float64{y, y * y / (4 * f)})
	}
	return yz
}

// circular is the section of a round trough of radius r about z = r that turns
// by half on either side.
func circular(r, half float64, n int) (yz [][2]float64) {
	for i := range n + 1 {
		s, c := math.Sincos(half * (2*float64(i)/float64(n) - 1))
		yz = append(yz, [2]float64{r * s, r * (1 - c)})
	}
	return yz
}

// troughFluence is the concentration at a trough's focus over all directions:
// seen from there every point of the mirror within the rim angle on either side
// shows the sun's luminance, along x as far as the disc reaches. In the
// direction a of the section the field filled is 2 r wide, so that it measures
// 2 rim x 2 sin(r), of the disc's pi sin^2(r); times the reflectance. On a flat
// receiver square to the axis cos(a) comes in: 2 sin(rim) instead of 2 rim.
// Derived here from the conservation of luminance (Welford & Winston 1989,
// chapter 2, from memory); the disc is of even luminance.
func troughFluence(rho, rim float64) float64 { return rho * 4 * rim / (math.Pi * math.Sin(sunRadius)) }

func troughFlat(rho, rim float64) float64 {
	return rho * 4 * math.Sin(rim) / (math.Pi * math.Sin(sunRadius))
}

// TestFocusOfTrough holds the peak of parabolic troughs that face the sun
// against the closed form. A facet that turns by d departs from the parabola by
// d/2 at its ends, so its image moves by u = d across the disc's middle: the
// chord of the disc there is sqrt(1-(x/r)^2) of its diameter, over x from -u to
// u. That mean is the meshing error, known; the rest is 0.3 % for the polygon
// of 48 corners and the tangent plane.
func TestFocusOfTrough(t *testing.T) {
	const rho = 0.9
	sun := r3.Vec{Z: 1}
	for _, c := range []struct {
		f, rimDeg float64
		n         int
	}{{.5, 20, 400}, {.5, 45, 900}, {2, 45, 900}, {.5, 45, 225}, {.5, 45, 4000}} {
		rim := c.rimDeg * math.Pi / 180
		m := newMirroredModel(t)
		m.profile(m.mirror(rho), 1, parabolic(c.f, rim, c.n))
		f := m.world().Focus(sun, aboveAll)
		// Normals turn by half of the ray's angle: a facet spans 2 rim/n seen
		// from the focus and turns by rim/n.
		u := rim / float64(c.n) / sunRadius
		mesh := (math.Sqrt(1-u*u) + math.Asin(u)/u) / 2
		p := r3.Vec{Z: c.f}
		got := f.At(p, r3.Vec{})
		flat := f.At(p, r3.Vec{Z: -1})
		rough := f.Rough(p, r3.Vec{})
		for _, x := range []struct {
			name      string
			got, want float64
			allow     float64
		}{
			{"all directions", got.Mirrors, troughFluence(rho, rim) * mesh, .003},
			{"on a plane", flat.Mirrors, troughFlat(rho, rim) * mesh, .003},
			// One facet stands for up to nine, the first and last of the mesh for
			// what is not there: below 1 % of 1,000.
			{"roughly", rough.Mirrors, troughFluence(rho, rim) * mesh, .01},
		} {
			if math.Abs(x.got/x.want-1) > x.allow {
				t.Errorf("f %g m, rim %g degrees, %d facets, %s: got %.2f times the sun, want %.2f (meshing takes %.2f %%)", c.f, c.rimDeg, c.n, x.name, x.got, x.want, 100*(1-mesh))
			}
			if math.Abs(1.02*x.got/x.want-1) < x.allow {
				t.Errorf("%s: twin: 2 %% more was not rejected", x.name)
			}
		}
		if got.Sun != 1 || flat.Sun != 0 {
			t.Errorf("direct sun: got %g and %g on the plane that faces the mirror, want 1 and 0", got.Sun, flat.Sun)
		}
		if got.Part != 0 || math.Abs(got.DistanceM/c.f-1) > .25 {
			t.Errorf("got part %d at %.3f m, want 0 at f to 1.17 f, f = %g m", got.Part, got.DistanceM, c.f)
		}
		// Off the focus it is less.
		if off := f.At(r3.Vec{Y: .05 * c.f, Z: c.f}, r3.Vec{}); off.Mirrors > .2*got.Mirrors {
			t.Errorf("off the focus: got %.2f times, want far less than %.2f", off.Mirrors, got.Mirrors)
		}
	}
}

// roundBrute is the concentration at p before a true round mirror, apart from
// this package: directions of a fine grid about the mirror are reflected in the
// circle x^2: y^2 + (z-R)^2 = R^2 and counted where they end in the disc.
func roundBrute(p r3.Vec, radius, half, rho float64, sun r3.Vec) float64 {
	const across, along = 40000, 61
	bound := math.Sin(sunRadius)
	sum := 0.0
	// The mirror runs along x, so that the direction's x is kept: it lies
	// within the disc's x, here -r to r about the sun's.
	for j := range along {
		dx := sun.X + bound*(2*(float64(j)+.5)/along-1)
		flat := math.Sqrt(1 - dx*dx)
		for i := range across {
			a := math.Pi * (2*(float64(i)+.5)/across - 1)
			s, c := math.Sincos(a)
			d := r3.Vec{X: dx, Y: flat * s, Z: -flat * c}
			// From p inside the circle to its rim.
			oy, oz := p.Y, p.Z-radius
			b := oy*s - oz*c
			tt := -b + math.Sqrt(b*b-(oy*oy+oz*oz-radius*radius))
			y, z := oy+tt*s, oz-tt*c
			if math.Abs(math.Atan2(y, -z)) > half {
				continue
			}
			n := r3.Vec{Y: -y / radius, Z: -z / radius}
			out := r3.Sub(d, r3.Scale(2*r3.Dot(d, n), n))
			if r3.Norm2(r3.Cross(out, sun)) < bound*bound && r3.Dot(out, sun) > 0 {
				sum++
			}
		}
	}
	// Solid angle of a cell: d(dx) d(a), since d omega = dx da about the x axis.
	cell := 2 * bound / along * 2 * math.Pi / across
	return rho * sum * cell / (math.Pi * bound * bound)
}

// TestFocusOfArc holds a round trough's caustic against brute force with the
// true circle: on the axis, at the cusp R/2, inside it, and beside it. The
// grid's cells are 0.009 degrees by a 61st of the disc, 1.5 % of the sums'
// edges at most; the mesh turns 0.01 degrees a facet.
func TestFocusOfArc(t *testing.T) {
	const rho, radius, half = .9, 2., .35
	for _, c := range []struct {
		sun r3.Vec
		p   r3.Vec
	}{
		{r3.Vec{Z: 1}, r3.Vec{Z: radius / 2}},
		{r3.Vec{Z: 1}, r3.Vec{Z: .97}},
		{r3.Vec{Z: 1}, r3.Vec{Z: 1.05}},
		{r3.Vec{Z: 1}, r3.Vec{Y: .01, Z: .98}},
		{r3.Vec{Z: 1}, r3.Vec{Y: .3, Z: .5}},
		{r3.Unit(r3.Vec{Y: .2, Z: 1}), r3.Vec{Y: -.19, Z: 1.02}},
		{r3.Unit(r3.Vec{X: .1, Y: .2, Z: 1}), r3.Vec{Y: -.19, Z: 1.02}},
	} {
		m := newMirroredModel(t)
		m.profile(m.mirror(rho), 1, circular(radius, half, 2000))
		got := m.world().Focus(c.sun, aboveAll).At(c.p, r3.Vec{}).Mirrors
		want := roundBrute(c.p, radius, half, rho, c.sun)
		t.Logf("sun %.3f, point %.3f: got %.3f, brute force %.3f", c.sun, c.p, got, want)
		if math.Abs(got-want) > .02*want+.01 {
			t.Errorf("sun %.3f, point %.3f: got %.3f times the sun, want %.3f", c.sun, c.p, got, want)
		}
	}
}

// TestFocusBounds: what cannot concentrate does not. Flat and convex mirrors
// send at most their reflectance to a point (law of reflection: the field of
// view filled by one image is at most the disc's).
func TestFocusBounds(t *testing.T) {
	const rho, tau = .85, .88
	glass, err := materials.NewGlazing(tau, 1)
	if err != nil {
		t.Fatal(err)
	}
	flat := newMirroredModel(t)
	flat.level(flat.mirror(rho), -2, 2, -2, 2, 0)
	convex := newMirroredModel(t)
	yz := circular(2, .5, 500)
	for i := range yz {
		yz[i][1] = -yz[i][1]
	}
	convex.profile(convex.mirror(rho), 2, yz)
	s := sampling.Stream2(5, 71)
	flatWorld, convexWorld := flat.world(), convex.world()
	reached, most := 0, 0.0
	for range 400 {
		sun := mirroredSun(20+60*s.Float64(), 360*s.Float64())
		p := r3.Vec{X: 3*s.Float64() - 1.5, Y: 3*s.Float64() - 1.5, Z: .6 + 2*s.Float64()}
		f, c := flatWorld.Focus(sun, aboveAll), convexWorld.Focus(sun, aboveAll)
		a, b := f.At(p, r3.Vec{}), c.At(p, r3.Vec{})
		if a.Mirrors > rho+1e-3 || a.Total() > 1+rho+1e-3 {
			t.Errorf("flat: got %.4f by the mirror, want at most %g", a.Mirrors, rho)
		}
		if b.Mirrors > rho+1e-3 {
			t.Errorf("convex: got %.4f by the mirror, want at most %g", b.Mirrors, rho)
		}
		if a.Mirrors > .8*rho {
			reached++
		}
		most = math.Max(most, b.Mirrors)
	}
	if reached < 20 || most < .1 {
		t.Errorf("the mirrors reached %d points, the round one with %.3f; want 20 and 0.1, or nothing was tested", reached, most)
	}
	// A pane between the mirror and the point, square to the mirrored light.
	const rim = 20 * math.Pi / 180
	m := newMirroredModel(t)
	m.profile(m.mirror(rho), 1, parabolic(2, rim, 800))
	free := m.world().Focus(r3.Vec{Z: 1}, aboveAll).At(r3.Vec{Z: 2}, r3.Vec{})
	m.level(glass, -.2, .2, -.2, .2, 1.7)
	in := m.world().Focus(r3.Vec{Z: 1}, aboveAll).At(r3.Vec{Z: 2}, r3.Vec{})
	// Light passes at 0 to 20 degrees, where glass loses less than 0.5 % more
	// than at normal incidence (Fresnel). The pane also takes (1 - tau) from the
	// sun of the mirror's middle, |y| < 0.2 of 0.705 m: hence tau squared below.
	low, high := tau*tau*free.Mirrors*.99, tau*free.Mirrors*1.002
	if !(in.Mirrors > low && in.Mirrors < high) {
		t.Errorf("behind glass: got %.3f, want %.3f to %.3f", in.Mirrors, low, high)
	}
	if in.Sun != 1 {
		t.Errorf("the sun at the focus: got %.4f, want 1: the pane is below it", in.Sun)
	}
}

// TestBeams: photons carry the same light as the images. Inside a box before a
// flat and a round mirror the mean fluence rate (flux x length / volume) is the
// mean over points of the box of the concentration there.
func TestBeams(t *testing.T) {
	const rho = .9
	sun := mirroredSun(60, 0)
	box := r3.Box{Min: r3.Vec{X: -.2, Y: .35, Z: .8}, Max: r3.Vec{X: .2, Y: .75, Z: 1.2}}
	const volume = .4 * .4 * .4
	var rows []mirroredRow
	for i, name := range []string{"flat", "round"} {
		m := newMirroredModel(t)
		if name == "flat" {
			m.level(m.mirror(rho), -1, 1, -.3, .3, 0)
		} else {
			m.profile(m.mirror(rho), 1, circular(2, .3, 300))
		}
		m.level(m.matte(.5), -5, 5, .5, 5, 1) // a sheet through the box, clear of the sun's way in
		w := m.world()
		f := w.Focus(sun, aboveAll)
		s := sampling.Stream3(9, 31, uint64(i))
		var want, got mirroredTally
		for range 16 {
			sum := 0.0
			for range 100 {
				p := r3.Vec{X: .4*s.Float64() - .2, Y: .35 + .4*s.Float64(), Z: .8 + .4*s.Float64()}
				sum += f.At(p, r3.Vec{}).Mirrors
			}
			want.add(sum / 100)
		}
		for range 16 {
			sum := 0.0
			w.Aim(sun).Only(false).Beams(4000, mirroredDraw(sun), &s, func(b *trace.Beam) {
				sum += b.FluxM2 * within(box, b.From, b.Dir, b.LengthM)
			})
			got.add(sum / volume)
		}
		rows = append(rows, mirroredRow{name, want.mean(), got.mean(), math.Hypot(want.stdErr(), got.stdErr()), 1e-3 * want.mean(), 15})
		if !w.Aim(sun).Only(true).Empty() {
			t.Error("got panes among the mirrors")
		}
	}
	mirroredJudge(t, "fluence by photons", rows, .2)
}

// within is the length of a ray's piece inside a box (slabs).
func within(b r3.Box, o, d r3.Vec, length float64) float64 {
	t0, t1 := 0.0, length
	for _, x := range [3][4]float64{{o.X, d.X, b.Min.X, b.Max.X}, {o.Y, d.Y, b.Min.Y, b.Max.Y}, {o.Z, d.Z, b.Min.Z, b.Max.Z}} {
		u, v := (x[2]-x[0])/x[1], (x[3]-x[0])/x[1]
		t0, t1 = math.Max(t0, math.Min(u, v)), math.Min(t1, math.Max(u, v))
	}
	return math.Max(0, t1-t0)
}

func BenchmarkFocus(b *testing.B) {
	m := newMirroredModel(b)
	m.profile(m.mirror(.9), 1, parabolic(.5, .8, 500))
	w := m.world()
	f := w.Focus(r3.Vec{Z: 1}, aboveAll)
	for _, c := range []struct {
		name string
		p    r3.Vec
	}{{"focus", r3.Vec{Z: .5}}, {"beside", r3.Vec{Y: .1, Z: .4}}} {
		b.Run("rough at the "+c.name, func(b *testing.B) {
			for range b.N {
				f.Rough(c.p, r3.Vec{})
			}
		})
		b.Run("exact at the "+c.name, func(b *testing.B) {
			for range b.N {
				f.At(c.p, r3.Vec{})
			}
		})
	}
}
