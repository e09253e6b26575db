package trace_test

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/system"
	"squint/trace"
)

// north is an opening whose outward side is +y, its lower left corner seen
// from indoors at x, z.
func north(x, z, width, height float64) system.Rect {
	return system.Rect{Origin: vec(x, 0, z), Across: vec(1, 0, 0), Up: vec(0, 0, 1), Outward: vec(0, 1, 0), WidthM: width, HeightM: height}
}

// sunBefore is the direction to a sun before such an opening, in profile, and
// turned out of the section by an angle.
func sunBefore(profileRad, asideRad float64) r3.Vec {
	sp, cp := math.Sincos(profileRad)
	sa, ca := math.Sincos(asideRad)
	return vec(sa, ca*cp, ca*sp)
}

// addSystem adds the faces of a system; finishes are by name, a face with a
// back has both.
func addSystem(m *mirroredModel, faces []system.Face, err error, finishes map[string]materials.BSDF) int32 {
	m.t.Helper()
	if err != nil {
		m.t.Fatal(err)
	}
	part := int32(len(m.s.Parts))
	m.s.Parts = append(m.s.Parts, scene.Part{Opening: -1, TexelM: 1})
	ids := map[[2]string]int32{}
	for _, f := range faces {
		key := [2]string{f.Finish, f.Back}
		id, ok := ids[key]
		if !ok {
			b := finishes[f.Finish]
			if f.Back != "" {
				both, err := materials.NewTwoSided(b, finishes[f.Back])
				if err != nil {
					m.t.Fatal(err)
				}
				b = both
			}
			id = int32(len(m.s.Finishes))
			m.s.Finishes = append(m.s.Finishes, scene.Finish{Name: f.Finish, BSDF: b})
			ids[key] = id
		}
		m.s.Triangles = append(m.s.Triangles, scene.Triangle{V: f.V, Finish: id, Part: part})
	}
	return part
}

// The slats of tables 11a and 11b, of the size of an indoor blind's.
const (
	slatWidthM, slatPitchM = 0.025, 0.02
	slatLengthM            = 2.0
	slatRows               = 31
	// slatEnds is what rays lose that start 1e-5 m off each slat: they pass an
	// edge within that distance of it on the wrong side. Light that leaves by
	// the slats' ends is less: pitch^2 width / (2 pi length^3) is 2e-6.
	slatEnds = 1e-5 / slatPitchM
)

// flatSlats are many flat slats whose tilt counts the outer edge up.
func flatSlats(t testing.TB, tiltRad float64, upper, lower materials.BSDF) (w *trace.World, outerM float64) {
	m := newMirroredModel(t)
	s := system.Slats{Position: system.Outside, GapM: 0.1, WidthM: slatWidthM, PitchM: slatPitchM, ThicknessM: 1e-5,
		TiltRad: tiltRad, HighM: slatRows * slatPitchM, Upper: "upper", Lower: "lower"}
	r := north(-slatLengthM/2, -slatRows*slatPitchM/2, slatLengthM, slatRows*slatPitchM)
	faces, err := s.Build(r)
	addSystem(m, faces, err, map[string]materials.BSDF{"upper": upper, "lower": lower})
	return m.world(), s.GapM + s.WidthM/2 + s.WidthM/2*math.Cos(tiltRad)
}

// slatLight is what becomes of light on the plane of the slats' outer edges:
// what passes straight, passes scattered and comes back, as shares.
type slatLight struct{ straight, passed, back mirroredTally }

// shareSlats follows n particles inward from random places of one pitch.
func shareSlats(w *trace.World, outerM, offM float64, n int, seed, number uint64, draw func(s *sampling.Stream) r3.Vec) *slatLight {
	var sum slatLight
	var found trace.Found
	for k := range n {
		s := sampling.Stream4(seed, 821, number, uint64(k))
		org := vec(0, outerM+offM, slatPitchM*(s.Float64()-.5))
		dir := draw(&s)
		weight, straight := 1.0, true
		var got [3]float64
		for bounce := 0; ; bounce++ {
			found.Reset()
			w.Walk(org, dir, 1, 0, &s, &found)
			if len(found.Exits) > 0 {
				switch {
				case found.Exits[0].Dir.Y > 0:
					got[2] = weight
				case straight:
					got[0] = weight
				default:
					got[1] = weight
				}
				break
			}
			h := &found.Landings[0].Hit
			rho, _ := h.BSDF.Lambert(h.Side)
			if bounce < 3 {
				weight *= rho
			} else if s.Float64() >= rho {
				break
			}
			straight = false
			org, dir = w.Offset(h.Point, h.Facing()), trace.CosineDirection(h.Facing(), s.Float64(), s.Float64())
		}
		sum.straight.add(got[0])
		sum.passed.add(got[1])
		sum.back.add(got[2])
	}
	return &sum
}

func slatParticles() int {
	if testing.Short() {
		return 2000
	}
	return 16000
}

func (r *mirroredRow) of(a mirroredTally) mirroredRow {
	return mirroredRow{r.name, r.want, a.mean(), a.stdErr(), r.allow, a.n - 1}
}

// slatMatte is a matte finish.
func slatMatte(t testing.TB, rho float64) materials.BSDF {
	b, err := materials.NewMatte(rho)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// TestSlatsDirect against table 11a, its converged columns, for suns in the
// section and out of it, whose profile angle alone counts. The table's tilt
// counts the inner edge up.
func TestSlatsDirect(t *testing.T) {
	table := ductTable(t, "11a_venetian_direct.csv")
	family := func(sign float64) (rows []mirroredRow) {
		for i, x := range table {
			rho := slatMatte(t, x[3])
			w, outer := flatSlats(t, sign*-radians(x[2]), rho, rho)
			sun := sunBefore(radians(x[4]), radians(float64(i%3)*25))
			got := shareSlats(w, outer, .001, slatParticles(), 3, uint64(i), func(*sampling.Stream) r3.Vec { return r3.Scale(-1, sun) })
			name := fmt.Sprintf("tilt %g, rho %g, profile %g", x[2], x[3], x[4])
			rows = append(rows,
				(&mirroredRow{name: name + ": straight", want: x[5], allow: 1e-6}).of(got.straight),
				(&mirroredRow{name: name + ": passed", want: x[7], allow: slatEnds}).of(got.passed),
				(&mirroredRow{name: name + ": back", want: x[10], allow: slatEnds}).of(got.back))
		}
		return rows
	}
	mirroredJudge(t, "11a slats, direct", family(1), .05)
	if n, _, _ := mirroredRejects(family(-1), 1); n < 20 {
		t.Errorf("twin: tilts of the other sign were rejected in %d values only", n)
	}
}

// TestSlatsDiffuse against table 11b: the hemisphere, and its halves above and
// below, given to 4 digits.
func TestSlatsDiffuse(t *testing.T) {
	table := ductTable(t, "11b_venetian_diffuse.csv")
	half := func(sign float64) func(s *sampling.Stream) r3.Vec {
		return func(s *sampling.Stream) r3.Vec {
			d := trace.CosineDirection(vec(0, -1, 0), s.Float64(), s.Float64())
			if sign != 0 {
				d.Z = -sign * math.Abs(d.Z) // light from above goes down
			}
			return d
		}
	}
	family := func(sign float64) (rows []mirroredRow) {
		for i, x := range table {
			rho := slatMatte(t, x[3])
			w, outer := flatSlats(t, sign*-radians(x[2]), rho, rho)
			name := fmt.Sprintf("tilt %g, rho %g", x[2], x[3])
			// Light that starts 0.02 mm before the slats' edges cannot pass
			// beside their stack, which is 0.31 m high to either side.
			for k, sky := range []float64{0, 1, -1} {
				got := shareSlats(w, outer, 2e-5, slatParticles(), 4, uint64(3*i+k), half(sky))
				passed := got.straight
				passed.sum, passed.square = passed.sum+got.passed.sum, passed.square+got.passed.square // never both
				want, allow := []float64{x[6], x[11], x[12]}[k], slatEnds
				if k > 0 {
					allow += 5e-5
				}
				rows = append(rows, (&mirroredRow{name: name + []string{": passed", ": passed from above", ": passed from below"}[k], want: want, allow: allow}).of(passed))
				if k == 0 {
					rows = append(rows, (&mirroredRow{name: name + ": back", want: x[9], allow: allow}).of(got.back))
				}
			}
		}
		return rows
	}
	mirroredJudge(t, "11b slats, diffuse", family(1), .05)
	if n, _, _ := mirroredRejects(family(-1), 1); n < 10 {
		t.Errorf("twin: tilts of the other sign were rejected in %d values only", n)
	}
}

// TestSlatsCutOff against table 11c: a little more closed than the cut-off
// nothing passes straight, a little more open something does, as the formula of
// table 11a says.
func TestSlatsCutOff(t *testing.T) {
	for i, x := range ductTable(t, "11c_cutoff_angles.csv") {
		width := .1 * x[0]
		tilt, ok := system.CutOffTilt(radians(x[1]), width, .1)
		if !ok || math.Abs(tilt+radians(x[2])) > 1e-7 {
			t.Errorf("row %d: got a cut-off of %g, want %g", i, -tilt*180/math.Pi, x[2])
			continue
		}
		sun := sunBefore(radians(x[1]), radians(float64(i%3)*30))
		share := func(tilt float64) float64 {
			m := newMirroredModel(t)
			s := system.Slats{Position: system.Outside, GapM: .1, WidthM: width, PitchM: .1, ThicknessM: 1e-5, TiltRad: tilt, HighM: 4, Upper: "black"}
			faces, err := s.Build(north(-5, -2, 10, 4))
			addSystem(m, faces, err, map[string]materials.BSDF{"black": m.matte(0)})
			w := m.world()
			lit := 0
			const n = 2000
			for k := range n {
				if w.Transmittance(vec(0, 0, -1.+.1*(float64(k)+.5)/n), sun, math.Inf(1)) > 0 {
					lit++
				}
			}
			return float64(lit) / n
		}
		const step = .5 * math.Pi / 180
		if got := share(tilt - step); got != 0 {
			t.Errorf("row %d: %g of the sun passes, want none", i, got)
		}
		want := 1 - x[0]*math.Abs(math.Sin(radians(x[1])-tilt-step))/math.Cos(radians(x[1]))
		// Either border of the lit strip falls between two of 2000 rays.
		if got := share(tilt + step); math.Abs(got-want) > 1e-3 || !(got > 0) {
			t.Errorf("row %d: %g of the sun passes, want %g", i, got, want)
		}
	}
}

// TestPerforatedSlats: on its way a ray crosses (width/pitch) |sin(profile -
// tilt)|/cos(profile) sheets on average, one more or less of the whole number,
// and each passes the open share times the overlap of a hole's rims, here as a
// formula of its own. Source: as materials.Perforated.
func TestPerforatedSlats(t *testing.T) {
	base := slatMatte(t, .5)
	holes, err := materials.NewPerforated(materials.Perforated{OpenShare: .2, HoleDiameterM: .001, ThicknessM: .0003, Base: base})
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct{ tilt, profile, aside float64 }{{-60, 10, 0}, {-60, 25, 20}, {-20, 35, 0}, {30, 70, 10}, {-75, 40, 30}} {
		w, _ := flatSlats(t, radians(c.tilt), holes, holes)
		sun := sunBefore(radians(c.profile), radians(c.aside))
		crossed := slatWidthM / slatPitchM * math.Abs(math.Sin(radians(c.profile-c.tilt))) / math.Cos(radians(c.profile))
		cos := math.Abs(math.Sin(radians(c.profile-c.tilt))) * math.Cos(radians(c.aside))
		k := .3 * math.Sqrt(1-cos*cos) / cos
		one := 0.0
		if k < 1 {
			one = .2 * 2 / math.Pi * (math.Acos(k) - k*math.Sqrt(1-k*k))
		}
		whole, rest := math.Modf(crossed)
		want := (1-rest)*math.Pow(one, whole) + rest*math.Pow(one, whole+1)
		const n = 4000
		got := 0.0
		for i := range n {
			got += w.Transmittance(vec(0, 0, slatPitchM*((float64(i)+.5)/n-9)), sun, math.Inf(1)) / n
		}
		if math.Abs(got-want) > 1.0/n { // a border between two rays
			t.Errorf("%+v: got %.5f, want %.5f (%.3f sheets of %.4f)", c, got, want, crossed, one)
		}
	}
}
