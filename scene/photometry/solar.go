package photometry

import "math"

// SolarConstant is the total solar irradiance (W/m2) at the mean distance of
// the Earth.
//
// Source: Kopp & Lean, A new, lower value of total solar irradiance,
// Geophysical Research Letters 38, 2011, L01706: 1360.8 +/- 0.5. Older standards
// have 1367 (WMO 1981), 0.5 % more.
const SolarConstant = 1360.8

// ExtraterrestrialNormal returns the irradiance (W/m2) on a plane facing the sun
// above the atmosphere, on a day of the year (1 for 1 January, to 366; other
// numbers continue the cycle).
//
// Source: SolarConstant times DistanceFactor.
func ExtraterrestrialNormal(dayOfYear int) float64 {
	return SolarConstant * DistanceFactor(dayOfYear)
}

// DistanceFactor returns the square of mean over actual distance of the sun on a
// day of the year.
//
// Source: Spencer, Fourier series representation of the position of the sun,
// Search 2(5), 1971, 172.
func DistanceFactor(dayOfYear int) float64 {
	sin, cos := math.Sincos(2 * math.Pi * float64(dayOfYear-1) / 365)
	sin2, cos2 := 2*sin*cos, cos*cos-sin*sin
	return 1.000110 + 0.034221*cos + 0.001280*sin + 0.000719*cos2 + 0.000077*sin2
}

// AirMassKastenYoung1989 returns the relative optical air mass for an apparent
// zenith angle. Angles beyond the horizon count as the horizon (37.92), negative
// ones by their size.
//
// Source: Kasten & Young, Revised optical air mass tables and approximation
// formula, Applied Optics 28(22), 1989, 4735-4738.
func AirMassKastenYoung1989(zenithRad float64) float64 {
	z := clampZenith(zenithRad)
	return 1 / (math.Cos(z) + 0.50572*math.Pow(96.07995-z*180/math.Pi, -1.6364))
}

// PrecipitableWaterCm returns the water vapour above the ground (cm of water)
// from the dew point at the ground: exp(0.07 Td - 0.075).
//
// Source: Perez, Ineichen, Seals, Michalsky & Stewart, Modeling daylight
// availability and irradiance components from direct and global irradiance,
// Solar Energy 44(5), 1990, 271-289, equation 3, after Wright, Perez &
// Michalsky (1989).
func PrecipitableWaterCm(dewPointC float64) float64 {
	return math.Exp(0.07*dewPointC - 0.075)
}

// clampZenith limits a zenith angle to 0 to pi/2; NaN counts as the horizon.
func clampZenith(zenithRad float64) float64 {
	z := math.Abs(zenithRad)
	if !(z <= math.Pi/2) {
		return math.Pi / 2
	}
	return z
}
