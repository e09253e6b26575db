package system

import "math"

// MirrorFacetRad is the largest angle between a facet and the curve it
// stands for that suits surfaces which mirror or shine: a mirrored ray is off
// by at most 0.2 degrees, less than the sun is wide. MatteFacetRad suits
// surfaces that scatter: a facet's illuminance by the sun is off by at most
// 3.5 % of the normal one (sin 2 degrees), up on one half of it and down on the
// other. Own choice.
const (
	MirrorFacetRad = 0.1 * math.Pi / 180
	MatteFacetRad  = 2 * math.Pi / 180
)

// maxHalfTurnRad bounds how far a curve turns from its chord: 60 degrees at
// either end. Common practice, no published source: more is a gutter.
const maxHalfTurnRad = 60 * math.Pi / 180

// maxFacets bounds the facets of one curve.
const maxFacets = 4096

// arc is a circular arc over a chord from x = 0 to lengthM, whose middle lies
// sagittaM above it (negative: below), as points whose facets are off the
// curve by at most facetRad. The half angle a of an arc of chord c and
// sagitta h has tan(a/2) = 2h/c (elementary geometry).
func arc(lengthM, sagittaM, facetRad float64) [][2]float64 {
	if sagittaM == 0 {
		return [][2]float64{{0, 0}, {lengthM, 0}}
	}
	half := 2 * math.Atan(2*math.Abs(sagittaM)/lengthM)
	radius := lengthM / 2 / math.Sin(half)
	// A facet that spans the angle d leaves the arc by d/2 at its ends.
	n := facets(half / facetRad)
	points := make([][2]float64, n+1)
	for i := range points {
		a := half * (2*float64(i)/float64(n) - 1)
		// 2 sin^2 instead of 1 - cos, which cancels for flat arcs.
		s, e := math.Sin(a/2), math.Sin(half/2)
		points[i] = [2]float64{lengthM/2 + radius*math.Sin(a), math.Copysign(2*radius*(e*e-s*s), sagittaM)}
	}
	points[0], points[n] = [2]float64{}, [2]float64{lengthM, 0}
	return points
}

// parabola is like arc a parabola whose axis stands square on the middle of
// the chord. Its slope at the distance x from the middle is 8 h x / c^2 and
// its focal length c^2 / (16 h) (elementary geometry).
func parabola(lengthM, sagittaM, facetRad float64) [][2]float64 {
	if sagittaM == 0 {
		return [][2]float64{{0, 0}, {lengthM, 0}}
	}
	h := math.Abs(sagittaM)
	end := math.Atan(4 * h / lengthM)
	// The slope's angle goes in equal steps. A chord's slope is the mean of
	// its ends', whose angle is off the mean angle by second order: one facet
	// in 16 more covers that up to 60 degrees.
	n := facets(end / facetRad * 17 / 16)
	points := make([][2]float64, n+1)
	for i := range points {
		u := math.Tan(end*(2*float64(i)/float64(n)-1)) / math.Tan(end) // -1 to 1
		points[i] = [2]float64{lengthM / 2 * (1 + u), math.Copysign(h*(1-u*u), sagittaM)}
	}
	points[0], points[n] = [2]float64{}, [2]float64{lengthM, 0}
	return points
}

// facets rounds up to 1 and more.
func facets(n float64) int { return int(math.Ceil(min(max(n-1e-9, 1), maxFacets))) }

// maxSagitta is the sagitta of an arc that turns by maxHalfTurnRad; a
// parabola of the same sagitta turns by less.
func maxSagitta(lengthM float64) float64 { return lengthM / 2 * math.Tan(maxHalfTurnRad/2) }
