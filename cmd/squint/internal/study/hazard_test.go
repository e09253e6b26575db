package study

import (
	"context"
	"math"
	"reflect"
	"testing"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/demo"
	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/photometry"
	"squint/scene/project"
	"squint/scene/sky"
	"squint/scene/weather"
	"squint/trace"
)

// hazardYear is the suns of a clear year, each hour, at 47.6 degrees north.
func hazardYear(t testing.TB, every int) *scene.Climate {
	c := &scene.Climate{Site: sky.Site{LatitudeDeg: 47.6}, Year: &weather.Year{}}
	at := time.Date(2022, 1, 1, 0, 30, 0, 0, time.UTC)
	for h := 0; h < 8760; h += every {
		s, err := sky.SunAt(c.Site, at.Add(time.Duration(h)*time.Hour))
		if err != nil {
			t.Fatal(err)
		}
		if s.Direction.Z > 0 {
			c.Moments = append(c.Moments, &scene.Moment{Step: h, Time: at.Add(time.Duration(h) * time.Hour), Sun: s.Refracted(1013.25, 10).Direction, SunNormalLx: 8e4})
		}
	}
	return c
}

// hazardModel makes an input of one mirror, as a strip along x through points
// of y and z, and the ground.
func hazardModel(t testing.TB, b materials.BSDF, half float64, yz [][2]float64, views ...scene.Viewpoint) *Input {
	matte, err := materials.NewMatte(.2)
	if err != nil {
		t.Fatal(err)
	}
	s := &scene.Scene{Project: &project.Project{}, Viewpoints: views, Finishes: []scene.Finish{{BSDF: b}, {BSDF: matte}},
		Parts: []scene.Part{{Name: "mirror", Opening: -1, TexelM: 1}, {Name: "ground", Kind: scene.GroundPlane, Opening: -1, TexelM: 1}}}
	quad := func(a, b, c, d r3.Vec, finish, part int32) {
		s.Triangles = append(s.Triangles, scene.Triangle{V: [3]r3.Vec{a, b, c}, Finish: finish, Part: part}, scene.Triangle{V: [3]r3.Vec{a, c, d}, Finish: finish, Part: part})
	}
	for i := range len(yz) - 1 {
		p, q := yz[i], yz[i+1]
		quad(r3.Vec{X: -half, Y: p[0], Z: p[1]}, r3.Vec{X: half, Y: p[0], Z: p[1]}, r3.Vec{X: half, Y: q[0], Z: q[1]}, r3.Vec{X: -half, Y: q[0], Z: q[1]}, 0, 0)
	}
	quad(r3.Vec{X: -60, Y: -60}, r3.Vec{X: 60, Y: -60}, r3.Vec{X: 60, Y: 60}, r3.Vec{X: -60, Y: 60}, 1, 1)
	c := hazardYear(t, 1)
	in := &Input{Project: &project.Project{Simulation: project.Simulation{Seed: 1}}, Scene: s, Climate: c, World: trace.Accelerate(s, 1)}
	in.Standings = []Standing{{Scene: s, World: in.World, Moments: c.Moments}}
	return in
}

func searched(t testing.TB, in *Input, workers int) *Hazard {
	h, err := hazard(context.Background(), in, Options{Workers: workers, Progress: func(Stage, int, int) {}})
	if err != nil {
		t.Fatal(err)
	}
	return h
}

func hazardMirror(t testing.TB, rho float64) materials.BSDF {
	b, err := materials.NewMirror(rho, 0)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// tiltedTrough is a parabolic trough of focal length f and rim angle rim whose
// axis points south and up by altitude, its focus at (focusY, focusZ).
func tiltedTrough(f, rim, altitude float64, n int, focusY, focusZ float64) (yz [][2]float64) {
	s, c := math.Sincos(altitude)
	for i := range n + 1 {
		u := 2 * f * math.Tan(rim/2*(1-2*float64(i)/float64(n)))
		v := u*u/(4*f) - f
		// The axis (-c, s) and across it (-s, -c); the front faces the sun.
		yz = append(yz, [2]float64{focusY - v*c + u*s, focusZ + v*s + u*c})
	}
	return yz
}

// TestHazardOfTrough: a trough that lies east and west and faces the noon sun
// of the equinoxes concentrates most then, in its focal line: 4 rim/(pi sin r)
// times the reflectance, derived in trace (TestFocusOfTrough), less the meshing
// error that is derived there, plus the sun itself; with the sun off the plane
// of the section by e it is less by the factor cos e. The search promises 2 %.
func TestHazardOfTrough(t *testing.T) {
	const rho, f, n, latitude = .9, .5, 150, 47.6
	rim := 30 * math.Pi / 180
	radius := photometry.SunDiameterRad / 2
	in := hazardModel(t, hazardMirror(t, rho), 1.5, tiltedTrough(f, rim, (90-latitude)*math.Pi/180, n, 0, 2))
	begin := time.Now()
	h := searched(t, in, 2)
	t.Logf("%d suns, %.2f s on two threads", h.Suns, time.Since(begin).Seconds())
	u := rim / n / radius
	mesh := (math.Sqrt(1-u*u) + math.Asin(u)/u) / 2
	want := 1 + mesh*rho*4*rim/(math.Pi*math.Sin(radius))
	p := h.Outdoors
	if p == nil {
		t.Fatal("got no peak")
	}
	t.Logf("%+v", *p)
	if math.Abs(p.Times/want-1) > .02 {
		t.Errorf("got %.2f times the sun, want %.2f", p.Times, want)
	}
	if math.Hypot(p.Point.Y, p.Point.Z-2) > .01 {
		t.Errorf("got the peak at %.3f, want it on the line y = 0, z = 2", p.Point)
	}
	decl := math.Asin(math.Max(-1, math.Min(1, p.Sun.Z*math.Sin(latitude*math.Pi/180)-p.Sun.Y*-1*math.Cos(latitude*math.Pi/180))))
	if math.Abs(decl) > 1.5*math.Pi/180 || math.Abs(p.Sun.X) > .2 {
		t.Errorf("got a sun of declination %.2f degrees and %.2f east at %v, want an equinox at noon", decl*180/math.Pi, p.Sun.X, p.Time)
	}
	if p.Mirror != "mirror" || p.FromM < f || p.FromM > 1.1*f || p.Indoors || !p.Ground || math.Abs(p.AboveM-p.Point.Z) > 1e-4 {
		t.Errorf("got %+v, want it %g m from the mirror, outdoors, above the ground", *p, f)
	}
	if h.Indoors != nil || h.Eye != nil {
		t.Error("got a peak indoors or at an eye, want none")
	}
	if h.Surface == nil || h.Surface.Times > p.Times {
		t.Errorf("on surfaces: got %+v, want less than in the air", h.Surface)
	}
	if g := h.Greatest(); g != p {
		t.Errorf("greatest: got %+v", g)
	}
}

// TestHazardAtEye: of two viewpoints the one in the focus of a trough is found.
func TestHazardAtEye(t *testing.T) {
	if testing.Short() {
		t.Skip("a whole search; TestHazardOfTrough is another")
	}
	const rho = .9
	yz := tiltedTrough(.6, .4, 40*math.Pi/180, 110, 0, 2)
	in := hazardModel(t, hazardMirror(t, rho), 1, yz,
		scene.Viewpoint{Name: "far", Position: r3.Vec{X: 20, Y: 20, Z: 1.2}, Direction: r3.Vec{X: 1}},
		scene.Viewpoint{Name: "desk", Position: r3.Vec{Z: 2}, Direction: r3.Vec{X: 1}})
	h := searched(t, in, 2)
	if h.Eye == nil || h.Eye.On != "desk" {
		t.Fatalf("got %+v, want a peak at the desk", h.Eye)
	}
	if h.Eye.Times > h.Outdoors.Times*1.02 || h.Eye.Times < .5*h.Outdoors.Times {
		t.Errorf("in the focus: got %.2f at the eye and %.2f in the air, want nearly the same", h.Eye.Times, h.Outdoors.Times)
	}
	if h.EveryMoments != 1 {
		t.Errorf("looked at every %d moments, want all", h.EveryMoments)
	}
}

// TestHazardWithoutConcentration: a flat mirror adds at most its reflectance
// to the sun; without mirrors nothing is searched.
func TestHazardWithoutConcentration(t *testing.T) {
	const rho = .85
	in := hazardModel(t, hazardMirror(t, rho), .5, [][2]float64{{0, 1}, {0, 2}})
	h := searched(t, in, 2)
	for _, p := range []*Peak{h.Outdoors, h.Surface} {
		if p == nil {
			t.Fatal("got no peak")
		}
		if p.Times > 1+rho+.002 || p.Times < .7 {
			t.Errorf("flat: got %.3f times the sun on %q, want up to %g", p.Times, p.On, 1+rho)
		}
	}
	if h.Outdoors.Times < 1+rho-.002 {
		t.Errorf("flat: got %.3f, want %g: the sun and its image", h.Outdoors.Times, 1+rho)
	}
	if h.Chain != nil {
		t.Errorf("got light by several mirrors, %+v, want none", h.Chain)
	}
	matte, err := materials.NewMatte(.5)
	if err != nil {
		t.Fatal(err)
	}
	if h := searched(t, hazardModel(t, matte, .5, [][2]float64{{-.4, 2}, {.4, 2}}), 1); h != nil {
		t.Errorf("without mirrors: got %+v, want nothing", h)
	}
}

// TestHazardChain: two flat mirrors in a right angle send light back by two
// reflections: rho squared of the sun besides the single ones.
func TestHazardChain(t *testing.T) {
	const rho = .9
	in := hazardModel(t, hazardMirror(t, rho), .6, [][2]float64{{-1.2, 1}, {0, 1}, {0, 2.2}})
	h := searched(t, in, 2)
	if h.Chain == nil {
		t.Fatal("got no light by two mirrors")
	}
	// Sun, two single images and the double one. A cell's mean is below that but
	// for noise: 32,000 photons of 2.9 m2 at most put 0.004 into a cell of 0.15 m
	// at each step, so 2.6 is some 650 steps of about 400 photons: 5 %, of which
	// 4 are allowed. The run that measures did not choose the cell.
	most := 1 + 2*rho + rho*rho
	if h.Chain.Times > 1.2*most || h.Chain.Times < 1+rho*rho/2 {
		t.Errorf("got %.2f times the sun, want below %.2f", h.Chain.Times, most)
	}
	if h.Outdoors.Times > 1+2*rho+.01 {
		t.Errorf("by one mirror: got %.2f, want at most %.2f", h.Outdoors.Times, 1+2*rho)
	}
}

// TestHazardGlossy: close before a flat glossy sheet of narrow lobe the light is
// the sun's and the lobe's share of it, since the cosines at which it arrives
// and leaves are nearly the same; noise as in TestHazardChain.
func TestHazardGlossy(t *testing.T) {
	const total, share = .8, .9
	b, err := materials.NewGlossy(total, share, 2*math.Pi/180)
	if err != nil {
		t.Fatal(err)
	}
	h := searched(t, hazardModel(t, b, .6, [][2]float64{{0, 1}, {0, 2.2}}), 2)
	if h.Outdoors != nil || h.Surface != nil || h.Chain == nil {
		t.Fatalf("got %+v, want an estimate alone", h)
	}
	if want := 1 + total*share; math.Abs(h.Chain.Times/want-1) > .2 {
		t.Errorf("got %.2f times the sun, want about %.2f", h.Chain.Times, want)
	}
	if h.Greatest() != h.Chain {
		t.Error("the estimate is not the greatest")
	}
}

// TestHazardCells: keys and middles belong together, sums are kept while the
// table grows, and indoors, outdoors and surfaces stay apart.
func TestHazardCells(t *testing.T) {
	c := newCells(.15)
	s := sampling.Stream2(3, 4)
	want := map[uint64]float64{}
	for range 60000 {
		p := r3.Vec{X: 20*s.Float64() - 10, Y: 20*s.Float64() - 10, Z: 4 * s.Float64()}
		key := c.key(p, s.Float64() < .5, int32(3*s.Float64())-1)
		if m := c.middle(key); math.Abs(m.X-p.X) > .0751 || math.Abs(m.Y-p.Y) > .0751 || math.Abs(m.Z-p.Z) > .0751 {
			t.Fatalf("%.3f: got the middle %.3f", p, m)
		}
		want[key] += .5
		c.add(key, .5, true)
	}
	if len(c.used) != len(want) {
		t.Errorf("got %d cells, want %d", len(c.used), len(want))
	}
	for key, x := range want {
		if e, fresh := c.find(key); fresh || float64(e.single) != x {
			t.Fatalf("got %g, want %g", e.single, x)
		}
	}
}

// TestHazardDeterminism: the same on any number of threads.
func TestHazardDeterminism(t *testing.T) {
	if testing.Short() {
		t.Skip("two searches")
	}
	in := hazardModel(t, hazardMirror(t, .9), .6, [][2]float64{{-1.2, 1}, {-.6, .9}, {0, 1}, {0, 2.2}})
	if a, b := searched(t, in, 1), searched(t, in, 3); !reflect.DeepEqual(a, b) {
		t.Errorf("got %+v on one thread, %+v on three", a, b)
	}
}

// TestHazardPlaces: the demo's workstations are indoors, the yard is not, and
// suns between the records run through those of the records.
func TestHazardPlaces(t *testing.T) {
	in, err := prepareFile(demo.FS(), demo.Project, "white shelf", 2)
	if err != nil {
		t.Fatal(err)
	}
	s := &hazardSearch{in: in, world: in.World, scene: in.Scene}
	for _, v := range in.Scene.Viewpoints {
		if !s.indoors(v.Position) {
			t.Errorf("%s: got outdoors", v.Name)
		}
	}
	b := in.Scene.Bounds
	for _, p := range []r3.Vec{{X: b.Min.X - 3, Y: b.Min.Y - 3, Z: 1.5}, {X: b.Max.X + 3, Y: b.Max.Y + 3, Z: 1.5}, {X: b.Min.X, Y: b.Min.Y, Z: b.Max.Z + 1}} {
		if s.indoors(p) {
			t.Errorf("%.1f: got indoors", p)
		}
	}
	n := 0
	for _, m := range in.Climate.Moments {
		if sun, up := s.sunAt(m.Time); up {
			n++
			// Refraction above 5 degrees is below 0.16 degrees; a tenth of it
			// for weather.
			if d := r3.Norm(r3.Sub(sun, m.Sun)); d > .02*math.Pi/180 {
				t.Errorf("%v: the sun is off by %.3f degrees", m.Time, d*180/math.Pi)
				break
			}
		}
	}
	if n < 2000 {
		t.Errorf("got %d suns", n)
	}
}
