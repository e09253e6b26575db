package system

import "math"

// Concentrator is a compound parabolic concentrator in two dimensions: two
// parabolic mirrors before an exit, through which passes, after few
// reflections, all light that comes from between two directions, and none of
// that which comes from beyond. Its section is described before an upright
// exit that faces outdoors: out from the exit, up from the exit's lower edge.
//
// The mirror below has its focus at the exit's upper edge and its axis along
// the upper limit of acceptance, the mirror above has the two exchanged. With
// limits alike above and below the exit's normal it is the symmetric
// concentrator of concentration 1/sin of the half-angle.
//
// Source: Winston, 1974, Principles of solar concentrators of a novel design,
// Solar Energy 16(2); Welford, Winston, 1989, High collection nonimaging
// optics, chapter 4 (from memory).
type Concentrator struct {
	ExitHeightM float64 // above 0
	// LowRad and HighRad limit the directions accepted, counted from the
	// exit's normal, up positive: -pi/2 <= LowRad < HighRad <= pi/2.
	LowRad, HighRad float64
	// KeepShare is the share that is kept of each mirror's reach out of the
	// exit, above 0 and at most 1, where nothing is cut off.
	KeepShare float64
}

// Limits of acceptance, our choice: of less than 10 degrees in all a
// concentrator is 20 times as long as its exit is high, and longer.
const (
	minAcceptanceRad = 10 * math.Pi / 180
	minKeepShare     = 0.05
	// lastRad: a mirror whose ends are seen from its focus this close together
	// is no mirror.
	lastRad = 1e-9
)

func (c Concentrator) check() error {
	switch {
	case !(c.ExitHeightM > 0 && c.ExitHeightM <= maxDepthM):
		return dimension("duct height", "got %g m, want above 0 m and at most %g m", c.ExitHeightM, maxDepthM)
	case !(c.HighRad <= math.Pi/2+lastRad):
		return dimension("axis tilt", "the acceptance ends %.4g degrees above the normal of the facade, want at most 90: light from beyond comes through the wall; tilt the axis less or narrow the acceptance above it", deg(c.HighRad))
	case !(c.LowRad >= -math.Pi/2-lastRad):
		return dimension("axis tilt", "the acceptance ends %.4g degrees below the normal of the facade, want at most 90: light from beyond comes through the wall; tilt the axis more or narrow the acceptance below it", -deg(c.LowRad))
	case !(c.HighRad-c.LowRad >= minAcceptanceRad-lastRad):
		return dimension("acceptance", "got %.4g degrees in all, want at least %.0f", deg(c.HighRad-c.LowRad), deg(minAcceptanceRad))
	case !(c.KeepShare >= minKeepShare && c.KeepShare <= 1):
		return dimension("collector share", "got %g, want %g to 1", c.KeepShare, minKeepShare)
	}
	return nil
}

// arcs are the two mirrors, from the exit outwards.
func (c Concentrator) arcs() (below, above focalArc) {
	lower, upper := plane{}, plane{0, c.ExitHeightM}
	below = focalArcThrough(upper, lower, c.HighRad, c.LowRad)
	above = focalArcThrough(lower, upper, c.LowRad, c.HighRad)
	if c.KeepShare < 1 {
		below = below.cutAt(c.KeepShare * below.at(below.toRad)[0])
		above = above.cutAt(c.KeepShare * above.at(above.toRad)[0])
	}
	return below, above
}

// Entrance are the outer ends of the mirror below and of the one above: out
// from the exit and up from its lower edge, metres.
func (c Concentrator) Entrance() (below, above [2]float64) {
	b, a := c.arcs()
	return b.at(b.toRad), a.at(a.toRad)
}

// ReachM is how far out of the exit the mirrors reach.
func (c Concentrator) ReachM() float64 {
	b, a := c.Entrance()
	return max(b[0], a[0])
}

// Concentration is the width of the entrance over the height of the exit.
func (c Concentrator) Concentration() float64 {
	b, a := c.Entrance()
	return plane(a).minus(b).length() / c.ExitHeightM
}

// Admitted are the limits of the directions from which any light passes, in
// radians from the exit's normal. They are LowRad and HighRad where nothing is
// cut off; a shortened concentrator also admits, without reflection, some
// light from beyond.
func (c Concentrator) Admitted() (lowRad, highRad float64) {
	b, a := c.Entrance()
	lowRad = plane(b).minus(plane{0, c.ExitHeightM}).angle()
	return lowRad, plane(a).angle()
}

// mirrors are the corners of the two mirrors' facets, from the exit outwards.
// A mirror without length is the exit's edge alone.
func (c Concentrator) mirrors(errorRad float64) (below, above []plane) {
	b, a := c.arcs()
	below, above = []plane{{}}, []plane{{0, c.ExitHeightM}}
	if math.Abs(b.toRad-b.fromRad) > lastRad {
		below = b.points(errorRad)
	}
	if math.Abs(a.toRad-a.fromRad) > lastRad {
		above = a.points(errorRad)
	}
	// The ends at the exit are its edges to the last bit, so that what is
	// joined there is closed.
	below[0], above[0] = plane{}, plane{0, c.ExitHeightM}
	return below, above
}

// Walls makes the mirrors and the two ends before the whole of exit, whose
// height must be ExitHeightM: fronts inside, entrance and exit open. A chord
// of a mirror differs from its curve by at most errorRad, above 0; 0 stands for
// MirrorFacetRad.
func (c Concentrator) Walls(exit Rect, errorRad float64, finish string) ([]Face, error) {
	if err := c.check(); err != nil {
		return nil, err
	}
	if math.Abs(exit.HeightM-c.ExitHeightM) > touchM {
		return nil, dimension("opening", "is %.4g m high, want the height of the collector's exit, %.4g m", exit.HeightM, c.ExitHeightM)
	}
	errorRad, err := facetError(errorRad)
	if err != nil {
		return nil, err
	}
	below, above := c.mirrors(errorRad)
	return tube{exit, 0, exit.WidthM}.collector(below, above, finish), nil
}
