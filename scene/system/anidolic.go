package system

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// AnidolicCeiling is an anidolic ceiling at the opening that is the mouth of
// its duct: a collector outdoors, which is a Concentrator with mirrored ends; a
// mirrored duct that leads level indoors under the ceiling; and at its end an
// outlet, an opening in the duct's floor under a parabolic reflector that turns
// the light down. Lengths are in metres, angles in radians; Build states the
// domain.
type AnidolicCeiling struct {
	// AxisTiltRad is the altitude of the collector's axis; UpperRad and LowerRad
	// are the half-angles of acceptance above and below it. The exit is the
	// mouth whatever the tilt, so that no light is lost on the way round a
	// bend.
	AxisTiltRad, UpperRad, LowerRad float64
	KeepShare                       float64 // of the collector's full reach; 0: 1
	SpaceM                          float64 // for the collector before the facade; 0: no limit

	// DuctLengthM is from the lower edge of the mouth to the end of the outlet.
	DuctLengthM float64
	DuctHeightM float64 // along the glass; 0: the opening's, less the gaps

	// OutletLengthM is the horizontal length of the outlet; 0: that at which
	// the light that fills the duct just fills the outlet, twice the duct's
	// height with a cut-off of 0. A shorter one throws some light back.
	OutletLengthM float64
	// OutletCutOffRad is the least angle below the horizontal at which light
	// leaves the outlet: with more than 0 the reflector reaches below the
	// duct's floor and is half a compound parabola in reverse.
	OutletCutOffRad float64

	GapM          float64 // between the opening's edges and the duct, closed by a frame
	FacetErrorRad float64 // of the curved mirrors; 0: MirrorFacetRad

	Reflector string // finish of the inside
	Casing    string // finish of the outside, seen from the street and the room, and of the frame
	// Finishes of panes, "" for none: over the collector's entrance, in the
	// mouth and over the outlet.
	EntranceGlazing, MouthGlazing, OutletGlazing string
	// Roller is the finish of the cloth over the entrance, "" for none; Drawn
	// covers the entrance with it.
	Roller string
	Drawn  bool
}

// Limits of an anidolic ceiling, our choice but for the last two.
const (
	minDuctHeightM = 0.05
	maxDuctLengthM = 30.0
	maxOutletRad   = 60 * math.Pi / 180
	// maxMouthLeanRad: a level duct behind glass that leans more has no length.
	maxMouthLeanRad = 45 * math.Pi / 180
	// maxRollSin is the sine of what the mouth's lower edge may be off level.
	maxRollSin = 0.01
	// rollerGapM is between the entrance and the cloth. Common practice, no
	// published source.
	rollerGapM = 0.02
)

// Build makes the faces. The fronts of the collector's, the duct's and the
// outlet's faces are inside, with Reflector as Finish and Casing as Back. They
// are closed but for entrance and outlet. The frame fills the opening around
// the mouth. Panes and cloth have their front to outdoors. Parts are
// "anidolic/collector", "anidolic/duct", "anidolic/outlet", "anidolic/frame",
// "anidolic/entrance", "pane", "anidolic/outlet pane" and "anidolic/roller".
//
// An error names the dimension and its limit: an acceptance below 10 degrees in
// all or beyond the plane of the facade, a share kept that is not 0.05 to 1, a
// collector longer than its space, a duct lower than 0.05 m or higher than the
// opening, an outlet longer than the duct or so short that no reflector fits, a
// cut-off above 60 degrees, a gap that is not positive, an opening that leans
// more than 45 degrees or whose lower edge is not level. Whether the duct meets
// the room's ceiling or walls cannot be known here.
func (c AnidolicCeiling) Build(r Rect) ([]Face, error) {
	s, err := c.section(r)
	if err != nil {
		return nil, err
	}
	t := s.tube
	faces := t.collector(s.below, s.above, c.Reflector)
	roof := []plane{s.above[0], s.ductTop}
	floor := []plane{s.ductFloor, s.below[0]}
	const duct, outlet = "anidolic/duct", "anidolic/outlet"
	faces = append(faces, t.strip(roof, c.Reflector, duct)...)
	faces = append(faces, t.strip(floor, c.Reflector, duct)...)
	faces = append(faces, t.ends(s.ductFloor, []plane{s.below[0], s.above[0], s.ductTop}, c.Reflector, duct)...)
	faces = append(faces, t.strip(s.reflector, c.Reflector, outlet)...)
	faces = append(faces, t.ends(s.ductFloor, s.reflector, c.Reflector, outlet)...)
	faces = append(behind(faces, c.Casing), s.frame(r, c.Casing)...)
	end, lip := s.reflector[len(s.reflector)-1], s.ductFloor
	low, high := s.below[len(s.below)-1], s.above[len(s.above)-1]
	if c.EntranceGlazing != "" {
		faces = append(faces, t.strip([]plane{high, low}, c.EntranceGlazing, "anidolic/entrance")...)
	}
	if c.MouthGlazing != "" {
		faces = append(faces, t.strip([]plane{s.above[0], s.below[0]}, c.MouthGlazing, "pane")...)
	}
	if c.OutletGlazing != "" {
		faces = append(faces, t.strip([]plane{end, lip}, c.OutletGlazing, "anidolic/outlet pane")...)
	}
	if c.Roller != "" && c.Drawn {
		faces = append(faces, t.strip(clearOf(high, low), c.Roller, "anidolic/roller")...)
	}
	return faces, nil
}

// clearOf is the line from high to low moved rollerGapM outdoors; its end is
// shortened where that would bring it behind the facade.
func clearOf(high, low plane) []plane {
	d := low.minus(high)
	n := plane{-d[1] / d.length(), d[0] / d.length()} // left of the line: away from the collector
	move := func(p plane) plane { return plane{p[0] + rollerGapM*n[0], p[1] + rollerGapM*n[1]} }
	a, b := move(high), move(low)
	if a[0] < rollerGapM/2 && b[0] > a[0] {
		f := (rollerGapM/2 - a[0]) / (b[0] - a[0])
		a = plane{a[0] + f*(b[0]-a[0]), a[1] + f*(b[1]-a[1])}
	}
	return []plane{a, b}
}

// Collector is the concentrator outdoors, before the mouth in opening r.
func (c AnidolicCeiling) Collector(r Rect) (Concentrator, error) {
	s, err := c.section(r)
	return s.collector, err
}

// Mouth is the part of the opening that is the duct's mouth.
func (c AnidolicCeiling) Mouth(r Rect) (Rect, error) {
	s, err := c.section(r)
	return s.tube.r.part(s.tube.lo, 0, s.tube.hi-s.tube.lo, s.collector.ExitHeightM), err
}

// part is a rectangle within or beside r.
func (r Rect) part(acrossM, upM, widthM, heightM float64) Rect {
	r.Origin = r.Point(acrossM, upM, 0)
	r.WidthM, r.HeightM = widthM, heightM
	return r
}

// Outlet is the opening through which the light enters the room; its outward
// side is that of the duct, so that Up points away from the facade.
func (c AnidolicCeiling) Outlet(r Rect) (Rect, error) {
	s, err := c.section(r)
	if err != nil {
		return Rect{}, err
	}
	t := s.tube
	lip, end := s.ductFloor, s.reflector[len(s.reflector)-1]
	o := t.point(t.lo, lip)
	up := r3.Unit(r3.Sub(t.point(t.lo, end), o))
	return Rect{Origin: o, Across: r.Across, Up: up, Outward: r3.Cross(up, r.Across),
		WidthM: t.hi - t.lo, HeightM: end.minus(lip).length()}, nil
}

// InAcceptance reports whether light from the unit direction sun comes through
// the collector at opening r, as to which the direction within the section
// alone decides: this is when the roller is needed. A shortened collector takes
// in light from beyond its acceptance too, see Concentrator.Admitted.
func (c AnidolicCeiling) InAcceptance(sun r3.Vec, r Rect) (bool, error) {
	k, err := c.Collector(r)
	if err != nil {
		return false, err
	}
	low, high := k.Admitted()
	profile, ok := ProfileAngle(sun, r)
	return ok && profile >= low && profile <= high, nil
}

// States are those of the roller.
func (c AnidolicCeiling) States() []State { return []State{{Name: "raised"}, {Name: "drawn"}} }

// Choose returns the index of the state, among States, that suits the sun:
// drawn in the acceptance, raised elsewhere, and where no ceiling can be built.
func (c AnidolicCeiling) Choose(sun r3.Vec, r Rect) int {
	if in, err := c.InAcceptance(sun, r); err == nil && in && sun.Z > 0 {
		return 1
	}
	return 0
}
