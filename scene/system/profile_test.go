package system

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

var shapes = []Profile{
	{Shape: Arc, SagittaM: 0.05},
	{Shape: Parabola, SagittaM: 0.04},
	{Shape: Parabola, FocusM: 1},
	{Shape: Polyline, Points: [][2]float64{{0, 0}, {0.2, -0.04}, {0.5, -0.05}, {0.8, 0}}},
	{Shape: Polyline, Points: [][2]float64{{0, 0.02}, {0.4, -0.05}, {0.8, 0.03}}},
	{Shape: Flat},
}

// underneath is the area of a shape between its line and the chord.
func underneath(line [][2]float64) float64 {
	sum := 0.0
	for i := range len(line) - 1 {
		sum += (line[i+1][0] - line[i][0]) * (line[i+1][1] + line[i][1]) / 2
	}
	return sum
}

// TestHollowShelf: whatever shape, slope and orientation, each part is closed,
// keeps its gap and has the volume of a bent board, and tops look up.
func TestHollowShelf(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 1))
	for i := range 200 {
		r := facing(rng.Float64()*2*math.Pi, (rng.Float64()-0.5)*40*rad, 0, 2, 1.8)
		s := plain()
		s.OutsideDepthM, s.InsideDepthM = 0.8, 0.8
		s.OutsideTiltRad, s.InsideTiltRad = r.LeanRad()+(rng.Float64()-0.5)*30*rad, r.LeanRad()+(rng.Float64()-0.5)*30*rad
		s.OutsideProfile, s.InsideProfile = shapes[i%len(shapes)], shapes[(i/len(shapes))%len(shapes)]
		s.GapM, s.FacetRad = 0.05, 0.5*rad
		faces, err := s.Build(r)
		if err != nil {
			t.Fatalf("%+v: %v", s, err)
		}
		parts := map[bool][]Face{}
		for _, f := range faces {
			d := r.Local(f.V[0]).Z
			parts[d > 0] = append(parts[d > 0], f)
			if f.Part == "shelf/top" && r3.Dot(f.Normal(), r.Up) < math.Cos(70*rad) {
				t.Fatalf("a top faces %v", f.Normal())
			}
		}
		for outside, part := range parts {
			if n := openEdges(part); n != 0 {
				t.Errorf("%+v: %d edges are open or wound two ways", s, n)
			}
			least := math.Inf(1)
			for _, f := range part {
				for _, v := range f.V {
					least = min(least, math.Abs(r.Local(v).Z))
				}
			}
			if math.Abs(least-s.GapM) > near {
				t.Errorf("comes within %g m of the glass, want %g", least, s.GapM)
			}
			// The body is swept by ThicknessM square to the chord, so its area
			// is thickness times the mean of the lengths of both lines
			// along the chord; they end on the cut, whose slope is 1/tan.
			turn, profile := s.OutsideTiltRad-r.LeanRad(), s.OutsideProfile
			if !outside {
				turn, profile = -(s.InsideTiltRad - r.LeanRad()), s.InsideProfile
			}
			line, _ := profile.line("", 0.8, s.FacetRad)
			sin, cos := math.Sincos(turn)
			want := s.ThicknessM * (0.8 - (s.GapM-s.ThicknessM*sin/2)/cos) * (r.WidthM + 2*s.ExtendM)
			// A curve that is not at its chord where it is cut moves the cut
			// sideways, by at most its height there times tan(turn).
			slack := 0.0
			for _, p := range line {
				slack = max(slack, math.Abs(p[1]*math.Tan(turn)))
			}
			if got := volume(part); math.Abs(got-want) > near+slack*s.ThicknessM*(r.WidthM+2*s.ExtendM) {
				t.Errorf("%+v: volume %.9f m3, want %.9f", profile, got, want)
			}
		}
	}
}

// TestHollowByHand: an arc of 0.8 m and 0.05 m sagitta is lowest in the
// middle.
func TestHollowByHand(t *testing.T) {
	r := Rect{Across: r3.Vec{X: 1}, Up: r3.Vec{Z: 1}, Outward: r3.Vec{Y: 1}, WidthM: 2, HeightM: 1.5}
	s := LightShelf{HeightM: 1, OutsideDepthM: 0.8, ThicknessM: 0.02, GapM: 0.01, OutsideProfile: Profile{Shape: Arc, SagittaM: 0.05}}
	faces, err := s.Build(r)
	if err != nil {
		t.Fatal(err)
	}
	low, at, far := math.Inf(1), 0.0, 0.0
	for _, f := range faces {
		if f.Part != "shelf/top" {
			continue
		}
		for _, v := range f.V {
			if v.Z < low-near {
				low, at = v.Z, v.Y
			}
			if v.Y > 0.8-near {
				far = v.Z
			}
		}
	}
	// A vertex lies within half of the 143 facets' 5.7 mm of the middle, where
	// the arc is 0.00285^2 / (2 x 1.625) higher.
	if math.Abs(low-0.95) > 2.5e-6 || math.Abs(at-0.4) > 0.00285 || math.Abs(far-1) > near {
		t.Errorf("lowest %.6f m at %.4f m, far edge at %.4f m; want 0.95, 0.4 and 1", low, at, far)
	}
	if got, want := underneath(arc(0.8, -0.05, MirrorFacetRad)), -0.026739; math.Abs(got-want) > 1e-5 {
		// segment of a circle: R = 1.625, angle 2 asin(0.4/1.625) = 0.497386; R^2/2 (angle - sin angle)
		t.Errorf("area of the hollow: got %.6f m2, want %.6f", got, want)
	}
}

func TestStack(t *testing.T) {
	r := facing(1, 0, 0, 2, 1.5)
	s := plain()
	s.HeightM, s.Stack, s.SpacingM = 0.6, 3, 0.3
	faces, err := s.Build(r)
	if err != nil {
		t.Fatal(err)
	}
	one := s
	one.Stack = 0
	base, err := one.Build(r)
	if err != nil {
		t.Fatal(err)
	}
	if len(faces) != 3*len(base) {
		t.Fatalf("got %d faces, want 3 x %d", len(faces), len(base))
	}
	for i, f := range faces {
		lift := r3.Scale(0.3*float64(i/len(base)), r.Up)
		for k, v := range f.V {
			if want := r3.Add(base[i%len(base)].V[k], lift); apart(v, want) > near {
				t.Fatalf("face %d: got %v, want %v", i, v, want)
			}
		}
	}
}

func TestShapeRefused(t *testing.T) {
	upright := facing(1, 0, 0, 2, 1.5)
	for _, c := range []struct {
		name, dimension string
		change          func(*LightShelf)
	}{
		{"no sagitta", "outside sagitta", func(s *LightShelf) { s.OutsideProfile = Profile{Shape: Arc} }},
		{"gutter", "inside sagitta", func(s *LightShelf) { s.InsideProfile = Profile{Shape: Arc, SagittaM: 0.3} }}, // of 0.8 m: 0.231 at most
		{"sagitta not a number", "outside sagitta", func(s *LightShelf) { s.OutsideProfile = Profile{Shape: Parabola, SagittaM: math.NaN()} }},
		{"focus too near", "outside focus", func(s *LightShelf) { s.OutsideProfile = Profile{Shape: Parabola, FocusM: 0.05} }},
		{"negative focus", "outside focus", func(s *LightShelf) { s.OutsideProfile = Profile{Shape: Parabola, FocusM: -1} }},
		{"unknown shape", "outside profile", func(s *LightShelf) { s.OutsideProfile = Profile{Shape: "wave"} }},
		{"one point", "outside polyline", func(s *LightShelf) { s.OutsideProfile = Profile{Shape: Polyline, Points: [][2]float64{{0, 0}}} }},
		{"hump", "outside polyline", func(s *LightShelf) {
			s.OutsideProfile = Profile{Shape: Polyline, Points: [][2]float64{{0, 0}, {0.3, 0.05}, {0.6, 0}}}
		}},
		{"short polyline", "outside polyline", func(s *LightShelf) {
			s.OutsideProfile = Profile{Shape: Polyline, Points: [][2]float64{{0, 0}, {0.3, -0.05}, {0.5, 0}}}
		}},
		{"polyline back", "outside polyline", func(s *LightShelf) {
			s.OutsideProfile = Profile{Shape: Polyline, Points: [][2]float64{{0, 0}, {0.3, -0.05}, {0.2, 0}, {0.6, 0}}}
		}},
		{"polyline not at the glass", "outside polyline", func(s *LightShelf) {
			s.OutsideProfile = Profile{Shape: Polyline, Points: [][2]float64{{0.1, 0}, {0.6, 0}}}
		}},
		{"hollow into the glass", "outside profile", func(s *LightShelf) {
			s.OutsideTiltRad, s.OutsideProfile = -55*rad, Profile{Shape: Arc, SagittaM: 0.17}
		}},
		{"stack without spacing", "spacing", func(s *LightShelf) { s.Stack = 2 }},
		{"stack touches", "spacing", func(s *LightShelf) { s.HeightM, s.Stack, s.SpacingM = 0.5, 2, 0.04 }},
		{"stack above the opening", "spacing", func(s *LightShelf) { s.Stack, s.SpacingM = 3, 0.2 }}, // 1.2 + 0.4 > 1.5
		{"stack of none", "stack", func(s *LightShelf) { s.Stack = -1 }},
		{"cavity", "cavity", func(s *LightShelf) { s.CavityM = -1 }},
	} {
		t.Run(c.name, func(t *testing.T) {
			s := plain()
			c.change(&s)
			faces, err := s.Build(upright)
			var d *DimensionError
			if !errors.As(err, &d) || d.Dimension != c.dimension || faces != nil {
				t.Errorf("got %d faces and error %v, want one about %q", len(faces), err, c.dimension)
			}
		})
	}
}

// TestShelfBehindInnerPane: the part indoors keeps its gap from the inner pane.
func TestShelfBehindInnerPane(t *testing.T) {
	r := facing(1, 0, 0, 2, 1.5)
	s := plain()
	s.CavityM = 0.12
	faces, err := s.Build(r)
	if err != nil {
		t.Fatal(err)
	}
	in, out := math.Inf(1), math.Inf(1)
	for _, f := range faces {
		for _, v := range f.V {
			if z := r.Local(v).Z; z < 0 {
				in = min(in, -z)
			} else {
				out = min(out, z)
			}
		}
	}
	if math.Abs(in-0.13) > near || math.Abs(out-0.01) > near { // 0.12 + 0.01
		t.Errorf("nearest to the plane of the glass: %g m indoors and %g outdoors, want 0.13 and 0.01", in, out)
	}
}
