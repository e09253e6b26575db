package system

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// ProfileAngle is the angle of the sun seen along the opening, in the
// rectangle's own frame: from the direction square to the glass toward Up, so
// tan(altitude)/cos(azimuth difference) at upright glass. It lies between
// -pi/2 and pi/2; false where the sun is behind the glass or in its plane.
// Source: ISO 15099:2003 (from memory).
func ProfileAngle(sun r3.Vec, r Rect) (float64, bool) {
	out := r3.Dot(sun, r.Outward)
	if !(out > 0) {
		return 0, false
	}
	return math.Atan2(r3.Dot(sun, r.Up), out), true
}

// CutOffTilt is the tilt at which flat slats of a width and a pitch just pass
// no sun of a profile angle straight, in radians, positive with the outer edge
// up: of larger tilts some sun passes, until the slats turn away from it. It
// is profile - asin(pitch/width cos profile), the slat cut-off of ISO 15099
// and EN 13363-2 (from memory), there with the inner edge up as positive.
// False where the slats are too far apart to cut the sun off at this tilt or
// the lengths are not positive.
func CutOffTilt(profileRad, widthM, pitchM float64) (float64, bool) {
	x := pitchM / widthM * math.Cos(profileRad)
	if !(widthM > 0 && pitchM > 0 && x >= -1 && x <= 1) {
		return 0, false
	}
	return profileRad - math.Asin(x), true
}

// RedirectTilt is the tilt, positive with the outer edge up, at which a
// mirror throws the sun of a profile angle so that it rises by riseM over
// depthM: a ray that falls by the profile angle leaves a mirror tilted by t
// rising by profile - 2t (law of reflection). For a ceiling riseM above the
// mirror the sun then just reaches its far end, depthM away; less tilt throws
// it nearer.
func RedirectTilt(profileRad, riseM, depthM float64) float64 {
	return redirect(profileRad, math.Atan2(riseM, depthM))
}

// redirect is RedirectTilt for a rise given as an angle.
func redirect(profileRad, riseRad float64) float64 { return (profileRad - riseRad) / 2 }
