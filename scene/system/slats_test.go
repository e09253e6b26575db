package system

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// eighty is a blind of slats 80 mm wide at 72 mm.
func eighty() Slats {
	return Slats{Position: Outside, GapM: 0.03, WidthM: 0.08, PitchM: 0.072, ThicknessM: 0.0004, SagittaM: 0.006, TiltRad: 30 * rad,
		HighM: 1.5, SideM: 0.005, HeadRail: true, Upper: "mirror", Lower: "white"}
}

// extent is the box of the faces in the opening's own frame.
func extent(faces []Face, r Rect) (lo, hi r3.Vec) {
	lo, hi = r3.Vec{X: math.Inf(1), Y: math.Inf(1), Z: math.Inf(1)}, r3.Vec{X: math.Inf(-1), Y: math.Inf(-1), Z: math.Inf(-1)}
	for _, f := range faces {
		for _, v := range f.V {
			l := r.Local(v)
			lo = r3.Vec{X: min(lo.X, l.X), Y: min(lo.Y, l.Y), Z: min(lo.Z, l.Z)}
			hi = r3.Vec{X: max(hi.X, l.X), Y: max(hi.Y, l.Y), Z: max(hi.Z, l.Z)}
		}
	}
	return lo, hi
}

// TestSlatsStayClear: whatever the tilt, position and orientation, slats stay
// in their strip, off the sides and off the panes.
func TestSlatsStayClear(t *testing.T) {
	rng := rand.New(rand.NewPCG(12, 1))
	for i := range 300 {
		r := facing(rng.Float64()*2*math.Pi, (rng.Float64()-0.5)*170*rad, (rng.Float64()-0.5)*90*rad, 2, 1.8)
		s := eighty()
		s.FacetRad = MatteFacetRad
		s.Position = []string{Inside, Outside, Between}[i%3]
		s.CavityM = []float64{0.05, 0, 0.12}[i%3]
		s.LowM, s.HighM = 0.3*rng.Float64(), 1.2+0.6*rng.Float64()
		s.SagittaM = (rng.Float64() - 0.5) * 0.02
		low, high := s.TiltLimits()
		s.TiltRad = low + (high-low)*rng.Float64()
		if i%2 == 1 {
			s.ThicknessM = 0.003
			low, high = s.TiltLimits()
			s.TiltRad = low + (high-low)*rng.Float64()
		}
		faces, err := s.Build(r)
		if err != nil {
			t.Fatalf("%+v: %v", s, err)
		}
		lo, hi := extent(faces, r)
		near1, far := s.GapM, s.GapM+s.WidthM // of the slats' own side of the plane
		switch s.Position {
		case Inside:
			near1, far = -s.CavityM-far, -s.CavityM-near1
		case Between:
			near1, far = clearM-s.CavityM, -clearM
		}
		// A curved or thick slat reaches beyond its width by the sagitta and
		// half the thickness when it stands up, within the strip's half pitch.
		slack := math.Abs(s.SagittaM) + s.ThicknessM/2
		if lo.Z < near1-slack-near || hi.Z > far+slack+near {
			t.Errorf("%+v: reaches from %g to %g m, want %g to %g", s, lo.Z, hi.Z, near1, far)
		}
		if s.Position == Between && (lo.Z < near1-near || hi.Z > far+near) {
			t.Errorf("%+v: touches a pane", s)
		}
		if s.Position == Inside && hi.Z > -s.CavityM-0.005 || s.Position == Outside && lo.Z < 0.005 {
			t.Errorf("%+v: touches the glass", s)
		}
		if lo.Y < s.LowM-slack-near || hi.Y > s.HighM+slack+near {
			t.Errorf("%+v: stands from %g to %g m, want %g to %g", s, lo.Y, hi.Y, s.LowM, s.HighM)
		}
		if math.Abs(lo.X-s.SideM) > near || math.Abs(hi.X-(2-s.SideM)) > near {
			t.Errorf("%+v: runs from %g to %g m", s, lo.X, hi.X)
		}
	}
}

// TestSlatsByHand: number, height and tilt of flat slats at a wall that faces
// north (+y).
func TestSlatsByHand(t *testing.T) {
	r := Rect{Across: r3.Vec{X: 1}, Up: r3.Vec{Z: 1}, Outward: r3.Vec{Y: 1}, WidthM: 2, HeightM: 1.5}
	s := eighty()
	s.SagittaM = 0
	faces, err := s.Build(r)
	if err != nil {
		t.Fatal(err)
	}
	var slats, rail []Face
	for _, f := range faces {
		if f.Part == "slats" {
			slats = append(slats, f)
		} else {
			rail = append(rail, f)
		}
	}
	// (1.5 - 0.08)/0.072 = 19.7: 20 slats, axes from 0.04 to 1.408, the rail from 1.448.
	if len(slats) != 40 || len(rail) != 2 {
		t.Fatalf("got %d and %d faces, want 2 each of 20 slats and of a rail", len(slats), len(rail))
	}
	if lo, hi := extent(rail, r); math.Abs(lo.Y-1.448) > near || math.Abs(hi.Y-1.5) > near || math.Abs(lo.Z-0.07) > near {
		t.Errorf("rail from %v to %v, want up 1.448 to 1.5, 0.07 m from the glass", lo, hi)
	}
	for i, f := range slats {
		axis := 0.04 + 0.072*float64(i/2)
		for _, v := range f.V {
			x := (v.Y - 0.07) // 0.03 + half of 0.08
			if math.Abs(math.Abs(x)-0.04*math.Cos(30*rad)) > near || math.Abs(v.Z-axis-x*math.Tan(30*rad)) > near {
				t.Fatalf("slat %d: corner %v", i/2, v)
			}
		}
		if want := (r3.Vec{Y: -0.5, Z: math.Cos(30 * rad)}); apart(f.Normal(), want) > near || f.Finish != "mirror" || f.Back != "white" {
			t.Fatalf("slat %d: %+v faces %v, want its mirror up and in", i/2, f, f.Normal())
		}
	}
	s.Lower = s.Upper
	faces, _ = s.Build(r)
	if faces[0].Back != "" {
		t.Errorf("both sides alike: got the back %q", faces[0].Back)
	}
	s.Raised = true
	if faces, err := s.Build(r); err != nil || faces != nil {
		t.Errorf("raised: got %d faces, %v", len(faces), err)
	}
	s.Raised, s.LowM = false, 1.45 // less than a slat
	if faces, err := s.Build(r); err != nil || len(faces) != 2 {
		t.Errorf("no room: got %d faces, %v; want the rail alone", len(faces), err)
	}
}

// TestCamber: a positive sagitta lifts the middle.
func TestCamber(t *testing.T) {
	r := facing(2, 0, 0, 2, 1.5)
	for _, sagitta := range []float64{0.006, -0.006} {
		s := eighty()
		s.TiltRad, s.SagittaM, s.HighM = 0, sagitta, 0.08 // one slat, axis at 0.04 m
		faces, err := s.Build(r)
		if err != nil {
			t.Fatal(err)
		}
		lo, hi := extent(faces, r)
		if want := 0.04 + max(0, sagitta); math.Abs(hi.Y-want) > 1e-6 || math.Abs(lo.Y-(0.04+min(0, sagitta))) > 1e-6 {
			t.Errorf("sagitta %g: from %g to %g m", sagitta, lo.Y, hi.Y)
		}
		for _, f := range faces {
			if f.Normal().Z < 0.9 {
				t.Fatalf("a face of a level slat looks %v", f.Normal())
			}
		}
	}
}

// TestThickSlats are closed bodies of the right volume.
func TestThickSlats(t *testing.T) {
	rng := rand.New(rand.NewPCG(13, 1))
	for range 50 {
		r := facing(rng.Float64()*6, (rng.Float64()-0.5)*rad*80, 0, 2, 1.5)
		s := eighty()
		s.ThicknessM, s.TiltRad, s.HeadRail, s.FacetRad = 0.004, (rng.Float64()-0.5)*100*rad, false, MatteFacetRad
		faces, err := s.Build(r)
		if err != nil {
			t.Fatal(err)
		}
		if n := openEdges(faces); n != 0 {
			t.Errorf("%d edges are open", n)
		}
		// Lines lifted square to the chord: the same area as flat, by 20 slats.
		if got, want := volume(faces), 20*0.08*0.004*1.99; math.Abs(got-want) > near {
			t.Errorf("volume %g m3, want %g", got, want)
		}
		for _, f := range faces {
			if f.Back != "" {
				t.Fatalf("a closed body has a back: %+v", f)
			}
		}
	}
}

// TestSlatsTurn wants the faces of a turned opening to be the turned faces:
// the tilt counts from the glass.
func TestSlatsTurn(t *testing.T) {
	upright := facing(0, 0, 0, 2, 1.5)
	s := eighty()
	s.FacetRad = MatteFacetRad
	base, err := s.Build(upright)
	if err != nil {
		t.Fatal(err)
	}
	rng := rand.New(rand.NewPCG(14, 1))
	for range 100 {
		r := facing(rng.Float64()*2*math.Pi, (rng.Float64()-0.5)*180*rad, rng.Float64(), 2, 1.5)
		faces, err := s.Build(r)
		if err != nil {
			t.Fatal(err)
		}
		for i, f := range faces {
			for k, v := range f.V {
				d := r3.Sub(base[i].V[k], upright.Origin)
				if want := r.Point(d.X, d.Z, d.Y); apart(v, want) > near {
					t.Fatalf("face %d: got %v, want %v", i, v, want)
				}
			}
		}
	}
}

// TestTiltLimits: flat slats wider than their pitch are pitch cos(tilt) apart,
// so they touch at acos(thickness/pitch); narrower ones close in line.
func TestTiltLimits(t *testing.T) {
	for _, c := range []struct{ width, pitch, thickness, want float64 }{
		{0.08, 0.072, 0.0004, math.Acos(0.0004 / 0.072)},
		{0.025, 0.02, 0.002, math.Acos(0.1)},
		{0.1, 0.05, 0.025, 60 * rad},
		{0.06, 0.08, 0.002, 90 * rad},
	} {
		s := Slats{WidthM: c.width, PitchM: c.pitch, ThicknessM: c.thickness}
		low, high := s.TiltLimits()
		if math.Abs(high-c.want) > 1e-6 || math.Abs(low+c.want) > 1e-6 {
			t.Errorf("%+v: got %g to %g degrees, want +-%g", c, deg(low), deg(high), deg(c.want))
		}
	}
	// A crowned slat and a hollow one are mirror images: the limits too.
	s := eighty()
	s.SagittaM = 0.012
	low, high := s.TiltLimits()
	s.SagittaM = -0.012
	low2, high2 := s.TiltLimits()
	if math.Abs(low+high2) > 1e-6 || math.Abs(high+low2) > 1e-6 || !(high < 89*rad && high > 30*rad) {
		t.Errorf("crowned %g to %g degrees, hollow %g to %g", deg(low), deg(high), deg(low2), deg(high2))
	}
	s.PitchM = 0.00045 // 0.00045 cos 33.4 degrees is less than 0.0004
	if low, high := s.TiltLimits(); low != 0 || high != 0 {
		t.Errorf("touching at any tilt: got %g to %g", low, high)
	}
}

func TestSlatsRefused(t *testing.T) {
	r := facing(1, 0, 0, 2, 1.5)
	for _, c := range []struct {
		name, dimension string
		change          func(*Slats)
	}{
		{"nowhere", "position", func(s *Slats) { s.Position = "above" }},
		{"no width", "width", func(s *Slats) { s.WidthM = 0 }},
		{"width not a number", "width", func(s *Slats) { s.WidthM = math.NaN() }},
		{"pitch below thickness", "pitch", func(s *Slats) { s.PitchM = 0.0003 }},
		{"no thickness", "thickness", func(s *Slats) { s.ThicknessM = 0 }},
		{"too thick", "thickness", func(s *Slats) { s.ThicknessM = 0.05 }},
		{"gutter", "sagitta", func(s *Slats) { s.SagittaM = 0.024 }}, // 0.04 tan 30 = 0.0231
		{"beyond closed", "tilt", func(s *Slats) { s.SagittaM, s.TiltRad = 0, 89.8*rad }},
		{"upside down", "tilt", func(s *Slats) { s.TiltRad = 91 * rad }},
		{"tilt not a number", "tilt", func(s *Slats) { s.TiltRad = math.NaN() }},
		{"on the glass", "gap", func(s *Slats) { s.GapM = 0 }},
		{"between nothing", "cavity", func(s *Slats) { s.Position = Between }},
		{"deeper than the cavity", "width", func(s *Slats) { s.Position, s.CavityM, s.TiltRad = Between, 0.081, 0 }},
		{"wider than the opening", "side", func(s *Slats) { s.SideM = 1 }},
		{"below the opening", "low", func(s *Slats) { s.LowM = -0.1 }},
		{"above the opening", "high", func(s *Slats) { s.HighM = 1.6 }},
		{"upside down strip", "high", func(s *Slats) { s.LowM, s.HighM = 1, 0.9 }},
		{"too many", "pitch", func(s *Slats) { s.PitchM, s.TiltRad, s.SagittaM = 0.0005, 0, 0 }},
		{"facets", "facet", func(s *Slats) { s.FacetRad = -1 }},
	} {
		t.Run(c.name, func(t *testing.T) {
			s := eighty()
			c.change(&s)
			faces, err := s.Build(r)
			var d *DimensionError
			if !errors.As(err, &d) || d.Dimension != c.dimension || faces != nil {
				t.Errorf("got %d faces and error %v, want one about %q", len(faces), err, c.dimension)
			}
		})
	}
	// Closed slats fit where open ones do not: 0.08 cos 60 + 0.0004 sin 60.
	s := eighty()
	s.Position, s.CavityM, s.SagittaM, s.TiltRad = Between, 0.0425, 0, 60*rad
	if _, err := s.Build(r); err != nil {
		t.Errorf("tilted in a narrow cavity: %v", err)
	}
}

func TestClash(t *testing.T) {
	r := facing(1, 0, 0, 2, 1.5)
	blind := eighty() // from 0.03 to 0.11 m outdoors
	inside := blind
	inside.Position = Inside
	upper, lower := blind, blind
	upper.LowM, lower.HighM = 1, 1
	for _, c := range []struct {
		name  string
		a, b  Hung
		clash bool
	}{
		{"same place", blind, blind, true},
		{"either side", blind, inside, false},
		{"one above the other", upper, lower, false},
		{"cloth in the slats", blind, Roller{Outside: true, Drop: 1, GapM: 0.05}, true},
		{"cloth in the slats, raised", blind, Roller{Outside: true, Drop: 1, GapM: 0.05, Raised: true}, true},
		{"cloth before the slats", blind, Roller{Outside: true, Drop: 1, GapM: 0.12}, false},
		{"cloth behind the slats", Roller{Outside: true, Drop: 1, GapM: 0.01}, blind, false},
		{"cloth above the slats", lower, Roller{Outside: true, Drop: 0.3, GapM: 0.05}, false},
		{"cloth indoors", blind, Roller{Drop: 1, GapM: 0.05}, false},
	} {
		if err := Clash(c.a, c.b, r); (err != nil) != c.clash {
			t.Errorf("%s: got %v, want an error: %v", c.name, err, c.clash)
		}
	}
}

func TestSlatsMeetShelf(t *testing.T) {
	r := facing(1, 0, 0, 2, 1.5)
	shelf := LightShelf{HeightM: 0.6, OutsideDepthM: 0.4, ThicknessM: 0.04, GapM: 0.01}
	hollow := shelf
	hollow.OutsideProfile = Profile{Shape: Arc, SagittaM: 0.05}
	short := shelf
	short.OutsideDepthM = 0.025
	stack := shelf
	stack.Stack, stack.SpacingM = 2, 0.5
	at := func(low float64) Slats { s := eighty(); s.LowM = low; return s }
	in := at(0)
	in.Position = Inside
	for _, c := range []struct {
		name  string
		s     Slats
		shelf LightShelf
		meets bool
	}{
		{"through", at(0), shelf, true},
		{"on its top", at(0.6), shelf, false},
		{"just into it", at(0.59), shelf, true},
		{"indoors", in, shelf, false},
		{"beyond its edge", at(0), short, false}, // the slats start at 0.03 m
		{"in the hollow", at(0.598), hollow, false},
		{"into the hollow", at(0.58), hollow, true},
		{"into the upper of two", at(0.7), stack, true},
	} {
		if err := c.s.Meets(c.shelf, r); (err != nil) != c.meets {
			t.Errorf("%s: got %v, want an error: %v", c.name, err, c.meets)
		}
	}
}

func BenchmarkSlats(b *testing.B) {
	r, s := facing(1, 0, 0, 2, 1.5), eighty()
	for b.Loop() {
		if _, err := s.Build(r); err != nil {
			b.Fatal(err)
		}
	}
}
