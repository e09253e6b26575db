package scene

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// AzimuthDeg is the azimuth of a model direction in degrees clockwise from true
// north, 0 to 360 (360 excluded); northDeg is that of the model's +y.
func AzimuthDeg(d r3.Vec, northDeg float64) float64 {
	az := math.Mod(math.Atan2(d.X, d.Y)*180/math.Pi+northDeg, 360)
	if az < 0 {
		az += 360
	}
	if az >= 360-1e-7 { // what is north but for rounding
		az = 0
	}
	return az
}

// AltitudeDeg is the angle of a unit vector above the horizon in degrees.
func AltitudeDeg(d r3.Vec) float64 {
	return math.Asin(math.Max(-1, math.Min(1, d.Z))) * 180 / math.Pi
}
