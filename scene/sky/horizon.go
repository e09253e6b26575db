package sky

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"
)

// ErrHorizon tells that a skyline cannot be used.
var ErrHorizon = errors.New("horizon line not usable")

// HorizonPoint is one point of a skyline: azimuth clockwise from north in 0 to
// 2 pi, altitude in 0 to pi/2 (radians).
type HorizonPoint struct{ AzimuthRad, AltitudeRad float64 }

// Horizon is the skyline around a site: altitudes at azimuths, straight in
// azimuth and altitude between them, around the circle. The zero value is the
// flat horizon. It does not change once made and may be used by many goroutines.
type Horizon struct {
	// points run through the azimuths in order; the first lies at or before 0,
	// the last at or beyond 2 pi.
	points []HorizonPoint
}

// NewHorizon makes a skyline of at least two points, in any order. Two points at
// one azimuth, in the order given, make a vertical edge: the first is the
// altitude to its west, the second to its east. It fails with ErrHorizon where
// there are fewer than two points, one is out of range, or three share an
// azimuth. Azimuth 2 pi is north seen from the west, 0 north seen from the east.
func NewHorizon(points []HorizonPoint) (Horizon, error) {
	if len(points) < 2 {
		return Horizon{}, fmt.Errorf("%w: got %d points, want 2 or more; add points or leave the horizon out", ErrHorizon, len(points))
	}
	for i, p := range points {
		if !(p.AzimuthRad >= 0 && p.AzimuthRad <= 2*math.Pi) {
			return Horizon{}, fmt.Errorf("%w: point %d: azimuth: got %g degrees, want 0 to 360; count clockwise from north", ErrHorizon, i+1, p.AzimuthRad/degree)
		}
		if !(p.AltitudeRad >= 0 && p.AltitudeRad <= math.Pi/2) {
			return Horizon{}, fmt.Errorf("%w: point %d: altitude: got %g degrees, want 0 to 90; check the point", ErrHorizon, i+1, p.AltitudeRad/degree)
		}
	}
	sorted := slices.Clone(points)
	slices.SortStableFunc(sorted, func(a, b HorizonPoint) int {
		switch {
		case a.AzimuthRad < b.AzimuthRad:
			return -1
		case a.AzimuthRad > b.AzimuthRad:
			return 1
		}
		return 0
	})
	here := 0 // points at this azimuth so far
	for i, p := range sorted {
		if i > 0 && p.AzimuthRad != sorted[i-1].AzimuthRad {
			here = 0
		}
		if here++; here > 2 {
			return Horizon{}, fmt.Errorf("%w: azimuth %g degrees: got 3 points, want 2 at most; drop the middle one", ErrHorizon, p.AzimuthRad/degree)
		}
	}
	first, last := sorted[0], sorted[len(sorted)-1]
	first.AzimuthRad += 2 * math.Pi
	last.AzimuthRad -= 2 * math.Pi
	return Horizon{points: slices.Concat([]HorizonPoint{last}, sorted, []HorizonPoint{first})}, nil
}

// AltitudeRad returns the altitude of the skyline at an azimuth (any finite
// number of turns); at a vertical edge that to its east. It is 0 for NaN.
func (h Horizon) AltitudeRad(azimuth float64) float64 {
	if len(h.points) == 0 || math.IsNaN(azimuth) || math.IsInf(azimuth, 0) {
		return 0
	}
	azimuth = math.Mod(azimuth, 2*math.Pi)
	if azimuth < 0 {
		azimuth += 2 * math.Pi
	}
	// The first point beyond the azimuth; the ones around it are at hand because
	// the line runs a turn around.
	low, high := 1, len(h.points)-1
	for low < high {
		mid := (low + high) / 2
		if h.points[mid].AzimuthRad > azimuth {
			high = mid
		} else {
			low = mid + 1
		}
	}
	p, q := h.points[low-1], h.points[low]
	width := q.AzimuthRad - p.AzimuthRad
	if !(width > 0) {
		return q.AltitudeRad
	}
	t := math.Min(1, (azimuth-p.AzimuthRad)/width)
	return p.AltitudeRad + (q.AltitudeRad-p.AltitudeRad)*t
}

// Hides tells whether a direction (unit vector) points below the skyline. What
// lies on it, and the zenith, is free.
func (h Horizon) Hides(dir r3.Vec) bool {
	if len(h.points) == 0 {
		return dir.Z < 0
	}
	level := math.Hypot(dir.X, dir.Y)
	if level == 0 {
		return dir.Z < 0
	}
	return math.Atan2(dir.Z, level) < h.AltitudeRad(azimuthOf(dir))
}
