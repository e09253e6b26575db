package outlook

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/scene/system"
	"squint/trace"
)

// Sunlit is the share of an opening's area that the sun in unit direction sun
// reaches from outdoors: 1 in full sun, 0 in the shade of anything opaque, of
// the skyline or of the opening's own facade, in between also behind cloth and
// perforations, by what they pass straight. The glass itself does not count.
// NaN where the sun stands behind the opening or below the horizon.
//
// n points of a Sobol sequence, a power of two, stand for the area. Each of n
// equal strips along either edge holds one, so that a shadow's edge along an
// edge of the opening is found to within 1/n of the area.
// Source: Sobol 1967, On the distribution of points in a cube and the
// approximate evaluation of integrals, USSR Computational Mathematics and
// Mathematical Physics 7(4).
func Sunlit(w *trace.World, opening system.Rect, sun r3.Vec, n int) float64 {
	if sun.Z <= 0 || r3.Dot(sun, opening.Outward) <= 0 {
		return math.NaN()
	}
	if w.Scene.HasHorizon && w.Scene.Horizon.Hides(sun) {
		return 0
	}
	lit := 0.0
	for i := range uint32(n) {
		// Half a step in, so that the strips are stood for by their middles.
		a := (float64(sampling.Sobol(0, i))/(1<<32) + 0.5/float64(n)) * opening.WidthM
		b := (float64(sampling.Sobol(1, i))/(1<<32) + 0.5/float64(n)) * opening.HeightM
		lit += w.Transmittance(opening.Point(a, b, w.Epsilon()), sun, math.Inf(1))
	}
	return lit / float64(n)
}

// SunReaches counts the directions of the sun, unit vectors, at which it stands
// at least minAltitudeRad high and reaches the point, past the skyline and all
// that is opaque. Taken at equal steps of time, count times step is a duration;
// each rise, set or obstacle's edge is known to within half a step.
func SunReaches(w *trace.World, point r3.Vec, suns []r3.Vec, minAltitudeRad float64) int {
	n := 0
	least := math.Sin(minAltitudeRad)
	for _, s := range suns {
		if s.Z < least || s.Z <= 0 || w.Scene.HasHorizon && w.Scene.Horizon.Hides(s) || w.Blocked(point, s, math.Inf(1)) {
			continue
		}
		n++
	}
	return n
}
