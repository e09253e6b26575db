package system

import "math"

// LightShelf is a shelf in two parts, one outdoors and one indoors of the
// glass, either of which may be missing. Lengths are in metres, angles in
// radians; Build states the domain.
type LightShelf struct {
	// HeightM is the height of the top above the lower edge of the opening,
	// along the glass, where the top's plane meets the plane of the glass. 0
	// is a shelf on the transom below a clerestory, its thickness hanging
	// below the opening; negative is one on the wall further down.
	HeightM float64
	// OutsideDepthM and InsideDepthM are the depths of the parts: from the
	// plane of the glass to the far edge, along the shelf's top. 0: no part.
	OutsideDepthM, InsideDepthM float64
	ThicknessM                  float64
	// OutsideTiltRad and InsideTiltRad are counted from the horizontal, of a
	// sloping opening too. Positive lifts the outer edge, the one toward
	// outdoors: a part outdoors rises away from the glass, one indoors falls
	// away from it, and equal tilts make one plane.
	OutsideTiltRad, InsideTiltRad float64
	ExtendM                       float64 // beyond the opening, on each side
	GapM                          float64 // between the plane of the glass and either part
	// CavityM is the distance of an inner pane indoors of the plane of the
	// glass, from which the indoor part then keeps GapM; its depth counts from
	// the plane of the glass all the same. 0: one pane.
	CavityM float64
	// OutsideProfile and InsideProfile shape the tops; the tilt is that of the
	// straight line from the glass to the far edge. The underside follows the
	// top at ThicknessM.
	OutsideProfile, InsideProfile Profile
	// Stack is the number of shelves, each SpacingM above the one below, the
	// lowest at HeightM; 0 and 1 are one shelf.
	Stack          int
	SpacingM       float64
	FacetRad       float64 // most between facet and curve; 0: MirrorFacetRad
	Top, Underside string  // finishes; the edges take Underside's
}

// Limits of a shelf. The tilts are counted from the horizontal. Common
// practice, no published source: a steeper board is a fin or a blind.
const (
	maxTiltRad = 60 * math.Pi / 180
	// maxTurnRad bounds the angle between shelf and the glass's normal, so
	// that a sloping opening cannot bring the shelf along the glass.
	maxTurnRad = 75 * math.Pi / 180
	maxLeanRad = 75 * math.Pi / 180
	maxDepthM  = 20.0
	// minHeightM: further below its opening a shelf belongs to another one.
	minHeightM    = -1.0
	maxThicknessM = 0.5
	maxStack      = 50
)

// Build makes the closed surface of each part, fronts away from the part: the
// lowest shelf first, the outdoor part before the indoor one; 12 faces for a
// flat part. The end at the glass is cut parallel to the glass, GapM away from
// it, so that the glass is never touched; the far end is square to the tilted
// line. A curved top is flat facets, off the curve by at most FacetRad.
//
// An error names the dimension and its limit: a height above the
// opening or more than 1 m below it, a thickness that is not positive or above
// 0.5 m, no depth, a negative length, a gap that is not positive, a tilt beyond
// 60 degrees or 75 from the glass's normal, a part so steep or shallow that
// nothing of it is left clear of the glass, a hollow whose edges rise beyond 60
// degrees from the line, stacked shelves that touch, an opening within 15
// degrees of flat. Whether a part meets the room's ceiling or walls cannot be
// known here.
func (s LightShelf) Build(r Rect) ([]Face, error) {
	if err := s.check(r); err != nil {
		return nil, err
	}
	const top, underside, edge = "shelf/top", "shelf/underside", "shelf/edge"
	finishes := [4]string{s.Top, s.Underside, s.Underside, s.Underside}
	var faces []Face
	for i := range max(1, s.Stack) {
		for _, outside := range []bool{true, false} {
			b, ok, err := s.section(r, outside, float64(i)*s.SpacingM)
			if err != nil {
				return nil, err
			}
			if !ok {
				continue
			}
			side := 1.0
			if !outside {
				side = -1
			}
			faces = append(faces, b.extrude(r, side, -s.ExtendM, r.WidthM+s.ExtendM, finishes, [3]string{top, edge, underside})...)
		}
	}
	return faces, nil
}

func (s LightShelf) check(r Rect) error {
	for _, l := range []struct {
		what  string
		value float64
	}{
		{"outside depth", s.OutsideDepthM}, {"inside depth", s.InsideDepthM}, {"extension", s.ExtendM},
	} {
		if !(l.value >= 0 && l.value <= maxDepthM) {
			return dimension(l.what, "got %g m, want 0 to %g m", l.value, maxDepthM)
		}
	}
	if s.OutsideDepthM == 0 && s.InsideDepthM == 0 {
		return dimension("outside depth", "got no outside depth and no inside depth, want at least one of them above 0 m")
	}
	if !(s.GapM > 0 && s.GapM <= maxDepthM) {
		return dimension("gap", "got %g m, want above 0 m, so that the shelf does not touch the glass", s.GapM)
	}
	if !(s.HeightM >= minHeightM && s.HeightM <= r.HeightM) {
		return dimension("height", "got %g m, want %g m to the opening's height, %.4g m", s.HeightM, minHeightM, r.HeightM)
	}
	if !(s.ThicknessM > 0 && s.ThicknessM <= maxThicknessM) {
		return dimension("thickness", "got %g m, want above 0 m and at most %g m", s.ThicknessM, maxThicknessM)
	}
	if !(s.CavityM >= 0 && s.CavityM <= maxDepthM) {
		return dimension("cavity", "got %g m, want 0 to %g m", s.CavityM, maxDepthM)
	}
	if !(s.FacetRad >= 0 && s.FacetRad <= math.Pi/4) {
		return dimension("facet", "got %g degrees, want 0 to 45", deg(s.FacetRad))
	}
	if !(s.Stack >= 0 && s.Stack <= maxStack) {
		return dimension("stack", "got %d, want 1 to %d", s.Stack, maxStack)
	}
	if s.Stack > 1 {
		if !(s.SpacingM > 0 && s.SpacingM <= maxDepthM) {
			return dimension("spacing", "got %g m, want above 0 m between stacked shelves", s.SpacingM)
		}
		if top := s.HeightM + float64(s.Stack-1)*s.SpacingM; top > r.HeightM+touchM {
			return dimension("spacing", "got %g m, with which the uppermost of %d shelves is at %.4g m, want at most the opening's height, %.4g m", s.SpacingM, s.Stack, top, r.HeightM)
		}
	}
	lean := r.LeanRad()
	if !(math.Abs(lean) <= maxLeanRad) {
		return dimension("opening", "leans %.1f degrees from upright, want at most %.0f for a light shelf", deg(lean), deg(maxLeanRad))
	}
	for _, t := range []struct {
		what        string
		value, used float64
	}{{"outside tilt", s.OutsideTiltRad, s.OutsideDepthM}, {"inside tilt", s.InsideTiltRad, s.InsideDepthM}} {
		if t.used == 0 {
			continue
		}
		if !(math.Abs(t.value) <= maxTiltRad+1e-12) {
			return dimension(t.what, "got %.4g degrees, want %.0f to %.0f", deg(t.value), -deg(maxTiltRad), deg(maxTiltRad))
		}
		if turn := t.value - lean; math.Abs(turn) > maxTurnRad {
			return dimension(t.what, "got %.4g degrees at glass that leans %.1f degrees, which is %.1f degrees from the glass's normal, want at most %.0f", deg(t.value), deg(lean), math.Abs(deg(turn)), deg(maxTurnRad))
		}
	}
	return nil
}

// section is a part seen along Across, raised by liftM; false where there is
// none. Out is counted away from the glass on the part's own side.
func (s LightShelf) section(r Rect, outside bool, liftM float64) (body, bool, error) {
	// turn is the slope of the part in the rectangle's own frame, positive
	// where it rises away from the glass.
	turn, depth, what, gap, profile := s.OutsideTiltRad-r.LeanRad(), s.OutsideDepthM, "outside", s.GapM, s.OutsideProfile
	if !outside {
		turn, depth, what, gap, profile = -(s.InsideTiltRad - r.LeanRad()), s.InsideDepthM, "inside", s.CavityM+s.GapM, s.InsideProfile
	}
	if depth == 0 {
		return body{}, false, nil
	}
	facet := s.FacetRad
	if facet == 0 {
		facet = MirrorFacetRad
	}
	line, err := profile.line(what, depth, facet)
	if err != nil {
		return body{}, false, err
	}
	sin, cos := math.Sincos(turn)
	// The underside runs ThicknessM below the top, square to the line, and so
	// is ThicknessM*sin further out at the same length along the part.
	if least := max(gap/cos, (gap-s.ThicknessM*sin)/cos); depth <= least+touchM {
		return body{}, false, dimension(what+" depth", "got %g m, want above %.4g m: with a gap of %g m, a thickness of %g m and this tilt nothing of the shelf stays clear of the glass", depth, least, gap, s.ThicknessM)
	}
	lower := make([][2]float64, len(line))
	for i, p := range line {
		lower[i] = [2]float64{p[0], p[1] - s.ThicknessM}
	}
	up := s.HeightM + liftM
	top, ok1 := cut(line, sin, cos, up, gap)
	under, ok2 := cut(lower, sin, cos, up, gap)
	if !ok1 || !ok2 {
		return body{}, false, dimension(what+" profile", "with this tilt and a gap of %g m its hollow comes too near the glass; want less tilt or a flatter hollow", gap)
	}
	b := body{top, under}
	if s.Stack > 1 {
		for _, p := range b.ring() {
			if low, high, ok := b.span(p[0]); ok && high-low > s.SpacingM-touchM {
				return body{}, false, dimension("spacing", "got %g m, want more than %.4g m, the height of a shelf %s, so that stacked shelves do not touch", s.SpacingM, high-low, what)
			}
		}
	}
	return b, true, nil
}

// meets returns the highest point of the shelves on one side of the glass that
// lies in a zone there.
func (s LightShelf) meets(r Rect, outside bool, z zone) (high float64, ok bool, err error) {
	if s.OutsideDepthM == 0 && outside || s.InsideDepthM == 0 && !outside {
		return 0, false, nil
	}
	if err := s.check(r); err != nil {
		return 0, false, err
	}
	high = math.Inf(-1)
	for i := range max(1, s.Stack) {
		b, has, err := s.section(r, outside, float64(i)*s.SpacingM)
		if err != nil {
			return 0, false, err
		}
		if !has {
			continue
		}
		if h, in := b.meets(z); in {
			high, ok = max(high, h), true
		}
	}
	return high, ok, nil
}

func deg(rad float64) float64 { return rad * 180 / math.Pi }
