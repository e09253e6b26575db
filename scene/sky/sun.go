package sky

import (
	"errors"
	"fmt"
	"math"
	"time"

	"github.com/hablullah/go-sampa"
	"gonum.org/v1/gonum/spatial/r3"
)

// Errors of SunAt, to be tested with errors.Is.
var (
	ErrSite = errors.New("site out of range")
	ErrTime = errors.New("time out of range")
)

const (
	// deltaTSeconds is terrestrial time minus universal time: 32.184 s plus the
	// 37 leap seconds in force since 2017 (IERS Bulletin C, from memory). From
	// 1900 to 2100 it is off by at most about 140 s (prediction for 2100, from
	// memory), during which the sun moves 6 arc seconds along the ecliptic:
	// 0.0016 degrees. Between 1960 and 2040 it stays below 0.0005 degrees.
	deltaTSeconds = 69.184

	firstYear, lastYear = 1900, 2100

	// Figure of the Earth and horizontal parallax of Reda & Andreas (2004),
	// equations 33 to 36.
	earthFlattening    = 0.99664719
	earthRadiusM       = 6378140.0
	parallaxAtOneAUDeg = 8.794 / 3600

	// IAU 2012 resolution B2 and IAU 2015 resolution B3 (nominal solar radius).
	astronomicalUnitKM = 149597870.7
	solarRadiusKM      = 695700.0
)

// Site is a place on Earth: latitude north positive (-90 to 90), longitude
// east positive (-180 to 180), elevation above sea level (-1,000 to 10,000 m;
// negative below it).
type Site struct{ LatitudeDeg, LongitudeDeg, ElevationM float64 }

// Sun is the sun's position seen from a site. Direction is the unit vector
// towards the centre of its disc (x east, y north, z up), ZenithRad in 0 to pi,
// AzimuthRad clockwise from north in 0 to 2 pi. DistanceAU is in astronomical
// units. As SunAt returns it the position is airless: without refraction.
type Sun struct {
	Direction             r3.Vec
	ZenithRad, AzimuthRad float64
	DistanceAU            float64
}

// SunAt returns the sun's airless position at a moment. It is good to 0.001
// degrees from 1960 to 2040 and 0.003 from 1900 to 2100, the years it accepts;
// UTC is taken for UT1, which adds 0.004 degrees at most.
//
// It fails with ErrSite or ErrTime where the input is out of range or not
// finite.
//
// Source: Reda & Andreas, Solar position algorithm for solar radiation
// applications, Solar Energy 76(5), 2004, 577-589. The geocentric position
// comes from the library; parallax and the turn to the horizon are done here,
// because the library sets negative elevations to zero, replaces a temperature
// of 0 by 10 degrees and cannot leave refraction out.
func SunAt(site Site, t time.Time) (Sun, error) {
	return sunAt(site, t, deltaTSeconds)
}

func sunAt(site Site, t time.Time, deltaT float64) (Sun, error) {
	if err := site.validate(); err != nil {
		return Sun{}, err
	}
	t = t.UTC()
	if y := t.Year(); y < firstYear || y > lastYear {
		return Sun{}, fmt.Errorf("%w: year: got %d, want %d to %d; check the date", ErrTime, y, firstYear, lastYear)
	}
	p, err := sampa.GetSunPosition(t,
		sampa.Location{Latitude: site.LatitudeDeg, Longitude: site.LongitudeDeg},
		&sampa.Options{DeltaT: deltaT})
	if err != nil {
		return Sun{}, fmt.Errorf("%w: %w", ErrTime, err)
	}
	sinPhi, cosPhi := math.Sincos(site.LatitudeDeg * degree)
	sinDelta, cosDelta := math.Sincos(p.GeocentricDeclination * degree)
	sinH, cosH := math.Sincos(p.ObserverLocalHourAngle * degree)

	// Seen from the surface: the geocentric direction less the observer's own
	// place, in units of the sun's distance (equations 33 to 42 as one vector;
	// x towards the meridian on the equator, y west, z to the pole).
	sinXi := math.Sin(parallaxAtOneAUDeg / p.EarthRadiusVector * degree)
	u := math.Atan2(earthFlattening*sinPhi, cosPhi)
	x := cosDelta*cosH - sinXi*(math.Cos(u)+site.ElevationM/earthRadiusM*cosPhi)
	y := cosDelta * sinH
	z := sinDelta - sinXi*(earthFlattening*math.Sin(u)+site.ElevationM/earthRadiusM*sinPhi)

	dir := r3.Unit(r3.Vec{X: -y, Y: z*cosPhi - x*sinPhi, Z: x*cosPhi + z*sinPhi})
	return sunTowards(dir, p.EarthRadiusVector), nil
}

func sunTowards(dir r3.Vec, distanceAU float64) Sun {
	return Sun{
		Direction:  dir,
		ZenithRad:  math.Atan2(math.Hypot(dir.X, dir.Y), dir.Z),
		AzimuthRad: azimuthOf(dir),
		DistanceAU: distanceAU,
	}
}

// Refracted returns the sun where it is seen through the air: lifted by the
// refraction for a pressure (hPa) and an air temperature (degrees Celsius),
// usually the annual means of the site; 1013.25 and 10 are the usual values
// where nothing is known. A sun whose disc stays below the horizon is returned
// unchanged, and so is one seen with a pressure or temperature that is no air
// (pressure not positive, temperature at or below -273).
//
// Source: Reda & Andreas (2004), equation 42, with its limit for the horizon.
func (s Sun) Refracted(pressureHPa, temperatureC float64) Sun {
	const semidiameterDeg, horizonRefractionDeg = 0.26667, 0.5667
	altitudeDeg := 90 - s.ZenithRad/degree
	if !(pressureHPa > 0) || !(temperatureC > -273) || altitudeDeg < -(semidiameterDeg+horizonRefractionDeg) {
		return s
	}
	liftDeg := pressureHPa / 1010 * 283 / (273 + temperatureC) *
		1.02 / (60 * math.Tan((altitudeDeg+10.3/(altitudeDeg+5.11))*degree))
	// At the zenith the formula turns slightly negative; the sun stays put.
	zenith := math.Max(0, s.ZenithRad-math.Max(0, liftDeg)*degree)
	sinZ, cosZ := math.Sincos(zenith)
	sinA, cosA := math.Sincos(s.AzimuthRad)
	return Sun{
		Direction:  r3.Vec{X: sinZ * sinA, Y: sinZ * cosA, Z: cosZ},
		ZenithRad:  zenith,
		AzimuthRad: s.AzimuthRad,
		DistanceAU: s.DistanceAU,
	}
}

// AngularDiameterRad returns the angle that the sun's disc subtends, from its
// distance: 0.5242 to 0.5422 degrees over the year.
//
// Source: nominal solar radius 695,700 km, IAU 2015 resolution B3.
func (s Sun) AngularDiameterRad() float64 {
	return 2 * math.Asin(solarRadiusKM/(s.DistanceAU*astronomicalUnitKM))
}

func (s Site) validate() error {
	for _, c := range []struct {
		key           string
		got, from, to float64
	}{
		{"latitude_deg", s.LatitudeDeg, -90, 90},
		{"longitude_deg", s.LongitudeDeg, -180, 180},
		{"elevation_m", s.ElevationM, -1000, 10000},
	} {
		if !(c.got >= c.from && c.got <= c.to) {
			return fmt.Errorf("%w: %s: got %g, want %g to %g; check the site", ErrSite, c.key, c.got, c.from, c.to)
		}
	}
	return nil
}
