package photometry

import "math"

// ClearDirectNormal returns the irradiance (W/m2) on a plane facing the sun
// under a cloudless sky, from that above the atmosphere, e0n, the air mass,
// corrected for pressure, and Linke's turbidity for an air mass of 2: 1 for
// clean dry air, 2 for very clear cold air, 3 to 5 for warm and moist air.
//
// Source: Rigollier, Bauer & Wald, On the clear sky model of the ESRA, Solar
// Energy 68(1), 2000, 33-48, after Kasten, The Linke turbidity factor based on
// improved values of the integral Rayleigh optical thickness, Solar Energy
// 56(3), 1996, 239-244; coefficients and turbidities from memory.
func ClearDirectNormal(e0n, airMass, turbidity float64) float64 {
	return e0n * math.Exp(-0.8662*turbidity*airMass*rayleigh(airMass))
}

// rayleigh is the optical thickness of clean dry air, from the same source.
func rayleigh(m float64) float64 {
	if m > 20 {
		return 1 / (10.4 + 0.718*m)
	}
	return 1 / (6.6296 + m*(1.7513+m*(-0.1202+m*(0.0065-m*0.00013))))
}

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
