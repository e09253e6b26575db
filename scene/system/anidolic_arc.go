package system

import "math"

// plane is a point of a section: out and up, metres.
type plane [2]float64

func (p plane) minus(q plane) plane { return plane{p[0] - q[0], p[1] - q[1]} }

// angle is that of the direction p, counted from out towards up.
func (p plane) angle() float64 { return math.Atan2(p[1], p[0]) }

func (p plane) length() float64 { return math.Hypot(p[0], p[1]) }

// focalArc is a piece of a parabola, from one angle to another seen from its
// focus. Rays along the axis, coming from axisRad, are mirrored to the focus:
// r = 2f/(1-cos phi), phi the angle from the axis.
// Source: Welford, Winston, 1989, High collection nonimaging optics, appendix
// G (from memory).
type focalArc struct {
	focus          plane
	axisRad        float64
	twiceFocalM    float64
	fromRad, toRad float64
}

// focalArcThrough has that focus and axis and passes through from; it ends where it
// is seen from the focus at toRad.
func focalArcThrough(focus, from plane, axisRad, toRad float64) focalArc {
	d := from.minus(focus)
	a := focalArc{focus: focus, axisRad: axisRad, fromRad: d.angle(), toRad: toRad}
	a.twiceFocalM = d.length() * (1 - math.Cos(a.fromRad-axisRad))
	return a
}

func (a focalArc) at(rad float64) plane {
	r := a.twiceFocalM / (1 - math.Cos(rad-a.axisRad))
	sin, cos := math.Sincos(rad)
	return plane{a.focus[0] + r*cos, a.focus[1] + r*sin}
}

// tangentRad is the direction of the curve where it is seen at rad, that of
// growing distance from the vertex: it halves the angle between the axis and
// the ray from the focus.
func (a focalArc) tangentRad(rad float64) float64 { return (rad + a.axisRad) / 2 }

// cutAt shortens the arc to where it reaches out as far as outM; out must
// grow along it.
func (a focalArc) cutAt(outM float64) focalArc {
	lo, hi := a.fromRad, a.toRad
	for range 80 {
		mid := (lo + hi) / 2
		if a.at(mid)[0] < outM {
			lo = mid
		} else {
			hi = mid
		}
	}
	a.toRad = (lo + hi) / 2
	return a
}

// points are on the curve, so close that a chord between two differs from the
// curve's direction by at most errorRad.
func (a focalArc) points(errorRad float64) []plane {
	turn := math.Abs(a.toRad-a.fromRad) / 2
	for n := max(1, int(math.Ceil(turn/(2*errorRad)))); ; n += 1 + n/50 {
		list := make([]plane, n+1)
		worst := 0.0
		for i := range list {
			rad := a.fromRad + (a.toRad-a.fromRad)*float64(i)/float64(n)
			list[i] = a.at(rad)
			if i == 0 {
				continue
			}
			chord := list[i].minus(list[i-1]).angle()
			for _, end := range [2]float64{rad, rad - (a.toRad-a.fromRad)/float64(n)} {
				// A line has no direction: half turns do not count.
				off := math.Remainder(chord-a.tangentRad(end), math.Pi)
				worst = max(worst, math.Abs(off))
			}
		}
		if worst <= errorRad {
			return list
		}
	}
}
