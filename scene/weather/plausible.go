package weather

import (
	"fmt"
	"math"
	"strings"
)

// maxIrradiance in W/m² is above anything that an hour can hold: the sun
// outside the atmosphere gives at most 1.035 x 1361 = 1409 W/m² (solar constant
// 1361: Kopp, Lean 2011, A new, lower value of total solar irradiance; 1.035:
// Spencer 1971), and brief cloud enhancement is averaged out over an hour. The
// limit itself is common practice, no published source.
const maxIrradiance = 1600

// Ranges of the EPW weather data dictionary: pressure 31000 to 120000 Pa, dew
// point -70 to 70 degrees C; dew points of polar winters lie lower.
const (
	minDewPointC  = -100
	maxDewPointC  = 70
	minPressurePa = 31000
	maxPressurePa = 120000
)

// checkSite refuses places that are not on the earth.
func checkSite(file string, line int, s Site) error {
	for _, f := range []struct {
		key      string
		v        float64
		min, max float64
		do       string
	}{
		{"latitude", s.LatitudeDeg, -90, 90, "give degrees, north positive"},
		{"longitude", s.LongitudeDeg, -180, 180, "give degrees, east positive"},
		{"time zone", s.UTCOffsetH, -12, 14, "give the hours of standard time before UTC, east positive"},
		// Range of the EPW weather data dictionary.
		{"elevation", s.ElevationM, -1000, 9999.9, "give metres above sea level"},
	} {
		if !(f.v >= f.min && f.v <= f.max) {
			return &ParseError{File: file, Line: line, Key: f.key, Got: fmt.Sprintf("%g", f.v),
				Want: fmt.Sprintf("%g to %g", f.min, f.max), Do: f.do, Err: ErrField}
		}
	}
	return nil
}

// standardPressurePa returns the pressure of the standard atmosphere at a
// height above sea level.
// Source: ISO 2533:1975 Standard atmosphere, troposphere with -6.5 K/km from
// 288.15 K and 101325 Pa (constants from memory).
func standardPressurePa(elevationM float64) float64 {
	return 101325 * math.Pow(1-0.0065*elevationM/288.15, 5.25588)
}

// checkAir refuses a missing dew point, which the sky model needs, and air that
// does not exist on the earth.
func (rw row) checkAir(r Record, dewCol, pressureCol int) error {
	if math.IsNaN(r.DewPointC) {
		return rw.fail(fmt.Sprintf("dew-point temperature (column %d)", dewCol+1),
			strings.TrimSpace(rw.fields[dewCol])+" (the code for a missing value)", "degrees C",
			"fill the gap from a neighbouring hour or take another file", ErrMissing)
	}
	if r.DewPointC < minDewPointC || r.DewPointC > maxDewPointC {
		return rw.fail(fmt.Sprintf("dew-point temperature (column %d)", dewCol+1), fmt.Sprintf("%g", r.DewPointC),
			fmt.Sprintf("%d to %d degrees C", minDewPointC, maxDewPointC), "check the order and the units of the columns", ErrImplausible)
	}
	if r.PressurePa < minPressurePa || r.PressurePa > maxPressurePa {
		return rw.fail(fmt.Sprintf("pressure (column %d)", pressureCol+1), fmt.Sprintf("%g Pa", r.PressurePa),
			fmt.Sprintf("%d to %d Pa", minPressurePa, maxPressurePa), "check the order and the units of the columns", ErrImplausible)
	}
	return nil
}
