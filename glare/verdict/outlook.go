package verdict

import (
	"fmt"
	"math"
)

// ViewLevel is a level of view out: what must be seen from a point, and the
// share of the utilised area from whose points it must be.
type ViewLevel struct {
	Name      string
	AngleDeg  float64 // horizontal sight angle, at least
	DistanceM float64 // outdoors, at least
	Layers    int     // of landscape, ground and sky, the landscape among them
	AreaShare float64
}

// ViewLevels are those of EN 17037:2018 annex C; "medium" as quoted in public
// summaries of the standard, the others from memory.
var ViewLevels = []ViewLevel{
	{"minimum", 14, 6, 1, 0.75},
	{"medium", 28, 20, 2, 0.75},
	{"high", 54, 50, 3, 0.75},
}

// ViewByName finds a level in ViewLevels.
func ViewByName(name string) (ViewLevel, bool) {
	return byName(ViewLevels, name, func(l ViewLevel) string { return l.Name })
}

// Holds says whether a point has the view: its sight angle (degrees) beyond the
// level's distance, known to within a bound, and the layers that it sees.
func (l ViewLevel) Holds(angleDeg, boundDeg float64, layers int, landscape bool) Outcome {
	angle := Bracket{Surely: angleDeg - boundDeg, Estimate: angleDeg, Possibly: angleDeg + boundDeg}
	if !landscape || layers < l.Layers {
		return NotMet
	}
	return AtLeast(angle, l.AngleDeg)
}

// ViewOut judges a work plane by the share of its points that have the view.
func ViewOut(subject string, l ViewLevel, share Bracket) Verdict {
	layers := [4]string{1: "the landscape", 2: "the landscape and one more layer", 3: "landscape, ground and sky"}[l.Layers]
	v := Verdict{
		Criterion: fmt.Sprintf("view out, %s: from %s of the area %s over at least %g degrees, %g m far", l.Name, percent(l.AreaShare), layers, l.AngleDeg, l.DistanceM),
		Source:    "EN 17037:2018",
		Subject:   subject,
		Text:      fmt.Sprintf("%s: the view out is had from %s of the area (at least %s asked)", subject, spreadIn(share), percent(l.AreaShare)),
	}
	return v.judged(share, l.AreaShare, AtLeast(share, l.AreaShare), "edges in view are known to a quarter of a degree only")
}

// SunLevel is a level of exposure to sunlight on the day chosen.
type SunLevel struct {
	Name  string
	Hours float64
}

// SunLevels are those of EN 17037:2018 annex D, from memory.
var SunLevels = []SunLevel{{"minimum", 1.5}, {"medium", 3}, {"high", 4}}

// SunByName finds a level in SunLevels.
func SunByName(name string) (SunLevel, bool) {
	return byName(SunLevels, name, func(l SunLevel) string { return l.Name })
}

// Sunlight judges the hours for which the sun, where it stands high enough,
// reaches the best of a project's openings on a cloudless day; boundH is how
// well they are known. Without an opening that has a reference point hours are
// NaN: undecided.
func Sunlight(subject string, l SunLevel, day string, minAltitudeDeg, hours, boundH float64) Verdict {
	b := Bracket{Surely: hours - boundH, Estimate: hours, Possibly: hours + boundH}
	v := Verdict{
		Criterion: fmt.Sprintf("exposure to sunlight, %s: at least %g h on %s, the sun at %g degrees or higher, in at least one opening", l.Name, l.Hours, day, minAltitudeDeg),
		Source:    "EN 17037:2018",
		Subject:   subject,
		Unit:      "h",
		Text:      fmt.Sprintf("%s: %s h of sun on %s (at least %g h asked)", subject, number(hours), day, l.Hours),
	}
	why := "the hours are known to within some minutes only"
	if math.IsNaN(hours) {
		v.Text = subject + ": no hours of sun"
		why = "no opening reaches up to its reference point"
	}
	return v.judged(b, l.Hours, AtLeast(b, l.Hours), why)
}
