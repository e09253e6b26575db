package sky

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

const degree = math.Pi / 180

// azimuthOf returns the azimuth of a direction, clockwise from north, in 0 to
// 2 pi (2 pi excluded); 0 for the zenith.
func azimuthOf(dir r3.Vec) float64 {
	a := math.Atan2(dir.X, dir.Y)
	if a < 0 {
		a += 2 * math.Pi
	}
	if a >= 2*math.Pi { // a tiny negative angle rounds up to 2 pi
		a = 0
	}
	return a
}
