package glare

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// The three disability glare equations of CIE 146:2002 (from memory) return
// the veiling luminance (cd/m2) per glare illuminance (lx) on the plane of
// the eye, of a source at thetaRad from the line of sight, for an observer of
// ageYears. ok is false, and the value 0, outside of the stated domain.

// VeilGeneral holds from 0.1 to 100 degrees. pigmentation of the eye is 0 for
// black, 0.5 for brown, 1 for blue-green, 1.2 for very light blue:
//
//	10/theta^3 + (5/theta^2 + 0.1 p/theta) (1 + (A/62.5)^4) + 0.0025 p
//
// with theta in degrees. Source: CIE 146:2002, general disability glare
// equation.
func VeilGeneral(thetaRad, ageYears, pigmentation float64) (perLux float64, ok bool) {
	t, ok := veilAngle(thetaRad, 0.1, 100)
	if !ok {
		return 0, false
	}
	return 10/(t*t*t) + (5/(t*t)+0.1*pigmentation/t)*(1+math.Pow(ageYears/62.5, 4)) + 0.0025*pigmentation, true
}

// VeilSmallAngle holds from 0.1 to 30 degrees:
// 10/theta^3 + 5/theta^2 (1 + (A/62.5)^4). Source: CIE 146:2002, small angle
// equation.
func VeilSmallAngle(thetaRad, ageYears float64) (perLux float64, ok bool) {
	t, ok := veilAngle(thetaRad, 0.1, 30)
	if !ok {
		return 0, false
	}
	return 10/(t*t*t) + 5/(t*t)*(1+math.Pow(ageYears/62.5, 4)), true
}

// VeilStilesHolladay holds from 1 to 30 degrees:
// 10/theta^2 (1 + (A/70)^4). Source: CIE 146:2002, age-adjusted
// Stiles-Holladay equation.
func VeilStilesHolladay(thetaRad, ageYears float64) (perLux float64, ok bool) {
	t, ok := veilAngle(thetaRad, 1, 30)
	if !ok {
		return 0, false
	}
	return 10 / (t * t) * (1 + math.Pow(ageYears/70, 4)), true
}

// MinVeilRad is how near to the line of sight VeilOf takes light for a source
// of veil: nearer, it is what is looked at, and 1/theta^3 is steeper than
// pixels are fine. Own choice; also where the Stiles-Holladay equation of CIE
// 146 begins.
const MinVeilRad = math.Pi / 180

// Veil is the veiling luminance of an image's sources.
type Veil struct {
	Luminance  float64 // cd/m2
	LeftOutLux float64 // illuminance of sources at angles that are not counted, lx
}

// VeilOf adds up VeilGeneral over the pixels and discs of sources, as found in
// lum, from MinVeilRad to 90 degrees.
func VeilOf(f *Field, lum []float32, sources []Source, ageYears, pigmentation float64) Veil {
	var v Veil
	add := func(dir r3.Vec, lux float64) {
		theta := math.Atan2(math.Hypot(dir.Y, dir.Z), dir.X)
		perLux, ok := VeilGeneral(theta, ageYears, pigmentation)
		if !ok || theta < MinVeilRad*(1-1e-12) { // rounding, as in veilAngle
			v.LeftOutLux += lux
			return
		}
		v.Luminance += perLux * lux
	}
	for _, s := range sources {
		if s.Disc {
			add(s.Dir, Disc{s.Dir, s.OmegaSr, s.MeanLuminance}.illuminance())
			continue
		}
		for _, i := range s.Pixels {
			add(f.Dir[i], float64(lum[i])*f.Omega[i]*f.CosTheta[i])
		}
	}
	return v
}

// veilAngle is the angle in degrees, if within from..to; 1e-12 relative is
// left for rounding from degrees to radians and back.
func veilAngle(thetaRad, from, to float64) (deg float64, ok bool) {
	deg = thetaRad * 180 / math.Pi
	return deg, deg >= from*(1-1e-12) && deg <= to*(1+1e-12)
}
