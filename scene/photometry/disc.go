package photometry

import "math"

// KcdLmPerW is the luminous efficacy of monochromatic radiation of 540 THz,
// exact by definition.
//
// Source: International System of Units (SI brochure, BIPM, 9th edition 2019),
// defining constants.
const KcdLmPerW = 683.0

// SunDiameterRad is the angle that the sun's disc subtends at the mean distance
// of the Earth: 0.533 degrees, from the nominal solar radius of 695,700 km (IAU
// 2015 resolution B3) and the astronomical unit of 149,597,870.7 km (IAU 2012
// resolution B2).
const SunDiameterRad = 0.533 * math.Pi / 180

// DiscSolidAngle returns the solid angle (sr) of a disc that subtends the full
// angle diameterRad (0 to 2 pi): 2 pi (1 - cos(d/2)), in a form that keeps its
// digits for small discs.
func DiscSolidAngle(diameterRad float64) float64 {
	s := math.Sin(diameterRad / 4)
	return 4 * math.Pi * s * s
}

// DiscProjectedSolidAngle returns the integral of the cosine over a disc that
// subtends the full angle diameterRad (0 to pi) and is faced squarely:
// pi sin^2(d/2), in sr.
func DiscProjectedSolidAngle(diameterRad float64) float64 {
	s := math.Sin(diameterRad / 2)
	return math.Pi * s * s
}

// DiscLuminance returns the luminance (cd/m2) of a uniform disc that subtends
// diameterRad and causes normalIlluminance (lx) on a plane facing it. It is 0
// where the disc has no size.
func DiscLuminance(normalIlluminance, diameterRad float64) float64 {
	if omega := DiscProjectedSolidAngle(diameterRad); omega > 0 {
		return normalIlluminance / omega
	}
	return 0
}
