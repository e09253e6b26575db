package trace_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/trace"
)

// mirroredPane is a single pane's transmittance and reflectance at incidence
// cos: the mean over both polarisations of the series of reflections between
// its faces; absorption from the transmittance at normal incidence, where
// T = a (1-r)^2/(1-a^2 r^2) is a quadratic in a. Written apart from package
// materials. Source: Born & Wolf, Principles of optics, 1999, section 1.5.2
// (Fresnel); Duffie & Beckman 2013, Solar engineering of thermal processes,
// section 5.3, incoherent sums (from memory).
func mirroredPane(normal, cos float64) (through, mirror float64) {
	const n = materials.GlassIndex
	r0 := math.Pow((n-1)/(n+1), 2)
	q := (1 - r0) * (1 - r0)
	a0 := (-q + math.Sqrt(q*q+4*normal*normal*r0*r0)) / (2 * normal * r0 * r0)
	inner := math.Sqrt(1 - (1-cos*cos)/n/n)
	a := math.Pow(a0, 1/inner)
	rs := math.Pow((cos-n*inner)/(cos+n*inner), 2)
	rp := math.Pow((n*cos-inner)/(n*cos+inner), 2)
	for _, r := range [2]float64{rs, rp} {
		t := a * (1 - r) * (1 - r) / (1 - a*a*r*r)
		through += t / 2
		mirror += (r + r*a*t) / 2
	}
	return through, mirror
}

// discCosine is the relative loss of the mean cosine over a disc of half-angle
// a against its centre's, 1-(1+cos a)/2 = a^2/4: 5.4e-6 for the sun.
const discCosine = 6e-6

// TestMirroredFlux: what arrives is normal illuminance x area facing the sun x
// the product of the shares on the way, exactly, where every beam is caught
// whole (energy balance; mirror of area 1 m2, sun of 10,000 lx due south).
func TestMirroredFlux(t *testing.T) {
	const lx, tau = 10000.0, 0.88
	glass, err := materials.NewGlazing(tau, 1)
	if err != nil {
		t.Fatal(err)
	}
	sin, cos := math.Sincos(40 * math.Pi / 180)
	sun := mirroredSun(40, 0)
	up, ur := mirroredPane(tau, cos)      // upright pane
	lp, lr := mirroredPane(tau, sin)      // level pane
	narrow := mirroredSun(40, 20)         // turned
	tp, _ := mirroredPane(tau, -narrow.Y) // upright pane under a turned sun
	// made is the sheet that catches the beam, and on which side.
	type made struct {
		part int32
		side materials.Side
	}
	const slit = "a pane 1 mm above a mirror 0.9"
	cases := []struct {
		name  string
		sun   r3.Vec
		want  float64
		build func(m *mirroredModel) made
	}{
		{"one level mirror 0.85", sun, lx * sin * .85, func(m *mirroredModel) made {
			m.level(m.mirror(.85), 0, 1, 0, 1, 0)
			return made{m.upright(m.matte(.5), -2, 3, 3, 0, 6), materials.Front}
		}},
		{"one level mirror 0.85, seen on its back", sun, lx * sin * .85, func(m *mirroredModel) made {
			m.quad(m.mirror(.85), r3.Vec{}, r3.Vec{Y: 1}, r3.Vec{X: 1, Y: 1}, r3.Vec{X: 1})
			return made{m.upright(m.matte(.5), -2, 3, 3, 0, 6), materials.Front}
		}},
		{"one level mirror 0.85, sun turned by 20", narrow, lx * sin * .85, func(m *mirroredModel) made {
			m.level(m.mirror(.85), 0, 1, 0, 1, 0)
			return made{m.upright(m.matte(.5), -2, 5, 3, 0, 6), materials.Front}
		}},
		{"the same, its southern 0.4 m shaded", sun, lx * sin * .85 * .6, func(m *mirroredModel) made {
			m.level(m.mirror(.85), 0, 1, 0, 1, 0)
			// The edge at y = -1: rays to y = 0.4 pass it at 1.4 tan 40. The disc's
			// penumbra is symmetric about it.
			m.upright(m.matte(0), -2, 3, -1, 0, 1.4*sin/cos)
			return made{m.upright(m.matte(.5), -2, 3, 3, 0, 6), materials.Front}
		}},
		{"two mirrors 0.9 x 0.8", sun, lx * sin * .9 * .8, func(m *mirroredModel) made {
			m.level(m.mirror(.9), 0, 1, 0, 1, 0)
			m.level(m.mirror(.8), -.5, 1.5, 3, 5.2, 3)
			return made{m.level(m.matte(.5), -1, 2, 6.5, 9, 0), materials.Front}
		}},
		{"three mirrors 0.9 x 0.8 x 0.7", sun, lx * sin * .9 * .8 * .7, func(m *mirroredModel) made {
			m.level(m.mirror(.9), 0, 1, 0, 1, 0)
			m.level(m.mirror(.8), -.5, 1.5, 3, 5.2, 3)
			m.level(m.mirror(.7), -.2, 1.2, 7, 8.3, 0) // in the shade of the second
			return made{m.upright(m.matte(.5), -1, 2, 12, 2, 5), materials.Front}
		}},
		{"three mirrors 1 x 1 x 1", sun, lx * sin, func(m *mirroredModel) made {
			m.level(m.mirror(1), 0, 1, 0, 1, 0)
			m.level(m.mirror(1), -.5, 1.5, 3, 5.2, 3)
			m.level(m.mirror(1), -.2, 1.2, 7, 8.3, 0)
			return made{m.upright(m.matte(.5), -1, 2, 12, 2, 5), materials.Front}
		}},
		{"upright pane, mirror 0.9", sun, lx * sin * up * .9, func(m *mirroredModel) made {
			m.level(m.mirror(.9), 0, 1, 0, 1, 0)
			m.upright(glass, -2, 3, -1, 0, 4)
			return made{m.upright(m.matte(.5), -2, 3, 3, 0, 6), materials.Front}
		}},
		{"upright pane, mirror 0.9, sun turned by 20", narrow, lx * sin * tp * .9, func(m *mirroredModel) made {
			m.level(m.mirror(.9), 0, 1, 0, 1, 0)
			m.upright(glass, -2, 3, -1, 0, 4)
			return made{m.upright(m.matte(.5), -2, 5, 3, 0, 6), materials.Front}
		}},
		{"pane, mirror 0.9, pane again, sun turned by 20", narrow, lx * sin * tp * .9 * tp, func(m *mirroredModel) made {
			// The turned sun carries what the panes mirror past each other: tan 20
			// of x by metre of y.
			m.level(m.mirror(.9), 0, 1, 0, 1, 0)
			m.upright(glass, -.9, .8, -1, 0, 4)
			m.upright(glass, .2, 1.9, 2, 0, 6)
			return made{m.upright(m.matte(.5), -2, 5, 3, 0, 6), materials.Front}
		}},
		// Between two panes T and R: T^2/(1 - R^2) (Stokes 1862, On the intensity
		// of the light reflected from or transmitted through a pile of plates,
		// Proc. Royal Society 11). What passes the mirror falls on the sheet's top.
		{"two panes with what they throw to and fro, mirror 0.9", sun, lx * sin * up * up / (1 - ur*ur) * .9, func(m *mirroredModel) made {
			m.level(m.mirror(.9), 0, 1, 0, 1, 0)
			m.upright(glass, -2, 3, -1, -4, 6)
			m.upright(glass, -2, 3, -1.2, -4, 6)
			return made{m.level(m.matte(.5), -1, 2, 3, 5.5, 3), materials.Back}
		}},
		{"a level pane mirrors", sun, lx * sin * lr, func(m *mirroredModel) made {
			m.level(glass, 0, 1, 0, 1, 0)
			return made{m.upright(m.matte(.5), -2, 3, 3, 0, 6), materials.Front}
		}},
		// Pane over mirror: R + T^2 m/(1 - R m) (Stokes 1862, as above).
		{slit, sun, lx * sin * (lr + .9*lp*lp/(1-.9*lr)), func(m *mirroredModel) made {
			m.level(glass, 0, 1, 0, 1, 0)
			m.level(m.mirror(.9), 0, 1, 0, 1, -.001)
			return made{m.upright(m.matte(.5), -2, 3, 3, -1, 6), materials.Front}
		}},
		{"an upright pane mirrors to the ground", sun, lx * cos * ur, func(m *mirroredModel) made {
			m.upright(glass, 0, 1, 0, 1, 2)
			return made{m.level(m.matte(.5), -1, 2, -4, 0, 0), materials.Front}
		}},
	}
	const shots = 32
	photons := 4000
	if testing.Short() {
		photons = 500
	}
	var rows []mirroredRow
	for i, c := range cases {
		m := newMirroredModel(t)
		on := c.build(m)
		sums := make([]float64, shots)
		mirroredShots(m.world(), c.sun, lx, shots, photons, uint64(100+i), func(k int, h *trace.Hit, flux float64) {
			if h.Part == on.part && h.Side == on.side {
				sums[k] += flux
			}
		})
		var a mirroredTally
		for _, f := range sums {
			a.add(f)
		}
		allow := c.want * discCosine
		if c.name == slit {
			allow += c.want * 2 * .001 / (sin / cos) // what enters or leaves by the slit's ends
		}
		rows = append(rows, mirroredRow{c.name, c.want, a.mean(), a.stdErr(), allow, shots - 1})
	}
	mirroredJudge(t, "flux by mirrors", rows, 0.05)
}

// lobeShare is the share of light arriving along wo that a glossy lobe throws
// into the directions wanted, by quadrature in the plane of projected directions
// (the integral of f cos dw is that of f over the unit disc).
func lobeShare(g *materials.Gloss, wo r3.Vec, wanted func(r3.Vec) bool) (sum float64) {
	const n = 1500
	for i := range n {
		for k := range n {
			x, y := 2*(float64(i)+.5)/n-1, 2*(float64(k)+.5)/n-1
			if z := 1 - x*x - y*y; z > 0 {
				if wi := (r3.Vec{X: x, Y: y, Z: math.Sqrt(z)}); wanted(wi) {
					sum += g.Eval(wo, wi) * 4 / n / n
				}
			}
		}
	}
	return sum
}

// TestMirroredGlossFlux: a glossy sheet of 1 m2 throws on the sun's flux times
// the share of its lobe that goes where sheets far away catch it, and a mirror
// passes on what it gets.
func TestMirroredGlossFlux(t *testing.T) {
	const lx = 10000.0
	sun := mirroredSun(40, 0)
	var rows []mirroredRow
	for i, c := range []struct {
		name                  string
		share, spread, mirror float64
	}{
		{"lobe of 2 degrees", .9, 2, 0},
		{"lobe of 5 degrees", .6, 5, 0},
		{"lobe of 15 degrees", .3, 15, 0},
		{"lobe of 5 degrees, then a mirror 0.8", .6, 5, .8},
	} {
		f, err := materials.NewGlossy(.8, c.share, c.spread*math.Pi/180)
		if err != nil {
			t.Fatal(err)
		}
		m := newMirroredModel(t)
		m.level(f, 0, 1, 0, 1, 0)
		catcher := m.upright(m.matte(.5), -500, 500, 300, 0, 500)
		wanted := func(wi r3.Vec) bool {
			return wi.Y > 0 && math.Abs(wi.X) < 500./300*wi.Y && wi.Z < 500./300*wi.Y
		}
		pass := 1.0
		if c.mirror > 0 {
			// A level mirror above, blind on the side of the sun, throws the
			// directions down again.
			sheet, err := materials.NewTwoSided(m.matte(0), m.mirror(c.mirror))
			if err != nil {
				t.Fatal(err)
			}
			m = newMirroredModel(t)
			m.level(f, 0, 1, 0, 1, 0)
			m.level(sheet, -500, 500, 1.5, 500, 300)
			catcher = m.level(m.matte(.5), -2000, 2000, 3, 2000, 0)
			wanted = func(wi r3.Vec) bool {
				return math.Abs(wi.X) < 500./300*wi.Z && wi.Y > 0 && wi.Y < 500./300*wi.Z
			}
			pass = c.mirror
		}
		const shots = 32
		sums := make([]float64, shots)
		mirroredShots(m.world(), sun, lx, shots, 4000, uint64(400+i), func(k int, h *trace.Hit, flux float64) {
			if h.Part == catcher {
				sums[k] += flux
			}
		})
		var a mirroredTally
		for _, x := range sums {
			a.add(x)
		}
		want := lx * sun.Z * pass * lobeShare(f.Gloss(materials.Front), sun, wanted)
		// The sheet's 1 m against 300 m at the rims, the quadrature at the lobe.
		rows = append(rows, mirroredRow{c.name, want, a.mean(), a.stdErr(), want * 2e-3, shots - 1})
	}
	mirroredJudge(t, "flux by glossy sheets", rows, .05)
}
