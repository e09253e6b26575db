package system

import (
	"math"
)

// Roller is a blind of cloth that hangs from the top of the opening, parallel
// to the glass and as wide as the opening.
type Roller struct {
	Outside bool
	Drop    float64 // share of the opening's height that is covered, 0 to 1, from the top
	GapM    float64 // between the plane of the glass and the cloth, above 0
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
	return -ro.GapM
}

// Meets returns an error, which says what would be clear, where the drawn
// cloth runs into the part of the shelf on its side of the glass.
func (ro Roller) Meets(s LightShelf, r Rect) error {
	cloth, err := ro.Build(r)
	if err != nil || cloth == nil {
		return err
	}
	depth := s.InsideDepthM
	if ro.Outside {
		depth = s.OutsideDepthM
	}
	if depth == 0 {
		return nil
	}
	if err := s.check(r); err != nil {
		return err
	}
	p, err := s.section(r, ro.Outside)
	if err != nil {
		return err
	}
	high, ok := highest(p, ro.GapM)
	low := r.HeightM * (1 - ro.Drop)
	// A cloth that ends on the shelf's top touches it and no more.
	if !ok || low >= high-touchM {
		return nil
	}
	return dimension("drop", "got %g, which reaches the shelf, whose top is %.4g m above the opening's lower edge at the cloth; want at most %.3g, or a gap larger than the shelf's reach",
		ro.Drop, high, math.Floor(1000*max(0, 1-high/r.HeightM))/1000)
}

// touchM is far below what can be built, far above rounding.
const touchM = 1e-6

// highest is the top of a convex section at a distance from the glass.
func highest(section [4][2]float64, out float64) (float64, bool) {
	high, ok := math.Inf(-1), false
	for i, a := range section {
		b := section[(i+1)%4]
		if lo, hi := min(a[0], b[0]), max(a[0], b[0]); out < lo || out > hi {
			continue
		}
		ok = true
		if a[0] == b[0] {
			high = max(high, a[1], b[1])
			continue
		}
		high = max(high, a[1]+(b[1]-a[1])*(out-a[0])/(b[0]-a[0]))
	}
	return high, ok
}
