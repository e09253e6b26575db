package scene

import (
	"math"
	"testing"

	"squint/scene/project"
)

func clearHill(t *testing.T) *Climate {
	t.Helper()
	return &Climate{Year: invented(t), Site: hill}
}

// almanac is the declination at solar noon at hill of a day of 2022, 1 to 365,
// rad, good to 0.01 degrees. Source: The Astronomical Almanac, section C, low
// precision formulas for the Sun (from memory). 1 January 2022, 12 h UT, is
// 8036 days after the epoch J2000.
func almanac(day float64) float64 {
	const degree = math.Pi / 180
	n := 8036 + day - 1 - 1.0/24
	g := (357.528 + 0.9856003*n) * degree
	ecliptic := (280.460 + 0.9856474*n + 1.915*math.Sin(g) + 0.020*math.Sin(2*g)) * degree
	return math.Asin(math.Sin((23.439-4e-7*n)*degree) * math.Sin(ecliptic))
}

// The hours of sun of a day against the closed form 24/pi acos(-tan phi tan
// delta), spherical trigonometry, with delta by almanac.
func TestDay(t *testing.T) {
	const perHour = 30
	for d, day := range map[project.MonthDay]float64{{Month: 2, Day: 1}: 32, {Month: 3, Day: 21}: 80, {Month: 6, Day: 21}: 172} {
		suns, err := clearHill(t).Day(d, 0, perHour)
		if err != nil {
			t.Fatal(err)
		}
		up, noon, most := 0.0, 0, -1.0
		for i, s := range suns {
			if s.Z > 0 {
				up++
			}
			if s.Z > most {
				noon, most = i, s.Z
			}
		}
		phi := hill.LatitudeDeg * math.Pi / 180
		hours := func(delta float64) float64 { return 24 / math.Pi * math.Acos(-math.Tan(phi)*math.Tan(delta)) }
		delta, want := almanac(day), hours(almanac(day))
		// What the almanac errs, and half a step at rise and at set. Between noon,
		// rise and set the declination moves as much up as down.
		const off = 0.01 * math.Pi / 180
		bound := 1.0/perHour + math.Abs(hours(delta+off)-want)
		if got := up / perHour; math.Abs(got-want) > bound {
			t.Errorf("%v: %.3f h of sun, want %.3f +- %.3f", d, got, want, bound)
		}
		// Noon falls within half a step, 0.25 degrees: 1 - cos 0.25 degrees = 1e-5.
		if got, want := most, math.Sin(math.Pi/2-phi+delta); math.Abs(got-want) > off+1e-5 {
			t.Errorf("%v: sine of the noon altitude %.5f, want %.5f", d, got, want)
		}
		// In the middle of its zone the sun is south within 16 min of noon.
		if s := suns[noon]; s.Y > 0 || math.Abs(float64(noon)/perHour-12) > 0.35 {
			t.Errorf("%v: highest at %.2f h towards %v", d, float64(noon)/perHour, s)
		}
	}
	// A model whose +y points east sees the noon sun to its right, +x.
	suns, err := clearHill(t).Day(project.MonthDay{Month: 3, Day: 21}, 90, 1)
	if err != nil {
		t.Fatal(err)
	}
	if s := suns[12]; s.X < 0.5 || math.Abs(s.Y) > 0.3 {
		t.Errorf("turned model: noon sun %v, want along +x", s)
	}
}

func TestClearMoment(t *testing.T) {
	c := clearHill(t)
	m, err := c.ClearMoment(&project.Project{}, project.MonthDay{Month: 3, Day: 21}, 9)
	if err != nil {
		t.Fatal(err)
	}
	if m.Step != 79*24+9 || m.Month != 2 || m.Sun.X <= 0 {
		t.Errorf("hour %d, month %d, sun %v; want the morning of 21 March", m.Step, m.Month, m.Sun)
	}
	if got := m.Sky.HorizontalIlluminance(); math.Abs(got-m.DiffuseLx) > 1e-4*got {
		t.Errorf("sky of %.0f lx, want %.0f", got, m.DiffuseLx)
	}
	if want := m.DiffuseLx + m.SunNormalLx*m.Sun.Z; math.Abs(m.GlobalLx-want) > 1e-9*want {
		t.Errorf("global %.0f lx, want %.0f", m.GlobalLx, want)
	}
	if m, err := c.ClearMoment(&project.Project{}, project.MonthDay{Month: 12, Day: 21}, 3); m != nil || err != nil {
		t.Errorf("at night: %v, %v", m, err)
	}
}
