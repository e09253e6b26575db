package system

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

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
	Top, Underside                string  // finishes; the edges take Underside's
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
)

// Build makes the closed surface of each part: 12 faces, their fronts away
// from the part, the outdoor part first. The end at the glass is cut parallel
// to the glass, GapM away from it, so that the glass is never touched; the far
// end is square to the top.
//
// An error names the dimension and its limit: a height above the
// opening or more than 1 m below it, a thickness that is not positive or above
// 0.5 m, no depth, a negative length, a gap that is not positive, a tilt beyond
// 60 degrees or 75 from the glass's normal, a part so steep or shallow that
// nothing of it is left clear of the glass, an opening within 15 degrees of
// flat. Whether a part meets the room's ceiling
// or walls cannot be known here.
func (s LightShelf) Build(r Rect) ([]Face, error) {
	if err := s.check(r); err != nil {
		return nil, err
	}
	var faces []Face
	if s.OutsideDepthM > 0 {
		p, err := s.section(r, true)
		if err != nil {
			return nil, err
		}
		faces = append(faces, s.prism(r, p, true)...)
	}
	if s.InsideDepthM > 0 {
		p, err := s.section(r, false)
		if err != nil {
			return nil, err
		}
		faces = append(faces, s.prism(r, p, false)...)
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

// section is a part seen along Across: out and up in metres of near top, far
// top, far underside, near underside, out counted away from the glass on the
// part's own side.
func (s LightShelf) section(r Rect, outside bool) ([4][2]float64, error) {
	// turn is the slope of the part in the rectangle's own frame, positive
	// where it rises away from the glass.
	turn, depth, what := s.OutsideTiltRad-r.LeanRad(), s.OutsideDepthM, "outside"
	if !outside {
		turn, depth, what = -(s.InsideTiltRad - r.LeanRad()), s.InsideDepthM, "inside"
	}
	sin, cos := math.Sincos(turn)
	// The underside runs ThicknessM below the top, square to it, and so is
	// ThicknessM*sin further out at the same length along the part.
	nearTop, nearUnder := s.GapM/cos, (s.GapM-s.ThicknessM*sin)/cos
	if least := max(nearTop, nearUnder); depth <= least+1e-6 {
		return [4][2]float64{}, dimension(what+" depth", "got %g m, want above %.4g m: with a gap of %g m, a thickness of %g m and this tilt nothing of the shelf stays clear of the glass", depth, least, s.GapM, s.ThicknessM)
	}
	top := func(l float64) [2]float64 { return [2]float64{l * cos, s.HeightM + l*sin} }
	under := func(l float64) [2]float64 {
		p := top(l)
		return [2]float64{p[0] + s.ThicknessM*sin, p[1] - s.ThicknessM*cos}
	}
	return [4][2]float64{top(nearTop), top(depth), under(depth), under(nearUnder)}, nil
}

// prism extrudes a section along Across.
func (s LightShelf) prism(r Rect, section [4][2]float64, outside bool) []Face {
	// Seen from the high-Across end with the glass on the left, which is
	// where outdoors lies to the right, the section runs clockwise; the
	// indoor part is its mirror image.
	lo, hi := -s.ExtendM, r.WidthM+s.ExtendM
	side := 1.0
	if !outside {
		side = -1
		lo, hi = hi, lo
	}
	at := func(i int, across float64) r3.Vec {
		return r.Point(across, section[i][1], side*section[i][0])
	}
	const top, underside, edge = "shelf/top", "shelf/underside", "shelf/edge"
	var faces []Face
	for i, part := range []string{top, edge, underside, edge} {
		finish := s.Underside
		if part == top {
			finish = s.Top
		}
		k := (i + 1) % 4
		faces = append(faces, quad(at(i, lo), at(i, hi), at(k, hi), at(k, lo), finish, part)...)
	}
	faces = append(faces, quad(at(0, lo), at(1, lo), at(2, lo), at(3, lo), s.Underside, edge)...)
	return append(faces, quad(at(3, hi), at(2, hi), at(1, hi), at(0, hi), s.Underside, edge)...)
}

func deg(rad float64) float64 { return rad * 180 / math.Pi }
