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

// The hours of sun of a day against the closed form 24/pi acos(-tan phi tan
// delta), spherical trigonometry, with the declination that the day's own noon
// altitude gives.
func TestDay(t *testing.T) {
	const perHour = 30
	for _, d := range []project.MonthDay{{Month: 2, Day: 1}, {Month: 3, Day: 21}, {Month: 6, Day: 21}} {
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
		delta := math.Asin(most) + phi - math.Pi/2
		want := 24 / math.Pi * math.Acos(-math.Tan(phi)*math.Tan(delta))
		// Half a step at rise and set; the declination moves by 0.4 degrees a day
		// at the equinox, 0.1 between noon and set, at 0.17 h a degree in sum of both
		// ends of opposite sign.
		if got := up / perHour; math.Abs(got-want) > 1.0/perHour+0.02 {
			t.Errorf("%v: %.3f h of sun, want %.3f", d, got, want)
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
