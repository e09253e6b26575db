package photometry

import "math"

// SolarIlluminance is the illuminance (lx) on a plane facing the sun above the
// atmosphere at the mean distance of the Earth. Source: see ClearDay.
const SolarIlluminance = 127500

// ClearDay returns the illuminance of the sun on a plane facing it and of the
// sky on a level plane (lx) on a clear day, for an altitude of the sun and a
// day of the year; both 0 where the sun is not above the horizon. It needs no
// weather: 127,500 lx times the distance factor times exp(-0.21 / sin h), and
// 800 + 15,500 sqrt(sin h).
//
// Source: Gillette, Pierpoint & Treado, A general illuminance model for daylight
// availability, Journal of the IES 13(4), 1984, 330-340, as in IES RP-21-84
// (both from memory).
func ClearDay(altitudeRad float64, dayOfYear int) (sunNormalLx, skyLx float64) {
	sin := math.Sin(altitudeRad)
	if sin <= 0 {
		return 0, 0
	}
	return SolarIlluminance * DistanceFactor(dayOfYear) * math.Exp(-0.21/sin), 800 + 15500*math.Sqrt(sin)
}
