package study

import (
	"context"
	"fmt"
	"math"
	"strings"
	"testing"
	"testing/fstest"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/verdict"
	"squint/scene"
	"squint/scene/project"
	"squint/trace/outlook"
)

const furtherCriteria = `[criteria]
glare = "medium"
provision_factor = "minimum"
median_diffuse_lx = 20000
view_out = "minimum"
sunlight = "minimum"
sunlight_altitude_deg = 5
cloth_class = 1
sda_at_least = 0.5
ase_at_most = 0.1
glare_autonomy_at_least = 0.5
equinox_at_least = 0.5

[[limit]]
name = "as sDA"
metric = "illuminance"
at_least = 300
hours = "8 to 18"
time_share = 0.5
place_share = 0.5

[[limit]]
name = "as sGA"
metric = "DGP"
at_most = 0.4
time_share = 0.95
place_share = 0.5

[[limit]]
metric = "daylight factor"
at_least = 0.015

[[limit]]
metric = "sunlit share"
at_most = 0.5
hours = "all"
time_share = 0.9

[[limit]]
metric = "eye illuminance"
at_most = 20000

[[limit]]
metric = "direct sun"
at_most = 1000
`

func furtherInput(t *testing.T) *Input {
	t.Helper()
	text := strings.Replace(tinyProject, "[criteria]\nglare = \"medium\"\n", furtherCriteria, 1)
	in, err := prepareFile(fstest.MapFS{
		"project.toml": {Data: fmt.Appendf(nil, text, 0.5)},
		"room.obj":     {Data: []byte(tinyRoom())},
		"site.epw":     {Data: tinyYear(t)},
	}, "project.toml", "", 1)
	if err != nil {
		t.Fatal(err)
	}
	return in
}

// Every criterion that is asked for is judged once at each of its places. The
// published ones that are limits on series are identical with the same limits
// written as the project's own, and one of them is counted here.
func TestFurtherCriteria(t *testing.T) {
	in := furtherInput(t)
	r, err := Run(context.Background(), in, Options{Workers: 2})
	if err != nil {
		t.Fatal(err)
	}
	find := func(part string) verdict.Verdict {
		t.Helper()
		n, found := 0, verdict.Verdict{}
		for _, v := range r.Further {
			if strings.HasPrefix(v.Criterion, part) {
				n, found = n+1, v
			}
		}
		if n != 1 {
			t.Errorf("%q: %d verdicts, want 1", part, n)
		}
		return found
	}
	sda, own := find("sDA"), find("own limit, as sDA")
	if sda.Estimate != own.Estimate || sda.Surely != own.Surely || sda.Possibly != own.Possibly || sda.Outcome != own.Outcome {
		t.Errorf("sDA %+v, the same limit %+v", sda, own)
	}
	reached := 0.0
	for _, e := range r.Planes[0].E {
		n := 0
		for _, h := range r.Clock {
			if e[h] >= 300 {
				n++
			}
		}
		if 2*n >= len(r.Clock) {
			reached++
		}
	}
	if want := reached / float64(len(r.Planes[0].E)); sda.Estimate != want {
		t.Errorf("sDA: got %g, counted %g", sda.Estimate, want)
	}
	sga, own := find("spatial glare autonomy"), find("own limit, as sGA")
	if sga.Estimate != own.Estimate || sga.Outcome != own.Outcome || r.GlareAutonomy.Estimate != sga.Estimate {
		t.Errorf("spatial glare autonomy %+v, the same limit %+v", sga, own)
	}
	if v := find("glare protection, simplified"); v.Outcome != verdict.NotMet { // the window has no roller
		t.Errorf("simplified route: %s", v.Outcome)
	}
	for _, part := range []string{"ASE", "daylight provision by daylight factor", "view out", "exposure to sunlight", "clear sky", "own limit: daylight factor", "own limit: sunlit share", "own limit: direct sun", "own limit: eye illuminance of at most 20,000 lx"} {
		find(part)
	}
	// The eight criteria of furtherCriteria but glare, and its six limits, at one
	// work plane, one opening, or all viewpoints.
	if len(r.Further) != 14 || len(r.Verdicts) != 14+len(r.Views)+len(r.Planes) {
		t.Errorf("%d further verdicts of %d", len(r.Further), len(r.Verdicts))
	}
	bright := 0
	for h, e := range r.Views[0].EvErr {
		ev := r.Views[0].Ev[h]
		if !(ev > 100) {
			continue
		}
		bright++
		if !(e > 0 && e < ev) {
			t.Errorf("record %d: illuminance at the eye %g lx with an error of %g", h, ev, e)
		}
	}
	if bright == 0 {
		t.Error("no hour has light at the eye: the test sees nothing")
	}
	p := &r.Planes[0]
	for s := range p.Clear.E {
		for k, m := range in.Clear {
			if e := float64(p.Clear.E[s][k]); !(e > 10 && e < m.GlobalLx) {
				t.Errorf("sensor %d, clear sky at %s: %g lx of %g outdoors", s, r.ClearNames[k], e, m.GlobalLx)
			}
		}
	}
	// All azimuths between the window's edges are seen from each sensor, less
	// what the wall before the glass hides: 0.15 m of it on either side.
	for s, got := range p.ViewOut.AngleDeg {
		at := p.Plane.Sensors[s].Position
		span := func(y float64) float64 {
			return (math.Atan2(3.5-at.X, at.Y-y) - math.Atan2(0.5-at.X, at.Y-y)) * 180 / math.Pi
		}
		// Indoors of the glass the wall's arris, at y = 0, is nearer; outdoors the
		// outer one, at -0.3, shows at a narrower angle.
		if want := span(-0.3); math.Abs(got-want) > 1 {
			t.Errorf("sensor %d: sight angle %.2f degrees, want %.2f", s, got, want)
		}
	}
}

// The sun on the window of the tiny room: never more than the bare opening's,
// less than it because of the reveal, and counted in seasons that add up.
func TestSunOnOpenings(t *testing.T) {
	in := furtherInput(t)
	r := &Result{Project: in.Project, Scene: in.Scene, Climate: in.Climate}
	if err := r.findSun(context.Background(), in, Options{Workers: 2}); err != nil {
		t.Fatal(err)
	}
	o := &r.Openings[0]
	with, hours := 0.0, 0.0
	for h, x := range o.Sunlit {
		if x != x {
			continue
		}
		with++
		if x < 0 || x > 1 {
			t.Errorf("record %d: sunlit share %g", h, x)
		}
	}
	for i, s := range o.Seasons {
		hours += s.Hours
		if s.Hours == 0 || !(s.Kept() > 0.3 && s.Kept() < 1) || !(s.Lit > 0.3 && s.Lit < 1) {
			t.Errorf("%s: %+v", Seasons[i], s)
		}
	}
	if with == 0 || with != hours {
		t.Errorf("%g records with a share, %g hours in seasons", with, hours)
	}
	// The wall stands 0.15 m out of the glass, whose 3 by 1.5 m a sun from the
	// south-west at 1:1:1 therefore leaves dark along 0.15 m of one side and of
	// the top. The twin is a glass flush with the wall.
	sun := r3.Unit(r3.Vec{X: -1, Y: -1, Z: 1})
	rect := in.Scene.Openings[0].Rect
	if got, want := outlook.Sunlit(in.World, rect, sun, sunlitPoints), (3-0.15)/3*(1.5-0.15)/1.5; math.Abs(got-want) > 2.0/sunlitPoints {
		t.Errorf("sunlit share: got %.4f, want %.4f", got, want)
	}
	rect.Origin.Y = -0.31
	if got := outlook.Sunlit(in.World, rect, sun, sunlitPoints); got != 1 {
		t.Errorf("sunlit share of a glass without reveal: got %.4f, want 1", got)
	}
	for month, want := range map[int]int{11: 0, 0: 0, 1: 0, 2: 1, 5: 2, 8: 3, 10: 3} {
		if got := seasonOf(month); got != want {
			t.Errorf("month %d: season %d, want %d", month+1, got, want)
		}
	}
}

// The reference point lies 1.2 m above the floor and 0.3 m above the sill at
// least. Source: EN 17037:2018 annex D, from memory.
func TestReferencePoint(t *testing.T) {
	o := scene.Opening{}
	o.Rect.Up, o.Rect.Across, o.Rect.Outward = r3.Vec{Z: 1}, r3.Vec{X: 1}, r3.Vec{Y: -1}
	o.Rect.WidthM, o.Rect.HeightM = 2, 1
	for _, c := range []struct {
		sill, want float64
		ok         bool
	}{
		{0.5, 1.2, true},  // 1.2 m above the floor
		{1.1, 1.4, true},  // 0.3 m above the sill
		{0.1, 1.2, false}, // the opening ends at 1.1 m
	} {
		o.Rect.Origin.Z = c.sill
		p, ok := referencePoint(o, 1.2, 0.001)
		if ok != c.ok || ok && (math.Abs(p.Z-c.want) > 1e-9 || p.X != 1 || p.Y != -0.001) {
			t.Errorf("sill %g: %v, %v, want z %g, %v", c.sill, p, ok, c.want, c.ok)
		}
	}
}

func TestClothOfOpening(t *testing.T) {
	p := &project.Project{
		Finishes: []project.Finish{{Name: "weave", Openness: 0.03, DiffuseTransmittance: 0.01}},
		Rollers: []project.Roller{
			{Opening: "window", Openness: 0.2, DiffuseTransmittance: 0.01},
			{Opening: "window", Cloth: "weave"},
		},
	}
	// The better of classes 0 (straight above 0.10) and 3 (straight up to 0.05,
	// scattered below 0.02). Source: EN 14501:2005, table for glare control, from
	// memory.
	if got := clothClass(p, "window"); got != 3 {
		t.Errorf("class %g, want 3", got)
	}
	if got := clothClass(p, "door"); !math.IsNaN(got) {
		t.Errorf("without roller: %g", got)
	}
}
