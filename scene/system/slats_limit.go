package system

import "math"

// TiltLimits are the tilts at which neighbouring slats touch, in radians: low
// is negative or 0, high positive or 0, -pi/2 and pi/2 where they never do. Both are 0
// where they touch at any tilt.
func (s Slats) TiltLimits() (low, high float64) {
	// 2 degrees from facet to curve move its points by less than 0.1 % of
	// the sagitta's 60 degree arc.
	s.FacetRad = MatteFacetRad
	section := s.chord()
	return -s.limit(section, -1), s.limit(section, 1)
}

// limit is the largest tilt, of one sign, up to which the slats stay clear.
func (s Slats) limit(section [][2]float64, sign float64) float64 {
	const step = math.Pi / 180
	last := 0.0
	if !s.clear(section, 0) {
		return 0
	}
	for i := 1; i <= 90; i++ {
		next := step * float64(i)
		if s.clear(section, sign*next) {
			last = next
			continue
		}
		for range 30 {
			if mid := (last + next) / 2; s.clear(section, sign*mid) {
				last = mid
			} else {
				next = mid
			}
		}
		return last
	}
	return math.Pi / 2
}

// clear reports whether the next slat above is at least as far away as the
// slat is thick and on its upper side.
func (s Slats) clear(section [][2]float64, tilt float64) bool {
	sin, cos := math.Sincos(tilt)
	x, y := s.PitchM*sin, s.PitchM*cos
	for _, p := range section {
		// A point of the next slat over this one, and one of this slat under
		// the next.
		next, above := distance(section, p[0]+x, p[1]+y)
		this, below := distance(section, p[0]-x, p[1]-y)
		if min(next, this) < s.ThicknessM || above < 0 || below > 0 {
			return false
		}
	}
	return true
}

// distance of a point from the slat, and its side: 1 above it, -1 below it, 0
// beyond its edges.
func distance(section [][2]float64, x, y float64) (m float64, side int) {
	m = math.Inf(1)
	for i := range len(section) - 1 {
		a, b := section[i], section[i+1]
		dx, dy := b[0]-a[0], b[1]-a[1]
		t := min(1, max(0, ((x-a[0])*dx+(y-a[1])*dy)/(dx*dx+dy*dy)))
		m = min(m, math.Hypot(x-a[0]-t*dx, y-a[1]-t*dy))
		if x < a[0] || x > b[0] {
			continue
		}
		side = 1
		if y < a[1]+(x-a[0])/dx*dy {
			side = -1
		}
	}
	return m, side
}
