package sky

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// shape is the common form of all skies here, relative luminance
//
//	l = [g0 + g1 cos zeta + a exp(b/cos zeta)] [f0 + c exp(d gamma) + e cos^2 gamma]
//
// The all-weather model has g0 = f0 = 1 and g1 = 0; the CIE general skies have
// f0 = 1 - c exp(d pi/2); the traditional overcast sky has a = 0. Each factor
// counts as 0 where it would be negative.
type shape struct {
	g0, g1, a, b float64
	f0, c, d, e  float64
}

// gradationAt returns the first factor for cos zeta in 0 to 1. At the horizon it
// is the limit from above, so for b = 0 it includes a.
func (s *shape) gradationAt(cosZeta float64) float64 {
	g := s.g0 + s.g1*cosZeta
	switch {
	case s.a == 0:
	case s.b == 0:
		g += s.a
	case cosZeta > 0:
		g += s.a * math.Exp(s.b/cosZeta)
	}
	return math.Max(0, g)
}

// indicatrixAt returns the second factor for an angle to the sun in 0 to pi.
func (s *shape) indicatrixAt(gamma float64) float64 {
	if s.c == 0 && s.e == 0 {
		return math.Max(0, s.f0)
	}
	cos := math.Cos(gamma)
	return math.Max(0, s.f0+s.c*math.Exp(s.d*gamma)+s.e*cos*cos)
}

// horizontalIntegral returns the integral of l cos zeta over the upper
// hemisphere (sr) with the sun at a zenith angle, to 1e-5 of its value.
//
// It integrates in rings around the sun, where the indicatrix is constant and
// its cusp an end point. Rings that meet the horizon are cut there: their share
// of azimuths is known, and so the integrand stays smooth. Gauss-Legendre in
// both variables; where the rings are cut, the angle runs as a sine, which takes
// the square-root ends away.
func (s *shape) horizontalIntegral(sunZenith float64) float64 {
	sinS, cosS := math.Sincos(sunZenith)
	quarter := math.Pi / 2
	var sum float64
	// ring adds the ring at gamma with weight w over its part above the horizon.
	ring := func(gamma, w float64) {
		sin, cos := math.Sincos(gamma)
		mid, swing := cos*cosS, sin*sinS
		half := math.Pi
		if swing > math.Abs(mid) {
			half = math.Acos(-mid / swing)
		} else if mid < 0 {
			return
		}
		var inner float64
		for i, x := range gaussNodes {
			cosZeta := mid + swing*math.Cos(half/2*(1+x))
			if cosZeta > 0 {
				inner += gaussWeights[i] * cosZeta * s.gradationAt(cosZeta)
			}
		}
		sum += w * s.indicatrixAt(gamma) * sin * inner * half // both halves of the ring
	}
	// full integrates over rings from gamma 0 (or pi) that no horizon cuts.
	full := func(from, to float64) {
		for i, x := range gaussNodes {
			ring(from+(to-from)/2*(1+x), gaussWeights[i]*math.Abs(to-from)/2)
		}
	}
	if sunZenith <= quarter {
		full(0, quarter-sunZenith)
	} else {
		full(math.Pi, 3*quarter-sunZenith)
	}
	// The horizon cuts the rings from pi/2 - Z to pi/2 + Z, Z counted from zenith
	// or nadir, whichever is nearer the sun.
	reach := math.Min(sunZenith, math.Pi-sunZenith)
	for i, x := range gaussNodes {
		sin, cos := math.Sincos(quarter * x)
		ring(quarter+reach*sin, gaussWeights[i]*reach*quarter*cos)
	}
	return sum
}

func zenithOf(dir r3.Vec) float64 { return math.Atan2(math.Hypot(dir.X, dir.Y), dir.Z) }

// angleBetween keeps its digits for directions that nearly coincide, unlike the
// arc cosine.
func angleBetween(p, q r3.Vec) float64 {
	return 2 * math.Atan2(r3.Norm(r3.Sub(p, q)), r3.Norm(r3.Add(p, q)))
}
