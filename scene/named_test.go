package scene

import (
	"math"
	"strings"
	"testing"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/project"
	"squint/scene/sky"
)

// equator is a climate on the equator at Greenwich, as far as named skies need.
func equator() *Climate {
	return &Climate{Site: sky.Site{}}
}

// TestCIEMoment: the light of a named sky is as asked, and the sun stands where
// the model is turned to.
func TestCIEMoment(t *testing.T) {
	// 20 March 2022, 15:00 UTC: about the equinox the sun's altitude on the
	// equator is 90 degrees less 15 degrees an hour from noon, its azimuth west;
	// the equation of time is -7.5 min (almanac, from memory), 1.9 degrees.
	at := time.Date(2022, 3, 20, 15, 0, 0, 0, time.UTC)
	p := &project.Project{}
	p.Site.NorthDeg = 90 // the model's +y points east
	m, err := equator().CIEMoment(p, at, 12, 12000, 70000)
	if err != nil {
		t.Fatal(err)
	}
	if got := m.Sky.HorizontalIlluminance(); math.Abs(got/12000-1) > 1e-4 {
		t.Errorf("sky: got %.1f lx on the level, want 12000", got)
	}
	if want := 12000 + 70000*m.Sun.Z; math.Abs(m.GlobalLx/want-1) > 1e-12 || m.Month != 2 || m.Step != -1 {
		t.Errorf("got %.1f lx global, month %d, hour %d, want %.1f, 2, -1", m.GlobalLx, m.Month, m.Step, want)
	}
	altitude := math.Asin(m.Sun.Z) * 180 / math.Pi
	if math.Abs(altitude-46.9) > 0.5 {
		t.Errorf("sun: got %.2f degrees high, want 46.9", altitude)
	}
	// West is behind a model whose +y is east.
	if flat := r3.Unit(r3.Vec{X: m.Sun.X, Y: m.Sun.Y}); flat.Y > -0.999 {
		t.Errorf("sun: got %v in the model, want it towards -y", flat)
	}
	if d := r3.Norm(r3.Sub(m.Sky.Sun(), m.Sun)); d > 1e-9 {
		t.Errorf("the sky's sun is %g off the moment's", d)
	}
}

func TestNamedMomentsRefuse(t *testing.T) {
	night := time.Date(2022, 3, 20, 1, 0, 0, 0, time.UTC)
	p := &project.Project{}
	for name, make := range map[string]func() (*Moment, error){
		"sun at night":        func() (*Moment, error) { return equator().CIEMoment(p, night, 1, 1e4, 1) },
		"clear at night":      func() (*Moment, error) { return equator().CIEMoment(p, night, 12, 1e4, 0) },
		"irradiance at night": func() (*Moment, error) { return equator().IrradianceMoment(p, night, 100, 100) },
		"no such kind":        func() (*Moment, error) { return equator().CIEMoment(p, night, 17, 1e4, 0) },
	} {
		if m, err := make(); err == nil {
			t.Errorf("%s: got %+v, want an error", name, m)
		} else if strings.Contains(err.Error(), "{") {
			t.Errorf("%s: got %q, want words", name, err)
		}
	}
	if m, err := equator().CIEMoment(p, night, 16, 1e4, 0); err != nil || m.SunNormalLx != 0 {
		t.Errorf("overcast at night: got %+v, %v, want a moment without sun", m, err)
	}
}

// TestIrradianceMoment: more direct light gives a stronger sun; none gives none.
func TestIrradianceMoment(t *testing.T) {
	noon := time.Date(2022, 3, 20, 12, 0, 0, 0, time.UTC)
	p := &project.Project{}
	with, err := equator().IrradianceMoment(p, noon, 100, 800)
	if err != nil {
		t.Fatal(err)
	}
	without, err := equator().IrradianceMoment(p, noon, 300, 0)
	if err != nil {
		t.Fatal(err)
	}
	// Luminous efficacy of beam and sky light lies within 80 to 150 lm/W; common
	// practice, no published source.
	if e := with.SunNormalLx / 800; e < 80 || e > 150 {
		t.Errorf("sun: got %.1f lm/W, want 80 to 150", e)
	}
	if without.SunNormalLx != 0 || without.GlobalLx != without.DiffuseLx {
		t.Errorf("no direct light: got %+v, want no sun", without)
	}
	if got := with.Sky.HorizontalIlluminance(); math.Abs(got/with.DiffuseLx-1) > 1e-3 {
		t.Errorf("sky: got %.1f lx, want %.1f", got, with.DiffuseLx)
	}
}

// TestNamedMomentsBehindSkyline: a sun that the horizon line hides adds nothing
// on the level; one that stands above a lower line does. All moments stand for
// the whole of their hour.
func TestNamedMomentsBehindSkyline(t *testing.T) {
	at := time.Date(2022, 3, 21, 9, 0, 0, 0, time.FixedZone("", 3600))
	c := clearHill(t)
	for name, make := range map[string]func(*project.Project) (*Moment, error){
		"clear": func(p *project.Project) (*Moment, error) {
			return c.ClearMoment(p, project.MonthDay{Month: 3, Day: 21}, 9)
		},
		"general sky": func(p *project.Project) (*Moment, error) { return c.CIEMoment(p, at, 12, 12000, 70000) },
		"irradiance":  func(p *project.Project) (*Moment, error) { return c.IrradianceMoment(p, at, 100, 700) },
	} {
		// At 50 degrees north the sun of 9 h stands 27 degrees high, cos 50 cos 45
		// = sin 27 (spherical trigonometry).
		for line, hidden := range map[float64]bool{20: false, 35: true} {
			p := &project.Project{Horizon: []project.HorizonPoint{{AzimuthDeg: 0, AltitudeDeg: line}, {AzimuthDeg: 180, AltitudeDeg: line}}}
			m, err := make(p)
			if err != nil {
				t.Fatal(err)
			}
			want := m.DiffuseLx
			if !hidden {
				want += m.SunNormalLx * m.Sun.Z
			}
			if m.SunNormalLx == 0 || math.Abs(m.GlobalLx/want-1) > 1e-12 || m.Share != 1 {
				t.Errorf("%s, horizon at %g degrees: got %.0f lx on the level, share %g, want %.0f lx, 1", name, line, m.GlobalLx, m.Share, want)
			}
		}
	}
}

// TestNearest: within an hour, the nearer of two records.
func TestNearest(t *testing.T) {
	at := func(h, m int) time.Time { return time.Date(2022, 6, 1, h, m, 0, 0, time.UTC) }
	c := &Climate{Moments: []*Moment{{Time: at(8, 30)}, {Time: at(9, 30)}}}
	if m := c.Nearest(at(9, 10)); m != c.Moments[1] {
		t.Errorf("9:10: got %v, want 9:30", m)
	}
	if m := c.Nearest(at(11, 0)); m != nil {
		t.Errorf("11:00: got %v, want none", m)
	}
}
