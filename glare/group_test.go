package glare

import (
	"math"
	"math/rand/v2"
	"reflect"
	"slices"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/view"
)

// slowGroups joins bright pixels pair by pair: touching, or at most grouping
// apart, and of the same kind.
func slowGroups(f *Field, lum []float32, threshold, core, grouping float64) [][]int32 {
	var bright []int32
	for i, l := range lum {
		if f.Inside[i] && float64(l) > threshold {
			bright = append(bright, int32(i))
		}
	}
	isCore := func(i int32) bool { return core > 0 && float64(lum[i]) > core }
	joined := func(i, j int32) bool {
		if isCore(i) != isCore(j) {
			return false
		}
		w := int32(f.Width)
		dx, dy := i%w-j%w, i/w-j/w
		if dx >= -1 && dx <= 1 && dy >= -1 && dy <= 1 {
			return true
		}
		if grouping <= 0 {
			return false
		}
		return r3.Norm(r3.Sub(f.Dir[i], f.Dir[j])) <= 2*math.Sin(grouping/2)
	}
	var groups [][]int32
	seen := map[int32]bool{}
	for _, start := range bright {
		if seen[start] {
			continue
		}
		seen[start] = true
		group := []int32{start}
		for k := 0; k < len(group); k++ {
			for _, j := range bright {
				if !seen[j] && joined(group[k], j) {
					seen[j] = true
					group = append(group, j)
				}
			}
		}
		slices.Sort(group)
		groups = append(groups, group)
	}
	return groups
}

// blobs is an image of some bright blobs and single pixels.
func blobs(rng *rand.Rand, f *Field, n int) []float32 {
	lum := make([]float32, f.Width*f.Height)
	for i := range lum {
		lum[i] = float32(200 + 100*rng.Float64())
	}
	for range n {
		x, y, r := rng.IntN(f.Width), rng.IntN(f.Height), rng.IntN(3)
		l := float32(1000 * math.Exp(4*rng.Float64()))
		for j := max(0, y-r); j <= min(f.Height-1, y+r); j++ {
			for i := max(0, x-r); i <= min(f.Width-1, x+r); i++ {
				lum[j*f.Width+i] = l
			}
		}
	}
	return lum
}

func TestGroupsAgainstPairs(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	scratch := new(Scratch) // shared by fields of different sizes on purpose
	fields := []*Field{
		NewField(fisheye(t, view.Equidistant, 180, 40)),
		NewField(fisheye(t, view.Orthographic, 180, 25)),
		NewField(fisheye(t, view.Equirectangular, 360, 30)),
		NewField(fisheye(t, view.Perspective, 90, 31)),
	}
	for range 60 {
		for _, f := range fields {
			lum := blobs(rng, f, rng.IntN(40))
			o := Options{GroupingRad: []float64{-1, 0, 0.02, 0.15, 0.4}[rng.IntN(5)]}
			if rng.IntN(3) == 0 {
				o.CoreCdM2 = 8000
			}
			grouping := o.GroupingRad
			if grouping == 0 {
				grouping = DefaultGroupingRad
			}
			want := slowGroups(f, lum, 2000, o.CoreCdM2, grouping)
			sources := Detect(f, lum, nil, o, scratch)
			var got [][]int32
			for _, s := range sources {
				got = append(got, s.Pixels)
			}
			slices.SortFunc(got, func(a, b []int32) int { return int(a[0] - b[0]) })
			if !reflect.DeepEqual(got, want) {
				t.Fatalf("%d px, %+v: got groups %v, want %v", f.Width, o, got, want)
			}
			for _, s := range sources {
				checkSource(t, f, lum, s)
			}
			if !slices.IsSortedFunc(sources, func(a, b Source) int {
				return int(math.Copysign(1, b.Contribution-a.Contribution))
			}) {
				t.Errorf("not sorted by contribution")
			}
		}
	}
}

// checkSource recomputes a source from its pixels.
func checkSource(t *testing.T, f *Field, lum []float32, s Source) {
	t.Helper()
	omega, flux, peak, dir := 0.0, 0.0, 0.0, r3.Vec{}
	for _, i := range s.Pixels {
		omega += f.Omega[i]
		flux += float64(lum[i]) * f.Omega[i]
		peak = math.Max(peak, float64(lum[i]))
		dir = r3.Add(dir, r3.Scale(float64(lum[i])*f.Omega[i], f.Dir[i]))
	}
	dir = r3.Unit(dir)
	p := PositionIndex(dir)
	l := flux / omega
	for _, c := range [][2]float64{
		{s.OmegaSr, omega}, {s.MeanLuminance, l}, {s.PeakLuminance, peak}, {s.Contribution, l * l * omega / (p * p)},
	} {
		if math.Abs(c[0]-c[1]) > 1e-12*math.Abs(c[1]) {
			t.Fatalf("got %g, want %g in %+v", c[0], c[1], s)
		}
	}
	if r3.Norm(r3.Sub(s.Dir, dir)) > 1e-12 {
		t.Fatalf("direction: got %v, want %v", s.Dir, dir)
	}
}

func TestDGPOnlyEqualsEvaluate(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 8))
	f := NewField(fisheye(t, view.Equidistant, 180, 64))
	scratch := new(Scratch)
	for k := range 200 {
		lum := blobs(rng, f, rng.IntN(30))
		var discs []Disc
		for range rng.IntN(3) {
			d := r3.Unit(r3.Vec{X: rng.NormFloat64(), Y: rng.NormFloat64(), Z: rng.NormFloat64()})
			discs = append(discs, Disc{Dir: d, OmegaSr: 6.8e-5, Luminance: 1e8 * rng.Float64()})
		}
		o := Options{Method: Method(k % 3), Position: PositionRule(k % 2), LowLight: k%5 == 0, CoreCdM2: float64(k%4) * 5000}
		want := Evaluate(f, lum, discs, o, nil)
		dgp, ev := DGPOnly(f, lum, discs, o, scratch)
		if math.Abs(dgp/want.DGP-1) > 1e-12 || math.Abs(ev/want.Ev-1) > 1e-12 {
			t.Fatalf("%+v: got %.15g and %.15g, want %.15g and %.15g", o, dgp, ev, want.DGP, want.Ev)
		}
		if e := want.EDirect + want.EIndirect; math.Abs(e/want.Ev-1) > 1e-12 {
			t.Fatalf("direct and indirect: got %g, want %g", e, want.Ev)
		}
		if again, _ := DGPOnly(f, lum, discs, o, scratch); again != dgp {
			t.Fatalf("the same again: got %g, want %g", again, dgp)
		}
	}
}

// two returns an image with two uniform patches gap rad apart on the horizon.
func two(v view.View, gap float64, left, right float64) []float32 {
	const size = 0.12
	return render(v, func(d r3.Vec) float64 {
		az, el := math.Atan2(d.Y, d.X), math.Asin(d.Z)
		switch {
		case math.Abs(el) > size/2:
		case az > gap/2 && az < gap/2+size:
			return left
		case az < -gap/2 && az > -gap/2-size:
			return right
		}
		return 100
	})
}

func TestGroupingAngle(t *testing.T) {
	v := fisheye(t, view.Equidistant, 180, 512)
	f := NewField(v)
	for _, c := range []struct {
		gapDeg, groupingRad float64
		want                int
	}{
		{3, 0, 1},    // within the default of 4 degrees
		{5, 0, 2},    // beyond
		{3, -1, 2},   // touching pixels only
		{3, 0.03, 2}, // 1.7 degrees
		{20, 0.4, 1}, // 23 degrees
	} {
		got := Detect(f, two(v, c.gapDeg*deg, 5000, 8000), nil, Options{GroupingRad: c.groupingRad}, nil)
		if len(got) != c.want {
			t.Errorf("%+v: got %d sources", c, len(got))
		}
	}
}

// A bright core counts with its surroundings unless it is separated.
func TestCore(t *testing.T) {
	v := fisheye(t, view.Equidistant, 180, 128)
	f := NewField(v)
	axis := toward(0.3, 0.2)
	lum := render(v, func(d r3.Vec) float64 {
		switch a := math.Acos(math.Min(1, r3.Dot(d, axis))); {
		case a < 0.06:
			return 50000
		case a < 0.3:
			return 4000
		}
		return 200
	})
	whole := Evaluate(f, lum, nil, Options{}, nil)
	parted := Evaluate(f, lum, nil, Options{CoreCdM2: 20000}, nil)
	if len(whole.Sources) != 1 || len(parted.Sources) != 2 {
		t.Fatalf("got %d and %d sources, want 1 and 2", len(whole.Sources), len(parted.Sources))
	}
	if parted.Sources[0].MeanLuminance < 20000 || parted.Sources[1].PeakLuminance > 20000 {
		t.Errorf("core and surroundings mixed: %+v", parted.Sources)
	}
	// Averaging before squaring can only lose (Jensen).
	if parted.SourceSum <= whole.SourceSum || parted.Ev != whole.Ev {
		t.Errorf("sum %g parted, %g whole; Ev %g, %g", parted.SourceSum, whole.SourceSum, parted.Ev, whole.Ev)
	}
}

// All methods find the same sources where source and background are uniform
// and far apart.
func TestMethodsAgree(t *testing.T) {
	v := fisheye(t, view.Equidistant, 180, 128)
	f := NewField(v)
	for _, c := range scenes(t) {
		if c.r < 5*deg || c.name == "very low light" {
			continue
		}
		lum := render(v, c.lum)
		fixed := Detect(f, lum, nil, Options{ThresholdCdM2: 4 * c.lb}, nil)
		// The work zone is below all of these discs.
		zone := Options{Method: MultipleOfTask, TaskCentre: r3.Vec{X: 1, Z: -1}, TaskRadiusRad: 0.2}
		for _, o := range []Options{{Method: MultipleOfMean, Multiple: 4 * c.lb / f.mean(lum)}, zone} {
			got := Detect(f, lum, nil, o, nil)
			// Mixed pixels exactly at the threshold may differ by rounding.
			if len(got) != 1 || math.Abs(got[0].OmegaSr/fixed[0].OmegaSr-1) > 0.02 {
				t.Errorf("%s, method %d: got %+v, want %+v", c.name, o.Method, got, fixed)
			}
		}
	}
	lum := make([]float32, f.Width*f.Height)
	if got := Detect(f, lum, nil, Options{Method: MultipleOfTask, TaskCentre: r3.Vec{X: -1}}, nil); got != nil {
		t.Errorf("zone out of sight: got %v, want nothing", got)
	}
}

// The zone kept in Scratch must not outlive its field or place.
func TestZoneIsNotStale(t *testing.T) {
	a := NewField(fisheye(t, view.Equidistant, 180, 40))
	b := NewField(fisheye(t, view.Equisolid, 180, 40))
	lum := blobs(rand.New(rand.NewPCG(9, 10)), a, 20)
	scratch := new(Scratch)
	for _, f := range []*Field{a, b, a} {
		for _, centre := range []r3.Vec{{}, {X: 1, Y: 1}, {X: 1, Z: -2}} {
			o := Options{Method: MultipleOfTask, TaskCentre: centre}
			if got, want := Evaluate(f, lum, nil, o, scratch).ThresholdCdM2, Evaluate(f, lum, nil, o, nil).ThresholdCdM2; got != want {
				t.Errorf("%v: threshold %g, want %g", centre, got, want)
			}
		}
	}
}

// The sun inside a bright window stays a source of its own; smeared into the
// pixel it falls on, DGP is far too low.
func TestDiscInsideBrightGroup(t *testing.T) {
	v := fisheye(t, view.Equidistant, 180, 64)
	f := NewField(v)
	window := render(v, func(d r3.Vec) float64 {
		if d.X > 0 && math.Abs(d.Y/d.X-0.4) < 0.4 && math.Abs(d.Z/d.X-0.4) < 0.3 {
			return 6000
		}
		return 300
	})
	sun := Disc{Dir: toward(25*deg, 20*deg), OmegaSr: capOmega(0.2665 * deg), Luminance: 3e7}
	r := Evaluate(f, window, []Disc{sun}, Options{}, nil)
	without := Evaluate(f, window, nil, Options{}, nil)
	if len(r.Sources) != 2 || !r.Sources[0].Disc || r.Sources[0].Contribution <= r.Sources[1].Contribution {
		t.Fatalf("got %+v, want the sun, then the window", r.Sources)
	}
	if r.Sources[1].OmegaSr != without.Sources[0].OmegaSr {
		t.Errorf("the disc changed the window: %g, want %g sr", r.Sources[1].OmegaSr, without.Sources[0].OmegaSr)
	}
	near(t, "Ev", r.Ev-without.Ev, sun.illuminance(), 1e-9*r.Ev)

	px, py, _ := v.LocalProject(sun.Dir)
	i := int(py)*f.Width + int(px)
	smeared := slices.Clone(window)
	smeared[i] += float32(sun.Luminance * sun.OmegaSr / f.Omega[i])
	s := Evaluate(f, smeared, nil, Options{}, nil)
	if s.DGP > r.DGP-0.05 {
		t.Errorf("smeared %g, apart %g: want at least 0.05 less", s.DGP, r.DGP)
	}
	t.Logf("DGP apart %.3f, smeared %.3f", r.DGP, s.DGP)
}

func TestDiscsThatDoNotCount(t *testing.T) {
	f := NewField(fisheye(t, view.Equidistant, 180, 16))
	lum := make([]float32, 256)
	for _, d := range []Disc{
		{Dir: r3.Vec{X: -1}, OmegaSr: 1e-4, Luminance: 1e9},
		{Dir: r3.Vec{Z: 1}, OmegaSr: 1e-4, Luminance: 1e9},
		{Dir: r3.Vec{X: 1}, Luminance: 1e9},
		{Dir: r3.Vec{X: 1}, OmegaSr: 1e-4},
	} {
		if r := Evaluate(f, lum, []Disc{d}, Options{}, nil); r.Ev != 0 || len(r.Sources) != 0 || r.DGP != 0.16 || !r.DGPsValid {
			t.Errorf("%+v: got %+v, want nothing", d, r)
		}
	}
}

// A scene mirrored left to right gives the same; turned about the line of
// sight, the same Ev.
func TestSymmetries(t *testing.T) {
	f := NewField(fisheye(t, view.Equidistant, 180, 50))
	lum := blobs(rand.New(rand.NewPCG(11, 12)), f, 25)
	mirrored, turned := make([]float32, len(lum)), make([]float32, len(lum))
	for y := range 50 {
		for x := range 50 {
			mirrored[y*50+49-x] = lum[y*50+x]
			turned[x*50+49-y] = lum[y*50+x]
		}
	}
	a, b, c := Evaluate(f, lum, nil, Options{}, nil), Evaluate(f, mirrored, nil, Options{}, nil), Evaluate(f, turned, nil, Options{}, nil)
	for _, q := range [][2]float64{{a.Ev, b.Ev}, {a.DGP, b.DGP}, {a.UGR, b.UGR}, {a.DGI, b.DGI}, {a.VCP, b.VCP}, {a.Ev, c.Ev}, {a.BackgroundLuminance, c.BackgroundLuminance}} {
		if math.Abs(q[0]/q[1]-1) > 1e-7 { // float32 weights
			t.Errorf("got %.12g and %.12g", q[0], q[1])
		}
	}
	if math.Abs(a.DGP-c.DGP) < 1e-6 {
		t.Error("turning the scene does not change the position index")
	}
}

func TestLengthIsChecked(t *testing.T) {
	defer func() {
		if recover() == nil {
			t.Error("an image of the wrong length was taken")
		}
	}()
	Detect(NewField(fisheye(t, view.Equidistant, 180, 8)), make([]float32, 63), nil, Options{}, nil)
}
