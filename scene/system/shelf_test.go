package system

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// plain is a shelf in both parts.
func plain() LightShelf {
	return LightShelf{HeightM: 1.2, OutsideDepthM: 0.6, InsideDepthM: 0.8, ThicknessM: 0.04, OutsideTiltRad: 10 * rad, InsideTiltRad: -5 * rad,
		ExtendM: 0.1, GapM: 0.01, Top: "mirror", Underside: "white"}
}

// openEdges counts the directed edges without exactly one opposite: 0 for a
// closed surface whose faces are all wound the same way.
func openEdges(faces []Face) int {
	type edge [2]r3.Vec
	count := map[edge]int{}
	for _, f := range faces {
		for i := range 3 {
			count[edge{f.V[i], f.V[(i+1)%3]}]++
		}
	}
	open := 0
	for e, n := range count {
		if n != 1 || count[edge{e[1], e[0]}] != 1 {
			open++
		}
	}
	return open
}

// volume is positive where the fronts are outside (divergence theorem).
func volume(faces []Face) float64 {
	v := 0.0
	for _, f := range faces {
		v += r3.Dot(f.V[0], r3.Cross(f.V[1], f.V[2])) / 6
	}
	return v
}

func TestShelfIsClosed(t *testing.T) {
	rng := rand.New(rand.NewPCG(4, 1))
	for range 300 {
		r := facing(rng.Float64()*2*math.Pi, (rng.Float64()-0.5)*60*rad, (rng.Float64()-0.5)*40*rad, 2, 1.8)
		s := plain()
		s.OutsideTiltRad, s.InsideTiltRad = (rng.Float64()-0.5)*60*rad, (rng.Float64()-0.5)*60*rad
		faces, err := s.Build(r)
		if err != nil {
			t.Fatal(err)
		}
		if len(faces) != 24 {
			t.Fatalf("got %d faces, want 12 for each part", len(faces))
		}
		for i, part := range [][]Face{faces[:12], faces[12:]} {
			if n := openEdges(part); n != 0 {
				t.Errorf("part %d: %d edges are open or wound two ways", i, n)
			}
			// The section is a trapezium of parallel sides top and underside,
			// ThicknessM apart, each from the cut at GapM to the depth:
			// depth - gap/cos, and depth - (gap - thickness*sin)/cos.
			depth, turn := s.OutsideDepthM, s.OutsideTiltRad-r.LeanRad()
			if i == 1 {
				depth, turn = s.InsideDepthM, -(s.InsideTiltRad - r.LeanRad())
			}
			sin, cos := math.Sincos(turn)
			want := s.ThicknessM * (depth - (s.GapM-s.ThicknessM*sin/2)/cos) * (r.WidthM + 2*s.ExtendM)
			if got := volume(part); math.Abs(got-want) > near {
				t.Errorf("part %d: volume %.9f m3, want %.9f", i, got, want)
			}
			// The gap is kept, and reached.
			least, side := math.Inf(1), 1-2*float64(i)
			for _, f := range part {
				for _, v := range f.V {
					least = min(least, side*r3.Dot(r3.Sub(v, r.Origin), r.Outward))
				}
			}
			if math.Abs(least-s.GapM) > near {
				t.Errorf("part %d: comes within %g m of the glass, want %g", i, least, s.GapM)
			}
			// A planted defect: one face wound the other way must be seen.
			part[5].V[0], part[5].V[1] = part[5].V[1], part[5].V[0]
			if openEdges(part) == 0 || math.Abs(volume(part)-want) < near {
				t.Error("a flipped face is not noticed")
			}
		}
	}
}

// TestShelfByHand: a wall that faces north (+y), a horizontal shelf.
func TestShelfByHand(t *testing.T) {
	r := Rect{Across: r3.Vec{X: 1}, Up: r3.Vec{Z: 1}, Outward: r3.Vec{Y: 1}, WidthM: 2, HeightM: 1.5}
	s := LightShelf{HeightM: 1, OutsideDepthM: 0.5, ThicknessM: 0.1, GapM: 0.02, ExtendM: 0.25, Top: "mirror", Underside: "white"}
	faces, err := s.Build(r)
	if err != nil {
		t.Fatal(err)
	}
	lo, hi := r3.Vec{X: math.Inf(1), Y: math.Inf(1), Z: math.Inf(1)}, r3.Vec{X: math.Inf(-1), Y: math.Inf(-1), Z: math.Inf(-1)}
	for _, f := range faces {
		for _, v := range f.V {
			lo = r3.Vec{X: min(lo.X, v.X), Y: min(lo.Y, v.Y), Z: min(lo.Z, v.Z)}
			hi = r3.Vec{X: max(hi.X, v.X), Y: max(hi.Y, v.Y), Z: max(hi.Z, v.Z)}
		}
		wantFinish := "white"
		switch n := f.Normal(); f.Part {
		case "shelf/top":
			wantFinish = "mirror"
			if n.Z < 1-near {
				t.Errorf("top faces %v, want up", n)
			}
		case "shelf/underside":
			if n.Z > near-1 {
				t.Errorf("underside faces %v, want down", n)
			}
		case "shelf/edge":
			if math.Abs(n.Z) > near {
				t.Errorf("edge faces %v, want sideways", n)
			}
		default:
			t.Errorf("part %q", f.Part)
		}
		if f.Finish != wantFinish {
			t.Errorf("%s: got finish %q, want %q", f.Part, f.Finish, wantFinish)
		}
	}
	if wantLo, wantHi := (r3.Vec{X: -0.25, Y: 0.02, Z: 0.9}), (r3.Vec{X: 2.25, Y: 0.5, Z: 1}); apart(lo, wantLo) > near || apart(hi, wantHi) > near {
		t.Errorf("box: got %v to %v, want %v to %v", lo, hi, wantLo, wantHi)
	}
}

// TestShelfOnTransom: the top at the opening's lower edge or below it, the
// thickness hanging down whatever the height.
func TestShelfOnTransom(t *testing.T) {
	r := Rect{Origin: r3.Vec{Z: 2.1}, Across: r3.Vec{X: 1}, Up: r3.Vec{Z: 1}, Outward: r3.Vec{Y: 1}, WidthM: 2, HeightM: 0.8}
	for _, height := range []float64{0.02, 0, -0.3, -1} {
		s := LightShelf{HeightM: height, OutsideDepthM: 0.6, InsideDepthM: 0.4, ThicknessM: 0.05, GapM: 0.01}
		faces, err := s.Build(r)
		if err != nil {
			t.Fatalf("height %g: %v", height, err)
		}
		lo, hi := math.Inf(1), math.Inf(-1)
		for _, f := range faces {
			for _, v := range f.V {
				lo, hi = min(lo, v.Z), max(hi, v.Z)
			}
		}
		if math.Abs(hi-(2.1+height)) > near || math.Abs(lo-(2.05+height)) > near { // by hand
			t.Errorf("height %g: z from %g to %g, want %g to %g", height, lo, hi, 2.05+height, 2.1+height)
		}
		if n := openEdges(faces[:12]) + openEdges(faces[12:]); n != 0 {
			t.Errorf("height %g: %d edges are open", height, n)
		}
	}
}

// TestTiltLiftsOuterEdge, of either part.
func TestTiltLiftsOuterEdge(t *testing.T) {
	r := facing(2, 0, 0, 2, 1.5)
	for _, outside := range []bool{true, false} {
		s := LightShelf{HeightM: 1, ThicknessM: 0.02, GapM: 0.01, OutsideTiltRad: 20 * rad, InsideTiltRad: 20 * rad}
		if outside {
			s.OutsideDepthM = 0.5
		} else {
			s.InsideDepthM = 0.5
		}
		faces, err := s.Build(r)
		if err != nil {
			t.Fatal(err)
		}
		var inner, outer r3.Vec // of the top, by their distance outdoors
		for i, v := range append(faces[0].V[:], faces[1].V[:]...) {
			d := r3.Dot(r3.Sub(v, r.Origin), r.Outward)
			if i == 0 || d < r3.Dot(r3.Sub(inner, r.Origin), r.Outward) {
				inner = v
			}
			if i == 0 || d > r3.Dot(r3.Sub(outer, r.Origin), r.Outward) {
				outer = v
			}
		}
		if rise := (outer.Z - inner.Z) / r3.Dot(r3.Sub(outer, inner), r.Outward); math.Abs(rise-math.Tan(20*rad)) > near {
			t.Errorf("outside %v: the outer edge rises by %.4f, want tan 20 degrees", outside, rise)
		}
	}
}

// TestShelfTurns wants the faces of a turned opening to be the turned faces:
// about the vertical as they are; about the sill, where the tilts, which are
// counted from the horizontal, turn too.
func TestShelfTurns(t *testing.T) {
	upright := facing(0, 0, 0, 2, 1.5)
	base, err := plain().Build(upright)
	if err != nil {
		t.Fatal(err)
	}
	rng := rand.New(rand.NewPCG(5, 1))
	for range 200 {
		azimuth, lean := rng.Float64()*2*math.Pi, (rng.Float64()-0.5)*80*rad
		r := facing(azimuth, lean, 0, 2, 1.5)
		s := plain()
		s.OutsideTiltRad += lean
		s.InsideTiltRad += lean
		faces, err := s.Build(r)
		if err != nil {
			t.Fatal(err)
		}
		for i, f := range faces {
			for k, v := range f.V {
				d := r3.Sub(base[i].V[k], upright.Origin)
				want := r.Point(d.X, d.Z, d.Y) // upright is x across, z up, y outward
				if apart(v, want) > near {
					t.Fatalf("azimuth %.3f, lean %.3f: face %d: got %v, want %v", azimuth, lean, i, v, want)
				}
			}
		}
	}
}

// hits is whether a ray meets a face (Moeller and Trumbore 1997, "Fast,
// minimum storage ray/triangle intersection", from memory).
func hits(f Face, origin, dir r3.Vec) bool {
	e1, e2 := r3.Sub(f.V[1], f.V[0]), r3.Sub(f.V[2], f.V[0])
	p := r3.Cross(dir, e2)
	det := r3.Dot(e1, p)
	if math.Abs(det) < 1e-14 {
		return false
	}
	s := r3.Sub(origin, f.V[0])
	u := r3.Dot(s, p) / det
	q := r3.Cross(s, e1)
	v := r3.Dot(dir, q) / det
	return u >= 0 && v >= 0 && u+v <= 1 && r3.Dot(e2, q)/det > 1e-9
}

// sunlit is the share of the glass below the shelf's height that the sun
// reaches along a middle line of rows.
func sunlit(faces []Face, r Rect, heightM float64, sun r3.Vec, rows int) float64 {
	lit := 0
	for i := range rows {
		p := r.Point(r.WidthM/2, heightM*(float64(i)+0.5)/float64(rows), 0)
		blocked := false
		for _, f := range faces {
			blocked = blocked || hits(f, p, sun)
		}
		if !blocked {
			lit++
		}
	}
	return float64(lit) / float64(rows)
}

// litShare is the closed form: a straight line from the glass toward the sun
// rises by the tangent of the profile angle for each metre outdoors, so an
// overhang of depth D casts a shadow D tan(profile) deep (profile angle:
// tan(alt)/cos(azimuth difference), ISO 15099; the shadow of an overhang:
// Olgyay and Olgyay 1957, "Solar control and shading devices", both from
// memory). Each corner (out, up) of the section casts its shadow at
// up - out*tan(profile); the shelf's reaches from the lowest to the highest.
func litShare(s LightShelf, profileRad float64) float64 {
	sin, cos := math.Sincos(s.OutsideTiltRad)
	tan := math.Tan(profileRad)
	shadow := func(out, up float64) float64 { return min(s.HeightM, max(0, up-out*tan)) }
	d, th := s.OutsideDepthM, s.ThicknessM
	corners := []float64{
		shadow(s.GapM, s.HeightM+s.GapM*sin/cos),
		shadow(s.GapM, s.HeightM+s.GapM*sin/cos-th/cos),
		shadow(d*cos, s.HeightM+d*sin),
		shadow(d*cos+th*sin, s.HeightM+d*sin-th*cos),
	}
	lo, hi := corners[0], corners[0]
	for _, c := range corners {
		lo, hi = min(lo, c), max(hi, c)
	}
	return 1 - (hi-lo)/s.HeightM
}

func TestSunlitGlass(t *testing.T) {
	// Without thickness and gap it is the textbook's: a horizontal overhang of
	// 0.5 m, 1 m above the sill, at a profile angle of 45 degrees shades half.
	if got := litShare(LightShelf{HeightM: 1, OutsideDepthM: 0.5}, 45*rad); math.Abs(got-0.5) > near {
		t.Fatalf("the closed form gives %g, want 0.5", got)
	}
	const rows = 500
	// Either border of the shadow falls between two rows: 1/rows for each.
	const tolerance = 2.0 / rows
	rng := rand.New(rand.NewPCG(6, 1))
	flipped := 0
	for range 60 {
		facade := rng.Float64() * 2 * math.Pi
		r := facing(facade, 0, 0, 2, 1.5)
		s := LightShelf{HeightM: 1, OutsideDepthM: 0.2 + 0.6*rng.Float64(), ThicknessM: 0.01 + 0.04*rng.Float64(), GapM: 0.01,
			OutsideTiltRad: (rng.Float64() - 0.5) * 60 * rad, ExtendM: 20}
		alt, off := (2+70*rng.Float64())*rad, (rng.Float64()-0.5)*120*rad
		sinAlt, cosAlt := math.Sincos(alt)
		sinAz, cosAz := math.Sincos(facade + off)
		sun := r3.Vec{X: cosAlt * sinAz, Y: cosAlt * cosAz, Z: sinAlt}
		profile := math.Atan(math.Tan(alt) / math.Cos(off))
		want := litShare(s, profile)
		faces, err := s.Build(r)
		if err != nil {
			t.Fatal(err)
		}
		if got := sunlit(faces, r, s.HeightM, sun, rows); math.Abs(got-want) > tolerance {
			t.Errorf("shelf %+v, profile %.2f degrees: got %.4f sunlit, want %.4f", s, profile/rad, got, want)
		}
		// A planted defect: the tilt of the wrong sign.
		s.OutsideTiltRad *= -1
		if faces, err = s.Build(r); err != nil {
			t.Fatal(err)
		}
		if math.Abs(sunlit(faces, r, s.HeightM, sun, rows)-want) > tolerance {
			flipped++
		}
	}
	if flipped < 30 {
		t.Errorf("a tilt of the wrong sign was noticed in %d of 60 cases only", flipped)
	}
}

func TestShelfRefused(t *testing.T) {
	upright := facing(1, 0, 0, 2, 1.5)
	for _, c := range []struct {
		name, dimension string
		r               Rect
		change          func(*LightShelf)
	}{
		{"above the opening", "height", upright, func(s *LightShelf) { s.HeightM = 1.51 }},
		{"far below the sill", "height", upright, func(s *LightShelf) { s.HeightM = -1.01 }},
		{"height not a number", "height", upright, func(s *LightShelf) { s.HeightM = math.NaN() }},
		{"too thick", "thickness", upright, func(s *LightShelf) { s.ThicknessM = 0.51 }},
		{"without thickness", "thickness", upright, func(s *LightShelf) { s.ThicknessM = 0 }},
		{"negative depth", "outside depth", upright, func(s *LightShelf) { s.OutsideDepthM = -1 }},
		{"infinite depth", "inside depth", upright, func(s *LightShelf) { s.InsideDepthM = math.Inf(1) }},
		{"no depth", "outside depth", upright, func(s *LightShelf) { s.OutsideDepthM, s.InsideDepthM = 0, 0 }},
		{"negative extension", "extension", upright, func(s *LightShelf) { s.ExtendM = -0.1 }},
		{"no gap", "gap", upright, func(s *LightShelf) { s.GapM = 0 }},
		{"too steep", "outside tilt", upright, func(s *LightShelf) { s.OutsideTiltRad = 61 * rad }},
		{"too steep inside", "inside tilt", upright, func(s *LightShelf) { s.InsideTiltRad = -61 * rad }},
		{"tilt not a number", "inside tilt", upright, func(s *LightShelf) { s.InsideTiltRad = math.NaN() }},
		{"along sloping glass", "outside tilt", facing(1, 40*rad, 0, 2, 1.5), func(s *LightShelf) { s.OutsideTiltRad = -50 * rad }},
		{"roof light", "opening", facing(1, 80*rad, 0, 2, 1.5), func(*LightShelf) {}},
		// drooping by 50 degrees the underside starts (0.01 + 0.04 sin 50) / cos 50 = 0.0632 m along the shelf
		{"cuts the glass", "outside depth", upright, func(s *LightShelf) { s.OutsideTiltRad = -50 * rad; s.OutsideDepthM = 0.063 }},
		// lifted at its outer edge by 50 degrees the part indoors droops
		{"cuts the glass inside", "inside depth", upright, func(s *LightShelf) { s.InsideTiltRad = 50 * rad; s.InsideDepthM = 0.063 }},
	} {
		t.Run(c.name, func(t *testing.T) {
			s := plain()
			c.change(&s)
			faces, err := s.Build(c.r)
			var d *DimensionError
			if !errors.As(err, &d) || d.Dimension != c.dimension || faces != nil {
				t.Errorf("got %d faces and error %v, want one about %q", len(faces), err, c.dimension)
			}
		})
	}
	s := plain()
	s.OutsideTiltRad, s.OutsideDepthM = -50*rad, 0.0634
	if _, err := s.Build(upright); err != nil {
		t.Errorf("just deep enough: %v", err)
	}
}
