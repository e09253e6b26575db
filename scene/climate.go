package scene

import (
	"cmp"
	"errors"
	"fmt"
	"io/fs"
	"math"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/photometry"
	"squint/scene/project"
	"squint/scene/sky"
	"squint/scene/weather"
)

// Moment is one step of the year with daylight: the sun in the model frame, its
// illuminance on a plane facing it, and the sky. Steps are the records of the
// weather file or equal parts of them. Illuminances are the means over the whole
// step, also where the sun is up for less than that.
type Moment struct {
	Step        int     // of the year, 0 is the first of 1 January; -1 for a moment of no year
	Share       float64 // of an hour, 1 for the whole record
	Time        time.Time
	Month       int // 0 is January
	Sun         r3.Vec
	SunNormalLx float64
	Sky         *sky.Sky
	DiffuseLx   float64 // of the whole sky on a level plane
	GlobalLx    float64 // with the sun, as far as the horizon line lets it pass
	// DNI and DHI are the irradiances, in W/m2, that these illuminances come
	// from.
	DNI, DHI float64
	Occupied bool // viewpoints are judged at this step
}

// Climate is a weather file made into moments.
type Climate struct {
	Year    *weather.Year
	Site    sky.Site
	Fit     weather.Fit
	OffsetH float64 // used: the fit's, or the project's own
	Moments []*Moment
	// SinAltitude of the sun, as it is seen through the air, by step, for the
	// choice of daylight hours; negative at night.
	SinAltitude []float64
	// DiffuseLx by step, 0 at night.
	DiffuseLx []float64
	// Clamped counts skies that the all-weather model does not cover and that
	// were moved into its range.
	Clamped int
	Notes   []string
}

// minSkyLx is the diffuse illuminance below which a record counts as night:
// such light changes no metric.
const minSkyLx = 10

// ReadClimate reads the project's weather file, finds the moment that each
// record stands for, and makes suns and skies. occupied marks the steps at
// which viewpoints are judged; it may be nil.
func ReadClimate(fsys fs.FS, p *project.Project, occupied []bool) (*Climate, error) {
	y, err := weather.Read(fsys, p.Weather.File)
	if errors.Is(err, fs.ErrNotExist) {
		return nil, fmt.Errorf("%s: weather.file: %s is not there; paths count from the project file's folder", p.File, p.Weather.File)
	}
	if err != nil {
		return nil, err
	}
	override(&y.Site, p.Site)
	c := &Climate{Year: y, Site: sky.Site{LatitudeDeg: y.Site.LatitudeDeg, LongitudeDeg: y.Site.LongitudeDeg, ElevationM: y.Site.ElevationM}}
	var sunErr error
	cz := func(t time.Time) float64 {
		s, err := sky.SunAt(c.Site, t)
		if err != nil {
			sunErr = err
			return math.NaN()
		}
		return s.Direction.Z
	}
	c.Fit = y.FitMoment(cz)
	if sunErr != nil {
		return nil, fmt.Errorf("%s: sun: %w", y.File, sunErr)
	}
	c.OffsetH = c.Fit.OffsetH
	if p.Weather.MomentOffsetH != nil {
		c.OffsetH = *p.Weather.MomentOffsetH
	}
	horizon, hasHorizon, err := turnedHorizon(p)
	if err != nil {
		return nil, err
	}
	north := p.Site.NorthDeg * math.Pi / 180
	steps, err := c.steps(60 / cmp.Or(p.Simulation.StepMin, 60))
	if err != nil {
		return nil, err
	}
	c.SinAltitude, c.DiffuseLx = make([]float64, len(steps)), make([]float64, len(steps))
	for i, s := range steps {
		sun, err := c.sunAt(&y.Records[s.Hour], s.Time)
		if err != nil {
			return nil, err
		}
		c.SinAltitude[i] = sun.Direction.Z
		m, clamped := c.moment(s, sun)
		if m == nil {
			continue
		}
		if clamped {
			c.Clamped++
		}
		m.Step = i
		c.DiffuseLx[i] = m.DiffuseLx
		m.turn(north)
		if hasHorizon && horizon.Hides(m.Sun) {
			m.GlobalLx = m.DiffuseLx
		}
		m.Occupied = occupied != nil && occupied[i]
		c.Moments = append(c.Moments, m)
	}
	if len(c.Moments) == 0 {
		return nil, fmt.Errorf("%s: got no hour with daylight, want a year of them; check the irradiance columns and the site", y.File)
	}
	c.Notes = append(c.Notes, y.Notes...)
	return c, nil
}

// PerHour is the number of steps in an hour: series of the year hold 8760 times
// as many values. 1 unless the project asks for finer steps.
func (c *Climate) PerHour() int { return max(1, len(c.SinAltitude)/weather.HoursPerYear) }

func override(s *weather.Site, o project.Site) {
	for _, x := range []struct {
		to   *float64
		from *float64
	}{{&s.LatitudeDeg, o.LatitudeDeg}, {&s.LongitudeDeg, o.LongitudeDeg}, {&s.UTCOffsetH, o.UTCOffsetH}, {&s.ElevationM, o.ElevationM}} {
		if x.from != nil {
			*x.to = *x.from
		}
	}
}

// sunAt is the sun as it is seen through the air at t, weather by record r.
func (c *Climate) sunAt(r *weather.Record, t time.Time) (sky.Sun, error) {
	s, err := sky.SunAt(c.Site, t)
	if err != nil {
		return s, fmt.Errorf("%s:%d: sun: %w", c.Year.File, r.Line, err)
	}
	return s.Refracted(r.PressurePa/100, orZero(r.DryBulbC)), nil
}

// SunAt is the sun at any moment in the model frame, whose +y points to azimuth
// northDeg, as it is seen through the usual air.
func SunAt(site sky.Site, northDeg float64, t time.Time) (r3.Vec, error) {
	s, err := usualSun(site, t)
	if err != nil {
		return r3.Vec{}, err
	}
	return turn(s.Direction, northDeg*math.Pi/180), nil
}

// steps are the parts of all records.
func (c *Climate) steps(parts int) (steps []weather.Step, err error) {
	steps = c.Year.Steps(parts, c.OffsetH, func(i int, t time.Time) float64 {
		s, sunErr := c.sunAt(&c.Year.Records[i], t)
		if sunErr != nil {
			err = sunErr
			return math.NaN()
		}
		return s.Direction.Z
	})
	return steps, err
}

// moment makes a step under its sun; nil at night. The sky is still in the world
// frame.
//
// Where the sun rises or sets within a time that its light is the mean of, it
// stands in the middle of the sunlit part, while the illuminances stay the
// means over the whole: an hour counts as one hour in every metric, so that
// this keeps the light of the year. While the sun is up they are 1/share times
// as high, which nothing downstream needs.
func (c *Climate) moment(step weather.Step, s sky.Sun) (m *Moment, clamped bool) {
	r, t := &c.Year.Records[step.Hour], step.Time
	sinAlt := s.Direction.Z
	if step.DHI <= 0 && step.DNI <= 0 {
		return nil, false
	}
	dni := step.DNI
	if step.SunlitShare <= 0 || sinAlt <= 0 {
		// No direct light comes from a sun that is down; in files that are
		// right to the minute there is none.
		dni = 0
	}
	ill := illuminances(step.DHI, dni, s, t, r.DewPointC)
	direct := ill.DirectNormal * math.Max(0, sinAlt)
	if ill.Diffuse < minSkyLx && direct < minSkyLx {
		return nil, false
	}
	dome, clamp := sky.NewPerez(aboveHorizon(s.Direction), ill.Clearness, ill.Brightness, ill.Diffuse)
	m = &Moment{
		Share: 1 / float64(c.PerHour()), Time: t, Month: r.Month - 1,
		Sun: s.Direction, SunNormalLx: ill.DirectNormal, Sky: dome,
		DiffuseLx: ill.Diffuse,
		GlobalLx:  ill.Diffuse + direct,
		DNI:       dni,
		DHI:       step.DHI,
	}
	return m, clamp.Clamped
}

// illuminances are those of irradiances, W/m2, under sun s at t.
func illuminances(dhi, dni float64, s sky.Sun, t time.Time, dewPointC float64) photometry.Illuminance {
	return photometry.Perez1990(photometry.Irradiance{
		DHI: dhi, DNI: dni, ZenithRad: s.ZenithRad,
		E0n:       photometry.ExtraterrestrialNormal(t.YearDay()),
		DewPointC: dewPointC,
		AirMass:   photometry.AirMassKastenYoung1989(s.ZenithRad),
	})
}

// aboveHorizon puts a sun that is down on the horizon, for the sky's glow.
func aboveHorizon(d r3.Vec) r3.Vec {
	if d.Z >= 0 {
		return d
	}
	d.Z = 0
	return r3.Unit(d)
}

func orZero(x float64) float64 {
	if math.IsNaN(x) {
		return 0
	}
	return x
}

// turn moves the moment from the world frame (y north) into the model frame,
// whose +y points to azimuth north.
func (m *Moment) turn(north float64) {
	m.Sun = turn(m.Sun, north)
	m.Sky = m.Sky.WithSun(turn(m.Sky.Sun(), north))
}

// turn rotates a world direction into the model frame.
func turn(d r3.Vec, north float64) r3.Vec {
	s, c := math.Sincos(north)
	// Azimuth a in the world is a-north in the model.
	return r3.Vec{X: d.X*c - d.Y*s, Y: d.X*s + d.Y*c, Z: d.Z}
}

// turnedHorizon is the project's horizon line in the model frame.
func turnedHorizon(p *project.Project) (h sky.Horizon, has bool, err error) {
	if len(p.Horizon) == 0 {
		return h, false, nil
	}
	var pts []sky.HorizonPoint
	for _, q := range p.Horizon {
		az := math.Mod(q.AzimuthDeg-p.Site.NorthDeg+720, 360)
		pts = append(pts, sky.HorizonPoint{AzimuthRad: az * math.Pi / 180, AltitudeRad: q.AltitudeDeg * math.Pi / 180})
	}
	h, err = sky.NewHorizon(pts)
	if err != nil {
		return h, false, fmt.Errorf("%s: horizon.line: %w", p.File, err)
	}
	return h, true, nil
}

// Overcast is the moment of the daylight factor: the CIE traditional overcast
// sky of 10,000 lx on a level plane.
func Overcast(month int) (*Moment, error) {
	const lx = 10000
	dome, err := sky.NewOvercastTraditional(sky.ByHorizontalIlluminance(lx))
	if err != nil {
		return nil, err
	}
	return &Moment{Step: -1, Share: 1, Month: month, Sun: r3.Vec{Z: 1}, Sky: dome, DiffuseLx: lx, GlobalLx: lx}, nil
}
