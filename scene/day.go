package scene

import (
	"fmt"
	"math"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/photometry"
	"squint/scene/project"
	"squint/scene/sky"
)

// at is the sun without refraction at an hour of standard time of a day in the
// year of the weather file.
func (c *Climate) at(d project.MonthDay, standardH float64) (time.Time, sky.Sun, error) {
	// The first record's hour begins the year.
	first := c.Year.Moment(0, -0.5)
	t := time.Date(first.Year(), time.Month(d.Month), d.Day, 0, 0, 0, 0, first.Location())
	t = t.Add(time.Duration(standardH * float64(time.Hour)))
	s, err := sky.SunAt(c.Site, t)
	if err != nil {
		return t, s, fmt.Errorf("%s: sun: %w", c.Year.File, err)
	}
	return t, s, nil
}

// Day holds the sun's directions over one day of standard time, without
// refraction and in the model frame, at the middles of equal steps, perHour of
// them an hour. northDeg is the project's.
func (c *Climate) Day(d project.MonthDay, northDeg float64, perHour int) ([]r3.Vec, error) {
	var out []r3.Vec
	for i := range 24 * perHour {
		_, s, err := c.at(d, (float64(i)+0.5)/float64(perHour))
		if err != nil {
			return nil, err
		}
		out = append(out, turn(s.Direction, northDeg*math.Pi/180))
	}
	return out, nil
}

// ClearMoment is the moment of a cloudless day at an hour of standard time: the
// sky of the CIE Standard Clear Sky, low luminance turbidity (CIE S 011/E:2003,
// type 12), as bright as photometry.ClearDay has it. nil where the sun is down.
// Step is the one that the moment falls in.
func (c *Climate) ClearMoment(p *project.Project, d project.MonthDay, standardH float64) (*Moment, error) {
	t, s, err := c.at(d, standardH)
	if err != nil {
		return nil, err
	}
	sun, lx := photometry.ClearDay(math.Pi/2-s.ZenithRad, t.YearDay())
	if lx == 0 {
		return nil, nil
	}
	dome, err := sky.NewCIE(12, s.Direction, sky.ByHorizontalIlluminance(lx))
	if err != nil {
		return nil, err
	}
	m, err := finished(p, &Moment{Time: t, Month: d.Month - 1, Sun: s.Direction, SunNormalLx: sun, Sky: dome, DiffuseLx: lx})
	if err != nil {
		return nil, err
	}
	m.Step = int((float64(24*(t.YearDay()-1)) + standardH) * float64(c.PerHour()))
	return m, nil
}
