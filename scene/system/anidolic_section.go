package system

import "math"

// anidolicSection is an anidolic ceiling seen along Across. Its rectangle is
// the opening moved up so that the origin of sections is the lower edge of the
// mouth.
type anidolicSection struct {
	tube         tube
	collector    Concentrator
	below, above []plane // mirrors of the collector, from the mouth outwards
	ductTop      plane   // where the roof ends
	ductFloor    plane   // where the floor ends: the outlet's near lip
	reflector    []plane // from ductTop to the outlet's far edge
}

func (c AnidolicCeiling) section(r Rect) (anidolicSection, error) {
	var s anidolicSection
	lean := r.LeanRad()
	switch {
	case !(math.Abs(lean) <= maxMouthLeanRad+1e-12):
		return s, dimension("opening", "leans %.1f degrees from upright, want at most %.0f for the mouth of a level duct", deg(lean), deg(maxMouthLeanRad))
	case !(math.Abs(r.Across.Z) <= maxRollSin):
		return s, dimension("opening", "its lower edge slopes by %.2g degrees, want a level one for the mouth of a duct", math.Abs(deg(math.Asin(r.Across.Z))))
	case !(c.GapM >= 0.0005 && c.GapM <= 0.5):
		return s, dimension("gap", "got %g m, want 0.0005 to 0.5 m, so that the duct touches no wall", c.GapM)
	case !(r.WidthM > 2*c.GapM):
		return s, dimension("gap", "got %g m on either side of an opening %.4g m wide, want less than half of that", c.GapM, r.WidthM)
	}
	height, most := c.DuctHeightM, r.HeightM-2*c.GapM
	if height == 0 {
		height = most
	}
	if !(height >= minDuctHeightM && height <= most+touchM) {
		if most < minDuctHeightM {
			return s, dimension("opening", "is %.4g m high, want at least %.4g m for the mouth of a duct", r.HeightM, minDuctHeightM+2*c.GapM)
		}
		return s, dimension("duct height", "got %g m, want %g m to %.4g m, the opening's height less a gap of %g m above and below", height, minDuctHeightM, most, c.GapM)
	}
	bottom := r.HeightM - c.GapM - height
	s.tube = tube{r.part(0, bottom, r.WidthM, height), c.GapM, r.WidthM - c.GapM}
	if err := s.outdoors(c, lean, height); err != nil {
		return s, err
	}
	return s, s.indoors(c, lean, height)
}

// outdoors sets the collector.
func (s *anidolicSection) outdoors(c AnidolicCeiling, lean, height float64) error {
	for _, half := range []float64{c.UpperRad, c.LowerRad} {
		if !(half >= 0 && half <= math.Pi) {
			return dimension("acceptance", "got a half-angle of %g degrees, want 0 to 180", deg(half))
		}
	}
	keep := c.KeepShare
	if keep == 0 {
		keep = 1
	}
	s.collector = Concentrator{ExitHeightM: height, LowRad: c.AxisTiltRad - c.LowerRad - lean,
		HighRad: c.AxisTiltRad + c.UpperRad - lean, KeepShare: keep}
	if err := s.collector.check(); err != nil {
		return err
	}
	reach := s.collector.ReachM()
	switch {
	case !(c.SpaceM >= 0):
		return dimension("collector space", "got %g m, want 0 m or more", c.SpaceM)
	case c.SpaceM > 0 && reach > c.SpaceM+touchM:
		return dimension("collector space", "the collector reaches %.4g m before the facade, want at most %g m: keep %.2g of its reach or less, widen the acceptance, or lower the duct", reach, c.SpaceM, math.Floor(100*keep*c.SpaceM/reach)/100)
	case reach > maxDepthM:
		return dimension("acceptance", "the collector would reach %.4g m before the facade, want at most %g m: widen the acceptance, keep less of the collector's reach, or lower the duct", reach, maxDepthM)
	}
	errorRad, err := facetError(c.FacetErrorRad)
	if err != nil {
		return err
	}
	s.below, s.above = s.collector.mirrors(errorRad)
	return nil
}

// indoors sets duct and outlet. It works in level and upright coordinates
// whose origin is the mouth's lower edge, in counted positive, and turns them
// by the lean of the glass.
func (s *anidolicSection) indoors(c AnidolicCeiling, lean, mouthHeight float64) error {
	sin, cos := math.Sincos(lean)
	turned := func(inM, upM float64) plane { return plane{-inM*cos + upM*sin, inM*sin + upM*cos} }
	height := mouthHeight * cos
	if !(c.OutletCutOffRad >= 0 && c.OutletCutOffRad <= maxOutletRad+1e-12) {
		return dimension("outlet cut-off", "got %.4g degrees, want 0 to %.0f", deg(c.OutletCutOffRad), deg(maxOutletRad))
	}
	cut := c.OutletCutOffRad
	length := c.OutletLengthM
	if length == 0 {
		length = outletLength(height, math.Pi/2, cut)
	}
	// The shortest reflector's axis is level and points at the facade.
	if least := outletLength(height, math.Pi, cut); !(length > least*1.02 && length <= maxDepthM) {
		return dimension("outlet length", "got %.4g m, want above %.4g m, below which no parabola joins the roof of a duct %.4g m high to the outlet's end, and at most %g m", length, least*1.02, height, maxDepthM)
	}
	// The mouth's upper edge lies further in where the glass leans back.
	least := max(0, mouthHeight*sin)
	switch {
	case !(c.DuctLengthM > 0 && c.DuctLengthM <= maxDuctLengthM):
		return dimension("duct length", "got %g m, want above 0 m and at most %g m", c.DuctLengthM, maxDuctLengthM)
	case !(c.DuctLengthM-length > least+touchM):
		return dimension("outlet length", "the outlet is %.4g m long and the duct %g m in all, want the outlet shorter by more than %.4g m: lengthen the duct, lower it or shorten the outlet", length, c.DuctLengthM, least)
	}
	start := c.DuctLengthM - length
	errorRad, err := facetError(c.FacetErrorRad)
	if err != nil {
		return err
	}
	a := outletArc(height, length, cut)
	for _, p := range a.points(errorRad) {
		s.reflector = append(s.reflector, turned(start+p[0], p[1]))
	}
	s.ductTop, s.ductFloor = turned(start, height), turned(start, 0)
	s.reflector[0] = s.ductTop
	return nil
}

// outletLength is the horizontal length of the outlet of a duct under a
// parabola with its focus at the outlet's near lip that starts at the duct's
// roof, has its axis axisRad below the horizontal (0: away from the facade) and
// ends cutRad below it as seen from the lip.
// Source: focalArcThrough, r = h (1+sin axis)/(1-cos(axis-cut)).
func outletLength(heightM, axisRad, cutRad float64) float64 {
	return heightM * (1 + math.Sin(axisRad)) / (1 - math.Cos(axisRad-cutRad)) * math.Cos(cutRad)
}

// outletArc is the reflector of an outlet, in from the lip and up from it.
//
// By the edge rays of the duct's section between lip and roof (Welford,
// Winston, 1989, chapter 4, from memory), light that meets the reflector leaves
// between the axis and the direction from lip to end; at an axis straight
// down, the length outletLength gives for pi/2, none comes back.
func outletArc(heightM, lengthM, cutRad float64) focalArc {
	lo, hi := cutRad, math.Pi // the length falls as the axis turns from lo to hi
	for range 80 {
		mid := (lo + hi) / 2
		if outletLength(heightM, mid, cutRad) > lengthM {
			lo = mid
		} else {
			hi = mid
		}
	}
	return focalArcThrough(plane{}, plane{0, heightM}, -(lo+hi)/2, -cutRad)
}

// frame closes the opening around the mouth, fronts indoors.
func (s *anidolicSection) frame(r Rect, finish string) []Face {
	up := s.tube.r.Origin
	bottom := r.Local(up).Y
	outer := [4][2]float64{{0, 0}, {r.WidthM, 0}, {r.WidthM, r.HeightM}, {0, r.HeightM}}
	inner := [4][2]float64{{s.tube.lo, bottom}, {s.tube.hi, bottom}, {s.tube.hi, bottom + s.tube.r.HeightM}, {s.tube.lo, bottom + s.tube.r.HeightM}}
	var faces []Face
	for i := range outer {
		k := (i + 1) % 4
		a, b, c, d := outer[i], outer[k], inner[k], inner[i]
		faces = append(faces, quad(r.Point(a[0], a[1], 0), r.Point(b[0], b[1], 0), r.Point(c[0], c[1], 0), r.Point(d[0], d[1], 0), finish, "anidolic/frame")...)
	}
	return faces
}
