package sky

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// Errors of the CIE skies, to be tested with errors.Is.
var (
	ErrKind  = errors.New("no such sky")
	ErrScale = errors.New("scale out of range")
	ErrSun   = errors.New("sun out of range")
)

// Scale says how bright a sky is. Make it with ByZenithLuminance or
// ByHorizontalIlluminance; the zero value is a black sky.
type Scale struct {
	value      float64
	horizontal bool
}

// ByZenithLuminance scales a sky to a luminance at the zenith (cd/m2).
func ByZenithLuminance(luminance float64) Scale { return Scale{value: luminance} }

// ByHorizontalIlluminance scales a sky to the illuminance it causes on a level
// plane (lx).
func ByHorizontalIlluminance(illuminance float64) Scale {
	return Scale{value: illuminance, horizontal: true}
}

// NewCIE returns one of the 15 CIE general skies. The sun is a unit vector; its
// direction has no effect on the kinds 1, 3 and 5. It fails with ErrKind outside
// 1 to 15, ErrSun for a vector without direction or, for the kinds that depend
// on it, a sun below the horizon, and ErrScale where the scale is negative or
// not finite.
//
// Source: Spatial distribution of daylight - CIE standard general sky, CIE S
// 011/E:2003 = ISO 15469:2004, equations 1 to 8 and table 1. (Equation numbers
// from memory.)
func NewCIE(kind int, sun r3.Vec, scale Scale) (*Sky, error) {
	if kind < 1 || kind > len(cieSkies) {
		return nil, fmt.Errorf("%w: CIE general sky: got %d, want 1 to %d; choose one of the standard's types", ErrKind, kind, len(cieSkies))
	}
	p := cieSkies[kind-1]
	a, b, c, d, e := p[0], p[1], p[2], p[3], p[4]
	return newScaled(shape{
		g0: 1, a: a, b: b,
		f0: 1 - c*math.Exp(d*math.Pi/2), c: c, d: d, e: e,
	}, sun, scale)
}

// NewOvercastTraditional returns the sky whose luminance grows threefold from
// horizon to zenith, L/Lz = (1 + 2 sin h)/3. It fails with ErrScale.
//
// Source: Moon & Spencer, Illumination from a non-uniform sky, Illuminating
// Engineering 37, 1942, 707-726; CIE S 011/E:2003, type 16.
func NewOvercastTraditional(scale Scale) (*Sky, error) {
	return newScaled(shape{g0: 1.0 / 3, g1: 2.0 / 3, f0: 1}, r3.Vec{Z: 1}, scale)
}

// NewClearTraditional returns the clear sky of Kittler. It fails with ErrSun for
// a vector without direction or a sun below the horizon, and with ErrScale.
//
// Source: Kittler, Standardisation of outdoor conditions for the calculation of
// daylight factor with clear skies, CIE conference Sunlight in Buildings, 1967;
// CIE publication 22, 1973 (from memory).
func NewClearTraditional(sun r3.Vec, scale Scale) (*Sky, error) {
	return newScaled(shape{g0: 1, a: -1, b: -0.32, f0: 0.91, c: 10, d: -3, e: 0.45}, sun, scale)
}

// NewClearTraditionalPolluted returns the clear sky over industrial regions. It
// fails as NewClearTraditional does.
//
// Source: Gusev, 1970, in CIE publication 22, 1973 (from memory).
func NewClearTraditionalPolluted(sun r3.Vec, scale Scale) (*Sky, error) {
	return newScaled(shape{g0: 1, a: -1, b: -0.32, f0: 0.856, c: 16, d: -3, e: 0.3}, sun, scale)
}

func newScaled(sh shape, sun r3.Vec, scale Scale) (*Sky, error) {
	if !(scale.value >= 0 && scale.value <= math.MaxFloat64) {
		return nil, fmt.Errorf("%w: got %g, want 0 or more; give the zenith luminance in cd/m2 or the horizontal illuminance in lx", ErrScale, scale.value)
	}
	n := r3.Norm(sun)
	directed := n > 0 && n <= math.MaxFloat64
	if depends := sh.c != 0 || sh.e != 0; depends && (!directed || sun.Z < 0) {
		return nil, fmt.Errorf("%w: direction: got %v, want one above the horizon; choose an hour with sun or an overcast type", ErrSun, sun)
	}
	sun = direction(sun)
	unit := sh.gradationAt(1) * sh.indicatrixAt(zenithOf(sun)) // at the zenith
	if scale.horizontal {
		unit = sh.horizontalIntegral(zenithOf(sun))
	}
	return newSky(sh, sun, scale.value/unit), nil
}

// cieSkies holds the parameters a to e of the types 1 to 15.
// Source: CIE S 011/E:2003, table 1.
var cieSkies = [15][5]float64{
	{4.0, -0.7, 0, -1.0, 0},       // 1: CIE Standard Overcast Sky, steep luminance gradation towards zenith, azimuthal uniformity
	{4.0, -0.7, 2, -1.5, 0.15},    // 2: Overcast, steep gradation and slight brightening towards the sun
	{1.1, -0.8, 0, -1.0, 0},       // 3: Overcast, moderately graded with azimuthal uniformity
	{1.1, -0.8, 2, -1.5, 0.15},    // 4: Overcast, moderately graded, slight brightening towards the sun
	{0, -1.0, 0, -1.0, 0},         // 5: Sky of uniform luminance
	{0, -1.0, 2, -1.5, 0.15},      // 6: Partly cloudy, no gradation towards zenith, slight brightening towards the sun
	{0, -1.0, 5, -2.5, 0.3},       // 7: Partly cloudy, no gradation, brighter circumsolar region
	{0, -1.0, 10, -3.0, 0.45},     // 8: Partly cloudy, no gradation, distinct solar corona
	{-1.0, -0.55, 2, -1.5, 0.15},  // 9: Partly cloudy, with the obscured sun
	{-1.0, -0.55, 5, -2.5, 0.3},   // 10: Partly cloudy, brighter circumsolar region
	{-1.0, -0.55, 10, -3.0, 0.45}, // 11: White-blue sky with distinct solar corona
	{-1.0, -0.32, 10, -3.0, 0.45}, // 12: CIE Standard Clear Sky, low luminance turbidity
	{-1.0, -0.32, 16, -3.0, 0.3},  // 13: CIE Standard Clear Sky, polluted atmosphere
	{-1.0, -0.15, 16, -3.0, 0.3},  // 14: Cloudless turbid sky with broad solar corona
	{-1.0, -0.15, 24, -2.8, 0.15}, // 15: White-blue turbid sky with broad solar corona
}
