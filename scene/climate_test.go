package scene

import (
	"bytes"
	"math"
	"slices"
	"strings"
	"testing"
	"testing/fstest"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/photometry"
	"squint/scene/sky"
	"squint/scene/weather"
)

// hill is an invented place in the middle of a time zone.
var hill = sky.Site{LatitudeDeg: 50, LongitudeDeg: 15, ElevationM: 120}

// invented is a year at hill of hourly means, clear every third day and
// overcast else.
func invented(t testing.TB) *weather.Year {
	t.Helper()
	y := &weather.Year{File: "w.epw", Format: "EPW", ReferenceYear: 2022, Comments: []string{"invented weather, for tests"},
		Site: weather.Site{Name: "Hill, Region, Country", LatitudeDeg: hill.LatitudeDeg, LongitudeDeg: hill.LongitudeDeg, UTCOffsetH: 1, ElevationM: hill.ElevationM}}
	y.Records = make([]weather.Record, weather.HoursPerYear)
	first := time.Date(2022, 1, 1, 0, 0, 0, 0, time.FixedZone("", 3600))
	for i := range y.Records {
		r := &y.Records[i]
		start := first.Add(time.Duration(i) * time.Hour)
		r.Month, r.Day, r.EndH = int(start.Month()), start.Day(), float64(start.Hour()+1)
		r.DryBulbC, r.DewPointC, r.PressurePa = 12, 6, 100000
		r.GlobalLx, r.DirectLx, r.DiffuseLx, r.ZenithCdM2 = math.NaN(), math.NaN(), math.NaN(), math.NaN()
		const parts = 4 // of the hour, for its mean
		for k := range parts {
			s, err := sky.SunAt(hill, start.Add(time.Duration(2*k+1)*time.Hour/(2*parts)))
			if err != nil {
				t.Fatal(err)
			}
			if c := s.Direction.Z; c > 0 {
				dni, dhi := 0.0, 250*c
				if i/24%3 == 0 {
					dni, dhi = 900*math.Exp(-0.12/(c+0.05)), 90*c+10
				}
				r.DNI, r.DHI, r.GHI = r.DNI+dni/parts, r.DHI+dhi/parts, r.GHI+(dhi+dni*c)/parts
			}
		}
	}
	return y
}

// file is the year as an EPW file; change, if not nil, edits its records.
func file(t testing.TB, year *weather.Year, change func(i int, r *weather.Record)) fstest.MapFS {
	t.Helper()
	y := *year
	y.Records = slices.Clone(year.Records)
	for i := range y.Records {
		if change != nil {
			change(i, &y.Records[i])
		}
	}
	var b bytes.Buffer
	if err := weather.WriteEPW(&b, &y); err != nil {
		t.Fatal(err)
	}
	return fstest.MapFS{"w.epw": {Data: b.Bytes()}}
}

func mustRead(t testing.TB, fsys fstest.MapFS, tables string, occupied []bool) *Climate {
	t.Helper()
	c, err := ReadClimate(fsys, load(t, tables+roomMesh), occupied)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func (c *Climate) byHour() map[int]*Moment {
	out := map[int]*Moment{}
	for _, m := range c.Moments {
		out[m.Step] = m
	}
	return out
}

// checkMoments holds for any year: the sun is up where it shines, everything
// adds up, and the record's place in the year is kept.
func checkMoments(t *testing.T, c *Climate) {
	t.Helper()
	last := -1
	for _, m := range c.Moments {
		r := c.Year.Records[m.Step]
		switch {
		case m.Step <= last:
			t.Fatalf("hour %d after %d", m.Step, last)
		case math.Abs(r3.Norm(m.Sun)-1) > near:
			t.Fatalf("hour %d: the sun's direction has length %g", m.Step, r3.Norm(m.Sun))
		case m.SunNormalLx < 0 || m.SunNormalLx > 0 && m.Sun.Z <= 0:
			t.Fatalf("hour %d: direct light of %g lx with the sun at %v", m.Step, m.SunNormalLx, m.Sun)
		case math.Abs(m.GlobalLx-m.DiffuseLx-m.SunNormalLx*math.Max(0, m.Sun.Z)) > 1e-9*m.GlobalLx:
			t.Fatalf("hour %d: global %g lx of diffuse %g and direct %g at %g", m.Step, m.GlobalLx, m.DiffuseLx, m.SunNormalLx, m.Sun.Z)
		case m.Month != r.Month-1:
			t.Fatalf("hour %d: month %d", m.Step, m.Month)
		case c.DiffuseLx[m.Step] != m.DiffuseLx || c.SinAltitude[m.Step] != m.Sun.Z:
			t.Fatalf("hour %d: the series by record differ", m.Step)
		case m.DiffuseLx < minSkyLx && m.GlobalLx-m.DiffuseLx < minSkyLx:
			t.Fatalf("hour %d: %g lx counts as day", m.Step, m.GlobalLx)
		}
		// Good to 1e-5 of its value, see sky.HorizontalIlluminance.
		if e := m.Sky.HorizontalIlluminance(); math.Abs(e-m.DiffuseLx) > 2e-5*m.DiffuseLx {
			t.Fatalf("hour %d: the sky gives %g lx, want %g", m.Step, e, m.DiffuseLx)
		}
		last = m.Step
	}
}

// TestClimate reads one invented year, which takes a second, for all its parts.
func TestClimate(t *testing.T) {
	fsys := file(t, invented(t), nil)
	c := mustRead(t, fsys, "", nil)
	for name, test := range map[string]func(*testing.T, fstest.MapFS, *Climate){
		"moments": testMoments, "north": testNorth, "horizon": testHorizon, "options": testOptions, "sunrise": testSunriseHour, "clamped": testClamped,
	} {
		t.Run(name, func(t *testing.T) { test(t, fsys, c) })
	}
}

func testMoments(t *testing.T, _ fstest.MapFS, c *Climate) {
	checkMoments(t, c)
	if math.Abs(c.OffsetH+0.5) > 0.02 || c.Fit.Contradicts {
		t.Errorf("offset %g h, want the middle of the hour: %s", c.OffsetH, c.Fit.Text)
	}
	// The sun by itself, in the middle of an hour of full day.
	m := c.byHour()[171*24+11] // 21 June, 11 to 12
	s, err := sky.SunAt(hill, time.Date(2022, 6, 21, 10, 30, 0, 0, time.UTC))
	if err != nil {
		t.Fatal(err)
	}
	// Refraction at an altitude of 63 degrees: 0.5 minutes of arc, 1.5e-4.
	if apart(m.Sun, s.Direction) > 2e-4 {
		t.Errorf("sun at %v, want %v", m.Sun, s.Direction)
	}
	// Diffuse and direct by the model itself (Perez et al. 1990), fed by hand.
	r := c.Year.Records[m.Step]
	want := photometry.Perez1990(photometry.Irradiance{DHI: r.DHI, DNI: r.DNI, ZenithRad: s.ZenithRad,
		E0n: photometry.ExtraterrestrialNormal(172), DewPointC: 6})
	if math.Abs(m.DiffuseLx/want.Diffuse-1) > 1e-3 || math.Abs(m.SunNormalLx/want.DirectNormal-1) > 1e-3 {
		t.Errorf("diffuse %g, direct %g; want %g, %g", m.DiffuseLx, m.SunNormalLx, want.Diffuse, want.DirectNormal)
	}
}

// testNorth: the model frame is the world's turned about the vertical.
// At north_deg 90 the model's +y points east, so that east, world +x, is model
// +y, and north, world +y, is model -x.
func testNorth(t *testing.T, fsys fstest.MapFS, straight *Climate) {
	for _, c := range []struct{ world, want r3.Vec }{
		{r3.Vec{X: 1}, r3.Vec{Y: 1}},
		{r3.Vec{Y: 1}, r3.Vec{X: -1}},
		{r3.Vec{Y: -0.6, Z: 0.8}, r3.Vec{X: 0.6, Z: 0.8}},
	} {
		if got := turn(c.world, math.Pi/2); apart(got, c.want) > near {
			t.Errorf("%v: got %v, want %v", c.world, got, c.want)
		}
	}
	turned := mustRead(t, fsys, "[site]\nnorth_deg = 90\n\n[horizon]\nline = [[80, 0], [90, 50], [100, 0]]\n\n", nil)
	for i, m := range straight.Moments {
		n := turned.Moments[i]
		if apart(n.Sun, r3.Vec{X: -m.Sun.Y, Y: m.Sun.X, Z: m.Sun.Z}) > near {
			t.Fatalf("hour %d: sun at %v, turned %v", m.Step, m.Sun, n.Sun)
		}
		d := r3.Unit(r3.Vec{X: 0.5, Y: -0.3, Z: 0.4})
		a, b := m.Sky.Luminance(d), n.Sky.Luminance(r3.Vec{X: 0.3 / r3.Norm(r3.Vec{X: 0.5, Y: -0.3, Z: 0.4}), Y: d.X, Z: d.Z})
		if math.Abs(a-b) > 1e-9*a { // the same tables at the same angles
			t.Fatalf("hour %d: luminance %g, turned %g", m.Step, a, b)
		}
	}
	// The ridge stands at azimuth 90, model +y.
	h, has, err := turnedHorizon(load(t, "[site]\nnorth_deg = 90\n\n[horizon]\nline = [[80, 0], [90, 50], [100, 0]]\n\n"+roomMesh))
	if err != nil || !has || !h.Hides(r3.Unit(r3.Vec{Y: 1, Z: 1})) || h.Hides(r3.Unit(r3.Vec{X: 1, Z: 0.1})) {
		t.Errorf("ridge: %v %v", has, err)
	}
	if s := mustBuild(t, "[site]\nnorth_deg = 90\n\n[horizon]\nline = [[80, 0], [90, 50], [100, 0]]\n\n"+roomMesh, room().files()); !s.HasHorizon || !s.Horizon.Hides(r3.Unit(r3.Vec{Y: 1, Z: 1})) {
		t.Error("the scene has no ridge")
	}
}

// testHorizon: a ridge of 30 degrees all around takes the sun out of
// the global illuminance below it, and nothing else.
func testHorizon(t *testing.T, fsys fstest.MapFS, c *Climate) {
	open := c.byHour()
	hidden := 0
	for _, m := range mustRead(t, fsys, "[horizon]\nline = [[0, 30], [180, 30]]\n\n", nil).Moments {
		want := open[m.Step].GlobalLx
		if m.Sun.Z < 0.5 { // sin 30 degrees
			want = m.DiffuseLx
			hidden++
		}
		if math.Abs(m.GlobalLx-want) > 1e-9*want {
			t.Fatalf("hour %d, sun at %g: global %g, want %g", m.Step, m.Sun.Z, m.GlobalLx, want)
		}
	}
	if hidden < 1000 {
		t.Errorf("only %d hours with the sun below 30 degrees", hidden)
	}
}

func testOptions(t *testing.T, fsys fstest.MapFS, fitted *Climate) {
	occupied := make([]bool, weather.HoursPerYear)
	for i := range occupied {
		occupied[i] = i%24 == 9
	}
	c := mustRead(t, fsys, "", occupied)
	for _, m := range c.Moments {
		if m.Occupied != (m.Step%24 == 9) {
			t.Fatalf("hour %d: occupied %v", m.Step, m.Occupied)
		}
	}
	// The project's own moment counts instead of the fitted one: at the label,
	// half an hour later than the middle of the hour.
	p := load(t, roomMesh)
	offset := 0.0
	p.Weather.MomentOffsetH = &offset
	d, err := ReadClimate(fsys, p, nil)
	if err != nil {
		t.Fatal(err)
	}
	a, b := fitted.byHour()[171*24+11], d.byHour()[171*24+11]
	if dt := b.Time.Sub(a.Time).Hours(); math.Abs(dt-0.5) > 0.02 || d.OffsetH != 0 {
		t.Errorf("moved by %g h, want 0.5", dt)
	}
	// The project's own site: half the world further west it is night at noon.
	west := mustRead(t, fsys, "[site]\nlongitude_deg = -165\n\n", nil)
	if west.Site.LongitudeDeg != -165 || west.Site.LatitudeDeg != 50 || west.SinAltitude[171*24+11] > 0 {
		t.Errorf("site %+v, sun at %g", west.Site, west.SinAltitude[171*24+11])
	}
	// Darkness.
	if _, err := ReadClimate(file(t, fitted.Year, func(_ int, r *weather.Record) { r.GHI, r.DNI, r.DHI = 0, 0, 0 }), load(t, roomMesh), nil); err == nil {
		t.Error("a year of night is taken")
	}
	if _, err := ReadClimate(fstest.MapFS{}, load(t, roomMesh), nil); err == nil || !strings.Contains(err.Error(), "w.epw") {
		t.Errorf("no file: got %v", err)
	}
}

// testSunriseHour: where the sun is up for part of the hour it stands in
// the middle of that part, above the horizon, and the record's own irradiances
// are not raised: the light of the year is kept.
func testSunriseHour(t *testing.T, _ fstest.MapFS, c *Climate) {
	part := 0
	for _, m := range c.Moments {
		mid := c.Year.Moment(m.Step, -0.5)
		if d := m.Time.Sub(mid).Minutes(); math.Abs(d) < 2 {
			continue // whole hours, to the fitted offset
		}
		part++
		r := c.Year.Records[m.Step]
		if m.Sun.Z <= 0 {
			t.Fatalf("hour %d: sun at %g", m.Step, m.Sun.Z)
		}
		at := photometry.Irradiance{DHI: r.DHI, DNI: r.DNI, ZenithRad: math.Acos(m.Sun.Z),
			E0n: photometry.ExtraterrestrialNormal(m.Time.YearDay()), DewPointC: r.DewPointC}
		if want := photometry.Perez1990(at); math.Abs(m.DiffuseLx-want.Diffuse) > 1e-6*want.Diffuse+1e-9 {
			t.Fatalf("hour %d: diffuse %g lx, want %g for the record's mean of %g W/m2", m.Step, m.DiffuseLx, want.Diffuse, r.DHI)
		}
	}
	if part < 300 {
		t.Errorf("only %d hours with a sunrise or a sunset in daylight, want most of 730", part)
	}
}

// testClamped: skies that the model has no physical luminances for are
// counted. A brightness far beyond that of white clouds is one: 700 W/m2 of
// diffuse light under a low sun.
func testClamped(t *testing.T, _ fstest.MapFS, before *Climate) {
	if before.Clamped > 100 {
		t.Errorf("usual year: %d clamped", before.Clamped)
	}
	days := 0
	bright := file(t, before.Year, func(i int, r *weather.Record) {
		if i%24 == 11 && r.Month == 1 {
			r.DHI, r.DNI, r.GHI = 700, 0, 700
			days++
		}
	})
	after := mustRead(t, bright, "", nil)
	if got := after.Clamped - before.Clamped; got != days || days != 31 {
		t.Errorf("%d skies more are clamped, want %d", got, days)
	}
	checkMoments(t, after)
}

func TestOvercast(t *testing.T) {
	m, err := Overcast(3)
	if err != nil {
		t.Fatal(err)
	}
	// Zenith luminance of the traditional overcast sky: 9/(7 pi) of its
	// horizontal illuminance (Moon and Spencer 1942, "Illumination from a
	// non-uniform sky"; CIE S 011, both from memory), a third at the horizon.
	zenith := 9 / (7 * math.Pi) * 10000
	if l := m.Sky.LuminanceExact(r3.Vec{Z: 1}); math.Abs(l/zenith-1) > 1e-9 {
		t.Errorf("zenith %g cd/m2, want %g", l, zenith)
	}
	if l := m.Sky.LuminanceExact(r3.Vec{X: 1}); math.Abs(l/zenith-1./3) > 1e-9 {
		t.Errorf("horizon %g of the zenith, want a third", l/zenith)
	}
	if m.SunNormalLx != 0 || m.GlobalLx != 10000 || m.DiffuseLx != 10000 || m.Month != 3 || m.Step != -1 {
		t.Errorf("got %+v", m)
	}
}
