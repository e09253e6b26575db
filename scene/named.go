package scene

import (
	"errors"
	"fmt"
	"math"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/project"
	"squint/scene/sky"
)

// Air as it is where nothing is known of it: pressure and temperature for the
// refraction, as sky.Refracted names them; dew point for the efficacy, of 50 %
// humidity at 20 degrees C (own choice).
const (
	usualPressureHPa  = 1013.25
	usualTemperatureC = 10
	usualDewPointC    = 9.3
)

// Nearest is the moment of the record nearest to t, which counts within the year
// of the weather file; nil where no hour with daylight lies within an hour.
func (c *Climate) Nearest(t time.Time) *Moment {
	var best *Moment
	least := time.Hour
	for _, m := range c.Moments {
		if d := m.Time.Sub(t).Abs(); d < least {
			best, least = m, d
		}
	}
	return best
}

// usualSun is the sun at t as it is seen through the usual air.
func usualSun(site sky.Site, t time.Time) (sky.Sun, error) {
	s, err := sky.SunAt(site, t)
	if err != nil {
		return s, err
	}
	return s.Refracted(usualPressureHPa, usualTemperatureC), nil
}

// finished completes a moment of no record whose sun and sky stand in the world
// frame.
func finished(p *project.Project, m *Moment) (*Moment, error) {
	m.Step, m.Share = -1, 1
	m.turn(p.Site.NorthDeg * math.Pi / 180)
	h, has, err := turnedHorizon(p)
	if err != nil {
		return nil, err
	}
	m.GlobalLx = m.DiffuseLx
	if !has || !h.Hides(m.Sun) {
		m.GlobalLx += m.SunNormalLx * math.Max(0, m.Sun.Z)
	}
	return m, nil
}

// CIEMoment is t under one of the CIE general skies 1 to 15, or 16, the
// traditional overcast sky, of diffuseLx on a level plane, with a sun of
// normalLx on a plane that faces it. Kinds whose luminance depends on the sun
// need one above the horizon.
func (c *Climate) CIEMoment(p *project.Project, t time.Time, kind int, diffuseLx, normalLx float64) (*Moment, error) {
	s, err := usualSun(c.Site, t)
	if err != nil {
		return nil, err
	}
	if normalLx > 0 && s.Direction.Z <= 0 {
		return nil, fmt.Errorf("sun: got %g lx from a sun below the horizon at %s, want none or a time of day", normalLx, t.Format("2 January 15:04"))
	}
	var dome *sky.Sky
	if kind == 16 {
		dome, err = sky.NewOvercastTraditional(sky.ByHorizontalIlluminance(diffuseLx))
	} else {
		dome, err = sky.NewCIE(kind, s.Direction, sky.ByHorizontalIlluminance(diffuseLx))
	}
	if errors.Is(err, sky.ErrSun) {
		return nil, fmt.Errorf("CIE general sky %d: the sun is below the horizon at %s; want a time of day, or a kind that needs no sun: 1, 3 or 5", kind, t.Format("2 January 15:04"))
	}
	if err != nil {
		return nil, err
	}
	sun := s.Direction
	if sun.Z <= 0 {
		sun = r3.Vec{Z: 1} // a sky that knows no sun, and none shines
	}
	return finished(p, &Moment{Time: t, Month: int(t.Month()) - 1, Sun: sun, SunNormalLx: normalLx, Sky: dome, DiffuseLx: diffuseLx})
}

// IrradianceMoment is t under the all-weather sky of diffuse horizontal and
// direct normal irradiance, W/m2, as an hour of a weather file is made.
func (c *Climate) IrradianceMoment(p *project.Project, t time.Time, diffuseWM2, directWM2 float64) (*Moment, error) {
	s, err := usualSun(c.Site, t)
	if err != nil {
		return nil, err
	}
	if s.Direction.Z <= 0 {
		return nil, fmt.Errorf("sun: it is below the horizon at %s; want a time of day", t.Format("2 January 15:04"))
	}
	ill := illuminances(diffuseWM2, directWM2, s, t, usualDewPointC)
	dome, _ := sky.NewPerez(s.Direction, ill.Clearness, ill.Brightness, ill.Diffuse)
	return finished(p, &Moment{Time: t, Month: int(t.Month()) - 1, Sun: s.Direction, SunNormalLx: ill.DirectNormal, Sky: dome, DiffuseLx: ill.Diffuse})
}
