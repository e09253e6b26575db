package study

import (
	"fmt"
	"time"

	"squint/scene"
	"squint/scene/project"
)

// ClockTime is a moment of the year as the clocks show it.
type ClockTime struct{ Month, Day, Hour, Minute int }

// in is that moment in the year of a weather file.
func (t ClockTime) in(c *scene.Climate, p *project.Project) time.Time {
	first := c.Year.Moment(0, -0.5)
	at := time.Date(first.Year(), time.Month(t.Month), t.Day, t.Hour, t.Minute, 0, 0, first.Location())
	shift := calendar(p, c).ClockShiftH(at.YearDay() - 1)
	return at.Add(-time.Duration(shift * float64(time.Hour)))
}

// AtHour is the record of the weather file nearest to a clock time.
func AtHour(t ClockTime) When {
	return func(c *scene.Climate, p *project.Project) (*scene.Moment, string, error) {
		m := c.Nearest(t.in(c, p))
		if m == nil {
			return nil, "", fmt.Errorf("%s: got no daylight at %02d-%02d %02d:%02d, want an hour of day or a named sky", c.Year.File, t.Month, t.Day, t.Hour, t.Minute)
		}
		return m, "the hour of the weather file", nil
	}
}

// traditionalOvercast is the kind that scene.CIEMoment has for it.
const traditionalOvercast = 16

// UnderOvercast is the CIE traditional overcast sky, that of the daylight
// factor, of diffuseLx on a level plane.
func UnderOvercast(t ClockTime, diffuseLx float64) When {
	return func(c *scene.Climate, p *project.Project) (*scene.Moment, string, error) {
		m, err := c.CIEMoment(p, t.in(c, p), traditionalOvercast, diffuseLx, 0)
		return m, "CIE traditional overcast sky", err
	}
}

// UnderCIE is a CIE general sky, 1 to 15, with the sun's place at a clock time.
func UnderCIE(t ClockTime, kind int, diffuseLx, normalLx float64) When {
	return func(c *scene.Climate, p *project.Project) (*scene.Moment, string, error) {
		m, err := c.CIEMoment(p, t.in(c, p), kind, diffuseLx, normalLx)
		return m, fmt.Sprintf("CIE general sky %d", kind), err
	}
}

// UnderIrradiance is the all-weather sky of given irradiances, W/m2.
func UnderIrradiance(t ClockTime, diffuseWM2, directWM2 float64) When {
	return func(c *scene.Climate, p *project.Project) (*scene.Moment, string, error) {
		m, err := c.IrradianceMoment(p, t.in(c, p), diffuseWM2, directWM2)
		return m, fmt.Sprintf("all-weather sky of %g W/m2 diffuse and %g W/m2 direct normal", diffuseWM2, directWM2), err
	}
}
