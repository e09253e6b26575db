package glare

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// PositionIndex returns Guth's position index P (dimensionless, >= 1) of a
// direction in the view frame: how much brighter a source may be there than
// on the line of sight for the same discomfort. dir need not be a unit
// vector. At and behind the plane of the eye it is +Inf: such a source does
// not count.
//
// Above and on the horizontal through the line of sight, with sigma the angle
// to the line of sight and tau that of the plane of source and line of sight
// to the vertical, both in degrees:
//
//	P = exp{ [35.2 - 0.31889 tau - 1.22 exp(-2 tau/9)] 1e-3 sigma
//	       + [21 + 0.26667 tau - 0.002963 tau^2] 1e-5 sigma^2 }
//
// Source: fit to Guth's data, G. W. Levin, J. IES 4 (1975); IES Lighting
// Handbook (from memory).
//
// Below, with R the offset from the line of sight and D the distance along
// it: P = 1 + 0.8 R/D for R < 0.6 D, else 1 + 1.2 R/D. Source: T. Iwata,
// M. Tokura, Lighting Res. Technol. 29 (1997); used by Wienold and
// Christoffersen 2006 (from memory). The published fits step at R = 0.6 D,
// from 1.48 to 1.72, and differ slightly on the horizontal.
func PositionIndex(dir r3.Vec) float64 {
	// Not dir.X <= 0: NaN is no direction either.
	if !(dir.X > 0) {
		return math.Inf(1)
	}
	off := math.Hypot(dir.Y, dir.Z)
	if off == 0 {
		return 1
	}
	// A source on the horizontal must not fall below it by rounding.
	if dir.Z < -1e-9*off {
		r := off / dir.X
		if r < 0.6 {
			return 1 + 0.8*r
		}
		return 1 + 1.2*r
	}
	const deg = 180 / math.Pi
	sigma := math.Atan2(off, dir.X) * deg
	tau := math.Atan2(math.Abs(dir.Y), math.Max(dir.Z, 0)) * deg
	return math.Exp((35.2-0.31889*tau-1.22*math.Exp(-2*tau/9))*1e-3*sigma +
		(21+0.26667*tau-0.002963*tau*tau)*1e-5*sigma*sigma)
}
