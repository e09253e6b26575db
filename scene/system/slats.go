package system

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// Where slats hang.
const (
	Inside  = "inside"
	Outside = "outside"
	Between = "between" // the two panes of a double glazing
)

// Slats are parallel slats along the opening, of a blind or of louvres, that
// turn about the middle of their width. Lengths are in metres, angles in
// radians; Build states the domain.
type Slats struct {
	Position string // Inside, Outside or Between
	// CavityM is the distance between the outer pane, in the plane of the
	// opening, and the inner one, indoors of it; 0 where there is one pane.
	CavityM float64
	// GapM is the distance between the pane on the slats' side and the slats
	// standing square to it; of no effect Between, where they hang midway.
	GapM           float64
	WidthM, PitchM float64 // of a slat across, and from slat to slat
	ThicknessM     float64
	SagittaM       float64 // of the middle above the line between the edges; negative: a hollow
	TiltRad        float64 // from square to the glass, positive with the outer edge up
	LowM, HighM    float64 // the strip covered, above the opening's lower edge
	SideM          float64 // between the slats' ends and the opening's sides
	HeadRail       bool    // a strip closes what is left above the uppermost slat
	Raised         bool
	Upper, Lower   string  // finishes
	FacetRad       float64 // most between facet and curve; 0: MirrorFacetRad
}

// Limits of slats. Common practice, no published source.
const (
	minSlatM, maxSlatM = 0.003, 1.0 // width
	// boardM is the thickness from which slats are closed bodies; thinner
	// ones, such as those of blinds, are sheets.
	boardM     = 0.002
	maxSlats   = 2000
	minSlatLen = 0.01
	// clearM is kept between slats and panes.
	clearM = 0.001
	// minRailM: a narrower rest needs no rail.
	minRailM = 0.001
)

// Build makes the slats, none where they are raised. Slats thinner than 2 mm
// are sheets: their front is the upper side, Finish is Upper and Back is
// Lower. Thicker ones are closed bodies, fronts away from the body, whose
// edges take Lower. A curved slat is flat facets, off the curve by at most
// FacetRad. Parts are "slats" and "slats/rail"; the rail's front is outdoors.
//
// The lowest slat hangs half a pitch above LowM, or half its width where that
// is more, so that no tilt moves a slat out of the strip; the others stand
// above it at the pitch as far as they fit.
//
// An error names the dimension and its limit: lengths that are not positive,
// slats that touch each other or the panes at this tilt, a sagitta by which
// the slat turns beyond 60 degrees, a strip outside the opening.
func (s Slats) Build(r Rect) ([]Face, error) {
	if err := s.check(r); err != nil {
		return nil, err
	}
	if s.Raised {
		return nil, nil
	}
	var faces []Face
	first, n := s.rows()
	for i := range n {
		faces = append(faces, s.slat(r, first+float64(i)*s.PitchM)...)
	}
	if s.HeadRail {
		top := s.LowM
		if n > 0 {
			top = first + float64(n-1)*s.PitchM + s.reach()
		}
		if s.HighM-top > minRailM {
			out := s.outM()
			lo, hi := s.SideM, r.WidthM-s.SideM
			rail := quad(r.Point(lo, top, out), r.Point(lo, s.HighM, out), r.Point(hi, s.HighM, out), r.Point(hi, top, out), s.Upper, "slats/rail")
			faces = append(faces, behind(rail, s.Lower)...)
		}
	}
	return faces, nil
}

// reach is the room kept for a slat above and below its axis.
func (s Slats) reach() float64 { return max(s.PitchM, s.WidthM) / 2 }

// rows are the height of the lowest slat's axis and the number of slats.
func (s Slats) rows() (first float64, n int) {
	first = s.LowM + s.reach()
	room := s.HighM - s.reach() - first
	if room < -touchM {
		return first, 0
	}
	return first, int((room+touchM)/s.PitchM) + 1
}

// outM is how far outdoors of the opening's plane the axes are.
func (s Slats) outM() float64 {
	switch s.Position {
	case Outside:
		return s.GapM + s.WidthM/2
	case Between:
		return -s.CavityM / 2
	}
	return -(s.CavityM + s.GapM + s.WidthM/2)
}

func (s Slats) check(r Rect) error {
	switch {
	case s.Position != Inside && s.Position != Outside && s.Position != Between:
		return dimension("position", "got %q, want %q, %q or %q", s.Position, Inside, Outside, Between)
	case !(s.WidthM >= minSlatM && s.WidthM <= maxSlatM):
		return dimension("width", "got %g m, want %g to %g m", s.WidthM, minSlatM, maxSlatM)
	case !(s.ThicknessM > 0 && s.ThicknessM <= s.WidthM/2):
		return dimension("thickness", "got %g m, want above 0 m and at most half the slat's width", s.ThicknessM)
	case !(s.PitchM > s.ThicknessM):
		return dimension("pitch", "got %g m, want more than the thickness, %g m, so that the slats do not touch", s.PitchM, s.ThicknessM)
	case !(s.PitchM <= maxDepthM):
		return dimension("pitch", "got %g m, want at most %g m", s.PitchM, maxDepthM)
	case !(math.Abs(s.SagittaM) <= maxSagitta(s.WidthM)):
		return dimension("sagitta", "got %g m, want at most %.4g m for a slat %g m wide", s.SagittaM, maxSagitta(s.WidthM), s.WidthM)
	case !(s.FacetRad >= 0 && s.FacetRad <= math.Pi/4):
		return dimension("facet", "got %g degrees, want 0 to 45", deg(s.FacetRad))
	case !(math.Abs(s.TiltRad) <= math.Pi/2+1e-9):
		return dimension("tilt", "got %.4g degrees, want -90 to 90", deg(s.TiltRad))
	case s.Position == Between && !(s.CavityM > 0 && s.CavityM <= maxSlatM):
		return dimension("cavity", "got %g m, want above 0 m for slats between two panes", s.CavityM)
	case !(s.CavityM >= 0 && s.CavityM <= maxSlatM):
		return dimension("cavity", "got %g m, want 0 to %g m", s.CavityM, maxSlatM)
	case s.Position != Between && !(s.GapM > 0 && s.GapM <= maxDepthM):
		return dimension("gap", "got %g m, want above 0 m, so that the slats do not touch the glass", s.GapM)
	case !(s.SideM >= 0 && r.WidthM-2*s.SideM >= minSlatLen):
		return dimension("side", "got %g m, want 0 m or more, and slats at least %g m long in an opening %.4g m wide", s.SideM, minSlatLen, r.WidthM)
	case !(s.LowM >= -touchM && s.LowM <= r.HeightM):
		return dimension("low", "got %g m, want 0 m to the opening's height, %.4g m", s.LowM, r.HeightM)
	case !(s.HighM >= s.LowM && s.HighM <= r.HeightM+touchM):
		return dimension("high", "got %g m, want %g m to the opening's height, %.4g m", s.HighM, s.LowM, r.HeightM)
	case (s.HighM-s.LowM)/s.PitchM > maxSlats:
		return dimension("pitch", "got %g m, which makes more than %d slats", s.PitchM, maxSlats)
	}
	if low, high := s.TiltLimits(); s.TiltRad < low-1e-9 || s.TiltRad > high+1e-9 {
		return dimension("tilt", "got %.4g degrees, want %.1f to %.1f: beyond, slats %g m wide touch at a pitch of %g m", deg(s.TiltRad), math.Ceil(10*deg(low))/10, math.Floor(10*deg(high))/10, s.WidthM, s.PitchM)
	}
	if s.Position != Between {
		return nil
	}
	if depth := s.depth(); depth+2*clearM > s.CavityM {
		return dimension("width", "at a tilt of %.4g degrees the slats are %.4g m deep, want at most %.4g m between panes %g m apart", deg(s.TiltRad), depth, max(0, s.CavityM-2*clearM), s.CavityM)
	}
	return nil
}

// chord is the slat's section in its own frame: x from the inner to the outer
// edge about the middle, y above the line between them.
func (s Slats) chord() [][2]float64 {
	facet := s.FacetRad
	if facet == 0 {
		facet = MirrorFacetRad
	}
	points := arc(s.WidthM, s.SagittaM, facet)
	for i := range points {
		points[i][0] -= s.WidthM / 2
	}
	return points
}

// turned is the section, moved up by liftM in the slat's own frame, as out and
// up of the axis.
func (s Slats) turned(liftM float64) [][2]float64 {
	sin, cos := math.Sincos(s.TiltRad)
	points := s.chord()
	for i, p := range points {
		x, y := p[0], p[1]+liftM
		points[i] = [2]float64{x*cos - y*sin, x*sin + y*cos}
	}
	return points
}

// depth is twice the slat's reach across the glass from its axis, with its
// thickness.
func (s Slats) depth() float64 {
	reach := 0.0
	for _, lift := range []float64{-s.ThicknessM / 2, s.ThicknessM / 2} {
		for _, p := range s.turned(lift) {
			reach = max(reach, math.Abs(p[0]))
		}
	}
	return 2 * reach
}

// slat makes one slat whose axis is upM above the opening's lower edge.
func (s Slats) slat(r Rect, upM float64) []Face {
	const part = "slats"
	lo, hi, out := s.SideM, r.WidthM-s.SideM, s.outM()
	strip := func(section [][2]float64, finish string) []Face {
		var faces []Face
		at := func(i int, across float64) r3.Vec {
			return r.Point(across, upM+section[i][1], out+section[i][0])
		}
		for i := range len(section) - 1 {
			faces = append(faces, quad(at(i, lo), at(i, hi), at(i+1, hi), at(i+1, lo), finish, part)...)
		}
		return faces
	}
	if s.ThicknessM < boardM {
		return behind(strip(s.turned(0), s.Upper), s.Lower)
	}
	b := body{s.turned(s.ThicknessM / 2), s.turned(-s.ThicknessM / 2)}
	for _, line := range [][][2]float64{b.top, b.under} {
		for i := range line {
			line[i] = [2]float64{out + line[i][0], upM + line[i][1]}
		}
	}
	return b.extrude(r, 1, lo, hi, [4]string{s.Upper, s.Lower, s.Lower, s.Lower}, [3]string{part, part, part})
}

// behind gives sheets the finish of their back; "" where it is the front's.
func behind(faces []Face, finish string) []Face {
	for i := range faces {
		if finish != faces[i].Finish {
			faces[i].Back = finish
		}
	}
	return faces
}
