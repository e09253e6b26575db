package system

import (
	"math"
)

// Roller is a blind of cloth that hangs from the top of the opening, parallel
// to the glass and as wide as the opening.
type Roller struct {
	Outside bool
	Drop    float64 // share of the opening's height that is covered, 0 to 1, from the top
	GapM    float64 // between the glass on the cloth's side and the cloth, above 0
	CavityM float64 // of an inner pane indoors of the plane of the glass; 0: one pane
	Raised  bool    // the cloth is rolled up
	Cloth   string  // finish
}

// Build makes the cloth's two faces, their front outdoors, and none where it
// is raised or its drop is 0. An error names the dimension and its limit.
func (ro Roller) Build(r Rect) ([]Face, error) {
	if !(ro.Drop >= 0 && ro.Drop <= 1) {
		return nil, dimension("drop", "got %g, want 0 to 1", ro.Drop)
	}
	if !(ro.GapM > 0 && ro.GapM <= maxDepthM) {
		return nil, dimension("gap", "got %g m, want above 0 m, so that the cloth does not touch the glass", ro.GapM)
	}
	if ro.Raised || ro.Drop == 0 {
		return nil, nil
	}
	out := ro.outM()
	low, high, width := r.HeightM*(1-ro.Drop), r.HeightM, r.WidthM
	return quad(r.Point(0, low, out), r.Point(0, high, out), r.Point(width, high, out), r.Point(width, low, out),
		ro.Cloth, "roller/cloth"), nil
}

// outM is negative indoors.
func (ro Roller) outM() float64 {
	if ro.Outside {
		return ro.GapM
	}
	return -ro.GapM - ro.CavityM
}

// hung is where the drawn cloth hangs.
func (ro Roller) hung(r Rect) (position string, z zone) {
	out := math.Abs(ro.outM())
	position = Inside
	if ro.Outside {
		position = Outside
	}
	return position, zone{out, out, r.HeightM * (1 - ro.Drop), r.HeightM}
}

// Meets returns an error, which says what would be clear, where the drawn
// cloth runs into the part of the shelf on its side of the glass.
func (ro Roller) Meets(s LightShelf, r Rect) error {
	cloth, err := ro.Build(r)
	if err != nil || cloth == nil {
		return err
	}
	_, z := ro.hung(r)
	high, ok, err := s.meets(r, ro.Outside, z)
	if err != nil || !ok {
		return err
	}
	return dimension("drop", "got %g, which reaches the shelf, whose top is %.4g m above the opening's lower edge at the cloth; want at most %.3g, or a gap larger than the shelf's reach",
		ro.Drop, high, math.Floor(1000*max(0, 1-high/r.HeightM))/1000)
}

// touchM is far below what can be built, far above rounding.
const touchM = 1e-6
